/** Lays out and draws a whole light curve. */
import type { FittedLightCurve, WholeLightCurve } from '../../solving/transit-types.js';
import type { Solved } from '../../solving/types.js';
import { drawFaintPoints } from './density-cloud.js';
import type { Sheet } from './freehand.js';
import { cleanLabel, fixedText } from './labels.js';
import { key, line, write } from './panel-marks.js';
import type { KeyEntry, Panel } from './panel-marks.js';
import { drawBottomLabels, drawFrame, drawLeftLabels, drawLeftTitle, xOf, yOf } from './small-panel.js';
import type { Box } from './small-panel.js';
import { MODEL_COLOUR, TEXT_COLOUR } from './style.js';
import { drawRuns } from './text-runs.js';
import { keepExtremes } from './thin.js';
import { LETTER_COLOURS, POINT_COLOUR, TREND_COLOUR } from './transit-look.js';
import { placeStretches, stretchesOf } from './time-stretches.js';
import { valueAxis } from './value-axis.js';
import type { ValueAxis } from './value-axis.js';
import { timeOffset } from './velocities-chart.js';

const LEFT_PX = 50;
const RIGHT_PX = 8;
const STRETCH_GAP_PX = 9;
/** Room that a letter asks for, CSS px. */
const LETTER_PX = 8.5;
/** Letters of the transits stand in a strip of this height at the foot of the lower panel, in shares of it. */
const LETTER_STRIP = 0.13;

interface Layout {
  readonly topPx: number;
  readonly panelPx: number;
  readonly betweenPx: number;
  readonly widthPx: number;
}

interface Piece {
  readonly box: Box;
  readonly x: ValueAxis;
  readonly xPx: Float64Array;
  readonly yPx: Float64Array;
  /** Trend or model, in the units of the axes; several runs. */
  readonly lines: readonly { readonly x: Float64Array; readonly y: Float64Array }[];
}

interface Row {
  readonly y: ValueAxis;
  readonly lineColour: string;
  readonly pieces: readonly Piece[];
}

export interface PreparedLightCurve {
  readonly rows: readonly Row[];
  readonly letters: readonly { readonly letter: string; readonly index: number; readonly days: number }[];
  readonly timeTitle: string;
  readonly key: readonly KeyEntry[];
  /** Points outside the panels. */
  readonly outside: number;
  readonly events: number;
  readonly pieces: number;
  readonly trended: boolean;
  /** More transits than letters have room for. */
  readonly crowded: boolean;
}

/** An interval for nearly all points: the central 99.6 %, and a margin of half of what they span. */
function robustRange(values: Float64Array, lowest: number): { low: number; high: number } {
  const sorted = values.filter((value) => Number.isFinite(value)).sort();
  if (sorted.length === 0) return { low: 0.99, high: 1.01 };
  const at = (share: number): number => sorted[Math.round(share * (sorted.length - 1))]!;
  const [low, high, middle] = [at(0.002), at(0.998), at(0.5)];
  const quarter = Math.max(at(0.75) - at(0.25), 1e-9 * Math.abs(middle));
  return {
    low: Math.max(
      Math.min(low - 1.2 * quarter, lowest - 1.2 * quarter),
      Math.min(sorted[0]!, lowest) - 0.5 * quarter,
    ),
    high: Math.min(high + 1.2 * quarter, sorted[sorted.length - 1]! + 0.5 * quarter),
  };
}

