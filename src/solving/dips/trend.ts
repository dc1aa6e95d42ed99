/**
 * Slow trend of a light curve: a robust local regression. Points are joined to medians of narrow bins; at knots a sixteenth of
 * the window apart, a parabola (a straight line where the window is cut by a gap or an end) is fitted to the bins within half a
 * window with tricube weights and biweight iterations, so that a few low bins do not pull it; between knots, cubics through
 * values and slopes of the knots. O(n log n).
 */
import { medianInPlace } from './order-statistics.js';
import { localFit, type LocalBins } from './local-fit.js';

const BINS_PER_WINDOW = 48;
const KNOTS_PER_WINDOW = 16;
/** A gap longer than this share of the window starts the trend afresh. */
const GAP_SHARE = 0.5;

/**
 * @param timesDays - ascending
 * @param flux - as many
 * @param isMasked - 1 leaves a point out of the fit
 * @param windowDays - full width of the window, > 0
 * @returns trend at every time, masked ones too; > 0 where the flux is
 */
export function slowTrend(
  timesDays: Float64Array,
  flux: Float64Array,
  isMasked: Uint8Array,
  windowDays: number,
): Float64Array {
  const trend = new Float64Array(timesDays.length);
  let start = 0;
  for (let i = 1; i <= timesDays.length; i++) {
    if (i < timesDays.length && timesDays[i]! - timesDays[i - 1]! <= GAP_SHARE * windowDays) continue;
    fillRun(timesDays, flux, isMasked, windowDays, start, i, trend);
    start = i;
  }
  return trend;
}

/** Medians of the unmasked points of rows `start` to `end` (excluded). */
function binsOf(
  timesDays: Float64Array,
  flux: Float64Array,
  isMasked: Uint8Array,
  binDays: number,
  start: number,
  end: number,
): LocalBins {
  const times: number[] = [];
  const values: number[] = [];
  const counts: number[] = [];
  const work = new Float64Array(end - start);
  let i = start;
  while (i < end) {
    const cell = Math.floor((timesDays[i]! - timesDays[start]!) / binDays);
    let count = 0;
    let sum = 0;
    while (i < end && Math.floor((timesDays[i]! - timesDays[start]!) / binDays) === cell) {
      if (isMasked[i] === 0) {
        work[count++] = flux[i]!;
        sum += timesDays[i]! - timesDays[start]!;
      }
      i++;
    }
    if (count === 0) continue;
    times.push(timesDays[start]! + sum / count);
    values.push(medianInPlace(work.subarray(0, count)));
    counts.push(count);
  }
  return {
    times: Float64Array.from(times),
    values: Float64Array.from(values),
    counts: Float64Array.from(counts),
  };
}

function fillRun(
  timesDays: Float64Array,
  flux: Float64Array,
  isMasked: Uint8Array,
  windowDays: number,
  start: number,
  end: number,
  trend: Float64Array,
): void {
  const bins = binsOf(timesDays, flux, isMasked, windowDays / BINS_PER_WINDOW, start, end);
  if (bins.times.length === 0) {
    // All of it is dips: nothing but its own level to go by.
    trend.fill(medianInPlace(flux.slice(start, end)), start, end);
    return;
  }
  const first = timesDays[start]!;
  const length = timesDays[end - 1]! - first;
  const intervals = Math.max(1, Math.ceil((length / windowDays) * KNOTS_PER_WINDOW));
  const stepDays = length > 0 ? length / intervals : 1;
  const levels = new Float64Array(intervals + 1);
  const slopes = new Float64Array(intervals + 1);
  for (let k = 0; k <= intervals; k++) {
    const fit = localFit(bins, first + k * stepDays, windowDays);
    levels[k] = fit.level;
    slopes[k] = fit.slopePerDay * stepDays;
  }
  for (let i = start; i < end; i++) {
    const position = Math.min((timesDays[i]! - first) / stepDays, intervals);
    const k = Math.min(Math.floor(position), intervals - 1);
    const u = position - k;
    const v = 1 - u;
    // Cubic Hermite.
    trend[i] =
      v * v * ((1 + 2 * u) * levels[k]! + u * slopes[k]!) +
      u * u * ((1 + 2 * v) * levels[k + 1]! - v * slopes[k + 1]!);
  }
}
