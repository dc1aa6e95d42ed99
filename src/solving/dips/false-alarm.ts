/** How often noise alone gives a dip as significant as this one. */
import { erfc } from '../../numerics/special-functions.js';
import type { BoxGrid } from './box-search.js';

/**
 * A search maximises over period, time, duration and slope continuously, so the expected number of chance dips above z grows as
 * volume z^POWER times the normal tail (sums over correlated boxes; the volume counts periods times phases). Power and factor are
 * fitted to the maxima of simulated white noise (*decisions* in DEVELOPERS.md).
 */
const POWER = 5;
const FACTOR = 0.01;

/** Size of a search: the sum over its frequencies of period over shortest duration. */
export function searchVolume(grid: BoxGrid): number {
  const durations = new Float64Array(64);
  let sum = 0;
  for (const frequency of grid.frequenciesPerDay) {
    const periodDays = 1 / frequency;
    grid.durationsAt(periodDays, durations);
    sum += periodDays / durations[0]!;
  }
  return sum;
}

/** Probability that a standard normal variable exceeds `z`. */
function normalTail(z: number): number {
  return 0.5 * erfc(z / Math.SQRT2);
}

/** Probability that the most significant dip that noise offers in a search of this volume exceeds `signalToNoise`. */
export function searchFalseAlarm(signalToNoise: number, volume: number): number {
  const z = Math.max(signalToNoise, 0);
  if (z < 2) return 1;
  return -Math.expm1(-FACTOR * volume * z ** POWER * normalTail(z));
}

/** The same for so many independent trials of one shape. */
export function trialsFalseAlarm(signalToNoise: number, trials: number): number {
  const single = normalTail(signalToNoise);
  return single >= 1 ? 1 : -Math.expm1(trials * Math.log1p(-single));
}
