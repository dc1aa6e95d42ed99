/** What panels drawn by hand have in common: points at their pixels, curves, means with error bars, short texts, a key. */
import type { Sheet } from './freehand.js';
import { drawFaintPoints } from './density-cloud.js';
import { inside, xOf, yOf } from './small-panel.js';
import type { Box } from './small-panel.js';
import { FONT_FAMILY, HEADING_FONT_PX, TEXT_COLOUR } from './style.js';

/** A panel: where it stands, and what its edges mean. */
export interface Panel {
  readonly box: Box;
  readonly x: Ends;
  readonly y: Ends;
}

export interface Ends {
  readonly low: number;
  readonly high: number;
}

/** Points as pale dots or as their density. */
export function faintPoints(
  sheet: Sheet,
  panel: Panel,
  x: Float64Array,
  y: Float64Array,
  colour: string,
): void {
  const { box } = panel;
  const xPx = x.map((value) => xOf(box, panel.x, value));
  const yPx = y.map((value) => yOf(box, panel.y, value));
  drawFaintPoints(sheet, xPx, yPx, box, colour);
}

/** A curve of straight lines, cut off at the frame. */
export function line(
  sheet: Sheet,
  { box, x: xEnds, y: yEnds }: Panel,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  look: { readonly colour: string; readonly widthPx: number; readonly dash?: number[] },
): void {
  if (x.length === 0) return;
  inside(sheet, box, () => {
    const { ctx } = sheet;
    ctx.strokeStyle = look.colour;
    ctx.lineWidth = look.widthPx;
    ctx.lineJoin = 'round';
    ctx.setLineDash(look.dash ?? []);
    ctx.beginPath();
    let isOpen = false;
    for (let i = 0; i < x.length; i += 1) {
      const [px, py] = [xOf(box, xEnds, x[i]!), yOf(box, yEnds, y[i]!)];
      // A line is broken where its value is not known.
      const isKnown = Number.isFinite(px) && Number.isFinite(py);
      if (isKnown && isOpen) ctx.lineTo(px, py);
      else if (isKnown) ctx.moveTo(px, py);
      isOpen = isKnown;
    }
    ctx.stroke();
    ctx.setLineDash([]);
  });
}

/** A level line over the whole width. */
export function level(
  sheet: Sheet,
  panel: Panel,
  value: number,
  look: { readonly colour: string; readonly widthPx: number; readonly dash?: number[] },
): void {
  line(sheet, panel, [panel.x.low, panel.x.high], [value, value], look);
}

export interface Mean {
  readonly x: number;
  readonly y: number;
  readonly sigma: number;
}

/** Means as discs with error bars. */
export function means(
  sheet: Sheet,
  panel: Panel,
  list: readonly Mean[],
  look: { readonly fill: string; readonly edge: string; readonly radiusPx: number },
): void {
  const { box } = panel;
  inside(sheet, box, () => {
    const { ctx } = sheet;
    ctx.strokeStyle = look.edge;
    ctx.lineWidth = 0.9;
    ctx.beginPath();
    for (const { x, y, sigma } of list) {
      const px = xOf(box, panel.x, x);
      ctx.moveTo(px, yOf(box, panel.y, y + sigma));
      ctx.lineTo(px, yOf(box, panel.y, y - sigma));
    }
    ctx.stroke();
    for (const { x, y } of list) {
      const py = yOf(box, panel.y, y);
      if (!(py >= box.top && py <= box.top + box.height)) continue;
      ctx.fillStyle = look.fill;
      ctx.beginPath();
      ctx.arc(xOf(box, panel.x, x), py, look.radiusPx, 0, 2 * Math.PI);
      ctx.fill();
      ctx.stroke();
    }
  });
}

/** One line of text. */
export function write(
  { ctx }: Sheet,
  text: string,
  x: number,
  y: number,
  look: {
    readonly sizePx?: number;
    readonly align?: 'left' | 'center' | 'right';
    readonly colour?: string;
    readonly bold?: boolean;
  } = {},
): void {
  ctx.font = `${look.bold === true ? 'bold ' : ''}${look.sizePx ?? 8.4}px ${FONT_FAMILY}`;
  ctx.fillStyle = look.colour ?? TEXT_COLOUR;
  ctx.textAlign = look.align ?? 'left';
  ctx.textBaseline = 'middle';
  ctx.fillText(text, x, y);
}

export interface KeyEntry {
  readonly text: string;
  readonly colour: string;
  readonly kind: 'line' | 'dot' | 'mean' | 'triangle';
}

/** A key on one line that ends at `right`; entries that would run into the heading are left out, the first ones first. */
export function key(
  { ctx }: Sheet,
  right: number,
  y: number,
  wanted: readonly KeyEntry[],
  headingText: string,
): void {
  const sizePx = 8.4;
  ctx.font = `bold ${HEADING_FONT_PX}px ${FONT_FAMILY}`;
  const room = right - ctx.measureText(headingText).width - 14;
  ctx.font = `${sizePx}px ${FONT_FAMILY}`;
  const widthOf = ({ text }: KeyEntry): number => ctx.measureText(text).width + 16;
  const whole = (list: readonly KeyEntry[]): number => list.reduce((sum, one) => sum + widthOf(one) + 8, -8);
  let entries = wanted;
  while (entries.length > 0 && whole(entries) > room) entries = entries.slice(1);
  const widths = entries.map(widthOf);
  let x = right - whole(entries);
  entries.forEach(({ text, colour, kind }, index) => {
    ctx.strokeStyle = colour;
    ctx.fillStyle = kind === 'mean' ? '#ffffff' : colour;
    ctx.lineWidth = 1.2;
    ctx.beginPath();
    if (kind === 'line') {
      ctx.moveTo(x, y);
      ctx.lineTo(x + 11, y);
      ctx.stroke();
    } else if (kind === 'triangle') {
      ctx.moveTo(x + 6, y - 2.6);
      ctx.lineTo(x + 3.4, y + 2);
      ctx.lineTo(x + 8.6, y + 2);
      ctx.closePath();
      ctx.fill();
    } else {
      ctx.arc(x + 6, y, kind === 'dot' ? 1.6 : 2.3, 0, 2 * Math.PI);
      ctx.fill();
      if (kind === 'mean') ctx.stroke();
    }
    ctx.fillStyle = TEXT_COLOUR;
    ctx.textAlign = 'left';
    ctx.textBaseline = 'middle';
    ctx.fillText(text, x + 14, y);
    x += widths[index]! + 8;
  });
}
