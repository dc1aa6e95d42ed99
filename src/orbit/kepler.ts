/** Kepler's equation for one point. Arrays go through `kepler-array.ts`, which is much faster. */
import { ConvergenceError } from '../errors.js';
import { reduceAngleRad } from './angles.js';
import { requireEccentricity, requireFinite } from './domain.js';
import { arcMinusSine, cubicStart } from './near-periastron.js';

const MAX_ITERATIONS = 50;
/** Relative step at which the iteration stops: the next one would be below rounding. */
const STEP_GOAL = 4e-16;
const STEP_NOISE = 1e-13;
/** Below this e the cubic start is no better than M + e (and overflows for the smallest). */
const CUBIC_FROM = 0.1;

/**
 * Solves Kepler's equation E - e sin E = M for the eccentric anomaly E.
 *
 * @param meanAnomalyRad - mean anomaly M, radians, any finite value (not reduced by the caller)
 * @param eccentricity - e, 0 <= e < 1; e = 0 returns M exactly
 * @returns E in radians, on the same revolution as M: |E - M| <= e
 * @throws ModelDomainError for a non-finite M or an e outside [0, 1)
 * @throws ConvergenceError carrying M, e and the last step, if 50 safeguarded steps do not suffice (none known)
 *
 * Accuracy: E to 2 ulps on the 80-digit values of test/reference/kepler, e up to 1 - 2^-53, |M| from 1e-300 to 1e22 rad.
 * Method: closed-form cubic start near periastron, M + e elsewhere, then Halley steps kept inside a shrinking bracket.
 */
export function solveKepler(meanAnomalyRad: number, eccentricity: number): number {
  requireFinite('mean anomaly', meanAnomalyRad);
  requireEccentricity(eccentricity);
  const reduced = reduceAngleRad(meanAnomalyRad);
  const half = solveHalfTurn(Math.abs(reduced), eccentricity);
  if (reduced === meanAnomalyRad) return reduced < 0 ? -half : half;
  const excess = half - Math.abs(reduced);
  return meanAnomalyRad + (reduced < 0 ? -excess : excess);
}

/**
 * E in [0, pi] for M in [0, pi]. The relative error of E stays at a few units of rounding even for e just below 1,
 * because M / (dM/dE) <= E everywhere: a relative error of M is not amplified in E.
 */
export function solveHalfTurn(meanAnomalyRad: number, eccentricity: number): number {
  if (eccentricity === 0 || meanAnomalyRad === 0) return meanAnomalyRad;
  const complement = 1 - eccentricity;
  let low = meanAnomalyRad;
  let high = Math.min(meanAnomalyRad / complement, meanAnomalyRad + eccentricity, Math.PI);
  if (high <= low) return low; // e is below the rounding of M
  let anomaly = high;
  if (eccentricity > CUBIC_FROM) {
    const start = cubicStart(meanAnomalyRad, eccentricity);
    if (start < 1 && start > low && start < high) anomaly = start;
  }
  let step = Infinity;
  for (let iteration = 0; iteration < MAX_ITERATIONS; iteration++) {
    const excess = complement * anomaly + eccentricity * arcMinusSine(anomaly) - meanAnomalyRad;
    if (excess === 0) return anomaly;
    if (excess > 0) high = anomaly;
    else low = anomaly;
    const halfSine = Math.sin(anomaly / 2);
    const slope = complement + 2 * eccentricity * halfSine * halfSine;
    const bend = eccentricity * Math.sin(anomaly);
    const next = anomaly - (excess * slope) / (slope * slope - 0.5 * excess * bend);
    const previousStep = Math.abs(step);
    step = next - anomaly;
    if (Math.abs(step) <= STEP_GOAL * anomaly) return next;
    // Steps that are tiny and no longer shrink are rounding of the excess, not progress.
    if (previousStep <= STEP_NOISE * anomaly && Math.abs(step) >= previousStep) return anomaly;
    anomaly = next > low && next < high ? next : 0.5 * (low + high);
  }
  throw new ConvergenceError('Kepler equation: 50 steps did not suffice', {
    meanAnomalyRad,
    eccentricity,
    lastStepRad: step,
  });
}

/**
 * True anomaly, on the same revolution as the mean anomaly.
 *
 * @param meanAnomalyRad - radians, any finite value
 * @param eccentricity - 0 <= e < 1
 * @returns radians. Errors as `solveKepler`.
 *
 * Accuracy: 3 ulps on the same values.
 */
export function trueAnomaly(meanAnomalyRad: number, eccentricity: number): number {
  requireFinite('mean anomaly', meanAnomalyRad);
  requireEccentricity(eccentricity);
  const reduced = reduceAngleRad(meanAnomalyRad);
  const half = solveHalfTurn(Math.abs(reduced), eccentricity) / 2;
  const angle =
    2 *
    Math.atan2(Math.sqrt(1 + eccentricity) * Math.sin(half), Math.sqrt(1 - eccentricity) * Math.cos(half));
  if (reduced === meanAnomalyRad) return reduced < 0 ? -angle : angle;
  const excess = angle - Math.abs(reduced);
  return meanAnomalyRad + (reduced < 0 ? -excess : excess);
}
