/** Relative flux of a star with quadratic limb darkening, I = 1 - u1 (1 - mu) - u2 (1 - mu)^2, crossed by a dark disc. */
import { OVERLAP_MOMENTS, overlapMoments } from './disc-overlap.js';

const MOMENTS = new Float64Array(OVERLAP_MOMENTS);

/**
 * Writes flux, d/dz, d/dk, d/du1, d/du2 into `out`; the flux is 1 where nothing is covered.
 *
 * @param separation - z, distance of the centres in stellar radii, >= 0
 * @param radiusRatio - k, >= 0, also above 1
 * @param u1 - with u2 such that u1/3 + u2/6 < 1 (the star has light)
 * @param out - (5), overwritten
 *
 * Accuracy: 1e-15 (1 + k) absolute in flux, 1e-14 in the derivatives (test/signals/transit/transit-flux.test.ts). Nothing is allocated.
 */
export function transitFlux(
  separation: number,
  radiusRatio: number,
  u1: number,
  u2: number,
  out: Float64Array,
): void {
  const moments = MOMENTS;
  overlapMoments(separation, radiusRatio, moments);
  const inverseTotal = 1 / starLight(u1, u2);
  const flat = 1 - u1 - 2 * u2;
  const slope = u1 + 2 * u2;
  const area = moments[0]!;
  const root = moments[1]!;
  const square = moments[2]!;
  const loss = (flat * area + slope * root + u2 * square) * inverseTotal;
  out[0] = 1 - loss;
  out[1] = -(flat * moments[3]! + slope * moments[4]! + u2 * moments[5]!) * inverseTotal;
  out[2] = -(flat * moments[6]! + slope * moments[7]! + u2 * moments[8]!) * inverseTotal;
  out[3] = (area - root - (Math.PI / 3) * loss) * inverseTotal;
  out[4] = (2 * (area - root) - square - (Math.PI / 6) * loss) * inverseTotal;
}

/** Light of the whole disc in units of its central intensity: pi (1 - u1/3 - u2/6). */
export function starLight(u1: number, u2: number): number {
  return Math.PI * (1 - u1 / 3 - u2 / 6);
}
