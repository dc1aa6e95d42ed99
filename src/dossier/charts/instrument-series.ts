/** The measurements of a solution as points to draw: one series per instrument. */
import type { ChartDataset } from 'chart.js';
import type { Solved } from '../../solving/types.js';
import type { ErrorBarSeries } from './error-bars.js';
import { cleanLabel } from './labels.js';
import { markerRadius, markerStyle, tint } from './style.js';
import { markedPoints } from './panel-parts.js';

const LONGEST_NAME = 18;

/** Names of the instruments as they are drawn. */
export function instrumentLabels(solved: Solved): string[] {
  return solved.velocities.instruments.map((name) => {
    const label = cleanLabel(name, LONGEST_NAME);
    return label === '' ? '(no name)' : label;
  });
}

/** Standard errors with the jitter of each instrument added in quadrature, m/s, in the order of the velocities. */
export function inflatedSigmas(solved: Solved): Float64Array {
  const { sigmasMps, instrumentOf } = solved.velocities;
  return sigmasMps.map((sigma, index) =>
    Math.hypot(sigma, solved.best.jittersMps[instrumentOf[index]!] ?? 0),
  );
}

/** Indices of the measurements of each instrument, in the order of time. */
function rowsOf(solved: Solved): number[][] {
  const rows = solved.velocities.instruments.map((): number[] => []);
  solved.velocities.instrumentOf.forEach((instrument, row) => rows[instrument]?.push(row));
  return rows;
}

/**
 * Points of every instrument for one panel.
 *
 * @param x - (n), in the unit of the x axis
 * @param y - (n), in the unit of the y axis
 * @param yAxisID - id of the panel's y axis
 * @param size - factor on the radius of the markers
 */
export function pointDatasets(
  solved: Solved,
  x: Float64Array,
  y: Float64Array,
  yAxisID: string,
  size = 1,
): ChartDataset<'scatter'>[] {
  const labels = instrumentLabels(solved);
  const radius = markerRadius(solved.velocities.count) * size;
  return rowsOf(solved).map((rows, instrument) => {
    const data = rows.map((row) => ({ x: x[row]!, y: y[row]! }));
    return markedPoints(labels[instrument]!, data, yAxisID, instrument, radius);
  });
}

/** Error bars of every instrument for one panel: formal errors over the paler ones with jitter. */
export function errorBarSeries(
  solved: Solved,
  x: Float64Array,
  y: Float64Array,
  yAxisID: string,
): ErrorBarSeries[] {
  const inflated = inflatedSigmas(solved);
  const width = solved.velocities.count > 200 ? 0.6 : 0.9;
  const rows = rowsOf(solved);
  const series = (
    sigma: Float64Array,
    colour: (instrument: number) => string,
    widthPx: number,
  ): ErrorBarSeries[] =>
    rows.map((own, instrument) => ({
      yAxisID,
      x: Float64Array.from(own, (row) => x[row]!),
      y: Float64Array.from(own, (row) => y[row]!),
      sigma: Float64Array.from(own, (row) => sigma[row]!),
      colour: colour(instrument),
      widthPx,
    }));
  return [
    ...series(inflated, (instrument) => tint(markerStyle(instrument).bar, 0.6), width * 1.5),
    ...series(solved.velocities.sigmasMps, (instrument) => markerStyle(instrument).bar, width),
  ];
}
