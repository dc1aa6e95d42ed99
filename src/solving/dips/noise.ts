/** What a detrended light curve scatters: the scale of its errors, its outliers, and its red noise. */
import { upperMedian } from '../../numerics/summary.js';
import { clippedRms, robustScatterInPlace } from './order-statistics.js';
import type { WeightedSeries } from './ticked-series.js';

/** Points above this many standard deviations, and lone points below it, are left out of the search. */
const OUTLIER_SIGMAS = 5;
/** Both neighbours of a lone low point are higher than minus this. */
const NEIGHBOUR_SIGMAS = 2.5;
const FEWEST_FOR_SCALE = 20;
const FEWEST_BINS = 8;

/** Usual spacing of times, days: the median difference; `NaN` for fewer than two. */
export function usualSpacingDays(timesDays: Float64Array): number {
  const n = timesDays.length;
  if (n < 2) return NaN;
  const spacings = new Float64Array(n - 1);
  for (let i = 1; i < n; i++) spacings[i - 1] = timesDays[i]! - timesDays[i - 1]!;
  return upperMedian(spacings)!;
}

/**
 * Factor that brings stated errors to the scatter from point to point: 1.48 times the median absolute difference of neighbours in
 * units of its error. 1 with fewer than 20 points.
 */
export function errorScale(values: Float64Array, sigmas: Float64Array): number {
  const n = values.length;
  if (n < FEWEST_FOR_SCALE) return 1;
  const differences = new Float64Array(n - 1);
  for (let i = 1; i < n; i++)
    differences[i - 1] = (values[i]! - values[i - 1]!) / Math.hypot(sigmas[i]!, sigmas[i - 1]!);
  const scale = robustScatterInPlace(differences);
  return scale > 0 ? scale : 1;
}

/**
 * Marks points that are too high, and single low points between two that are not low: no dip is that short. A low point at a
 * gap is kept (what rests on it is distrusted later).
 *
 * @param isOutlier - overwritten
 * @param loneLow - whether a dip would cover several points, so that a lone low one can be told
 */
export function markOutliers(
  values: Float64Array,
  sigmas: Float64Array,
  loneLow: 'left out' | 'kept',
  isOutlier: Uint8Array,
): void {
  const n = values.length;
  const scaled = values.map((value, i) => value / sigmas[i]!);
  const scatter = n > 0 ? Math.max(1, robustScatterInPlace(scaled.slice())) : 1;
  for (let i = 0; i < n; i++) {
    const off = scaled[i]! / scatter;
    const before = i > 0 ? scaled[i - 1]! / scatter : -Infinity;
    const after = i + 1 < n ? scaled[i + 1]! / scatter : -Infinity;
    const isLone =
      loneLow === 'left out' &&
      off < -OUTLIER_SIGMAS &&
      before > -NEIGHBOUR_SIGMAS &&
      after > -NEIGHBOUR_SIGMAS;
    isOutlier[i] = off > OUTLIER_SIGMAS || isLone ? 1 : 0;
  }
}

/**
 * Red noise [Pont2006]: scatter of weighted means over bins in units of what independent points give, at least 1; 1 where
 * fewer than eight bins are half full. Points without weight (dips, outliers) do not count.
 */
export function redNoiseFactor(series: WeightedSeries, binDays: number): number {
  const { timesDays, values, weights } = series;
  const totals: number[] = [];
  const sums: number[] = [];
  const n = timesDays.length;
  let i = 0;
  while (i < n) {
    const cell = Math.floor((timesDays[i]! - timesDays[0]!) / binDays);
    let w = 0;
    let wx = 0;
    while (i < n && Math.floor((timesDays[i]! - timesDays[0]!) / binDays) === cell) {
      w += weights[i]!;
      wx += weights[i]! * values[i]!;
      i++;
    }
    if (w > 0) {
      totals.push(w);
      sums.push(wx);
    }
  }
  return scatterOfMeans(totals, sums);
}

/**
 * Scatter of weighted means in units of what independent points give, at least 1; 1 where fewer than eight are half full.
 *
 * @param totals - weight of each, > 0
 * @param sums - weighted sum of the values of each
 */
export function scatterOfMeans(totals: readonly number[], sums: readonly number[]): number {
  if (totals.length < FEWEST_BINS) return 1;
  const half = 0.5 * upperMedian(totals)!;
  const full = sums.flatMap((sum, k) => (totals[k]! >= half ? [sum / Math.sqrt(totals[k]!)] : []));
  return full.length < FEWEST_BINS ? 1 : Math.max(1, clippedRms(Float64Array.from(full)));
}
