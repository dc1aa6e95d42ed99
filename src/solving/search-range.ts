/** Which frequencies are searched, and how finely. */
import type { Case } from '../observations/types.js';
import type { FrequencyGrid } from './periodogram.js';

/** Samples per resolution element 1/span; 8 keeps the loss at a peak between two samples below 1 % of its height. */
const SAMPLES_PER_RESOLUTION = 10;
const SHORTEST_PERIOD_DAYS = 0.5;
const LONGEST_PERIOD_IN_SPANS = 1.5;
/** Bounds memory and time for hostile spans (a date with a digit too many). */
const LARGEST_GRID = 1_500_000;

export interface SearchRange {
  readonly spanDays: number;
  readonly shortestPeriodDays: number;
  readonly longestPeriodDays: number;
  readonly grid: FrequencyGrid;
  /** `true` when the grid was cut at LARGEST_GRID and the shortest period raised. */
  readonly cut: boolean;
}

/**
 * @param spanDays - last minus first observation, > 0
 * @param wanted - the user's range; null entries leave it to the data
 */
export function searchRange(spanDays: number, wanted: Case['periodRangeDays']): SearchRange {
  const longest = wanted.high ?? Math.max(LONGEST_PERIOD_IN_SPANS * spanDays, 2 * SHORTEST_PERIOD_DAYS);
  let shortest = Math.min(wanted.low ?? SHORTEST_PERIOD_DAYS, 0.999 * longest);
  const low = 1 / longest;
  const step = 1 / (SAMPLES_PER_RESOLUTION * spanDays);
  let count = Math.ceil((1 / shortest - low) / step) + 1;
  const cut = count > LARGEST_GRID;
  if (cut) {
    count = LARGEST_GRID;
    shortest = 1 / (low + (count - 1) * step);
  }
  return {
    spanDays,
    shortestPeriodDays: shortest,
    longestPeriodDays: longest,
    grid: { startPerDay: low, stepPerDay: step, count },
    cut,
  };
}
