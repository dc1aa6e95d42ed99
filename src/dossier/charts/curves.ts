/**
 * Draws curves as straight lines between their samples, cut off at the panel's frame. The drawing library's own lines
 * join samples per CSS pixel or bend between them; both show at 300 dpi.
 */
import type { Chart, ChartDataset } from 'chart.js';
import type { ChartPlugin } from './chart-drawing.js';
import { clipToPanel } from './error-bars.js';

export interface Curve {
  readonly yAxisID: string;
  /** (n), in the units of the axes, x monotone. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly colour: string;
  readonly widthPx: number;
  /** Lower edge of a band, (n), and its colour. */
  readonly band?: { readonly y: Float64Array; readonly fill: string };
}

/** A data set without points that stands for a curve in the legend and in the order of drawing. */
export function curveDataset(
  label: string,
  look: {
    readonly colour: string;
    readonly widthPx: number;
    readonly fill?: string;
    readonly dash?: number[];
  },
  order: number,
): ChartDataset<'scatter'> {
  return {
    type: 'scatter',
    label,
    data: [],
    yAxisID: 'y',
    pointStyle: look.fill === undefined ? 'line' : 'rect',
    pointBackgroundColor: look.fill ?? look.colour,
    pointBorderColor: look.colour,
    pointBorderWidth: look.widthPx,
    backgroundColor: look.fill ?? look.colour,
    borderColor: look.colour,
    borderWidth: look.widthPx,
    borderDash: look.dash ?? [],
    order,
  };
}

/** A plugin that draws the curves when the turn of the data set with this label comes. */
export function curves(list: readonly Curve[], label: string): ChartPlugin {
  return {
    id: `curves ${label}`,
    beforeDatasetDraw: (chart, { index }) => {
      if (chart.data.datasets[index]?.label !== label) return;
      for (const curve of list) drawCurve(chart, curve);
    },
  };
}

function drawCurve(chart: Chart, curve: Curve): void {
  const xAxis = chart.scales['x'];
  const yAxis = chart.scales[curve.yAxisID];
  if (xAxis === undefined || yAxis === undefined || curve.x.length === 0) return;
  const { ctx } = chart;
  const n = curve.x.length;
  const lines = curve.band === undefined ? [curve.y] : [curve.y, curve.band.y];
  ctx.save();
  clipToPanel(chart, yAxis);
  ctx.lineJoin = 'round';
  if (curve.band !== undefined) {
    ctx.fillStyle = curve.band.fill;
    ctx.beginPath();
    for (let i = 0; i < n; i += 1)
      ctx.lineTo(xAxis.getPixelForValue(curve.x[i]!), yAxis.getPixelForValue(curve.y[i]!));
    for (let i = n - 1; i >= 0; i -= 1) {
      ctx.lineTo(xAxis.getPixelForValue(curve.x[i]!), yAxis.getPixelForValue(curve.band.y[i]!));
    }
    ctx.closePath();
    ctx.fill();
  }
  ctx.strokeStyle = curve.colour;
  ctx.lineWidth = curve.widthPx;
  for (const y of lines) {
    ctx.beginPath();
    for (let i = 0; i < n; i += 1)
      ctx.lineTo(xAxis.getPixelForValue(curve.x[i]!), yAxis.getPixelForValue(y[i]!));
    ctx.stroke();
  }
  ctx.restore();
}
