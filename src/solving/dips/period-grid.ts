/** Which periods are searched: steps so small that a dip stays together over the whole span. */
import type { BoxGrid } from './box-search.js';
import { longestDurationDays, shortestDurationDays, type DurationRange } from './duration-range.js';

/** Neighbouring durations differ by this factor: a box loses at most 9 % of its signal to noise between two of them. */
const DURATION_RATIO = 1.4;
/**
 * Step of the frequency in units of (shortest duration/period)/span. Half a step away from the truth, the shortest dips drift
 * by a quarter of their duration at either end of the span (12 % of the signal to noise), those three times as long by a
 * twelfth (4 %).
 */
const STEP = 1;
const MOST_FREQUENCIES = 5_000_000;

/**
 * @param spanDays - > 0
 * @param shortestDays - shortest period
 * @param longestDays - longest period, > shortestDays
 */
export function periodGrid(
  range: DurationRange,
  spanDays: number,
  shortestDays: number,
  longestDays: number,
): BoxGrid {
  const frequencies: number[] = [];
  const last = 1 / shortestDays;
  let frequency = 1 / longestDays;
  while (frequency <= last && frequencies.length < MOST_FREQUENCIES) {
    frequencies.push(frequency);
    frequency += (STEP * shortestDurationDays(range, 1 / frequency) * frequency) / spanDays;
  }
  return { frequenciesPerDay: Float64Array.from(frequencies), durationsAt: durationLadder(range) };
}

/** Durations from the shortest to the longest of a period, in equal ratios. */
function durationLadder(range: DurationRange): BoxGrid['durationsAt'] {
  return (periodDays, out) => {
    const longest = longestDurationDays(range, periodDays);
    let duration = shortestDurationDays(range, periodDays);
    let count = 0;
    do {
      out[count++] = duration;
      duration *= DURATION_RATIO;
    } while (duration < longest * 1.1 && count < out.length);
    return count;
  };
}

/** Durations from `shortestDays` to the first that reaches `longestDays`, in equal ratios; the same at every period. */
export function fixedLadder(
  shortestDays: number,
  longestDays: number,
  ratio: number,
): BoxGrid['durationsAt'] {
  return (_periodDays, out) => {
    let count = 0;
    for (let duration = shortestDays; count < out.length; duration *= ratio) {
      out[count++] = duration;
      if (duration >= longestDays) break;
    }
    return count;
  };
}
