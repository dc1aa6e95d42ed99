/** Odd and even transits of each companion side by side: unequal depths betray an eclipsing pair of twice the period. */
import type { Solved } from '../../solving/types.js';
import { formatQuantity } from '../numbers.js';
import { counted } from '../titles.js';
import { CSS_PX_PER_MM, ONE_COLUMN_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { freehand, HEADING_PX } from './freehand.js';
import type { Sheet } from './freehand.js';
import { cleanLabel, fileLetter, significantText } from './labels.js';
import { faintPoints, level, line, means, write } from './panel-marks.js';
import type { Panel } from './panel-marks.js';
import { median } from './ranges.js';
import {
  drawBottomLabels,
  drawBottomTitle,
  drawFrame,
  drawLeftLabels,
  drawLeftTitle,
} from './small-panel.js';
import { FAINT_TEXT_COLOUR, MODEL_COLOUR } from './style.js';
import {
  binTransit,
  curveAt,
  curvesOf,
  deepestLoss,
  joined,
  shownEvents,
  shownHours,
} from './transit-events.js';
import type { ShownEvent } from './transit-events.js';
import { MEAN_EDGE, POINT_COLOUR, TREND_COLOUR } from './transit-look.js';
import { valueAxis } from './value-axis.js';

const PANEL_PX = 150;
const BOTTOM_PX = 33;
const LEFT_PX = 50;
const RIGHT_PX = 8;
const BINS = 30;
const PPM = 1e6;

/** Depth of some of the transits: the model's, stretched so that it fits them best. */
export interface ParityDepth {
  readonly count: number;
  /** Of the model's depth. */
  readonly factor: number;
  readonly factorSigma: number;
}

/**
 * Least squares for the factor by which the dip of the model must be stretched; the error grows with the scatter where that
 * is larger than the stated errors. `null` where the points do not reach into the dip.
 */
export function parityDepth(events: readonly ShownEvent[]): ParityDepth | null {
  const { flux, model, sigmas } = joined(events);
  let [cross, square] = [0, 0];
  for (let i = 0; i < flux.length; i += 1) {
    const loss = 1 - model[i]!;
    const weight = 1 / sigmas[i]! ** 2;
    if (!Number.isFinite(weight)) continue;
    cross += weight * loss * (1 - flux[i]!);
    square += weight * loss * loss;
  }
  if (!(square > 0)) return null;
  const factor = cross / square;
  let [chiSquare, inside] = [0, 0];
  for (let i = 0; i < flux.length; i += 1) {
    const loss = 1 - model[i]!;
    if (!(loss > 0)) continue;
    chiSquare += ((1 - flux[i]! - factor * loss) / sigmas[i]!) ** 2;
    inside += 1;
  }
  const excess = Math.max(1, chiSquare / Math.max(1, inside - 1));
  return { count: events.length, factor, factorSigma: Math.sqrt(excess / square) };
}

/** One chart per companion with odd and even transits in the fit: `odd-even-b`. */
export function oddEvenCharts(solved: Solved): ChartDrawing[] {
  return solved.record.companions.flatMap((_, companion) => {
    const drawing = oddEvenChart(solved, companion);
    return drawing === null ? [] : [drawing];
  });
}

function oddEvenChart(solved: Solved, companion: number): ChartDrawing | null {
  const { record, photometry } = solved;
  const own = record.companions[companion]!;
  const events = shownEvents(solved, own.letter);
  const odd = events.filter(({ cycle }) => cycle % 2 !== 0);
  const even = events.filter(({ cycle }) => cycle % 2 === 0);
  const [oddDepth, evenDepth] = [parityDepth(odd), parityDepth(even)];
  if (photometry === undefined || oddDepth === null || evenDepth === null) return null;
  const letter = cleanLabel(own.letter, 8);
  const depth = deepestLoss(curvesOf(photometry, own.letter).slice(0, 1), events);
  const away = (oddDepth.factor - evenDepth.factor) / Math.hypot(oddDepth.factorSigma, evenDepth.factorSigma);
  const target = cleanLabel(record.target, 25);
  const name = target.endsWith('…') || target === '' ? `companion ${letter}` : `${target} ${letter}`;
  const difference = `${significantText(Math.abs(away), 2)} σ`;
  return {
    name: `odd-even-${fileLetter(own.letter, companion)}`,
    widthMm: ONE_COLUMN_MM,
    heightMm: (HEADING_PX + PANEL_PX + BOTTOM_PX + 1) / CSS_PX_PER_MM,
    title: `Odd and even transits of companion ${letter} of ${cleanLabel(record.target, 80)}`,
    caption: [
      `Transits of odd and of even cycles of companion ${letter} apart${bandWords(events)}.`,
      `Their depths, from the model stretched to fit each group, differ by ${difference}.`,
      'Orange lines: both depths, across both panels. Circles: weighted means.',
    ].join(' '),
    configure: () =>
      freehand(`${name}: odd and even`, (sheet) => {
        paint(sheet, solved, own.letter, depth, [
          { title: 'odd', events: odd, depth: oddDepth },
          { title: 'even', events: even, depth: evenDepth },
        ]);
        write(sheet, `difference ${difference}`, sheet.widthPx - RIGHT_PX, 11, { align: 'right' });
      }),
  };
}

/** Depths differ from band to band, so that one band must speak for all. */
function bandWords(events: readonly ShownEvent[]): string {
  const bands = new Set(events.map(({ band }) => band));
  return bands.size < 2 ? '' : ', all bands together; curve and depths are those of the first';
}

interface Side {
  readonly title: string;
  readonly events: readonly ShownEvent[];
  readonly depth: ParityDepth;
}

function paint(sheet: Sheet, solved: Solved, letter: string, depth: number, sides: readonly Side[]): void {
  const photometry = solved.photometry!;
  const half = shownHours(photometry, letter);
  const points = sides.map(({ events }) => joined(events));
  const bins = points.map((one) => binTransit(one, half, BINS));
  const scatter = 1.4826 * median(points[0]!.flux.map((value, i) => Math.abs(value - points[0]!.model[i]!)));
  const reach = Math.min(3 * scatter, 1.1 * depth);
  // A millionth keeps a panel without any scatter open.
  let [low, high] = [1 - depth - reach - 1e-6, 1 + reach + 1e-6];
  for (const { residual, sigma } of bins.flat()) {
    low = Math.min(low, 1 - depth + residual - sigma);
    high = Math.max(high, 1 + residual + sigma);
  }
  low -= 0.22 * (high - low);
  const curve = curvesOf(photometry, letter)[0] ?? null;
  const width = (sheet.widthPx - LEFT_PX - RIGHT_PX) / 2;
  const x = valueAxis([{ text: 'time from mid-transit' }], 'h', -half, half, 4, 4);
  const y = valueAxis([{ text: 'relative flux' }], '', low, high, 6, 7);
  sides.forEach((side, index) => {
    const panel: Panel = {
      box: { left: LEFT_PX + index * width, top: HEADING_PX, width, height: PANEL_PX },
      x,
      y,
    };
    const { hours, flux, model } = points[index]!;
    faintPoints(sheet, panel, hours, flux, POINT_COLOUR);
    for (const other of sides)
      level(sheet, panel, 1 - depth * other.depth.factor, {
        colour: TREND_COLOUR,
        widthPx: 0.8,
        ...(other === side ? {} : { dash: [3, 2] }),
      });
    if (curve !== null)
      line(sheet, panel, curve.hoursFromMidTransit, curve.flux, { colour: MODEL_COLOUR, widthPx: 1 });
    const modelAt = (time: number): number => (curve === null ? (model[0] ?? 1) : curveAt(curve, time));
    if (hours.length > BINS * 3)
      means(
        sheet,
        panel,
        bins[index]!.map((bin) => ({ x: bin.hours, y: modelAt(bin.hours) + bin.residual, sigma: bin.sigma })),
        { fill: '#ffffff', edge: MEAN_EDGE, radiusPx: 1.7 },
      );
    const { factor, factorSigma, count } = side.depth;
    const sigma = PPM * depth * factorSigma;
    const value = PPM * depth * factor;
    const text = formatQuantity({ value, sigma, lower: value - sigma, upper: value + sigma, unit: 'ppm' }, 'text'); // prettier-ignore
    const foot = panel.box.top + PANEL_PX - 8;
    write(sheet, `${side.title}: ${counted(count, 'transit')}`, panel.box.left + 5, foot - 10, { bold: true, sizePx: 8 }); // prettier-ignore
    write(sheet, `depth ${text}`, panel.box.left + 5, foot, { sizePx: 8, colour: FAINT_TEXT_COLOUR });
    drawFrame(sheet, panel.box, x, y);
    drawBottomLabels(sheet, panel.box, x);
    drawBottomTitle(sheet, panel.box, x.title, width);
    if (index > 0) return;
    drawLeftLabels(sheet, panel.box, y);
    drawLeftTitle(sheet, panel.box, 8, y.title, PANEL_PX);
  });
}
