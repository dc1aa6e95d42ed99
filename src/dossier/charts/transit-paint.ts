/** Lays out and draws the folded transits of one companion, a column of flux and residuals for each band. */
import type { TransitCurve } from '../../solving/transit-types.js';
import type { Solved } from '../../solving/types.js';
import { counted } from '../titles.js';
import { MOST_DOTS } from './density-cloud.js';
import type { Sheet } from './freehand.js';
import { cleanLabel } from './labels.js';
import { faintPoints, key, level, line, means, write } from './panel-marks.js';
import type { Mean, Panel } from './panel-marks.js';
import { median } from './ranges.js';
import {
  drawBottomLabels,
  drawFrame,
  drawLeftLabels,
  drawLeftTitle,
  drawBottomTitle,
} from './small-panel.js';
import type { Box } from './small-panel.js';
import { FAINT_TEXT_COLOUR, MODEL_COLOUR } from './style.js';
import { binTransit, curveAt, curvesOf, deepestLoss, joined, shownHours } from './transit-events.js';
import type { ShownEvent, TransitBin } from './transit-events.js';
import { bandColour, MEAN_EDGE } from './transit-look.js';
import { valueAxis } from './value-axis.js';
import type { ValueAxis } from './value-axis.js';

export const FLUX_PX = 165;
export const RESIDUALS_PX = 62;
export const BOTTOM_PX = 33;
export const ROW_GAP_PX = 8;
const LEFT_PX = 50;
const RIGHT_PX = 8;
const COLUMN_GAP_PX = 8;
const BINS = 42;
/** Fewer points than this in a panel need no means. */
const FEWEST_FOR_BINS = 80;
const PPM = 1e6;
/** No panel is narrower than this, relative flux. */
const FLATTEST = 1e-6;

interface BandPanel {
  readonly flux: Panel;
  readonly residuals: Panel;
  readonly band: string;
  readonly colour: string;
  readonly note: string;
  readonly points: Pick<ShownEvent, 'hours' | 'flux' | 'model' | 'sigmas'>;
  readonly residualsPpm: Float64Array;
  readonly bins: readonly TransitBin[];
  readonly curve: TransitCurve | null;
  readonly isFirst: boolean;
}

export interface BandPanels {
  readonly panels: readonly BandPanel[];
  readonly x: ValueAxis;
  readonly y: ValueAxis;
  readonly residual: ValueAxis;
  /** A panel shows the density of its points. */
  readonly crowded: boolean;
  /** Points above or below the panels of the flux, and those of the residuals. */
  readonly outside: readonly [number, number];
  /** 0 without means. */
  readonly binMinutes: number;
}

/** A range that holds the means with their errors, and the crowd of the points as far as it is not much wider than the dip. */
function fluxRange(
  panels: readonly Pick<BandPanel, 'points' | 'bins' | 'curve'>[],
  depth: number,
): { low: number; high: number } {
  const scatters = panels.map(({ points }) => spreadOf(points));
  const reach = Math.min(3.2 * Math.max(...scatters), Math.max(1.2 * depth, 3.2 * Math.min(...scatters)));
  let [low, high] = [1 - depth - reach - FLATTEST, 1 + reach + FLATTEST];
  for (const { bins, points } of panels)
    for (const { residual, sigma } of bins) {
      low = Math.min(low, 1 - depth + residual - sigma);
      high = Math.max(high, 1 + residual + sigma);
      if (points.hours.length === 0) break;
    }
  return { low, high };
}

/** Standard deviation of the residuals by their median absolute value. */
function spreadOf({ flux, model }: Pick<ShownEvent, 'flux' | 'model'>): number {
  return 1.4826 * median(flux.map((value, i) => Math.abs(value - model[i]!)));
}

