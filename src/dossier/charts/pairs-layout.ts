/** Where the panels of a pair chart stand: a triangle of equal boxes on a page of two columns. */
import { CSS_PX_PER_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import { HEADING_PX } from './freehand.js';
import type { Box } from './small-panel.js';

export interface PairsLayout {
  readonly heightMm: number;
  /** Panel of a column and a row, both from 0 at the top left. */
  box(column: number, row: number): Box;
  /** Free area at the upper right, above the panels of the second row. */
  readonly free: Box;
}

const LEFT_PX = 52;
const RIGHT_PX = 8;
const BOTTOM_PX = 31;
const GAP_PX = 6;
/** Few quantities would make panels so tall that the chart fills a page. */
const TALLEST_PX = 112;

/** @param count - of quantities, at least 2 */
export function pairsLayout(count: number): PairsLayout {
  const sheetWidth = Math.floor(TWO_COLUMNS_MM * CSS_PX_PER_MM);
  const width = (sheetWidth - LEFT_PX - RIGHT_PX - GAP_PX * (count - 1)) / count;
  const height = Math.min(width, TALLEST_PX);
  const box = (column: number, row: number): Box => ({
    left: LEFT_PX + column * (width + GAP_PX),
    top: HEADING_PX + row * (height + GAP_PX),
    width,
    height,
  });
  const first = box(0, 0);
  const left = first.left + width + 18;
  return {
    heightMm: (HEADING_PX + count * height + (count - 1) * GAP_PX + BOTTOM_PX + 1) / CSS_PX_PER_MM,
    box,
    free: { left, top: first.top, width: sheetWidth - RIGHT_PX - left, height },
  };
}
