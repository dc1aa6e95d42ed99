/** Ranks of the draws of each chain among all draws: when all chains sample the same distribution, every rank is as frequent. */

/**
 * @param values - (chains x drawsPerChain), chain after chain
 * @param bins - number of equal ranges of rank
 * @returns (chains) x (bins): how many draws of a chain have a rank in each range; ties fall together
 */
export function rankCounts(
  values: Float64Array,
  chains: number,
  drawsPerChain: number,
  bins: number,
): Float64Array[] {
  const total = chains * drawsPerChain;
  const sorted = Float64Array.from(values).sort();
  // Smallest value of each range but the first: faster than ranking every draw.
  const limits = Float64Array.from(
    { length: bins - 1 },
    (_, k) => sorted[Math.round(((k + 1) * total) / bins)]!,
  );
  return Array.from({ length: chains }, (_, chain) => {
    const counts = new Float64Array(bins);
    for (let d = 0; d < drawsPerChain; d += 1)
      counts[rangeOf(limits, values[chain * drawsPerChain + d]!)]! += 1;
    return counts;
  });
}

/** Number of limits at or below a value. */
function rangeOf(limits: Float64Array, value: number): number {
  let [low, high] = [0, limits.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (limits[middle]! <= value) low = middle + 1;
    else high = middle;
  }
  return low;
}
