/** The transits of each companion folded on mid-transit: one panel per band, residuals below. */
import type { Solved } from '../../solving/types.js';
import { counted } from '../titles.js';
import { CSS_PX_PER_MM, ONE_COLUMN_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { MOST_DOTS } from './density-cloud.js';
import { freehand, HEADING_PX } from './freehand.js';
import { cleanLabel, fileLetter, significantText } from './labels.js';
import { shownEvents } from './transit-events.js';
import {
  bandPanels,
  BOTTOM_PX,
  paintBandPanels,
  RESIDUALS_PX,
  ROW_GAP_PX,
  FLUX_PX,
} from './transit-paint.js';
import type { BandPanels } from './transit-paint.js';

const MOST_COLUMNS = 3;
const MOST_BANDS = 9;

/** One chart per companion with transits in the fit: `transit-b`. */
export function transitCharts(solved: Solved): ChartDrawing[] {
  return solved.record.companions.flatMap((_, companion) => {
    const drawing = transitChart(solved, companion);
    return drawing === null ? [] : [drawing];
  });
}

/** Transits of the companion with this index; `null` when no light curve shows one. */
export function transitChart(solved: Solved, companion: number): ChartDrawing | null {
  const { record, photometry } = solved;
  const own = record.companions[companion]!;
  const events = shownEvents(solved, own.letter);
  if (photometry === undefined || events.length === 0) return null;
  const letter = cleanLabel(own.letter, 8);
  const bands = [...new Set(events.map(({ band }) => band))];
  const shown = bands.slice(0, MOST_BANDS);
  const columns = Math.min(MOST_COLUMNS, shown.length);
  const rows = Math.ceil(shown.length / columns);
  const widthMm = shown.length === 1 ? ONE_COLUMN_MM : TWO_COLUMNS_MM;
  const rowPx = FLUX_PX + RESIDUALS_PX + BOTTOM_PX;
  const heightPx = HEADING_PX + rows * rowPx + (rows - 1) * ROW_GAP_PX + 1;
  const { value: periodDays } = own.elements.period;
  const period = periodDays === null ? 'period unknown' : `P = ${significantText(periodDays, 6)} d`;
  const target = cleanLabel(record.target, 19);
  const name = target.endsWith('…') || target === '' ? 'companion' : target;
  const headingText = `${name} ${letter}, ${period}`;
  let prepared: BandPanels | null = null;
  const sheet = { widthPx: Math.floor(widthMm * CSS_PX_PER_MM), topPx: HEADING_PX, columns };
  const get = (): BandPanels => (prepared ??= bandPanels(solved, own.letter, events, shown, sheet));
  const { crowded, outside, binMinutes } = get();
  return {
    name: `transit-${fileLetter(own.letter, companion)}`,
    widthMm,
    heightMm: heightPx / CSS_PX_PER_MM,
    title: `Transits of companion ${letter} of ${cleanLabel(record.target, 80)}`,
    caption: [
      `Transits of companion ${letter} put on top of one another (${period.replace('P =', 'period')}), over their baselines${record.companions.length > 1 ? ' and without the other companions' : ''}${shown.length > 1 ? '; one panel per band' : ''}. Residuals below.`,
      crowded ? `Panels of more than ${MOST_DOTS} points show their density.` : '',
      binMinutes > 0
        ? `Circles: weighted means in bins of ${significantText(binMinutes, 2)} min, taken of the residuals and set on the model.`
        : '',
      'Line: model, exposure time included.',
      outside[0] + outside[1] > 0
        ? `Outside the panels: ${counted(outside[0], 'point')} of the flux, ${outside[1]} of the residuals.`
        : '',
      bands.length > shown.length ? `The first ${shown.length} of ${bands.length} bands are shown.` : '',
    ]
      .filter((sentence) => sentence !== '')
      .join(' '),
    configure: () =>
      freehand(headingText, (target) => {
        paintBandPanels(target, get(), headingText);
      }),
  };
}
