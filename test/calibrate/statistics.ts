/** What many judged sets say together: coverage, uniformity of ranks, scatter over the bound. */
import { regularisedGammaQ } from '../../src/numerics/special-functions.js';
import type { SetResult } from './judge-set.js';
import { RANK_DRAWS } from './draw-enough.js';

/** Central intervals of one and two standard deviations of a Gaussian. */
export const LEVELS: readonly number[] = [0.683, 0.954];

/** Numbers of bins into which the 200 possible ranks fall evenly. */
const BIN_CHOICES = [20, 10, 8, 5, 4];
const FEWEST_PER_BIN = 10;

export function covers(level: number, probability: number): boolean {
  return Math.abs(level - 0.5) < 0.5 * probability;
}

/** Share of sets whose central interval of that probability holds the truth. */
export function coverage(results: readonly SetResult[], quantity: number, probability: number): number {
  return results.filter(({ levels }) => covers(levels[quantity]!, probability)).length / results.length;
}

export function binomialError(probability: number, count: number): number {
  return Math.sqrt((probability * (1 - probability)) / count);
}

/** Counts of ranks in equal bins, as many as leave ten sets to a bin. */
export function rankCounts(results: readonly SetResult[], quantity: number): number[] {
  const bins = BIN_CHOICES.find((choice) => results.length / choice >= FEWEST_PER_BIN) ?? 4;
  const counts = new Array<number>(bins).fill(0);
  for (const { ranks } of results) counts[Math.floor((ranks[quantity]! * bins) / (RANK_DRAWS + 1))]!++;
  return counts;
}

/** Probability of counts at least as uneven as these when all bins are equally likely (Pearson's chi-square). */
export function uniformityProbability(counts: readonly number[]): number {
  const expected = counts.reduce((sum, count) => sum + count, 0) / counts.length;
  const chiSquare = counts.reduce((sum, count) => sum + (count - expected) ** 2 / expected, 0);
  return regularisedGammaQ((counts.length - 1) / 2, chiSquare / 2);
}

/** Root mean square of estimate minus truth over the Cramer-Rao bound. */
export function scatterOverBound(results: readonly SetResult[], quantity: number): number {
  const sum = results.reduce((total, { standardised }) => total + standardised[quantity]! ** 2, 0);
  return Math.sqrt(sum / results.length);
}

/** Mean coverage over all quantities, with its standard error from the scatter between sets. */
export function pooledCoverage(
  results: readonly SetResult[],
  probability: number,
): { readonly share: number; readonly standardError: number } {
  const shares = results.map(
    ({ levels }) => levels.filter((level) => covers(level, probability)).length / levels.length,
  );
  const share = shares.reduce((sum, value) => sum + value, 0) / shares.length;
  const variance = shares.reduce((sum, value) => sum + (value - share) ** 2, 0) / (shares.length - 1);
  return { share, standardError: Math.sqrt(variance / shares.length) };
}

const LARGEST_DEVIATION = 3;
const SMALLEST_PROBABILITY = 1e-3;

/** Sentences about what is not as it should be: coverage of each quantity and of all together within 3 standard errors, uniform ranks. */
export function calibrationFaults(results: readonly SetResult[], names: readonly string[]): string[] {
  const faults: string[] = [];
  const judge = (what: string, share: number, wanted: number, error: number): void => {
    const deviation = (share - wanted) / error;
    if (!(Math.abs(deviation) <= LARGEST_DEVIATION))
      faults.push(
        `${what}: ${(100 * share).toFixed(1)} % of ${(100 * wanted).toFixed(1)} %, ${deviation.toFixed(1)} standard errors`,
      );
  };
  for (const probability of LEVELS) {
    names.forEach((name, q) => {
      judge(name, coverage(results, q, probability), probability, binomialError(probability, results.length));
    });
    const pooled = pooledCoverage(results, probability);
    judge('all quantities', pooled.share, probability, pooled.standardError);
  }
  names.forEach((name, q) => {
    const probability = uniformityProbability(rankCounts(results, q));
    if (!(probability > SMALLEST_PROBABILITY))
      faults.push(`${name}: uneven ranks, p = ${probability.toExponential(1)}`);
  });
  return faults;
}
