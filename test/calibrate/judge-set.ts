/** Where the truth of a set lies among its draws, and how far the estimate is from the truth. */
import { median } from '../../src/numerics/summary.js';
import { RANK_DRAWS, type DrawnSet } from './draw-enough.js';

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
export function judgeSet(sampled: DrawnSet, widthFactor = 1): SetResult {
  const { name, index, truths, columns, standardised, smallestEss, divergences } = sampled;
  const draws = columns[0]!.length;
  const thinning = draws / RANK_DRAWS;
  // Pulling the draws towards their median by a factor is pushing the truth away from it by the inverse.
  const thresholds = columns.map((column, q) => {
    const middle = widthFactor === 1 ? truths[q]! : median(column);
    return middle + (truths[q]! - middle) / widthFactor;
  });
  return {
    problem: name,
    index,
    ranks: columns.map((column, q) => {
      let below = 0;
      for (let d = thinning - 1; d < draws; d += thinning) if (column[d]! < thresholds[q]!) below++;
      return below;
    }),
    levels: columns.map((column, q) => column.filter((value) => value < thresholds[q]!).length / draws),
    standardised,
    smallestEss,
    divergences,
    draws,
  };
}
