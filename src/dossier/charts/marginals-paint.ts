/** Draws the rows of densities of the chart of marginals. */
import type { PosteriorDraws } from '../../solving/types.js';
import { HEADING_PX } from './freehand.js';
import type { Sheet } from './freehand.js';
import { MEDIAN_PX, REPORTED_PX, verticalLine } from './histogram.js';
import { densityCurve } from './kernel-density.js';
import { POSTERIOR_LOOK as LOOK } from './posterior-look.js';
import type { DrawnQuantity } from './posterior-quantities.js';
import {
  drawBottomLabels,
  drawBottomTitle,
  drawFrame,
  drawLeftTitle,
  inside,
  SMALL_TICK_PX,
  xOf,
} from './small-panel.js';
import type { Box } from './small-panel.js';
import { shownQuantity } from './shown-quantity.js';
import type { ShownQuantity } from './shown-quantity.js';
import { FAINT_TEXT_COLOUR } from './style.js';
import { drawRuns } from './text-runs.js';
import { thinnedIndices } from './thin-draws.js';

export interface MarginalRow {
  /** `null` where there are no draws; then the text of `absent` stands in the panel. */
  readonly quantities: readonly (DrawnQuantity | null)[];
  readonly absent: readonly string[];
}

/** Height of one row: panel, tick labels, title. */
export const ROW_PX = 116;
const PANEL_PX = 82;
const LEFT_PX = 18;
const RIGHT_PX = 8;
const GAP_PX = 14;
const MOST_DRAWS = 20_000;
const TALLEST = 0.93;
const LONGEST_LABEL = 7;

export function paintMarginals(
  sheet: Sheet,
  rows: readonly MarginalRow[],
  { chains, drawsPerChain }: PosteriorDraws,
): void {
  const indices = thinnedIndices(chains, drawsPerChain, MOST_DRAWS);
  rows.forEach(({ quantities, absent }, row) => {
    const width = (sheet.widthPx - LEFT_PX - RIGHT_PX - GAP_PX * (quantities.length - 1)) / quantities.length;
    quantities.forEach((quantity, column) => {
      const box: Box = {
        left: LEFT_PX + column * (width + GAP_PX),
        top: HEADING_PX + row * ROW_PX,
        width,
        height: PANEL_PX,
      };
      if (column === 0) drawLeftTitle(sheet, box, LEFT_PX / 2, [{ text: 'density' }], PANEL_PX);
      if (quantity === null) paintAbsent(sheet, box, absent[column] ?? '');
      else paintDensity(sheet, box, shownQuantity(quantity, indices, 5, LONGEST_LABEL));
    });
  });
}

function paintDensity(sheet: Sheet, box: Box, { quantity, values, spread, axis }: ShownQuantity): void {
  const { ctx } = sheet;
  const { x, density } = densityCurve(values, spread);
  const tallest = density.reduce((one, other) => Math.max(one, other), Number.MIN_VALUE);
  const foot = box.top + box.height;
  const trace = (closed: boolean): void => {
    ctx.beginPath();
    if (closed) ctx.moveTo(box.left, foot);
    for (let i = 0; i < x.length; i += 1)
      ctx.lineTo(xOf(box, axis, x[i]!), foot - (TALLEST * box.height * density[i]!) / tallest);
    if (closed) ctx.lineTo(box.left + box.width, foot);
  };
  const fillBetween = (from: number, to: number, colour: string): void => {
    const [left, right] = [Math.max(box.left, xOf(box, axis, from)), xOf(box, axis, to)];
    inside(sheet, { ...box, left, width: Math.min(right, box.left + box.width) - left }, () => {
      trace(true);
      ctx.fillStyle = colour;
      ctx.fill();
    });
  };
  fillBetween(...spread.two, LOOK.pale);
  fillBetween(...spread.one, LOOK.strong);
  inside(sheet, box, () => {
    trace(false);
    ctx.strokeStyle = LOOK.line;
    ctx.lineWidth = 1;
    ctx.stroke();
    if (quantity.reported !== null)
      verticalLine(ctx, xOf(box, axis, quantity.reported), box.top, foot, LOOK.reported, REPORTED_PX);
    verticalLine(ctx, xOf(box, axis, spread.median), box.top, foot, LOOK.median, MEDIAN_PX);
  });
  drawFrame(sheet, box, axis, null);
  drawBottomLabels(sheet, box, axis);
  drawBottomTitle(sheet, box, axis.title, box.width);
}

function paintAbsent(sheet: Sheet, box: Box, text: string): void {
  drawRuns(sheet.ctx, [{ text }], box.left + box.width / 2, box.top + box.height / 2, {
    sizePx: SMALL_TICK_PX,
    colour: FAINT_TEXT_COLOUR,
    align: 'center',
  });
}
