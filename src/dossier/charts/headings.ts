/** Heading and legend of a chart, both outside the panels so that they never cover a point. */
import type { ChartOptions } from 'chart.js';
import { HEADING_FONT_PX, TEXT_COLOUR, TICK_FONT_PX } from './style.js';

type Plugins = NonNullable<ChartOptions['plugins']>;

/** Heading at the left above the panels; none for an empty text. */
export function heading(text: string): NonNullable<Plugins['title']> {
  return {
    display: text !== '',
    text,
    align: 'start',
    color: TEXT_COLOUR,
    font: { size: HEADING_FONT_PX, weight: 'bold' },
    padding: { top: 1, bottom: 2 },
  };
}

/**
 * Legend above the panels.
 *
 * @param labels - those datasets that are listed, by label; a label that occurs in several panels is listed once
 */
export function legend(labels: ReadonlySet<string>): NonNullable<Plugins['legend']> {
  return {
    display: labels.size > 0,
    position: 'top',
    align: 'start',
    onClick: () => undefined,
    labels: {
      color: TEXT_COLOUR,
      font: { size: TICK_FONT_PX },
      usePointStyle: true,
      boxWidth: 8,
      boxHeight: 5.5,
      padding: 7,
      sort: (one, other) => (one.datasetIndex ?? 0) - (other.datasetIndex ?? 0),
      filter: (item, data) => {
        const first = data.datasets.findIndex((dataset) => dataset.label === item.text);
        return labels.has(item.text) && first === item.datasetIndex;
      },
    },
  };
}
