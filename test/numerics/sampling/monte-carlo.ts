/** Comparison of a mean over chains with its true value, in units of its own Monte-Carlo error. */
import { basicEss } from '../../../src/numerics/sampling/index.js';
import { mean, standardDeviation } from '../../../src/numerics/summary.js';

/** (mean over the chains - truth) / standard error, the error from the spread and the effective number of draws. */
export function departure(chains: readonly Float64Array[], truth: number): number {
  const pooled = Float64Array.from(chains.flatMap((chain) => [...chain]));
  return (mean(pooled) - truth) / (standardDeviation(pooled) / Math.sqrt(basicEss(chains)));
}
