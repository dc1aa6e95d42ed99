/** What several charts with stacked panels share: the line at zero and the points of one source. */
import type { ChartDataset } from 'chart.js';
import { MODEL_COLOUR, markerStyle } from './style.js';

/** Annotation: a line at zero through a panel, under the points. */
export function zeroLine(yScaleID: string): {
  readonly type: 'line';
  readonly yScaleID: string;
  readonly xScaleID: 'x';
  readonly yMin: 0;
  readonly yMax: 0;
  readonly borderColor: string;
  readonly borderWidth: number;
  readonly drawTime: 'beforeDatasetsDraw';
} {
  return {
    type: 'line',
    yScaleID,
    xScaleID: 'x',
    yMin: 0,
    yMax: 0,
    borderColor: MODEL_COLOUR,
    borderWidth: 0.9,
    drawTime: 'beforeDatasetsDraw',
  };
}

/**
 * Points with the marker of a source.
 *
 * @param place - of the source in the list of sources, which tells colour and shape
 * @param radius - CSS px, before the marker's own factor
 */
export function markedPoints(
  label: string,
  data: { x: number; y: number }[],
  yAxisID: string,
  place: number,
  radius: number,
): ChartDataset<'scatter'> {
  const style = markerStyle(place);
  return {
    type: 'scatter',
    label,
    data,
    yAxisID,
    pointStyle: style.shape,
    pointRadius: radius * style.sizeFactor,
    pointBackgroundColor: style.fill,
    pointBorderColor: style.edge,
    pointBorderWidth: radius > 2 ? 0.7 : 0.45,
    backgroundColor: style.fill,
    borderColor: style.edge,
    borderWidth: 0.8,
    order: 20,
  };
}
