/** Mid-times as points to draw: one series per source. */
import type { ChartDataset } from 'chart.js';
import type { TimingSolved } from '../../solving/timing/types.js';
import type { ErrorBarSeries } from './error-bars.js';
import { cleanLabel } from './labels.js';
import { markerRadius, markerStyle, tint } from './style.js';
import { markedPoints } from './panel-parts.js';

const LONGEST_NAME = 22;
/** More than this many sources are drawn, but the smallest of them as one. */
const MOST_SOURCES = 8;
const REST = 'other sources';

export interface TimingSeries {
  readonly label: string;
  readonly rows: readonly number[];
}

/** Rows by source (by file where sources are not said), largest first; beyond eight the rest is one series. */
export function timingSeries({ rows }: TimingSolved): TimingSeries[] {
  const groups = new Map<string, number[]>();
  for (let row = 0; row < rows.count; row++) {
    const source = cleanLabel(rows.sources[row] ?? '', LONGEST_NAME);
    const file = cleanLabel((rows.paths[row] ?? '').replace(/^.*[\\/]/, ''), LONGEST_NAME);
    const label = source === '' ? file : source;
    const members = groups.get(label);
    if (members === undefined) groups.set(label, [row]);
    else members.push(row);
  }
  const sorted = Array.from(groups, ([label, members]) => ({ label, rows: members }));
  if (sorted.length <= MOST_SOURCES) return sorted;
  sorted.sort((a, b) => b.rows.length - a.rows.length);
  const rest = sorted.splice(MOST_SOURCES - 1);
  return [...sorted, { label: `${rest.length} ${REST}`, rows: rest.flatMap((series) => series.rows) }];
}

/** Which rows a panel shows, and where its points lie. */
export interface TimingPanel {
  readonly yAxisID: string;
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly shows: (row: number) => boolean;
  /** Factor on the radius of the markers. */
  readonly size: number;
}

export function timingPoints(
  series: readonly TimingSeries[],
  count: number,
  panel: TimingPanel,
): ChartDataset<'scatter'>[] {
  const radius = markerRadius(count) * panel.size;
  return series.map(({ label, rows }, index) => {
    const data = rows.filter(panel.shows).map((row) => ({ x: panel.x[row]!, y: panel.y[row]! }));
    return markedPoints(label, data, panel.yAxisID, index, radius);
  });
}

/** Errors as stated over the paler ones with the jitter of the preferred model. */
export function timingBars(
  series: readonly TimingSeries[],
  sigmas: Float64Array,
  inflated: Float64Array,
  panel: TimingPanel,
): ErrorBarSeries[] {
  const width = sigmas.length > 200 ? 0.6 : 0.9;
  const bars = (sigma: Float64Array, paleness: number, widthPx: number): ErrorBarSeries[] =>
    series.map(({ rows }, index) => {
      const own = rows.filter(panel.shows);
      return {
        yAxisID: panel.yAxisID,
        x: Float64Array.from(own, (row) => panel.x[row]!),
        y: Float64Array.from(own, (row) => panel.y[row]!),
        sigma: Float64Array.from(own, (row) => sigma[row]!),
        colour: tint(markerStyle(index).bar, paleness),
        widthPx,
      };
    });
  return [...bars(inflated, 0.6, 1.5 * width), ...bars(sigmas, 0, width)];
}
