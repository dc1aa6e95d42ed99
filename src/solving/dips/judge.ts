/** Whether a candidate may be believed, and if not, why not. */
import { counted } from '../../observations/text.js';
import type { BoxGrid } from './box-search.js';
import type { TrapezoidShape } from './trapezoid.js';
import type { DipCandidate } from './types.js';
import { wholeSignalToNoise, withoutStrongest, type WeighedDip } from './candidate.js';
import { searchFalseAlarm, trialsFalseAlarm } from './false-alarm.js';
import {
  LEAST_EFFICIENCY,
  PERIODS_TO_TELL,
  SINGLE_LEAST_SIGNAL,
  STRONG_SIGNAL,
  type SearchSettings,
} from './search-settings.js';

/** Without its strongest event, the rest must pass this for the trials of the period alone. */
const REST_THRESHOLD = 0.01;
/** Share of the signal to noise that events with data all around must carry. */
const WHOLE_SHARE = 0.5;
const WHOLE_LEAST = 4;
/** Points of a single event: fewer may be an accident. */
const FEWEST_POINTS = 3;

export type Verdict =
  | { readonly kind: 'accepted' }
  /** Noise would do. */
  | { readonly kind: 'weak'; readonly why: string }
  /** Significant, but it rests on one event. */
  | { readonly kind: 'one event'; readonly why: string }
  /** Significant, but the data are not fit to carry it. */
  | { readonly kind: 'distrusted'; readonly why: string };

function percent(probability: number): string {
  return `${Number((100 * probability).toPrecision(2))} %`;
}

/** @param efficiency - of its peak in the spectrum */
export function judgePeriodic(weighed: WeighedDip, efficiency: number, settings: SearchSettings): Verdict {
  const falseAlarm = searchFalseAlarm(weighed.signalToNoise, settings.volume);
  if (!(falseAlarm < settings.threshold))
    return {
      kind: 'weak',
      why: `noise alone gives a dip as significant in ${percent(falseAlarm)} of such searches (threshold ${percent(settings.threshold)})`,
    };
  const canTell = periodTrials(settings.grid) >= PERIODS_TO_TELL && weighed.signalToNoise < STRONG_SIGNAL;
  if (canTell && efficiency < LEAST_EFFICIENCY)
    return {
      kind: 'weak',
      why: `it does not stand out of the spectrum: detection efficiency ${efficiency.toFixed(1)}, ${LEAST_EFFICIENCY} wanted`,
    };
  if (weighed.events.length < 2) return { kind: 'one event', why: 'only one event at this period has data' };
  const rest = withoutStrongest(weighed);
  if (!(trialsFalseAlarm(rest, periodTrials(settings.grid)) < REST_THRESHOLD))
    return {
      kind: 'one event',
      why: `it rests on one event: without the strongest, a signal to noise of ${rest.toFixed(1)} is left, which noise reaches at some period`,
    };
  const whole = wholeSignalToNoise(weighed);
  if (whole < Math.max(WHOLE_LEAST, WHOLE_SHARE * weighed.signalToNoise))
    return {
      kind: 'distrusted',
      why: `it rests on events at the edge of gaps: those with data on both sides have a signal to noise of ${whole.toFixed(1)} of ${weighed.signalToNoise.toFixed(1)}`,
    };
  return { kind: 'accepted' };
}

/** Another dip of a period that is already taken, or `null`: the two periods keep together over the span. */
export function sameCompanion(
  shape: TrapezoidShape,
  accepted: readonly DipCandidate[],
  spanDays: number,
): Verdict | null {
  for (const [index, { periodDays, midTimeDays, durationDays }] of accepted.entries()) {
    if (periodDays === null) continue;
    const within = Math.max(durationDays, shape.durationDays) / spanDays;
    if (Math.abs(shape.periodDays / periodDays - 1) > within) continue;
    const turns = (shape.midTimeDays - midTimeDays) / periodDays;
    return {
      kind: 'distrusted',
      why: `a second dip of candidate ${index + 1} at phase ${(turns - Math.floor(turns)).toFixed(3)} of the same period: its occultation, a remnant of its transit, or the other eclipse of a binary`,
    };
  }
  return null;
}

function periodTrials(grid: BoxGrid | null): number {
  return grid === null ? 1 : grid.frequenciesPerDay.length;
}

export function judgeSingle(weighed: WeighedDip, settings: SearchSettings): Verdict {
  const falseAlarm = searchFalseAlarm(weighed.signalToNoise, settings.singleVolume);
  if (!(falseAlarm < settings.threshold) || weighed.signalToNoise < SINGLE_LEAST_SIGNAL)
    return {
      kind: 'weak',
      why: `a single event with a signal to noise of ${weighed.signalToNoise.toFixed(1)}, false-alarm probability ${percent(falseAlarm)} (needed: ${SINGLE_LEAST_SIGNAL}, ${percent(settings.threshold)})`,
    };
  const points = weighed.events.reduce((sum, event) => sum + event.points, 0);
  if (points < FEWEST_POINTS)
    return {
      kind: 'distrusted',
      why: `a single event of ${counted(points, 'point')}; an accident does that (${FEWEST_POINTS} wanted)`,
    };
  if (!weighed.events.every(({ isWhole }) => isWhole))
    return { kind: 'distrusted', why: 'a single event at the edge of a gap, without data on both sides' };
  return { kind: 'accepted' };
}

/** Largest multiple of a period that may have been taken for it. */
const MOST_TURNS = 12;
/** Depths of one body's dips differ by less than this share. */
const ALIKE = 0.35;

/** Whether an accepted candidate is every second, third ... dip of another one. */
export function isPartOf(taken: DipCandidate, other: DipCandidate): boolean {
  if (taken.periodDays === null || other.periodDays === null) return false;
  // Dips of one body are alike; a faint remnant between deep ones is something else.
  if (Math.abs(taken.depth - other.depth) > ALIKE * Math.max(taken.depth, other.depth)) return false;
  const turns = Math.round(taken.periodDays / other.periodDays);
  if (turns < 2 || turns > MOST_TURNS) return false;
  const within = 0.5 * Math.max(taken.durationDays, other.durationDays);
  const cycles = Math.max(1, Math.ceil((taken.events.at(-1)! - taken.events[0]!) / taken.periodDays));
  if (Math.abs(taken.periodDays - turns * other.periodDays) * cycles > 2 * within) return false;
  const phase = (taken.midTimeDays - other.midTimeDays) / other.periodDays;
  return Math.abs(phase - Math.round(phase)) * other.periodDays < 2 * within;
}
