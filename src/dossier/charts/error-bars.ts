/** Draws error bars behind the points of a panel, cut off at the panel's frame. */
import type { Chart, Scale } from 'chart.js';
import type { ChartPlugin } from './chart-drawing.js';

export interface ErrorBarSeries {
  readonly yAxisID: string;
  /** (n), in the units of the axes; `sigma` >= 0. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly sigma: Float64Array;
  readonly colour: string;
  readonly widthPx: number;
}

/**
 * A plugin that draws the given bars in the given order.
 *
 * @param ahead - label of the datasets ahead of which they are drawn; absent: ahead of all marks of the chart
 */
export function errorBars(series: readonly ErrorBarSeries[], ahead?: string): ChartPlugin {
  if (ahead === undefined) {
    return {
      id: 'errorBars',
      beforeDatasetsDraw: (chart) => {
        for (const one of series) drawBars(chart, one);
      },
    };
  }
  return {
    id: `errorBars ${ahead}`,
    beforeDatasetDraw: (chart, { index, meta }) => {
      if (chart.data.datasets[index]?.label !== ahead) return;
      for (const one of series) if (one.yAxisID === meta.yAxisID) drawBars(chart, one);
    },
  };
}

function drawBars(chart: Chart, series: ErrorBarSeries): void {
  const xAxis = chart.scales['x'];
  const yAxis = chart.scales[series.yAxisID];
  if (xAxis === undefined || yAxis === undefined || series.x.length === 0) return;
  const { ctx } = chart;
  ctx.save();
  clipToPanel(chart, yAxis);
  ctx.strokeStyle = series.colour;
  ctx.lineWidth = series.widthPx;
  ctx.beginPath();
  for (let i = 0; i < series.x.length; i += 1) {
    const x = xAxis.getPixelForValue(series.x[i]!);
    const high = clamped(yAxis, series.y[i]! + series.sigma[i]!);
    const low = clamped(yAxis, series.y[i]! - series.sigma[i]!);
    if (!(low > high)) continue;
    ctx.moveTo(x, high);
    ctx.lineTo(x, low);
  }
  ctx.stroke();
  ctx.restore();
}

/** Limits what follows to the panel of one y axis. */
export function clipToPanel(chart: Chart, yAxis: Scale): void {
  const { left, width } = chart.chartArea;
  chart.ctx.beginPath();
  chart.ctx.rect(left, yAxis.top, width, yAxis.bottom - yAxis.top);
  chart.ctx.clip();
}

/** Pixel of a value, not further than a little outside the panel (an error bar may be huge). */
function clamped(yAxis: Scale, value: number): number {
  const pixel = yAxis.getPixelForValue(value);
  return Math.min(yAxis.bottom + 5, Math.max(yAxis.top - 5, pixel));
}
