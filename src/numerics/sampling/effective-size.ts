/** Effective number of draws of several chains of one quantity. */
import { mean, standardDeviation } from '../summary.js';
import { autocovariance } from './autocovariance.js';

/**
 * Number of independent draws that would give the mean of the quantity as well as these chains do [Vehtari2021,
 * section 3.2]: autocorrelations of all chains combined, with the spread between chains counted as correlation,
 * summed up to where Geyer's initial monotone sequence ends (Geyer 1992, Statistical Science 7, 473).
 *
 * @param chains - equal lengths of at least 4, read only; not split here
 * @returns > 0, at most N·log10(N) for N draws in all (antithetic chains beat independent draws); NaN when a value is not finite or
 *   the chains do not vary
 */
export function effectiveSize(chains: readonly Float64Array[]): number {
  const length = chains[0]?.length ?? 0;
  const total = chains.length * length;
  if (length < 4) return NaN;
  const covariances = chains.map(autocovariance);
  const lagMean = (lag: number): number =>
    covariances.reduce((sum, covariance) => sum + covariance[lag]!, 0) / chains.length;
  const between = chains.length > 1 ? standardDeviation(chains.map((chain) => mean(chain))) ** 2 : 0;
  const within = (lagMean(0) * length) / (length - 1);
  const variance = lagMean(0) + between;
  if (!(variance > 0) || variance === Infinity) return NaN;
  const correlation = (lag: number): number => 1 - (within - lagMean(lag)) / variance;

  // Sums of pairs of neighbouring lags are positive and falling for a reversible chain; noise ends that.
  let even = 1;
  let odd = correlation(1);
  let smallestPair = Infinity;
  let sumBefore = 0;
  let lag = 0;
  while (lag < length - 5 && even + odd > 0) {
    smallestPair = Math.min(smallestPair, even + odd);
    sumBefore += smallestPair;
    lag += 2;
    even = correlation(lag);
    odd = correlation(lag + 1);
  }
  // Of the last pair only the even lag is kept, at half weight: that lowers the noise of the estimate.
  const last = even > 0 || even + odd >= 0 ? even : 0;
  const stepsPerDraw = Math.max(-1 + 2 * sumBefore + last, 1 / Math.log10(total));
  return total / stepsPerDraw;
}
