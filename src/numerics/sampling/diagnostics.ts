/**
 * Have the chains converged? Measures of [Vehtari2021] for one quantity at a time.
 *
 * Everywhere: `chains` has one array per chain, equal lengths of at least 8 draws, in order of drawing, read
 * only. Each is split in two halves (the middle draw of an odd length is left out), so that a single drifting
 * chain is noticed. The result is NaN where the measure has no meaning: a value that is not finite, or no
 * variation at all (R-hat is Infinity where only chains differ). Accuracy: 1e-13 relative to the five sets of
 * test/reference/sampling/diagnostics.json.
 */
import { mean, median, quantileSorted, standardDeviation } from '../summary.js';
import { effectiveSize } from './effective-size.js';
import { normalScores } from './ranks.js';

const SHORTEST_CHAIN = 8;

/**
 * R-hat: the larger of the one for location (ranks) and the one for spread (ranks of distances from the median).
 * Chains that agree give 1; "converged" asks for less than 1.01.
 *
 * @throws RangeError for no chains, unequal lengths or fewer than 8 draws (so do the other measures)
 */
export function rankNormalisedRHat(chains: readonly Float64Array[]): number {
  const halves = splitChains(chains);
  if (!areFinite(chains)) return NaN;
  const centre = median(pool(chains));
  const folded = halves.map((half) => half.map((value) => Math.abs(value - centre)));
  // Math.max keeps NaN, as it must.
  return Math.max(plainRHat(normalScores(halves)), plainRHat(normalScores(folded)));
}

/** Effective number of draws for the centre of the distribution, blind to its scale and tails; more than 400 are asked for. */
export function bulkEss(chains: readonly Float64Array[]): number {
  const halves = splitChains(chains);
  return areFinite(chains) ? effectiveSize(normalScores(halves)) : NaN;
}

/** The smaller of the effective numbers for the 5 % and 95 % quantiles: how well the ends of an interval are known. */
export function tailEss(chains: readonly Float64Array[]): number {
  const halves = splitChains(chains);
  if (!areFinite(chains)) return NaN;
  const ascending = pool(chains).sort();
  const sizes = [0.05, 0.95].map((probability) => {
    const limit = quantileSorted(ascending, probability);
    return effectiveSize(halves.map((half) => half.map((value) => (value <= limit ? 1 : 0))));
  });
  return Math.min(...sizes);
}

/** Effective number of draws for the mean of the values themselves (needs a finite variance). */
export function basicEss(chains: readonly Float64Array[]): number {
  const halves = splitChains(chains);
  return areFinite(chains) ? effectiveSize(halves) : NaN;
}

/**
 * Estimated Bayesian fraction of missing information: how freely one chain moves between energies (Betancourt 2016,
 * arXiv:1604.00695). About 1 or more is healthy; below 0.3 the tails are hardly reached.
 *
 * @param energies - of one chain, in order, at least 3
 * @returns sum of squared steps over sum of squared departures from the mean, 0 .. 4; NaN when the energies do not vary
 */
export function ebfmi(energies: Float64Array): number {
  if (energies.length < 3)
    throw new RangeError(`${energies.length} energies are too few to judge a chain; at least 3 are needed`);
  const centre = mean(energies);
  let steps = 0;
  let departures = 0;
  for (let k = 0; k < energies.length; k++) {
    if (k > 0) steps += (energies[k]! - energies[k - 1]!) ** 2;
    departures += (energies[k]! - centre) ** 2;
  }
  return steps / departures;
}

/** Square root of the ratio of the variance of all draws to that within chains (no ranks, no splitting). */
function plainRHat(chains: readonly Float64Array[]): number {
  const length = chains[0]!.length;
  const between = standardDeviation(chains.map((chain) => mean(chain))) ** 2;
  const within = mean(chains.map((chain) => standardDeviation(chain) ** 2));
  return Math.sqrt((within * (length - 1)) / length + between) / Math.sqrt(within);
}

function splitChains(chains: readonly Float64Array[]): Float64Array[] {
  const length = chains[0]?.length ?? 0;
  if (length < SHORTEST_CHAIN)
    throw new RangeError(
      `${chains.length} chains of ${length} draws were given; at least one of ${SHORTEST_CHAIN} is needed`,
    );
  if (chains.some((chain) => chain.length !== length))
    throw new RangeError(
      `chains of ${chains.map((chain) => chain.length).join(', ')} draws were given; equal lengths are needed`,
    );
  const half = length >> 1;
  return chains.flatMap((chain) => [chain.slice(0, half), chain.slice(length - half)]);
}

function areFinite(chains: readonly Float64Array[]): boolean {
  return chains.every((chain) => chain.every(Number.isFinite));
}

function pool(chains: readonly Float64Array[]): Float64Array {
  const pooled = new Float64Array(chains.reduce((sum, chain) => sum + chain.length, 0));
  let filled = 0;
  for (const chain of chains) {
    pooled.set(chain, filled);
    filled += chain.length;
  }
  return pooled;
}
