/**
 * Marginal likelihoods of models beside the reported one: without a companion, and with it circular or eccentric.
 * Importance sampling around the maximum of each, which has one mode and few dimensions.
 */
import { minimiseSmooth } from '../../numerics/minimise.js';
import { RandomStream } from '../../numerics/random.js';
import { importanceEvidence } from '../../numerics/sampling/importance.js';
import type { PlannedFit } from '../explorer.js';
import { otherShape } from '../evidence.js';
import type { Settled } from '../settle.js';
import type { MarginalComparison } from '../types.js';
import { curvatureOfDensity } from './density-curvature.js';
import { PosteriorDensity } from './posterior-density.js';
import type { PriorScales } from './priors.js';

const DRAWS = 6000;
/** Below this many effective draws the estimate is not given. */
const FEWEST_EFFECTIVE = 150;

export interface LogEvidence {
  readonly logEvidence: number;
  readonly standardError: number;
}

/** Comparisons for one companion; null where one could not be computed reliably or the case leaves no choice. */
export interface CompanionMarginals {
  readonly presence: MarginalComparison | null;
  readonly eccentricity: MarginalComparison | null;
}

/** ln marginal likelihood of a fitted model around its maximum, or null when too few draws carry it. */
export function evidenceAround(
  planned: PlannedFit,
  settled: Settled,
  scales: PriorScales,
  random: RandomStream,
): LogEvidence | null {
  const density = new PosteriorDensity(planned.fit.problem, planned.plan, scales);
  const { folded } = density;
  const start = density.position(settled.explorer.portable(planned));
  const first = curvatureOfDensity(density, start);
  const scale = Float64Array.from({ length: density.size }, (_, j) =>
    Math.sqrt(first[j * density.size + j]!),
  );
  const top = minimiseSmooth(
    (position, gradient) => {
      const value = density.evaluate(position, gradient);
      for (let j = 0; j < gradient.length; j++) gradient[j] = -gradient[j]!;
      return -value;
    },
    start,
    { scale, maxIterations: 60 },
  );
  const centre = density.fold(top.parameters);
  const result = importanceEvidence(folded, centre, curvatureOfDensity(density, centre), {
    random,
    draws: DRAWS,
  });
  return result.effectiveSampleSize < FEWEST_EFFECTIVE ? null : result;
}

function compare(one: LogEvidence | null, other: LogEvidence | null): MarginalComparison | null {
  if (one === null || other === null) return null;
  return {
    logBayesFactor: one.logEvidence - other.logEvidence,
    standardError: Math.hypot(one.standardError, other.standardError),
  };
}

/**
 * @param best - the reported model and mode
 * @param reported - its own marginal likelihood, from its draws
 */
export function marginalsOf(
  settled: Settled,
  best: PlannedFit,
  reported: LogEvidence,
  scales: PriorScales,
  seed: number,
): CompanionMarginals[] {
  return best.plan.companions.map((companion, c) => {
    const without = settled.explorer.without(best, c);
    const random = (stream: number): RandomStream => RandomStream.fromSeed(seed, 20_000 + 10 * c + stream);
    const absent = evidenceAround(without, settled, scales, random(0));
    const other = otherShape(settled.explorer, best, c);
    const reshaped = other === null ? null : evidenceAround(other, settled, scales, random(1));
    return {
      presence: compare(reported, absent),
      eccentricity: companion.circular ? compare(reshaped, reported) : compare(reported, reshaped),
    };
  });
}
