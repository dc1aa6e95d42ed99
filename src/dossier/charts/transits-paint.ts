/** Lays out and draws single transits one below the other, in columns of one scale. */
import type { Solved } from '../../solving/types.js';
import { drawFaintPoints } from './density-cloud.js';
import type { Sheet } from './freehand.js';
import { cleanLabel, fixedText, significantText } from './labels.js';
import { key, line, means, write } from './panel-marks.js';
import type { KeyEntry, Panel } from './panel-marks.js';
import { median } from './ranges.js';
import { drawBottomLabels, drawBottomTitle, drawFrame, drawLeftTitle, xOf, yOf } from './small-panel.js';
import type { Box } from './small-panel.js';
import { FAINT_TEXT_COLOUR, FRAME_COLOUR, MODEL_COLOUR } from './style.js';
import { binTransit, curveAt, curvesOf, deepestLoss, shownHours } from './transit-events.js';
import type { ShownEvent, TransitBin } from './transit-events.js';
import { bandColour, MEAN_EDGE } from './transit-look.js';
import { valueAxis } from './value-axis.js';
import type { ValueAxis } from './value-axis.js';

/** Above the first and below the last row: axis and title. */
export const STACK_EDGES_PX = 34;
const ROW_PX = 36;
const LEFT_PX = 34;
const RIGHT_PX = 6;
const LABEL_PX = 66;
const BINS = 28;
const MOST_KEY_BANDS = 4;
const CURVE_POINTS = 240;
/** Points that scatter by more than this share of the depth get means. */
const NOISY_SHARE = 0.12;

interface StackRow {
  readonly event: ShownEvent;
  readonly shift: number;
  readonly bins: readonly TransitBin[];
  readonly colour: string;
  readonly labels: readonly [string, string, string];
  readonly curve: { readonly x: Float64Array; readonly y: Float64Array };
}

export interface Stack {
  readonly columns: readonly { readonly panel: Panel; readonly rows: readonly StackRow[] }[];
  readonly x: ValueAxis;
  readonly heightPx: number;
  readonly step: number;
  readonly stepText: string;
  readonly depth: number;
  readonly hasMeans: boolean;
  /** The bands of the rows, none where there is only one. */
  readonly bands: readonly { readonly text: string; readonly colour: string }[];
}

/** 1, 2 or 5 times a power of ten, the nearest above. */
function roundUp(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  return [1, 1.5, 2, 3, 4, 5, 6, 8, 10]
    .map((factor) => factor * power)
    .find((step) => step >= value * 0.999)!;
}

function scatterOf({ flux, model }: ShownEvent): number {
  return 1.4826 * median(flux.map((value, i) => Math.abs(value - model[i]!)));
}

/** @param columns - of at most 12 rows each; the list is read downwards, column after column */
export function stackOf(
  solved: Solved,
  letter: string,
  events: readonly ShownEvent[],
  columns: number,
  widthPx: number,
  topPx: number,
): Stack {
  const photometry = solved.photometry!;
  const half = shownHours(photometry, letter);
  const depth = Math.max(deepestLoss(curvesOf(photometry, letter), events), 1e-7);
  const scatter = median(Float64Array.from(events, scatterOf));
  const noisy = scatter > NOISY_SHARE * depth;
  // Rows keep clear of one another; very noisy points may run into the next row, the means do not.
  const step = roundUp(Math.min(1.15 * depth + 4 * scatter, 2.4 * depth));
  const perColumn = Math.ceil(events.length / columns);
  const heightPx = Math.max(60, perColumn * ROW_PX + 10);
  const bands = (solved.record.photometry?.bands ?? []).map(({ name }) => name);
  const shownBands = [...new Set(events.map(({ band }) => band))];
  const columnPx = (widthPx - LEFT_PX - RIGHT_PX) / columns;
  const x = valueAxis([{ text: 'time from mid-transit' }], 'h', -half, half, columnPx > 250 ? 6 : 4, 4);
  const y = { low: 1 - (perColumn - 1) * step - depth - 0.45 * step, high: 1 + 0.5 * step };
  const rows = events.map((event, index): StackRow => {
    const curve = photometry.curves.find((one) => one.letter === letter && one.band === event.band);
    const shift = (index % perColumn) * step;
    const hours = Float64Array.from(
      { length: CURVE_POINTS + 1 },
      (_, i) => half * ((2 * i) / CURVE_POINTS - 1),
    );
    return {
      event,
      shift,
      bins: noisy ? binTransit(event, half, BINS) : [],
      colour: bandColour(Math.max(0, bands.indexOf(event.band))),
      labels: [
        `cycle ${fixedText(event.cycle, 0)}`,
        cleanLabel(event.table, 13),
        fixedText(event.midTimeBjdTdb, 3),
      ],
      curve:
        curve === undefined
          ? { x: event.hours, y: event.model }
          : { x: hours, y: hours.map((value) => curveAt(curve, value)) },
    };
  });
  return {
    columns: Array.from({ length: columns }, (_, column) => {
      const box: Box = {
        left: LEFT_PX + column * columnPx,
        top: topPx,
        width: columnPx - LABEL_PX,
        height: heightPx,
      };
      return {
        panel: { box, x, y },
        rows: rows.filter((_, index) => Math.floor(index / perColumn) === column),
      };
    }),
    x,
    heightPx,
    step,
    stepText: significantText(step, 2).replace(/\.?0+$/, ''),
    depth,
    hasMeans: noisy,
    bands:
      shownBands.length < 2
        ? []
        : shownBands.slice(0, MOST_KEY_BANDS).map((band) => ({
            text: cleanLabel(band, 8),
            colour: bandColour(Math.max(0, bands.indexOf(band))),
          })),
  };
}

