/** The same dips at periods that go with a found one: each refitted, and the best explanation chosen. */
import { weighDip, type WeighedDip } from './candidate.js';
import { refineNear, type DurationBounds } from './refine.js';
import type { WeightedSeries } from './ticked-series.js';
import type { RelatedPeriod } from './types.js';

const RATIOS: readonly (readonly [ratio: number, kind: string])[] = [
  [1 / 3, 'P/3'],
  [1 / 2, 'P/2'],
  [2 / 3, '2P/3'],
  [3 / 2, '3P/2'],
  [2, '2P'],
  [3, '3P'],
];
/** Signals to noise that differ by less than this share are equal: the same events, once with and once without cycles in gaps. */
const EQUAL = 0.01;
const MOST_MOVES = 3;

export interface PeriodChoice {
  readonly chosen: WeighedDip;
  readonly related: readonly RelatedPeriod[];
}

/** Whether `b` explains the dips better than `a`: more signal, or the same with fewer events that nobody saw. */
function isBetter(b: WeighedDip, a: WeighedDip): boolean {
  if (b.events.length < 2) return false;
  if (b.signalToNoise > (1 + EQUAL) * a.signalToNoise) return true;
  if (b.signalToNoise < (1 - EQUAL) * a.signalToNoise) return false;
  return b.eventsInSpan - b.events.length < a.eventsInSpan - a.events.length;
}

/**
 * @param boundsAt - durations allowed at a period
 * @param shortestPeriodDays - shorter ones are not tried
 */
export function choosePeriod(
  series: WeightedSeries,
  found: WeighedDip,
  spacingDays: number,
  spanDays: number,
  shortestPeriodDays: number,
  boundsAt: (periodDays: number) => DurationBounds,
): PeriodChoice {
  let chosen = found;
  for (let move = 0; ; move++) {
    const { periodDays, durationDays } = chosen.refined.shape;
    const tried: { weighed: WeighedDip; kind: string }[] = [];
    for (const [ratio, kind] of RATIOS) {
      const period = ratio * periodDays;
      if (period < shortestPeriodDays || period > spanDays) continue;
      const bounds = boundsAt(period);
      const near = {
        shortestDays: Math.max(bounds.shortestDays, 0.6 * durationDays),
        longestDays: Math.min(bounds.longestDays, 1.6 * durationDays),
      };
      if (near.shortestDays >= near.longestDays) continue;
      const refined = refineNear(series, period, durationDays / spanDays, near);
      if (refined !== null)
        tried.push({ weighed: weighDip(series, refined, spacingDays, found.redNoise), kind });
    }
    const better = tried.filter(({ weighed }) => isBetter(weighed, chosen));
    if (better.length === 0 || move === MOST_MOVES)
      return {
        chosen,
        related: tried.map(({ weighed, kind }) => ({
          periodDays: weighed.refined.shape.periodDays,
          kind,
          signalToNoise: weighed.signalToNoise,
          events: weighed.events.length,
          eventsInSpan: weighed.eventsInSpan,
        })),
      };
    chosen = better.reduce((a, b) => (isBetter(b.weighed, a.weighed) ? b : a)).weighed;
  }
}
