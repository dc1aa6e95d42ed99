/** Thins the draws of a posterior evenly, the same way every time. */

/**
 * @param chains - number of chains, each of `drawsPerChain` draws, one chain after the other
 * @param most - about how many are wanted in all, at least 1
 * @returns indices of every k-th draw of each chain, ascending; all draws when there are no more than wanted
 */
export function thinnedIndices(chains: number, drawsPerChain: number, most: number): Int32Array {
  const step = Math.max(1, Math.ceil((chains * drawsPerChain) / most));
  const perChain = Math.ceil(drawsPerChain / step);
  const indices = new Int32Array(chains * perChain);
  for (let chain = 0; chain < chains; chain += 1)
    for (let k = 0; k < perChain; k += 1) indices[chain * perChain + k] = chain * drawsPerChain + k * step;
  return indices;
}

/** The values at these indices. */
export function pick(values: Float64Array, indices: Int32Array): Float64Array {
  const picked = new Float64Array(indices.length);
  for (let k = 0; k < indices.length; k += 1) picked[k] = values[indices[k]!]!;
  return picked;
}
