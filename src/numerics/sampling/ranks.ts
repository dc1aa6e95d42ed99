/** Rank normalisation: makes diagnostics blind to heavy tails and to the scale of a quantity. */
import { normalQuantile } from '../special-functions.js';

/**
 * Replaces values by normal scores of their ranks over all chains together [Vehtari2021, equation 14].
 *
 * @param chains - any lengths, finite values; read only
 * @returns fresh arrays of the same lengths; ties share their mean rank
 */
export function normalScores(chains: readonly Float64Array[]): Float64Array[] {
  const total = chains.reduce((sum, chain) => sum + chain.length, 0);
  const pooled = new Float64Array(total);
  let filled = 0;
  for (const chain of chains) {
    pooled.set(chain, filled);
    filled += chain.length;
  }
  // Sorting the values alone is many times faster than sorting indices; a binary search finds each rank again.
  pooled.sort();
  const scores = scoresOf(total);
  return chains.map((chain) =>
    chain.map((value) => {
      const below = countBelow(pooled, value, false);
      const upTo = pooled[below + 1] === value ? countBelow(pooled, value, true) : below + 1;
      const rank = (below + 1 + upTo) / 2;
      return Number.isInteger(rank) ? scores[rank - 1]! : scoreOf(rank, total);
    }),
  );
}

function scoreOf(rank: number, total: number): number {
  return normalQuantile((rank - 3 / 8) / (total + 1 / 4));
}

// The same number of draws is judged again and again, for every coordinate: the quantiles are the dear part.
let lastScores: Float64Array = new Float64Array(0);

function scoresOf(total: number): Float64Array {
  if (lastScores.length !== total)
    lastScores = Float64Array.from({ length: total }, (_, index) => scoreOf(index + 1, total));
  return lastScores;
}

/** Number of elements of an ascending array below `value`, or below and equal to it. */
function countBelow(ascending: Float64Array, value: number, withEqual: boolean): number {
  let low = 0;
  let high = ascending.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    const element = ascending[middle]!;
    if (element < value || (withEqual && element === value)) low = middle + 1;
    else high = middle;
  }
  return low;
}
