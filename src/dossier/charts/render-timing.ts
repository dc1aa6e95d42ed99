/** The charts of a solution of mid-times, drawn and encoded. */
import type { TimingSolved } from '../../solving/timing/types.js';
import type { ChartDrawing, ChartFile } from './chart-drawing.js';
import { modulationCharts } from './modulation-chart.js';
import { oMinusCChart } from './o-minus-c-chart.js';
import { renderDrawings } from './render-charts.js';

/** Describes the charts; pure, draws nothing. */
export function describeTimingCharts(solved: TimingSolved): ChartDrawing[] {
  return [oMinusCChart(solved), ...modulationCharts(solved)];
}

/** Each chart as PNG and as SVG. */
export function renderTimingCharts(solved: TimingSolved): Promise<ChartFile[]> {
  return renderDrawings(describeTimingCharts(solved));
}