export function prepareLightCurve(
  solved: Solved,
  whole: WholeLightCurve,
  layout: Layout,
): PreparedLightCurve {
  const { timesBjdTdb: times, flux, trend } = whole;
  const fitted = (solved.photometry?.fitted ?? []).find(({ name }) => name === whole.name) ?? null;
  const trended = trend.some((value) => value !== 1);
  const offset = timeOffset(times[0] ?? 0, times[times.length - 1] ?? 0);
  const days = times.map((time) => time - offset);
  const stretches = stretchesOf(days);
  const flat = flux.map((value, row) => value / trend[row]!);
  const deepest = (fitted?.transit ?? new Float64Array(0)).reduce(
    (least, value) => Math.min(least, value),
    1,
  );
  const rowBox = (index: number): Box => ({
    left: LEFT_PX,
    top: layout.topPx + index * (layout.panelPx + layout.betweenPx),
    width: layout.widthPx - LEFT_PX - RIGHT_PX,
    height: layout.panelPx,
  });
  const place = (
    index: number,
    y: ValueAxis,
    values: Float64Array,
    runs: readonly { readonly x: Float64Array; readonly y: Float64Array }[],
  ): Piece[] =>
    placeStretches(stretches, rowBox(index), STRETCH_GAP_PX).map(({ box, stretch }) => {
      const wanted = Math.max(1, Math.round(box.width / 62));
      const x = valueAxis([{ text: '' }], '', stretch.low, stretch.high, wanted, 9);
      const rows = rowsWithin(days, stretch.low, stretch.high);
      return {
        box,
        x,
        xPx: days.subarray(rows.from, rows.to).map((value) => xOf(box, x, value)),
        yPx: values.subarray(rows.from, rows.to).map((value) => yOf(box, y, value)),
        lines: runs,
      };
    });
  const daysPerPx = stretches.reduce((sum, one) => sum + one.high - one.low, 1e-9) / rowBox(0).width;
  const title = [{ text: 'relative flux' }];
  const rows: Row[] = [];
  let outside = 0;
  if (trended) {
    const range = robustRange(flux, Infinity);
    const y = valueAxis(title, '', range.low, range.high, 5, 7);
    outside = Math.max(outside, countOutside(flux, range));
    rows.push({ y, lineColour: TREND_COLOUR, pieces: place(0, y, flux, trendRuns(days, trend)) });
  }
  const tight = robustRange(flat, deepest);
  // Room at the foot for the letters.
  const room = { low: tight.low - LETTER_STRIP * (tight.high - tight.low), high: tight.high };
  outside = Math.max(outside, countOutside(flat, room));
  const y = valueAxis(
    [{ text: trended ? 'flux over trend' : 'relative flux' }],
    '',
    room.low,
    room.high,
    5,
    7,
  );
  rows.push({
    y,
    lineColour: MODEL_COLOUR,
    pieces: place(rows.length, y, flat, fitted === null ? [] : modelRuns(fitted, offset, daysPerPx)),
  });
  const letters = lettersOf(solved, fitted, offset);
  const scale = solved.record.timeScale === 'unknown' ? 'date' : solved.record.timeScale.replace('_', ' ');
  return {
    rows,
    letters,
    timeTitle: offset === 0 ? `${scale} (d)` : `${scale} \u2212 ${fixedText(offset, 0)} (d)`,
    key: [
      ...(trended ? [{ text: 'trend', colour: TREND_COLOUR, kind: 'line' } as const] : []),
      ...[...new Map(letters.map(({ letter, index }) => [letter, index]))].map(([letter, index]) => ({
        text: letter,
        colour: LETTER_COLOURS[index % LETTER_COLOURS.length]!,
        kind: 'triangle' as const,
      })),
      ...(letters.length > 0 ? [{ text: 'model', colour: MODEL_COLOUR, kind: 'line' } as const] : []),
    ],
    outside,
    events: letters.length,
    pieces: stretches.length,
    trended,
    crowded: letters.length * LETTER_PX > rowBox(0).width,
  };
}

function rowsWithin(days: Float64Array, low: number, high: number): { from: number; to: number } {
  let from = 0;
  while (from < days.length && days[from]! < low) from += 1;
  let to = from;
  while (to < days.length && days[to]! <= high) to += 1;
  return { from, to };
}

function countOutside(values: Float64Array, { low, high }: { low: number; high: number }): number {
  let count = 0;
  for (const value of values) if (value < low || value > high) count += 1;
  return count;
}

/** The trend, a few thousand samples of it, broken where the data pause. */
function trendRuns(days: Float64Array, trend: Float64Array): { x: Float64Array; y: Float64Array }[] {
  const step = Math.max(1, Math.floor(days.length / 3000));
  const span = days[days.length - 1]! - days[0]!;
  const pause = Math.max(0.01 * span, (5 * span * step) / days.length);
  const runs: { x: number[]; y: number[] }[] = [];
  for (let row = 0; row < days.length; row += step) {
    const last = runs.at(-1);
    if (last === undefined || days[row]! - last.x.at(-1)! > pause)
      runs.push({ x: [days[row]!], y: [trend[row]!] });
    else {
      last.x.push(days[row]!);
      last.y.push(trend[row]!);
    }
  }
  return runs.map(({ x, y }) => ({ x: Float64Array.from(x), y: Float64Array.from(y) }));
}

