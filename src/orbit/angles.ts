/** Angles brought to a chosen revolution. */
import { TWO_PI } from './constants.js';

// 2 pi as a sum of three parts; the first two have 31 significant bits, so a number of revolutions below 2^22 times
// either of them is exact and the remainder is that of the true 2 pi, not of its nearest double.
export const TWO_PI_HIGH = 6.2831853069365025;
export const TWO_PI_MIDDLE = 2.430840201437384e-10;
export const TWO_PI_LOW = 1.1650928224373424e-19;
/** Radians; beyond it the three parts no longer suffice. */
export const REDUCTION_LIMIT_RAD = 2.6e7;

/**
 * The angle in [-pi, pi] that differs from the given one by whole revolutions.
 *
 * @param angleRad - any finite angle, radians
 * @returns radians; `NaN` for a non-finite angle. Angles already in [-pi, pi] are returned unchanged.
 *
 * Accuracy: the remainder of the double given, to 3 ulps even where it is tiny (test/orbit/angles.test.ts, up to 1e22 rad).
 */
export function reduceAngleRad(angleRad: number): number {
  if (Math.abs(angleRad) <= Math.PI) return angleRad;
  if (Math.abs(angleRad) <= REDUCTION_LIMIT_RAD) {
    const revolutions = Math.floor(angleRad / TWO_PI + 0.5);
    return angleRad - revolutions * TWO_PI_HIGH - revolutions * TWO_PI_MIDDLE - revolutions * TWO_PI_LOW;
  }
  // The trigonometric functions reduce any argument with enough digits of pi.
  return Math.atan2(Math.sin(angleRad), Math.cos(angleRad));
}

/** The same direction in [0, 2 pi), radians. Any finite angle. */
export function normaliseRadians(angleRad: number): number {
  const reduced = reduceAngleRad(angleRad);
  const turned = reduced < 0 ? reduced + TWO_PI : reduced + 0;
  return turned < TWO_PI ? turned : 0; // a tiny negative angle would round up to the full turn
}

/** The same direction in [0, 360), degrees. Any finite angle; exact apart from one rounding for negative ones. */
export function normaliseDegrees(angleDeg: number): number {
  const remainder = angleDeg % 360;
  const turned = remainder < 0 ? remainder + 360 : remainder + 0;
  return turned < 360 ? turned : 0;
}