export function bandPanels(
  solved: Solved,
  letter: string,
  events: readonly ShownEvent[],
  bands: readonly string[],
  sheet: { readonly widthPx: number; readonly topPx: number; readonly columns: number },
): BandPanels {
  const photometry = solved.photometry!;
  const half = shownHours(photometry, letter);
  const depth = deepestLoss(curvesOf(photometry, letter), events);
  const parts = bands.map((band) => {
    const own = events.filter((event) => event.band === band);
    const points = joined(own);
    return {
      band,
      own,
      points,
      bins: points.hours.length < FEWEST_FOR_BINS ? [] : binTransit(points, half, BINS),
      curve: photometry.curves.find((one) => one.letter === letter && one.band === band) ?? null,
    };
  });
  const reachX = Math.min(half, 1.03 * Math.max(...parts.map(({ points }) => points.hours.reduce((most, value) => Math.max(most, Math.abs(value)), 0)))); // prettier-ignore
  const range = fluxRange(parts, depth);
  const residualReach = PPM * Math.max(...parts.map(({ points, bins }) => {
    const means = bins.reduce((most, { residual, sigma }) => Math.max(most, Math.abs(residual) + sigma), 0);
    return Math.max(1.25 * means, 2.7 * spreadOf(points));
  }), 1e-6); // prettier-ignore
  const columnPx = (sheet.widthPx - LEFT_PX - RIGHT_PX - (sheet.columns - 1) * COLUMN_GAP_PX) / sheet.columns;
  const x = valueAxis([{ text: 'time from mid-transit' }], 'h', -reachX, reachX, columnPx > 200 ? 7 : 5, 4);
  const y = valueAxis([{ text: 'relative flux' }], '', range.low, range.high, 6, 7);
  const residualAxis = (wanted: number): ValueAxis =>
    valueAxis([{ text: 'residual' }], 'ppm', -residualReach, residualReach, wanted, 6);
  const residual = residualAxis(3).ticks.length < 3 ? residualAxis(5) : residualAxis(3);
  const outside: [number, number] = [0, 0];
  const panels = parts.map((part, index): BandPanel => {
    const column = index % sheet.columns;
    const row = Math.floor(index / sheet.columns);
    const top = sheet.topPx + row * (FLUX_PX + RESIDUALS_PX + BOTTOM_PX + ROW_GAP_PX);
    const box = (from: number, height: number): Box => ({
      left: LEFT_PX + column * (columnPx + COLUMN_GAP_PX),
      top: from,
      width: columnPx,
      height,
    });
    for (const value of part.points.flux) if (value < range.low || value > range.high) outside[0] += 1;
    const residualsPpm = part.points.flux.map((value, i) => PPM * (value - part.points.model[i]!));
    for (const value of residualsPpm) if (Math.abs(value) > residualReach) outside[1] += 1;
    const tables = [...new Set(part.own.map(({ table }) => table))];
    return {
      ...part,
      flux: { box: box(top, FLUX_PX), x, y },
      residuals: { box: box(top + FLUX_PX, RESIDUALS_PX), x, y: residual },
      colour: bandColour(Math.max(0, (solved.record.photometry?.bands ?? []).findIndex(({ name }) => name === part.band))), // prettier-ignore
      note: `${counted(part.own.length, 'transit')}${tables.length > 1 ? ` in ${counted(tables.length, 'table')}` : ''}`,
      residualsPpm,
      isFirst: column === 0,
    };
  });
  return {
    panels,
    x,
    y,
    residual,
    crowded: panels.some(({ points }) => points.hours.length > MOST_DOTS),
    outside,
    binMinutes: panels.some(({ bins }) => bins.length > 0) ? (60 * 2 * half) / BINS : 0,
  };
}

export function paintBandPanels(sheet: Sheet, all: BandPanels, headingText: string): void {
  key(
    sheet,
    sheet.widthPx - RIGHT_PX,
    11,
    [
      ...(all.binMinutes > 0 ? [{ text: 'means', colour: MEAN_EDGE, kind: 'mean' } as const] : []),
      { text: 'model', colour: MODEL_COLOUR, kind: 'line' },
    ],
    headingText,
  );
  for (const panel of all.panels) paintBand(sheet, panel, all);
}

function paintBand(sheet: Sheet, panel: BandPanel, all: BandPanels): void {
  const { flux, residuals, points, bins, curve, colour } = panel;
  const look = { fill: '#ffffff', edge: MEAN_EDGE, radiusPx: 2 };
  faintPoints(sheet, flux, points.hours, points.flux, colour);
  if (curve !== null)
    line(sheet, flux, curve.hoursFromMidTransit, curve.flux, { colour: MODEL_COLOUR, widthPx: 1.1 });
  const onModel = bins.map(({ hours, residual, sigma }): Mean => ({
    x: hours,
    y: modelAt(points, hours, curve) + residual,
    sigma,
  }));
  means(sheet, flux, onModel, look);
  faintPoints(sheet, residuals, points.hours, panel.residualsPpm, colour);
  level(sheet, residuals, 0, { colour: MODEL_COLOUR, widthPx: 0.9 });
  means(
    sheet,
    residuals,
    bins.map(({ hours, residual, sigma }) => ({ x: hours, y: PPM * residual, sigma: PPM * sigma })),
    look,
  );
  const { box } = flux;
  const foot = box.top + box.height - 8;
  write(sheet, cleanLabel(panel.band, 22), box.left + 6, foot - 10, { bold: true });
  write(sheet, panel.note, box.left + 6, foot, { sizePx: 8, colour: FAINT_TEXT_COLOUR });
  drawFrame(sheet, box, all.x, all.y);
  drawFrame(sheet, residuals.box, all.x, all.residual);
  drawBottomLabels(sheet, residuals.box, all.x);
  drawBottomTitle(sheet, residuals.box, all.x.title, box.width);
  if (!panel.isFirst) return;
  drawLeftLabels(sheet, box, all.y);
  drawLeftLabels(sheet, residuals.box, all.residual);
  drawLeftTitle(sheet, box, 8, all.y.title, box.height);
  drawLeftTitle(sheet, residuals.box, 8, all.residual.title, residuals.box.height + 6);
}

/** The model where a mean stands: the dense curve, or the nearest point without one. */
function modelAt(
  points: Pick<ShownEvent, 'hours' | 'model'>,
  hours: number,
  curve: TransitCurve | null,
): number {
  if (curve !== null) return curveAt(curve, hours);
  let nearest = 0;
  points.hours.forEach((value, i) => {
    if (Math.abs(value - hours) < Math.abs(points.hours[nearest]! - hours)) nearest = i;
  });
  return points.model[nearest] ?? 1;
}
