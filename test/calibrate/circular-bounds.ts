/** Cramer-Rao bounds of one circular orbit from the closed form of its velocity; nothing of the program is used. */
import { inverse } from '../solving/helpers.js';
import type { SimulatedSet } from './problems.js';

export interface CircularBounds {
  readonly logPeriod: number;
  readonly amplitudeMps: number;
  readonly longitudeRad: number;
  readonly zeroPointMps: number;
}

/**
 * Smallest standard errors that an unbiased estimator can have for v = K cos(lambda + 2 pi t/P) + zero point, at the truth.
 * In Gaussian noise the jitter is uncorrelated with all of them, so its being unknown does not enlarge these.
 */
export function circularBounds(set: SimulatedSet): CircularBounds {
  const { timesDays, sigmasMps } = set.data;
  const orbit = set.truth.companions[0]!;
  const jitter = set.truth.jittersMps[0]!;
  const frequency = (2 * Math.PI) / orbit.periodDays;
  const longitude = orbit.argPeriastronStarRad - frequency * orbit.timePeriastronDays;
  const information = new Float64Array(16);
  timesDays.forEach((t, i) => {
    const angle = longitude + frequency * t;
    const k = orbit.semiAmplitudeMps;
    // By ln P, K, lambda, zero point.
    const slopes = [k * Math.sin(angle) * frequency * t, Math.cos(angle), -k * Math.sin(angle), 1];
    const weight = 1 / (sigmasMps[i]! ** 2 + jitter ** 2);
    slopes.forEach((a, r) => {
      slopes.forEach((b, c) => (information[4 * r + c]! += weight * a * b));
    });
  });
  const covariance = inverse(information, 4);
  const error = (j: number): number => Math.sqrt(covariance[j]![j]!);
  return { logPeriod: error(0), amplitudeMps: error(1), longitudeRad: error(2), zeroPointMps: error(3) };
}
