/** A light curve without its slow trend, with errors that fit its scatter; table by table. */
import { errorScale, markOutliers } from './noise.js';
import type { WeightedSeries } from './ticked-series.js';
import { slowTrend } from './trend.js';
import type { DipData } from './types.js';

export interface Detrended {
  /** flux/trend - 1. */
  readonly values: Float64Array;
  /** Errors of `values`, brought to the scatter from point to point. */
  readonly sigmas: Float64Array;
  readonly trend: Float64Array;
  readonly isOutlier: Uint8Array;
  /** Factor on the stated errors, per table. */
  readonly errorScales: readonly number[];
}

/** Rows of each table, in order of time. */
function rowsByTable(data: DipData): Uint32Array[] {
  const { timesDays, segmentOf } = data;
  if (segmentOf === undefined) return [Uint32Array.from({ length: timesDays.length }, (_, i) => i)];
  const rows: number[][] = [];
  segmentOf.forEach((table, i) => (rows[table] ??= []).push(i));
  return rows.filter((list) => list.length > 0).map((list) => Uint32Array.from(list));
}

/**
 * @param isMasked - 1 where a dip is known: left out of the trend
 * @param windowDays - full width of the window of the trend
 */
export function detrended(
  data: DipData,
  isMasked: Uint8Array,
  windowDays: number,
  loneLow: 'left out' | 'kept',
): Detrended {
  const n = data.timesDays.length;
  const values = new Float64Array(n);
  const sigmas = new Float64Array(n);
  const trend = new Float64Array(n);
  const isOutlier = new Uint8Array(n);
  const errorScales: number[] = [];
  for (const rows of rowsByTable(data)) {
    const times = Float64Array.from(rows, (i) => data.timesDays[i]!);
    const flux = Float64Array.from(rows, (i) => data.flux[i]!);
    const masked = Uint8Array.from(rows, (i) => isMasked[i]!);
    const own = slowTrend(times, flux, masked, windowDays);
    const departures = flux.map((value, k) => value / own[k]! - 1);
    const stated = Float64Array.from(rows, (i, k) => data.sigmas[i]! / Math.abs(own[k]!));
    const scale = errorScale(departures, stated);
    const scaled = stated.map((sigma) => sigma * scale);
    const outliers = new Uint8Array(rows.length);
    markOutliers(departures, scaled, loneLow, outliers);
    rows.forEach((row, k) => {
      values[row] = departures[k]!;
      sigmas[row] = scaled[k]!;
      trend[row] = own[k]!;
      isOutlier[row] = outliers[k]!;
    });
    errorScales.push(scale);
  }
  return { values, sigmas, trend, isOutlier, errorScales };
}

/** Series for a search: no weight for outliers and where `isMasked` is 1. */
export function weightedSeries(
  timesDays: Float64Array,
  light: Detrended,
  isMasked: Uint8Array,
): WeightedSeries {
  const weights = light.sigmas.map((sigma, i) =>
    light.isOutlier[i] === 1 || isMasked[i] === 1 || !(sigma > 0) ? 0 : 1 / (sigma * sigma),
  );
  return { timesDays, values: light.values, weights };
}
