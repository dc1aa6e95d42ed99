/** Draws of one chain until they are worth enough independent ones. */
import { bulkEss } from '../../src/numerics/sampling/diagnostics.js';
import type { NutsChain } from '../../src/numerics/sampling/nuts.js';

/** Draws kept for the ranks, evenly thinned: a rank is one of 200 numbers. */
export const RANK_DRAWS = 199;
const BATCH = 5 * RANK_DRAWS;
/** As in the program, draws are added until they are worth enough independent ones; here as many as are kept. */
export const ENOUGH_ESS = 200;
const MOST_BATCHES = 10;

/** One simulated set with its draws, as it is judged. */
export interface DrawnSet {
  /** Name of the problem. */
  readonly name: string;
  readonly index: number;
  /** Per quantity, the truth. */
  readonly truths: readonly number[];
  /** Per quantity, the draws in order; a multiple of `RANK_DRAWS`. */
  readonly columns: readonly Float64Array[];
  /** Errors of the estimates over the Cramer-Rao bounds, where the problem has them in closed form. */
  readonly standardised: readonly number[];
  readonly smallestEss: number;
  readonly divergences: number;
}

/** @param read - the quantities at a position */
export function drawEnough(
  chain: NutsChain,
  size: number,
  read: (position: Float64Array) => readonly number[],
): Pick<DrawnSet, 'columns' | 'smallestEss' | 'divergences'> {
  const growing: number[][] = [];
  let columns: Float64Array[] = [];
  let smallestEss = 0;
  let divergences = 0;
  for (let batch = 0; batch < MOST_BATCHES && smallestEss < ENOUGH_ESS; batch++) {
    const { positions, divergent } = chain.draw(BATCH);
    for (let d = 0; d < BATCH; d++) {
      read(positions.subarray(d * size, (d + 1) * size)).forEach((value, q) => {
        (growing[q] ??= []).push(value);
      });
      divergences += divergent[d]!;
    }
    columns = growing.map((values) => Float64Array.from(values));
    smallestEss = Math.min(...columns.map((column) => bulkEss([column])));
  }
  return { columns, smallestEss, divergences };
}
