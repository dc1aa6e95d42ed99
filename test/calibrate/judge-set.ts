/** Where the truth of a set lies among its draws, and how far the estimate is from the truth. */
import { median } from '../../src/numerics/summary.js';
import { circularBounds } from './circular-bounds.js';
import { quantitiesOf } from './quantities.js';
import { RANK_DRAWS, type SampledSet } from './sample-set.js';

/** Plain data: it crosses processes as JSON. */
export interface SetResult {
  readonly problem: string;
  readonly index: number;
  /** Per quantity: how many of the thinned draws lie below the truth, 0 .. RANK_DRAWS. */
  readonly ranks: readonly number[];
  /** Per quantity: the share of all draws that lie below the truth, 0..1. */
  readonly levels: readonly number[];
  /** Maximum-likelihood estimate minus truth over the Cramer-Rao bound: ln P, K, mean longitude, zero point; circular orbits only. */
  readonly standardised: readonly number[];
  readonly smallestEss: number;
  readonly divergences: number;
  readonly draws: number;
}

/**
 * @param widthFactor - draws are pulled towards their median by this factor; 1 except in negative controls
 */
export function judgeSet(sampled: SampledSet, widthFactor = 1): SetResult {
  const { problem, index, truths, columns, smallestEss, divergences } = sampled;
  const draws = columns[0]!.length;
  const thinning = draws / RANK_DRAWS;
  // Pulling the draws towards their median by a factor is pushing the truth away from it by the inverse.
  const thresholds = columns.map((column, q) => {
    const middle = widthFactor === 1 ? truths[q]! : median(column);
    return middle + (truths[q]! - middle) / widthFactor;
  });
  return {
    problem: problem.name,
    index,
    ranks: columns.map((column, q) => {
      let below = 0;
      for (let d = thinning - 1; d < draws; d += thinning) if (column[d]! < thresholds[q]!) below++;
      return below;
    }),
    levels: columns.map((column, q) => column.filter((value) => value < thresholds[q]!).length / draws),
    standardised: problem.companions.every(({ circular }) => circular) ? standardisedErrors(sampled) : [],
    smallestEss,
    divergences,
    draws,
  };
}

/** Errors of the estimate in the order of the quantities of a circular orbit, without the jitter. */
function standardisedErrors({ problem, set, best, truths }: SampledSet): number[] {
  const estimate = quantitiesOf(problem).read(best, set.truth);
  const { logPeriod, amplitudeMps, longitudeRad, zeroPointMps } = circularBounds(set);
  const bounds = [logPeriod, amplitudeMps, longitudeRad, zeroPointMps];
  return bounds.map((bound, q) => (estimate[q]! - truths[q]!) / bound);
}
