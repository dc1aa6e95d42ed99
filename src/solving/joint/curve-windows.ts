/** Which points of a light curve enter the fit: the neighbourhood of the events, one segment each. */
import { median } from '../../numerics/summary.js';
import type { LightCurveTable } from '../../observations/photometry-types.js';

/** What is known of a companion's events before the fit. Days since the solver's epoch. */
export interface Ephemeris {
  readonly letter: string;
  /** `null` where only one transit is known. */
  readonly periodDays: number | null;
  readonly midTimeDays: number;
  readonly durationDays: number;
  readonly depth: number;
  /** Later than a transit by this, days, where occultations are fitted; else `null`. */
  readonly occultationLagDays: number | null;
}

/** One event of one companion. */
export interface EventTime {
  readonly letter: string;
  readonly cycle: number;
  readonly midTimeDays: number;
  readonly durationDays: number;
}

export interface Window {
  readonly start: number;
  /** Excluded. */
  readonly end: number;
  readonly events: readonly EventTime[];
}

/** Half width of a neighbourhood in durations of the event: as much outside on either side as the event is long. */
const HALF_WIDTH_IN_DURATIONS = 1.5;
/** A table no longer than this many days, or durations, is one run: a night on one target. */
const NIGHT_DAYS = 0.8;
const NIGHT_IN_DURATIONS = 5;
const FEWEST_POINTS = 5;
/** A neighbourhood reaches at least this many usual steps of the table to either side. */
const LEAST_STEPS = 4;
/** More events than this in one table are no orbit that is searched here. */
const MOST_EVENTS = 20_000;

/** Events of all companions that fall into a span, in order of time. */
export function eventsWithin(
  ephemerides: readonly Ephemeris[],
  fromDays: number,
  toDays: number,
): EventTime[] {
  const events: EventTime[] = [];
  for (const { letter, periodDays, midTimeDays, durationDays, occultationLagDays } of ephemerides) {
    const lags = occultationLagDays === null ? [0] : [0, occultationLagDays];
    for (const lag of lags) {
      const first = midTimeDays + lag;
      if (periodDays === null) {
        if (first > fromDays && first < toDays)
          events.push({ letter, cycle: 0, midTimeDays: first, durationDays });
        continue;
      }
      const from = Math.ceil((fromDays - first) / periodDays);
      const to = Math.min(Math.floor((toDays - first) / periodDays), from + MOST_EVENTS);
      for (let cycle = from; cycle <= to; cycle++)
        events.push({ letter, cycle, midTimeDays: first + cycle * periodDays, durationDays });
    }
  }
  return events.sort((a, b) => a.midTimeDays - b.midTimeDays);
}

/** Runs of points around the events of a light curve. */
export function windowsOf(timesDays: Float64Array, ephemerides: readonly Ephemeris[]): Window[] {
  const n = timesDays.length;
  if (n < FEWEST_POINTS) return [];
  const first = timesDays[0]!;
  const last = timesDays[n - 1]!;
  const longest = Math.max(...ephemerides.map(({ durationDays }) => durationDays));
  const margin = HALF_WIDTH_IN_DURATIONS * longest;
  const events = eventsWithin(ephemerides, first - margin, last + margin);
  if (last - first <= Math.max(NIGHT_DAYS, NIGHT_IN_DURATIONS * longest))
    return events.length === 0 ? [] : [{ start: 0, end: n, events }];
  const step = medianStep(timesDays);
  const windows: { from: number; to: number; events: EventTime[] }[] = [];
  for (const event of events) {
    const half = Math.max(
      HALF_WIDTH_IN_DURATIONS * event.durationDays,
      0.5 * event.durationDays + LEAST_STEPS * step,
    );
    const from = event.midTimeDays - half;
    const to = event.midTimeDays + half;
    const before = windows.at(-1);
    if (before !== undefined && from < before.to) {
      before.to = Math.max(before.to, to);
      before.events.push(event);
    } else windows.push({ from, to, events: [event] });
  }
  return windows.flatMap(({ from, to, events: own }) => {
    const start = firstNotBelow(timesDays, from);
    const end = firstNotBelow(timesDays, to);
    return end - start >= FEWEST_POINTS ? [{ start, end, events: own }] : [];
  });
}

function firstNotBelow(sorted: Float64Array, value: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle]! < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Times of a table on the solver's axis. */
export function daysOf(table: LightCurveTable, epochBjdTdb: number): Float64Array {
  return table.timesBjdTdb.map((time) => time - epochBjdTdb);
}

/** Usual distance of neighbouring points. */
function medianStep(timesDays: Float64Array): number {
  return median(timesDays.subarray(1).map((time, i) => time - timesDays[i]!));
}