/** The model of each transit through the points of the fit: highest and lowest of every quarter of a pixel. */
function modelRuns(
  fitted: FittedLightCurve,
  offset: number,
  daysPerPx: number,
): { x: Float64Array; y: Float64Array }[] {
  return fitted.segments.map(({ start, end }) => {
    const x = fitted.timesBjdTdb.slice(start, end).map((time) => time - offset);
    const y = fitted.transit.subarray(start, end);
    const columns = x.map((value) => (4 * (value - x[0]!)) / daysPerPx);
    const kept = keepExtremes(columns, y, Infinity);
    return {
      x: Float64Array.from(kept, (row) => x[row]!),
      y: Float64Array.from(kept, (row) => y[row]!),
    };
  });
}

function lettersOf(
  { record }: Solved,
  fitted: FittedLightCurve | null,
  offset: number,
): { letter: string; index: number; days: number }[] {
  const found = (fitted?.segments ?? []).flatMap(({ events }) =>
    events.map(({ letter, midTimeBjdTdb }) => ({
      letter: cleanLabel(letter, 3),
      index: Math.max(
        0,
        record.companions.findIndex((one) => one.letter === letter),
      ),
      days: midTimeBjdTdb - offset,
    })),
  );
  return found.sort((one, other) => one.days - other.days);
}

export function paintLightCurve(sheet: Sheet, prepared: PreparedLightCurve, headingText: string): void {
  const { rows } = prepared;
  key(sheet, sheet.widthPx - RIGHT_PX, 11, prepared.key, headingText);
  rows.forEach(({ y, lineColour, pieces }, index) => {
    const isLast = index === rows.length - 1;
    for (const { box, x, xPx, yPx, lines } of pieces) {
      const panel: Panel = { box, x, y };
      drawFaintPoints(sheet, xPx, yPx, box, POINT_COLOUR);
      for (const run of lines)
        if (run.x.length > 0 && run.x[run.x.length - 1]! >= x.low && run.x[0]! <= x.high)
          line(sheet, panel, run.x, run.y, {
            colour: lineColour,
            widthPx: prepared.crowded && isLast ? 0.5 : 1,
          });
      if (isLast) paintLetters(sheet, panel, prepared);
      drawFrame(sheet, box, x, y);
      if (isLast) drawBottomLabels(sheet, box, x);
    }
    const [first, last] = [pieces[0]!.box, pieces.at(-1)!.box];
    drawLeftLabels(sheet, first, y);
    drawLeftTitle(sheet, first, 8, y.title, first.height);
    if (isLast)
      drawRuns(sheet.ctx, [{ text: prepared.timeTitle }], (first.left + last.left + last.width) / 2, first.top + first.height + 22, {
        sizePx: 9.3,
        colour: TEXT_COLOUR,
        align: 'center',
      }); // prettier-ignore
  });
}

/** A triangle and a letter at the foot of each transit; where they are too many for letters, a row of triangles for each companion. */
function paintLetters(sheet: Sheet, { box, x }: Panel, { letters, crowded }: PreparedLightCurve): void {
  const { ctx } = sheet;
  const foot = box.top + box.height - 4;
  const reached = new Map<string, number>();
  let lettered = -Infinity;
  for (const { letter, index, days } of letters) {
    if (days < x.low || days > x.high) continue;
    const px = xOf(box, x, days);
    if (px - (reached.get(letter) ?? -Infinity) < 1.5) continue;
    reached.set(letter, px);
    const colour = LETTER_COLOURS[index % LETTER_COLOURS.length]!;
    const [half, tip] = crowded ? [1.6, foot - 15 + 6 * (index % 3)] : [2.6, foot - 14];
    ctx.fillStyle = colour;
    ctx.beginPath();
    ctx.moveTo(px, tip);
    ctx.lineTo(px - half, tip + 1.7 * half);
    ctx.lineTo(px + half, tip + 1.7 * half);
    ctx.closePath();
    ctx.fill();
    // A letter beside another moves a little; one that would lose its triangle is left out.
    const at = Math.max(px, lettered + 7.5);
    if (crowded || at - px > 4) continue;
    lettered = at;
    write(sheet, letter, at, foot - 3.5, { sizePx: 8.4, align: 'center', colour, bold: true });
  }
}
