/** What the times of the data allow: events inside the span, and how short the period of a single event can be. */
import { firstAtOrAfter } from './order-statistics.js';
import type { WeightedSeries } from './ticked-series.js';
import type { TrapezoidShape } from './trapezoid.js';

/** An event would have been seen where this share of its usual number of points is there. */
const SEEN_SHARE = 0.4;

/** Events between the first and the last time, with or without data. */
export function eventsInSpan(timesDays: Float64Array, shape: TrapezoidShape): number {
  const n = timesDays.length;
  const first = Math.ceil((timesDays[0]! - shape.midTimeDays) / shape.periodDays);
  const last = Math.floor((timesDays[n - 1]! - shape.midTimeDays) / shape.periodDays);
  return Math.max(0, last - first + 1);
}

/**
 * Least period of a dip that was seen once, days: at every shorter one (down to twice its duration), a second event would
 * have fallen among the data.
 */
export function shortestUnseenPeriod(
  series: WeightedSeries,
  midTimeDays: number,
  durationDays: number,
  spacingDays: number,
): number {
  const times = series.timesDays.filter((_, i) => series.weights[i]! > 0);
  const n = times.length;
  const wanted = Math.max(1, SEEN_SHARE * (durationDays / spacingDays));
  const seen = (time: number): boolean => {
    const from = firstAtOrAfter(times, time - 0.5 * durationDays);
    return firstAtOrAfter(times, time + 0.5 * durationDays) - from >= wanted;
  };
  const before = midTimeDays - times[0]!;
  const after = times[n - 1]! - midTimeDays;
  const farthest = Math.max(before, after) + 0.5 * durationDays;
  const isSeen = (periodDays: number): boolean => {
    for (let time = midTimeDays + periodDays; time <= midTimeDays + after; time += periodDays)
      if (seen(time)) return true;
    for (let time = midTimeDays - periodDays; time >= midTimeDays - before; time -= periodDays)
      if (seen(time)) return true;
    return false;
  };
  let periodDays = 2 * durationDays;
  // The farthest event in the span moves by a quarter of the duration from one trial to the next.
  while (periodDays < farthest && isSeen(periodDays))
    periodDays += (0.25 * durationDays * periodDays) / Math.max(farthest, periodDays);
  return Math.min(periodDays, farthest);
}
