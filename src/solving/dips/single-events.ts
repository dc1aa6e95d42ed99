/** The most significant box at any one time. */
import { BoxSearch, type BoxPeak } from './box-search.js';
import { fixedLadder } from './period-grid.js';
import type { SearchSettings } from './search-settings.js';
import type { WeightedSeries } from './ticked-series.js';

/** One fold with a period longer than the span puts no two times together. */
const PERIOD_IN_SPANS = 1.5;
const DURATION_RATIO = 1.3;

/** `null` where nothing dips. */
export function loudestSingle(series: WeightedSeries, settings: SearchSettings): BoxPeak | null {
  const { singleBounds, spanDays } = settings;
  const search = new BoxSearch(series, {
    frequenciesPerDay: Float64Array.of(1 / (PERIOD_IN_SPANS * spanDays)),
    durationsAt: fixedLadder(singleBounds.shortestDays, singleBounds.longestDays, DURATION_RATIO),
  });
  const peak = search.peakAt(0);
  if (!(peak.depth > 0)) return null;
  // Of the turns of the fold, the one inside the data.
  const { timesDays } = series;
  const centre = 0.5 * (timesDays[0]! + timesDays[timesDays.length - 1]!);
  const turns = Math.round((centre - peak.midTimeDays) / peak.periodDays);
  return { ...peak, midTimeDays: peak.midTimeDays + turns * peak.periodDays };
}
