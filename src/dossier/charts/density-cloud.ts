/**
 * Many points as their density: counted in square cells, darker where more of them fall. A million points cost no more
 * than the cells they fall into, and a lonely point still shows.
 */
import type { Sheet } from './freehand.js';
import { inside } from './small-panel.js';
import type { Box } from './small-panel.js';
import { tint } from './style.js';

/** Up to this many points are drawn one by one. */
export const MOST_DOTS = 2000;

const CELL_PX = 1;
const LEVELS = 6;

export interface Cloud {
  /** From the palest to the darkest: upright strokes (x, top, bottom) in CSS px, three numbers each. */
  readonly levels: readonly Float64Array[];
}

/**
 * Counts points in cells; neighbours of one level in a column become one stroke. Levels are equal steps of the logarithm
 * of the count.
 *
 * @param xPx - (n), CSS px on the sheet
 * @param yPx - (n)
 * @param box - points outside are left out
 */
export function makeCloud(xPx: Float64Array, yPx: Float64Array, box: Box): Cloud {
  const columns = Math.max(1, Math.floor(box.width / CELL_PX));
  const rows = Math.max(1, Math.floor(box.height / CELL_PX));
  const counts = new Uint32Array(columns * rows);
  let most = 1;
  for (let i = 0; i < xPx.length; i += 1) {
    const column = Math.floor((xPx[i]! - box.left) / CELL_PX);
    const row = Math.floor((yPx[i]! - box.top) / CELL_PX);
    if (!(column >= 0 && column < columns && row >= 0 && row < rows)) continue;
    const count = (counts[column * rows + row]! += 1);
    if (count > most) most = count;
  }
  const scale = most > 1 ? (LEVELS - 1) / Math.log(most) : 0;
  const levelOf = (count: number): number => (count === 0 ? -1 : Math.round(Math.log(count) * scale));
  const strokes: number[][] = Array.from({ length: LEVELS }, () => []);
  for (let column = 0; column < columns; column += 1) {
    const x = box.left + (column + 0.5) * CELL_PX;
    let start = 0;
    for (let row = 0; row < rows; row += 1) {
      const level = levelOf(counts[column * rows + row]!);
      const next = row + 1 < rows ? levelOf(counts[column * rows + row + 1]!) : -2;
      if (next === level) continue;
      if (level >= 0) strokes[level]!.push(x, box.top + start * CELL_PX, box.top + (row + 1) * CELL_PX);
      start = row + 1;
    }
  }
  return { levels: strokes.map((list) => Float64Array.from(list)) };
}

/** Draws a cloud in shades of one colour. */
export function drawCloud({ ctx }: Sheet, cloud: Cloud, colour: string): void {
  // A little wider than a cell, so that no seams show between columns at any resolution.
  ctx.lineWidth = CELL_PX * 1.15;
  cloud.levels.forEach((strokes, level) => {
    if (strokes.length === 0) return;
    ctx.strokeStyle = shadeOf(colour, level);
    ctx.beginPath();
    for (let i = 0; i < strokes.length; i += 3) {
      ctx.moveTo(strokes[i]!, strokes[i + 1]!);
      ctx.lineTo(strokes[i]!, strokes[i + 2]!);
    }
    ctx.stroke();
  });
}

/** Never so dark that a black line over it would be lost. */
function shadeOf(colour: string, level: number): string {
  return tint(colour, 0.66 * (1 - level / (LEVELS - 1)));
}

/** Draws each point as a small disc, clipped to the box. */
export function drawDots(
  sheet: Sheet,
  xPx: Float64Array,
  yPx: Float64Array,
  box: Box,
  look: { readonly radiusPx: number; readonly fill: string },
): void {
  inside(sheet, box, () => {
    const { ctx } = sheet;
    ctx.fillStyle = look.fill;
    for (let i = 0; i < xPx.length; i += 1) {
      const [x, y] = [xPx[i]!, yPx[i]!];
      if (!(x >= box.left && x <= box.left + box.width && y >= box.top && y <= box.top + box.height))
        continue;
      ctx.beginPath();
      ctx.arc(x, y, look.radiusPx, 0, 2 * Math.PI);
      ctx.fill();
    }
  });
}

/** Points of one colour: one by one where they are few, else their density. */
export function drawFaintPoints(
  sheet: Sheet,
  xPx: Float64Array,
  yPx: Float64Array,
  box: Box,
  colour: string,
): void {
  if (xPx.length > MOST_DOTS) {
    drawCloud(sheet, makeCloud(xPx, yPx, box), colour);
    return;
  }
  const few = xPx.length <= 400;
  drawDots(sheet, xPx, yPx, box, { radiusPx: few ? 1.1 : 0.8, fill: tint(colour, few ? 0.4 : 0.5) });
}
