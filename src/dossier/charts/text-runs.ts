/** Short texts with italic symbols, subscripts and superscripts, for axis titles of charts that are drawn by hand. */
import { FONT_FAMILY } from './style.js';

/** A stretch of text in one style. */
export interface TextRun {
  readonly text: string;
  readonly italic?: true;
  readonly place?: 'below' | 'above';
}

export interface TextLook {
  readonly sizePx: number;
  readonly colour: string;
  readonly align: 'left' | 'center' | 'right';
}

type Context = CanvasRenderingContext2D;

const SMALL = 0.72;
/** Shifts of the middle of a subscript and a superscript, in units of the size of type. */
const SHIFT = { below: 0.28, above: -0.34 } as const;

/** The runs as one plain string, for tests and captions. */
export function plainText(runs: readonly TextRun[]): string {
  return runs.map((run) => run.text).join('');
}

/** Width in CSS px. */
export function runsWidth(ctx: Context, runs: readonly TextRun[], sizePx: number): number {
  let width = 0;
  for (const run of runs) {
    ctx.font = fontOf(run, sizePx);
    width += ctx.measureText(run.text).width;
  }
  return width;
}

/** Writes the runs with their middle at height `y`; changes font, colour and alignment of the context. */
export function drawRuns(ctx: Context, runs: readonly TextRun[], x: number, y: number, look: TextLook): void {
  const width = runsWidth(ctx, runs, look.sizePx);
  let left = x - (look.align === 'left' ? 0 : look.align === 'center' ? width / 2 : width);
  ctx.fillStyle = look.colour;
  ctx.textAlign = 'left';
  ctx.textBaseline = 'middle';
  for (const run of merged(runs)) {
    ctx.font = fontOf(run, look.sizePx);
    // A blank at the start of an SVG text is not drawn, so it is stepped over.
    const word = run.text.trimStart();
    left += ctx.measureText(' '.repeat(run.text.length - word.length)).width;
    ctx.fillText(word, left, y + (run.place === undefined ? 0 : SHIFT[run.place] * look.sizePx));
    left += ctx.measureText(word).width;
  }
}

/** Neighbours of one style made one. */
function merged(runs: readonly TextRun[]): TextRun[] {
  const out: TextRun[] = [];
  for (const run of runs) {
    const last = out.at(-1);
    if (last !== undefined && last.italic === run.italic && last.place === run.place)
      out[out.length - 1] = { ...last, text: last.text + run.text };
    else out.push(run);
  }
  return out;
}

function fontOf(run: TextRun, sizePx: number): string {
  const size = run.place === undefined ? sizePx : SMALL * sizePx;
  return `${run.italic === true ? 'italic ' : ''}${size}px ${FONT_FAMILY}`;
}
