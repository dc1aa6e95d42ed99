/** Histogram of the draws of one quantity, the central part dark. */
import type { Sheet } from './freehand.js';
import { POSTERIOR_LOOK as LOOK } from './posterior-look.js';
import { inside, xOf } from './small-panel.js';
import type { Box } from './small-panel.js';
import type { ShownQuantity } from './shown-quantity.js';

const FEWEST_BINS = 12;
const MOST_BINS = 36;
/** The tallest bar reaches this share of the panel's height. */
const TALLEST = 0.92;
/** The reported value is the wider line and lies below, so that both show where they coincide. */
export const REPORTED_PX = 2.2;
export const MEDIAN_PX = 0.9;

/** Counts in equal bins of an interval; values outside it are left out, its upper end belongs to the last bin. */
export function binCounts(values: Float64Array, low: number, high: number, bins: number): Float64Array {
  const counts = new Float64Array(bins);
  for (const value of values) {
    if (value < low || value > high) continue;
    counts[Math.min(bins - 1, Math.floor((bins * (value - low)) / (high - low)))]! += 1;
  }
  return counts;
}

/** Number of bins whose width is 3.5 s n^(-1/3) [Scott1979], within what a small panel can show. */
export function binNumber(count: number, scale: number, range: number): number {
  const width = (3.5 * scale) / count ** (1 / 3);
  return width > 0 ? Math.min(MOST_BINS, Math.max(FEWEST_BINS, Math.round(range / width))) : MOST_BINS;
}

/** Fills a panel with the histogram, its median and the reported value. */
export function paintHistogram(
  sheet: Sheet,
  box: Box,
  { values, spread, axis, quantity }: ShownQuantity,
): void {
  const { ctx } = sheet;
  const { low, high } = axis;
  const bins = binNumber(values.length, spread.scale, high - low);
  const counts = binCounts(values, low, high, bins);
  const tallest = counts.reduce((one, other) => Math.max(one, other), 1);
  const foot = box.top + box.height;
  const outline = (): void => {
    ctx.beginPath();
    ctx.moveTo(box.left, foot);
    counts.forEach((count, bin) => {
      const top = foot - (TALLEST * box.height * count) / tallest;
      ctx.lineTo(box.left + (box.width * bin) / bins, top);
      ctx.lineTo(box.left + (box.width * (bin + 1)) / bins, top);
    });
    ctx.lineTo(box.left + box.width, foot);
  };
  inside(sheet, box, () => {
    outline();
    ctx.fillStyle = LOOK.pale;
    ctx.fill();
  });
  const [from, to] = [xOf(box, axis, spread.one[0]), xOf(box, axis, spread.one[1])];
  inside(sheet, { ...box, left: from, width: to - from }, () => {
    outline();
    ctx.fillStyle = LOOK.strong;
    ctx.fill();
  });
  inside(sheet, box, () => {
    outline();
    ctx.strokeStyle = LOOK.line;
    ctx.lineWidth = 0.8;
    ctx.stroke();
    if (quantity.reported !== null)
      verticalLine(ctx, xOf(box, axis, quantity.reported), box.top, foot, LOOK.reported, REPORTED_PX);
    verticalLine(ctx, xOf(box, axis, spread.median), box.top, foot, LOOK.median, MEDIAN_PX);
  });
}

/** A line over the height of a panel. */
export function verticalLine(
  ctx: CanvasRenderingContext2D,
  x: number,
  top: number,
  foot: number,
  colour: string,
  widthPx: number,
): void {
  ctx.strokeStyle = colour;
  ctx.lineWidth = widthPx;
  ctx.beginPath();
  ctx.moveTo(x, top);
  ctx.lineTo(x, foot);
  ctx.stroke();
}