export function paintStack(sheet: Sheet, stack: Stack, headingText: string): void {
  const entries: KeyEntry[] = [
    ...stack.bands.map(({ text, colour }) => ({ text, colour, kind: 'dot' as const })),
    ...(stack.hasMeans ? [{ text: 'means', colour: MEAN_EDGE, kind: 'mean' } as const] : []),
    { text: 'model', colour: MODEL_COLOUR, kind: 'line' },
  ];
  key(sheet, sheet.widthPx - RIGHT_PX, 11, entries, headingText);
  stack.columns.forEach(({ panel, rows }, column) => {
    for (const row of rows) paintRow(sheet, panel, row);
    drawFrame(sheet, panel.box, stack.x, null);
    drawBottomLabels(sheet, panel.box, stack.x);
    drawBottomTitle(sheet, panel.box, stack.x.title, panel.box.width + 20);
    if (column === 0) {
      drawLeftTitle(sheet, panel.box, 8, [{ text: 'relative flux, shifted' }], panel.box.height);
      paintScale(sheet, panel, stack.depth);
    }
  });
}

function paintRow(sheet: Sheet, panel: Panel, { event, shift, bins, colour, labels, curve }: StackRow): void {
  const { box, x, y } = panel;
  const down = (values: Float64Array): Float64Array => values.map((value) => value - shift);
  drawFaintPoints(
    sheet,
    event.hours.map((value) => xOf(box, x, value)),
    event.flux.map((value) => yOf(box, y, value - shift)),
    box,
    colour,
  );
  line(sheet, panel, curve.x, down(curve.y), { colour: MODEL_COLOUR, widthPx: 0.9 });
  const interpolated = (hours: number): number => {
    let nearest = 0;
    for (let i = 1; i < curve.x.length; i += 1)
      if (Math.abs(curve.x[i]! - hours) < Math.abs(curve.x[nearest]! - hours)) nearest = i;
    return curve.y[nearest]!;
  };
  means(
    sheet,
    panel,
    bins.map(({ hours, residual, sigma }) => ({
      x: hours,
      y: interpolated(hours) + residual - shift,
      sigma,
    })),
    { fill: '#ffffff', edge: MEAN_EDGE, radiusPx: 1.6 },
  );
  const level = yOf(box, y, 1 - shift);
  const left = box.left + box.width + 5;
  write(sheet, labels[0], left, level, { sizePx: 8, bold: true });
  write(sheet, labels[1], left, level + 9.5, { sizePx: 7.4, colour: FAINT_TEXT_COLOUR });
  write(sheet, labels[2], left, level + 18.5, { sizePx: 7.4, colour: FAINT_TEXT_COLOUR });
}

/** A bar of a round length beside the first transit. */
function paintScale(sheet: Sheet, { box, y }: Panel, depth: number): void {
  const { ctx } = sheet;
  const power = 10 ** Math.floor(Math.log10(depth));
  const length = [5, 2, 1].map((factor) => factor * power).find((value) => value <= 1.05 * depth) ?? power;
  const [top, foot] = [yOf(box, y, 1), yOf(box, y, 1 - length)];
  const x = box.left - 6;
  ctx.strokeStyle = FRAME_COLOUR;
  ctx.lineWidth = 1;
  ctx.beginPath();
  ctx.moveTo(x - 2, top);
  ctx.lineTo(x + 2, top);
  ctx.moveTo(x, top);
  ctx.lineTo(x, foot);
  ctx.moveTo(x - 2, foot);
  ctx.lineTo(x + 2, foot);
  ctx.stroke();
  ctx.save();
  ctx.translate(x - 7, (top + foot) / 2);
  ctx.rotate(-Math.PI / 2);
  write(sheet, significantText(length, 1), 0, 0, { sizePx: 8, align: 'center' });
  ctx.restore();
}
