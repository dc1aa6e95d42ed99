/**
 * Scatter beyond the errors of mid-times: variance sigma^2 + jitter^2. Sampled and maximised along u, jitter = scale sinh u,
 * with a uniform prior in u (density 1/sqrt(s^2 + scale^2)), as for the jitters of velocities.
 */
import { minimiseScalar } from '../../numerics/minimise-scalar.js';
import { median } from '../../numerics/summary.js';
import type { LinearSolver } from './linear-solver.js';

export interface JitterScale {
  readonly scaleDays: number;
  readonly largestDays: number;
  /** u of the largest. */
  readonly reach: number;
}

/** Prior scale (0.3 of the median error) and largest jitter (ten times scatter plus error). */
export function jitterScale(sigmasDays: Float64Array, scatterDays: number): JitterScale {
  const usual = median(sigmasDays);
  const scaleDays = 0.3 * usual;
  const largestDays = 10 * (scatterDays + usual);
  return { scaleDays, largestDays, reach: Math.asinh(largestDays / scaleDays) };
}

const COARSE_STEPS = 40;

/**
 * Highest ln L over the jitter at the solver's present frequency; the solver is left there.
 *
 * @returns -Infinity in `logLikelihood` where the coefficients are not determined
 */
export function bestJitter(
  solver: LinearSolver,
  scale: JitterScale,
): { readonly jitterDays: number; readonly logLikelihood: number } {
  const valueAt = (u: number): number => {
    solver.setJitter(scale.scaleDays * Math.sinh(u));
    return solver.solve();
  };
  let bestStep = 0;
  let best = -Infinity;
  const step = scale.reach / COARSE_STEPS;
  for (let k = 0; k <= COARSE_STEPS; k++) {
    const value = valueAt(k * step);
    if (value > best) {
      best = value;
      bestStep = k;
    }
  }
  if (best === -Infinity) return { jitterDays: 0, logLikelihood: -Infinity };
  const low = Math.max(0, (bestStep - 1) * step);
  const high = Math.min(scale.reach, (bestStep + 1) * step);
  const inside = minimiseScalar((u) => -valueAt(u), low, high, 1e-7 * scale.reach);
  const atZero = valueAt(0);
  const u = atZero >= -inside.value ? 0 : inside.position;
  const logLikelihood = valueAt(u);
  return { jitterDays: scale.scaleDays * Math.sinh(u), logLikelihood };
}

export interface JitterNodes {
  readonly jittersDays: Float64Array;
  /** ln of the prior's share of each node (trapezoid rule in u). */
  readonly logShares: Float64Array;
}

/** Nodes that are this far below the best in ln of the integrand carry nothing. */
const NEGLIGIBLE = 18;
const SEARCH_STEPS = 240;

/** `count` nodes over the jitters that matter at the solver's present frequency. */
export function jitterNodes(solver: LinearSolver, scale: JitterScale, count: number): JitterNodes {
  const step = scale.reach / SEARCH_STEPS;
  const values = new Float64Array(SEARCH_STEPS + 1);
  let best = -Infinity;
  for (let k = 0; k <= SEARCH_STEPS; k++) {
    solver.setJitter(scale.scaleDays * Math.sinh(k * step));
    values[k] = solver.marginal(solver.solve());
    best = Math.max(best, values[k]!);
  }
  let first = 0;
  let last = SEARCH_STEPS;
  while (first < SEARCH_STEPS && values[first + 1]! < best - NEGLIGIBLE) first++;
  while (last > first + 1 && values[last - 1]! < best - NEGLIGIBLE) last--;
  const low = first * step;
  const width = (last - first) * step;
  const jittersDays = new Float64Array(count);
  const logShares = new Float64Array(count);
  for (let k = 0; k < count; k++) {
    jittersDays[k] = scale.scaleDays * Math.sinh(low + (width * k) / (count - 1));
    const isEnd = k === 0 || k === count - 1;
    logShares[k] = Math.log((width / (count - 1) / scale.reach) * (isEnd ? 0.5 : 1));
  }
  return { jittersDays, logShares };
}
