/** The options of a search turned into numbers, and into sentences that say so. */
import { periodGrid } from './period-grid.js';
import type { BoxGrid } from './box-search.js';
import {
  durationRange,
  longestDurationDays,
  shortestDurationDays,
  type DurationRange,
} from './duration-range.js';
import { searchVolume } from './false-alarm.js';
import { usualSpacingDays } from './noise.js';
import type { DurationBounds } from './refine.js';
import type { DipData, DipSearchOptions } from './types.js';

const DEFAULT_SHORTEST_DAYS = 0.5;
const DEFAULT_MOST = 5;
const DEFAULT_THRESHOLD = 0.001;
/** Width of the trend's window in units of the longest duration searched: half of such a dip survives before it is masked, all of it after. */
const WINDOW_DURATIONS = 4;
/** The period of a single event is unknown: it may last as long as the transits of this period, at least. */
const SINGLE_PERIOD_DAYS = 20;
/** A lone low point is an outlier where the shortest dip covers at least this many. */
const POINTS_OF_A_DIP = 3;
/** A single event must stand out by this much, whatever the false-alarm probability says: nothing repeats it. */
export const SINGLE_LEAST_SIGNAL = 8;
/** A period must stand out of its own spectrum, where that has periods enough to tell. */
export const LEAST_EFFICIENCY = 5;
export const PERIODS_TO_TELL = 200;
/** A dip as strong as this fills the spectrum with traces of itself, which then has nothing left to stand out of. */
export const STRONG_SIGNAL = 12;

export interface SearchSettings {
  readonly spacingDays: number;
  readonly spanDays: number;
  readonly range: DurationRange;
  readonly shortestPeriodDays: number;
  /** `null` where no period in the range leaves two events in the span. */
  readonly grid: BoxGrid | null;
  /** Of the search for periods, and of that for single events: what false-alarm probabilities count with. */
  readonly volume: number;
  readonly singleBounds: DurationBounds;
  readonly singleVolume: number;
  readonly windowDays: number;
  readonly loneLow: 'left out' | 'kept';
  readonly most: number;
  readonly threshold: number;
  readonly said: readonly string[];
}

export function durationBounds(range: DurationRange, periodDays: number): DurationBounds {
  return {
    shortestDays: shortestDurationDays(range, periodDays),
    longestDays: longestDurationDays(range, periodDays),
  };
}

function days(value: number): string {
  return `${Number(value.toPrecision(4))} d`;
}

/** @throws RangeError unless there are two times and the range of periods is positive */
export function searchSettings(data: DipData, options: DipSearchOptions): SearchSettings {
  const { timesDays } = data;
  const n = timesDays.length;
  const spanDays = n > 1 ? timesDays[n - 1]! - timesDays[0]! : 0;
  if (!(spanDays > 0)) throw new RangeError('a search for dips needs points at two times or more');
  const spacingDays = usualSpacingDays(timesDays);
  const range = durationRange(options.starDensityGcc ?? null, spacingDays);
  const shortestPeriodDays = options.shortestPeriodDays ?? DEFAULT_SHORTEST_DAYS;
  const longestPeriodDays = Math.min(options.longestPeriodDays ?? 0.5 * spanDays, spanDays);
  if (!(shortestPeriodDays > 0)) throw new RangeError(`a shortest period of ${shortestPeriodDays} d is not above 0`);
  const isPeriodic = shortestPeriodDays < longestPeriodDays;
  const grid = isPeriodic ? periodGrid(range, spanDays, shortestPeriodDays, longestPeriodDays) : null;
  const unknown = Math.max(SINGLE_PERIOD_DAYS, longestPeriodDays);
  const singleBounds = {
    shortestDays: Math.min(shortestDurationDays(range, shortestPeriodDays), 0.1 * spanDays),
    longestDays: Math.min(longestDurationDays(range, unknown), 0.5 * spanDays),
  };
  const windowDays =
    options.trendWindowDays ??
    WINDOW_DURATIONS * (isPeriodic ? longestDurationDays(range, longestPeriodDays) : singleBounds.longestDays);
  const loneLow =
    singleBounds.shortestDays >= POINTS_OF_A_DIP * spacingDays ? 'left out' : ('kept' as const);
  const most = options.maximumCompanions ?? DEFAULT_MOST;
  const threshold = options.falseAlarmThreshold ?? DEFAULT_THRESHOLD;
  const volume = grid === null ? 0 : searchVolume(grid);
  return {
    spacingDays,
    spanDays,
    range,
    shortestPeriodDays,
    grid,
    volume,
    singleBounds,
    singleVolume: spanDays / singleBounds.shortestDays,
    windowDays,
    loneLow,
    most,
    threshold,
    said: [
      grid === null
        ? `no period was searched: the span of ${days(spanDays)} holds no two events at ${days(shortestPeriodDays)} or longer; single events only`
        : `periods of ${days(shortestPeriodDays)} to ${days(longestPeriodDays)}${options.longestPeriodDays == null ? ' (half the span, so that two events fall inside)' : ''}, ${grid.frequenciesPerDay.length} of them: half a step in period moves the shortest dips by at most a quarter of their duration at the ends of the span`,
      range.said,
      `slow trend: robust local regression in a window of ${days(windowDays)}${options.trendWindowDays == null ? `, ${WINDOW_DURATIONS} times the longest duration searched` : ''}; dips that are found are masked and the trend is taken again`,
      `errors scaled to the scatter from point to point, and by the red noise of means over the duration`,
      loneLow === 'left out'
        ? 'left out: points more than 5 sigma above the trend, and lone ones as far below it'
        : 'left out: points more than 5 sigma above the trend',
      `accepted: false-alarm probability below ${threshold}, detection efficiency of ${LEAST_EFFICIENCY} or more (or a signal to noise above ${STRONG_SIGNAL}), and without the strongest event still 0.01 for the periods tried; a single event also needs a signal to noise of ${SINGLE_LEAST_SIGNAL}`,
    ],
  };
} // prettier-ignore
