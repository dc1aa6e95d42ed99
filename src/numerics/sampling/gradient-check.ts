/** Compares the gradient of a density with difference quotients: a sampler with a wrong one does not fail, it crawls. */
import type { SmoothDensity } from './density.js';

export interface GradientCheck {
  /**
   * |analytic - quotient| of the worst coordinate, in units of the larger of the quotient and the root of the
   * curvature there (at a maximum the quotient is 0, and the root of the curvature is one over a standard
   * deviation).
   */
  readonly worstRelativeError: number;
  readonly index: number;
  readonly analytic: number;
  readonly differenceQuotient: number;
}

/** Steps h, h/2, h/4 ...; the most stable extrapolation counts, so it does no harm that the last ones are all rounding. */
const HALVINGS = 12;

/**
 * @param position - a point inside the domain; not modified
 * @param steps - length `size`: largest step per coordinate, about a standard deviation or less; default 0.01 times the size of the
 *   coordinate (0.01 where it is 0). Steps that leave the domain are passed over.
 * @returns the worst coordinate; below 1e-6 for a right gradient of a smooth density, about as large as the mistake for a wrong one
 *   (NaN counts as infinitely wrong)
 * @throws RangeError when the density cannot be evaluated at the point, or beside it with any of the steps
 *
 * Method: central differences extrapolated to step zero (Ridders 1982, Advances in Engineering Software 4, 75).
 */
export function checkGradient(
  density: SmoothDensity,
  position: Float64Array,
  steps?: Float64Array,
): GradientCheck {
  const { size } = density;
  if (position.length !== size || (steps !== undefined && steps.length !== size))
    throw new RangeError(`position and steps must have ${size} elements`);
  const gradient = new Float64Array(size);
  const centre = density.evaluate(position, gradient);
  if (!Number.isFinite(centre))
    throw new RangeError(`ln density is ${centre} at the point where its gradient is to be checked`);
  let worst: GradientCheck = { worstRelativeError: -1, index: -1, analytic: NaN, differenceQuotient: NaN };
  for (let j = 0; j < size; j++) {
    const place = Math.abs(position[j]!);
    const step = steps?.[j] ?? 0.01 * (place > 0 ? place : 1);
    const { quotient, curvature } = differentiate(density, position, centre, j, step);
    const analytic = gradient[j]!;
    const difference = Math.abs(analytic - quotient);
    const scale = Math.max(Math.abs(quotient), Math.sqrt(Math.abs(curvature)));
    const error = Number.isNaN(difference) ? Infinity : difference === 0 ? 0 : difference / scale;
    if (error > worst.worstRelativeError)
      worst = { worstRelativeError: error, index: j, analytic, differenceQuotient: quotient };
  }
  return worst;
}

/** First derivative (extrapolated) and second derivative (rough, from the first usable step) along coordinate j. */
function differentiate(
  density: SmoothDensity,
  position: Float64Array,
  centre: number,
  j: number,
  largestStep: number,
): { quotient: number; curvature: number } {
  const point = position.slice();
  const unused = new Float64Array(density.size);
  let quotient = NaN;
  let curvature = NaN;
  let smallestError = Infinity;
  // Row k of the extrapolation triangle; the row before is all that is needed.
  let previous: number[] = [];
  let step = largestStep;
  for (let halving = 0; halving < HALVINGS; halving++, step /= 2) {
    const upper = position[j]! + step;
    const lower = position[j]! - step;
    point[j] = upper;
    const above = density.evaluate(point, unused);
    point[j] = lower;
    const below = density.evaluate(point, unused);
    if (!Number.isFinite(above) || !Number.isFinite(below)) continue;
    const present = [(above - below) / (upper - lower)];
    if (previous.length === 0) {
      quotient = present[0]!;
      curvature = (above - 2 * centre + below) / (step * step);
    }
    let factor = 4;
    for (const [k, coarser] of previous.entries()) {
      const finer = present[k]!;
      const extrapolated = finer + (finer - coarser) / (factor - 1);
      const error = Math.max(Math.abs(extrapolated - finer), Math.abs(extrapolated - coarser));
      if (error < smallestError) {
        smallestError = error;
        quotient = extrapolated;
      }
      present.push(extrapolated);
      factor *= 4;
    }
    previous = present;
  }
  if (previous.length === 0)
    throw new RangeError(
      `the density cannot be evaluated beside coordinate ${j} = ${position[j]!}; try a smaller step`,
    );
  return { quotient, curvature };
}
