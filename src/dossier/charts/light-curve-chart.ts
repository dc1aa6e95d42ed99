/** A whole light curve: with its slow trend above, without it below, the transits marked by the letters of their companions. */
import type { WholeLightCurve } from '../../solving/transit-types.js';
import type { Solved } from '../../solving/types.js';
import { CSS_PX_PER_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { MOST_DOTS } from './density-cloud.js';
import { freehand, HEADING_PX } from './freehand.js';
import { cleanLabel } from './labels.js';
import { paintLightCurve, prepareLightCurve } from './light-curve-paint.js';
import type { PreparedLightCurve } from './light-curve-paint.js';

const PANEL_PX = 128;
const BETWEEN_PX = 8;
const BOTTOM_PX = 31;
/** Shorter ones hold one transit, which has a chart of its own. */
const SHORTEST_DAYS = 1.5;
const MOST_CHARTS = 12;

/** One chart for each light curve that runs over more than 1.5 d, the longest dozen. */
export function lightCurveCharts(solved: Solved): ChartDrawing[] {
  const spanOf = ({ timesBjdTdb: t }: WholeLightCurve): number => (t[t.length - 1] ?? 0) - (t[0] ?? 0);
  const long = (solved.photometry?.whole ?? []).filter((one) => spanOf(one) > SHORTEST_DAYS);
  const shown = new Set([...long].sort((one, other) => spanOf(other) - spanOf(one)).slice(0, MOST_CHARTS));
  return long
    .filter((one) => shown.has(one))
    .map((whole, index, { length }) =>
      lightCurveChart(solved, whole, length === 1 ? 'light-curve' : `light-curve-${index + 1}`),
    );
}

function lightCurveChart(solved: Solved, whole: WholeLightCurve, name: string): ChartDrawing {
  const target = cleanLabel(solved.record.target, 40);
  const table = cleanLabel(whole.name, 30);
  const trended = whole.trend.some((value) => value !== 1);
  const panels = trended ? 2 : 1;
  const heightPx = HEADING_PX + panels * PANEL_PX + (panels - 1) * BETWEEN_PX + BOTTOM_PX;
  const headingText = target.endsWith('…') || target === '' ? table : `${target}: ${table}`;
  let prepared: PreparedLightCurve | null = null;
  const layout = {
    topPx: HEADING_PX,
    panelPx: PANEL_PX,
    betweenPx: BETWEEN_PX,
    widthPx: Math.floor(TWO_COLUMNS_MM * CSS_PX_PER_MM),
  };
  const get = (): PreparedLightCurve => (prepared ??= prepareLightCurve(solved, whole, layout));
  return {
    name,
    widthMm: TWO_COLUMNS_MM,
    heightMm: (heightPx + 1) / CSS_PX_PER_MM,
    title: `Light curve of ${cleanLabel(solved.record.target, 80)}: ${table}`,
    caption: caption(whole, table, get()),
    configure: () =>
      freehand(headingText, (sheet) => {
        paintLightCurve(sheet, get(), headingText);
      }),
  };
}

function caption(
  whole: WholeLightCurve,
  table: string,
  { outside, events, pieces, trended }: PreparedLightCurve,
): string {
  const count = whole.flux.length;
  return [
    trended
      ? `The whole light curve ${table} (${count} points) with the slow trend that was removed for the search, and below without it.`
      : `The whole light curve ${table} (${count} points).`,
    count > MOST_DOTS ? 'Points are drawn as their density: the darker, the more of them.' : '',
    events > 0
      ? 'Triangles: transits with points in the fit, by the letter of the companion; black line: model.'
      : 'No transit in it has points in the fit.',
    pieces > 1 ? 'Long gaps are cut out of the time axis.' : '',
    outside > 0 ? `${outside} point${outside === 1 ? ' lies' : 's lie'} outside the panels.` : '',
  ]
    .filter((sentence) => sentence !== '')
    .join(' ');
}
