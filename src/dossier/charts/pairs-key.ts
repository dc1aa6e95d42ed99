/** What stands in the free corner of a pair chart: the numbers of its histograms, and the key to its marks. */
import { roundedParts, typographicMinus } from '../numbers.js';
import type { Sheet } from './freehand.js';
import type { ShownQuantity } from './shown-quantity.js';
import { POSTERIOR_LOOK as LOOK } from './posterior-look.js';
import type { Box } from './small-panel.js';
import { FAINT_TEXT_COLOUR, TEXT_COLOUR } from './style.js';
import { drawRuns, runsWidth } from './text-runs.js';
import type { TextRun } from './text-runs.js';
import { unitText } from './value-axis.js';

/** Width of the samples with their words. */
const MARKS_PX = 118;
const SIZE_PX = 8.4;
const LINE_PX = 11.6;
const BETWEEN_PX = 6;
const SAMPLE_PX = 14;

/** Writes the table of medians and, beside it, the key to the marks. */
export function paintPairsKey(sheet: Sheet, box: Box, shown: readonly ShownQuantity[]): void {
  const { ctx } = sheet;
  const rows = shown.map(({ quantity, spread }): TextRun[][] => {
    const { value, plus, minus } = roundedParts(
      spread.median,
      spread.one[1] - spread.median,
      spread.median - spread.one[0],
    );
    return [
      [...quantity.symbol],
      [{ text: typographicMinus(value) }],
      [{ text: `+${plus}` }],
      [{ text: `\u2212${minus}` }],
      unitText(quantity.unit),
    ];
  });
  const widths = rows[0]!.map((_, column) =>
    Math.max(...rows.map((cells) => runsWidth(ctx, cells[column]!, SIZE_PX))),
  );
  let y = box.top + LINE_PX / 2;
  write(sheet, [{ text: 'median and central 68.3 %' }], box.left, y, 'left', FAINT_TEXT_COLOUR);
  for (const cells of rows) {
    y += LINE_PX;
    let x = box.left;
    cells.forEach((cell, column) => {
      const numeric = column > 0 && column < 4;
      write(sheet, cell, numeric ? x + widths[column]! : x, y, numeric ? 'right' : 'left', TEXT_COLOUR);
      x += widths[column]! + BETWEEN_PX;
    });
  }
  const beside = Math.max(
    box.left + widths.reduce((sum, width) => sum + width + BETWEEN_PX, 24),
    box.left + 150,
  );
  // Below the numbers where there is no room beside them.
  if (beside + MARKS_PX <= box.left + box.width + 4) paintMarks(sheet, beside, box.top);
  else paintMarks(sheet, box.left, y + LINE_PX);
}

function paintMarks(sheet: Sheet, left: number, top: number): void {
  const { ctx } = sheet;
  const marks: readonly [string, (y: number) => void][] = [
    [
      '39.3 % of the draws',
      (y): void => {
        swatch(ctx, left, y, LOOK.medium);
      },
    ],
    [
      '86.5 % of the draws',
      (y): void => {
        swatch(ctx, left, y, LOOK.pale);
      },
    ],
    [
      'median',
      (y): void => {
        upright(ctx, left, y, LOOK.median);
      },
    ],
    [
      'reported value',
      (y): void => {
        upright(ctx, left, y, LOOK.reported);
      },
    ],
  ];
  marks.forEach(([text, sample], index) => {
    const y = top + LINE_PX * (index + 0.5);
    sample(y);
    write(sheet, [{ text }], left + SAMPLE_PX + 5, y, 'left', TEXT_COLOUR);
  });
}

function swatch(ctx: CanvasRenderingContext2D, left: number, y: number, fill: string): void {
  ctx.fillStyle = fill;
  ctx.strokeStyle = LOOK.line;
  ctx.lineWidth = 0.8;
  ctx.fillRect(left, y - 3.5, SAMPLE_PX, 7);
  ctx.strokeRect(left, y - 3.5, SAMPLE_PX, 7);
}

function upright(ctx: CanvasRenderingContext2D, left: number, y: number, colour: string): void {
  ctx.strokeStyle = colour;
  ctx.lineWidth = 1.3;
  ctx.beginPath();
  ctx.moveTo(left + SAMPLE_PX / 2, y - 4);
  ctx.lineTo(left + SAMPLE_PX / 2, y + 4);
  ctx.stroke();
}

function write(
  { ctx }: Sheet,
  runs: readonly TextRun[],
  x: number,
  y: number,
  align: 'left' | 'right',
  colour: string,
): void {
  drawRuns(ctx, runs, x, y, { sizePx: SIZE_PX, colour, align });
}
