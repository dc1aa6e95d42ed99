/** What a chart is before it becomes pixels: size on paper, words, and a recipe made from data and options only. */
import type { ChartConfiguration, Plugin } from 'chart.js';

/** Widths of one and of two columns of a journal page, mm. */
export const ONE_COLUMN_MM = 88;
export const TWO_COLUMNS_MM = 180;

/** CSS pixels per mm (96 per inch): the unit that charts are laid out in. */
export const CSS_PX_PER_MM: number = 96 / 25.4;

/** One chart, described. Nothing here depends on a clock, a locale, the machine or chance. */
export interface ChartDrawing {
  /** File name without extension, e.g. `folded-b`. */
  readonly name: string;
  readonly widthMm: number;
  readonly heightMm: number;
  /** A few words: title of the SVG document, heading above the chart in a report. Plain text, not yet escaped. */
  readonly title: string;
  /** What is drawn and what a reader must know to read it. Plain text, not yet escaped. */
  readonly caption: string;
  /** Makes a fresh configuration; Chart.js changes the object that it is given, so each rendering asks for its own. */
  readonly configure: () => ChartConfiguration;
}

/** A chart as a file of the dossier. */
export interface ChartFile {
  /** e.g. `velocities.png`. */
  readonly name: string;
  readonly bytes: Uint8Array;
  /** The drawing's caption, for a report that shows the chart. Plain text, not yet escaped. */
  readonly caption: string;
}

/** A plugin that belongs to one chart (passed with its configuration, never registered globally). */
export type ChartPlugin = Plugin;

/** Size of a drawing in whole CSS pixels; Chart.js cuts fractions off, so we do it first and scale to the exact width. */
export function cssSize(drawing: Pick<ChartDrawing, 'widthMm' | 'heightMm'>): {
  width: number;
  height: number;
} {
  return {
    width: Math.floor(drawing.widthMm * CSS_PX_PER_MM),
    height: Math.floor(drawing.heightMm * CSS_PX_PER_MM),
  };
}
