/** A small panel at a place of the sheet: where a value lies, its frame, ticks and titles. */
import type { Sheet } from './freehand.js';
import { FONT_FAMILY, FRAME_COLOUR, TEXT_COLOUR } from './style.js';
import { drawRuns, runsWidth } from './text-runs.js';
import type { TextRun } from './text-runs.js';
import type { ValueAxis } from './value-axis.js';

export interface Box {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

type Ends = Pick<ValueAxis, 'low' | 'high'>;

export const SMALL_TICK_PX = 8.2;
export const SMALL_TITLE_PX = 9.3;
const TICK_LENGTH_PX = 3;
const BETWEEN_LABELS_PX = 5;

/** CSS px of a value on the horizontal axis of a panel. */
export function xOf(box: Box, ends: Ends, value: number): number {
  return box.left + (box.width * (value - ends.low)) / (ends.high - ends.low);
}

/** CSS px of a value on the vertical axis of a panel. */
export function yOf(box: Box, ends: Ends, value: number): number {
  return box.top + (box.height * (ends.high - value)) / (ends.high - ends.low);
}

/** Draws inside a panel only. */
export function inside({ ctx }: Sheet, box: Box, paint: () => void): void {
  ctx.save();
  ctx.beginPath();
  ctx.rect(box.left, box.top, box.width, box.height);
  ctx.clip();
  paint();
  ctx.restore();
}

/** Frame with tick marks at the bottom and the left (where an axis is given), over what is inside. */
export function drawFrame(sheet: Sheet, box: Box, bottom: ValueAxis | null, left: ValueAxis | null): void {
  const { ctx } = sheet;
  ctx.strokeStyle = FRAME_COLOUR;
  ctx.lineWidth = 0.7;
  ctx.strokeRect(box.left, box.top, box.width, box.height);
  ctx.beginPath();
  const foot = box.top + box.height;
  for (const { value } of bottom?.ticks ?? []) {
    const x = xOf(box, bottom!, value);
    ctx.moveTo(x, foot);
    ctx.lineTo(x, foot - TICK_LENGTH_PX);
  }
  for (const { value } of left?.ticks ?? []) {
    const y = yOf(box, left!, value);
    ctx.moveTo(box.left, y);
    ctx.lineTo(box.left + TICK_LENGTH_PX, y);
  }
  ctx.stroke();
}

/** Tick labels below a panel, inside its width; those that would run into one another are left out. */
export function drawBottomLabels({ ctx }: Sheet, box: Box, axis: ValueAxis): void {
  setTickFont(ctx, 'center');
  ctx.textBaseline = 'top';
  let reached = -Infinity;
  for (const { value, text } of axis.ticks) {
    const half = ctx.measureText(text).width / 2;
    const x = xOf(box, axis, value);
    if (x - half < Math.max(reached + BETWEEN_LABELS_PX, box.left - 3)) continue;
    if (x + half > box.left + box.width + 3) continue;
    ctx.fillText(text, x, box.top + box.height + 3);
    reached = x + half;
  }
}

/** Tick labels at the left of a panel. */
export function drawLeftLabels({ ctx }: Sheet, box: Box, axis: ValueAxis): void {
  setTickFont(ctx, 'right');
  ctx.textBaseline = 'middle';
  const half = SMALL_TICK_PX / 2;
  for (const { value, text } of axis.ticks) {
    const y = yOf(box, axis, value);
    if (y < box.top + half - 3 || y > box.top + box.height - half + 3) continue;
    ctx.fillText(text, box.left - 3, y);
  }
}

/** Title below the tick labels, set smaller where it is wider than `room` allows. */
export function drawBottomTitle(sheet: Sheet, box: Box, title: readonly TextRun[], room: number): void {
  const x = box.left + box.width / 2;
  drawRuns(sheet.ctx, title, x, box.top + box.height + 21, {
    sizePx: fittingSize(sheet, title, room),
    colour: TEXT_COLOUR,
    align: 'center',
  });
}

/** Title along the left side, at `x`, reading upwards. */
export function drawLeftTitle(
  sheet: Sheet,
  box: Box,
  x: number,
  title: readonly TextRun[],
  room: number,
): void {
  const { ctx } = sheet;
  const sizePx = fittingSize(sheet, title, room);
  ctx.save();
  ctx.translate(x, box.top + box.height / 2);
  ctx.rotate(-Math.PI / 2);
  drawRuns(ctx, title, 0, 0, { sizePx, colour: TEXT_COLOUR, align: 'center' });
  ctx.restore();
}

function fittingSize({ ctx }: Sheet, title: readonly TextRun[], room: number): number {
  const width = runsWidth(ctx, title, SMALL_TITLE_PX);
  return width <= room ? SMALL_TITLE_PX : Math.max(6, (SMALL_TITLE_PX * room) / width);
}

function setTickFont(ctx: CanvasRenderingContext2D, align: 'center' | 'right'): void {
  ctx.font = `${SMALL_TICK_PX}px ${FONT_FAMILY}`;
  ctx.fillStyle = TEXT_COLOUR;
  ctx.textAlign = align;
}
