/** Draws the panels of a pair chart. */
import type { PosteriorDraws } from '../../solving/types.js';
import { densityMap } from './density-map.js';
import type { DensityMap } from './density-map.js';
import type { Sheet } from './freehand.js';
import { paintHistogram } from './histogram.js';
import { paintPairsKey } from './pairs-key.js';
import type { PairsLayout } from './pairs-layout.js';
import { POSTERIOR_LOOK as LOOK } from './posterior-look.js';
import type { DrawnQuantity } from './posterior-quantities.js';
import {
  drawBottomLabels,
  drawBottomTitle,
  drawFrame,
  drawLeftLabels,
  drawLeftTitle,
  inside,
  xOf,
  yOf,
} from './small-panel.js';
import type { Box } from './small-panel.js';
import { shownQuantity } from './shown-quantity.js';
import type { ShownQuantity } from './shown-quantity.js';
import { thinnedIndices } from './thin-draws.js';
import type { ValueAxis } from './value-axis.js';

/** Enough for a smooth contour, few enough to sort for every pair. */
const MOST_DRAWS = 6000;
const MOST_DOTS = 110;
const DOT_PX = 0.65;
const CROSS_PX = 4;
const LEFT_TITLE_X = 8;
const LONGEST_LABEL = 5;

export interface PreparedPairs {
  readonly shown: readonly ShownQuantity[];
  /** Row by row below the diagonal. */
  readonly maps: readonly (readonly DensityMap[])[];
}

/** The costly part, which PNG and SVG share. */
export function preparePairs(
  quantities: readonly DrawnQuantity[],
  { chains, drawsPerChain }: PosteriorDraws,
): PreparedPairs {
  const indices = thinnedIndices(chains, drawsPerChain, MOST_DRAWS);
  const shown = quantities.map((quantity) => shownQuantity(quantity, indices, 3, LONGEST_LABEL));
  const maps = shown.map((down, row) =>
    shown.slice(0, row).map((across) =>
      densityMap({
        x: across.values,
        y: down.values,
        xSpread: across.spread,
        ySpread: down.spread,
        xBounded: isBounded(across),
        yBounded: isBounded(down),
      }),
    ),
  );
  return { shown, maps };
}

/** An end of the axis is where the quantity itself ends. */
function isBounded({ quantity, spread }: ShownQuantity): boolean {
  return spread.low === quantity.bounds[0] || spread.high === quantity.bounds[1];
}

export function paintPairs(sheet: Sheet, layout: PairsLayout, { shown, maps }: PreparedPairs): void {
  const first = layout.box(0, 0);
  shown.forEach((down, row) => {
    shown.slice(0, row).forEach((across, column) => {
      const box = layout.box(column, row);
      inside(sheet, box, () => {
        paintPair(sheet, box, across, down, maps[row]![column]!);
      });
      drawFrame(sheet, box, across.axis, down.axis);
    });
    const own = layout.box(row, row);
    paintHistogram(sheet, own, down);
    drawFrame(sheet, own, down.axis, null);
    if (row > 0) {
      const leftmost = layout.box(0, row);
      drawLeftLabels(sheet, leftmost, down.axis);
      drawLeftTitle(sheet, leftmost, LEFT_TITLE_X, down.axis.title, first.height + 4);
    }
    const foot = layout.box(row, shown.length - 1);
    drawBottomLabels(sheet, foot, down.axis);
    drawBottomTitle(sheet, foot, down.axis.title, first.width + 2);
  });
  paintPairsKey(sheet, layout.free, shown);
}

function paintPair(
  sheet: Sheet,
  box: Box,
  across: ShownQuantity,
  down: ShownQuantity,
  map: DensityMap,
): void {
  const { ctx } = sheet;
  paintDots(sheet, box, across, down, map);
  [...map.contours].reverse().forEach((lines, index) => {
    ctx.beginPath();
    for (const line of lines) traceLine(ctx, box, across.axis, down.axis, line);
    ctx.fillStyle = index === 0 ? LOOK.pale : LOOK.medium;
    ctx.strokeStyle = LOOK.line;
    ctx.lineWidth = 0.8;
    ctx.lineJoin = 'round';
    ctx.fill();
    ctx.stroke();
  });
  const { reported: x } = across.quantity;
  const { reported: y } = down.quantity;
  if (x === null || y === null) return;
  const [px, py] = [xOf(box, across.axis, x), yOf(box, down.axis, y)];
  ctx.strokeStyle = LOOK.reported;
  ctx.lineWidth = 1.3;
  ctx.beginPath();
  ctx.moveTo(px - CROSS_PX, py);
  ctx.lineTo(px + CROSS_PX, py);
  ctx.moveTo(px, py - CROSS_PX);
  ctx.lineTo(px, py + CROSS_PX);
  ctx.stroke();
}

function traceLine(
  ctx: CanvasRenderingContext2D,
  box: Box,
  xAxis: ValueAxis,
  yAxis: ValueAxis,
  line: Float64Array,
): void {
  ctx.moveTo(xOf(box, xAxis, line[0]!), yOf(box, yAxis, line[1]!));
  for (let k = 2; k < line.length; k += 2)
    ctx.lineTo(xOf(box, xAxis, line[k]!), yOf(box, yAxis, line[k + 1]!));
  ctx.closePath();
}

/** Some of the draws outside the outer contour, at even distances in their order; none beyond the axes. */
function paintDots(
  { ctx }: Sheet,
  box: Box,
  across: ShownQuantity,
  down: ShownQuantity,
  { atDraws, levels }: DensityMap,
): void {
  const outside: number[] = [];
  const lowest = Math.min(...levels);
  const { axis: xAxis } = across;
  const { axis: yAxis } = down;
  for (let i = 0; i < atDraws.length; i += 1) {
    const [x, y] = [across.values[i]!, down.values[i]!];
    if (atDraws[i]! >= lowest || x < xAxis.low || x > xAxis.high || y < yAxis.low || y > yAxis.high) continue;
    outside.push(i);
  }
  const step = Math.max(1, Math.ceil(outside.length / MOST_DOTS));
  ctx.fillStyle = LOOK.point;
  for (let k = 0; k < outside.length; k += step) {
    const i = outside[k]!;
    ctx.beginPath();
    ctx.arc(xOf(box, xAxis, across.values[i]!), yOf(box, yAxis, down.values[i]!), DOT_PX, 0, 2 * Math.PI);
    ctx.fill();
  }
}
