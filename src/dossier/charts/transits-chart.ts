/** Every transit of a companion on its own, one below the other. */
import type { Solved } from '../../solving/types.js';
import { CSS_PX_PER_MM, ONE_COLUMN_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { freehand, HEADING_PX } from './freehand.js';
import { cleanLabel, fileLetter } from './labels.js';
import { shownEvents } from './transit-events.js';
import type { ShownEvent } from './transit-events.js';
import { paintStack, stackOf, STACK_EDGES_PX } from './transits-paint.js';
import type { Stack } from './transits-paint.js';

const MOST_IN_A_COLUMN = 12;
const MOST_COLUMNS = 3;

/** One chart per companion with at least two transits in the fit: `transits-b`. */
export function transitsCharts(solved: Solved): ChartDrawing[] {
  return solved.record.companions.flatMap((_, companion) => {
    const drawing = transitsChart(solved, companion);
    return drawing === null ? [] : [drawing];
  });
}

/** `wanted` of the events, evenly over the list, the first and the last among them. */
function evenly(events: readonly ShownEvent[], wanted: number): ShownEvent[] {
  if (events.length <= wanted) return [...events];
  return Array.from(
    { length: wanted },
    (_, i) => events[Math.round((i * (events.length - 1)) / (wanted - 1))]!,
  );
}

/** Transits of the companion with this index; `null` for fewer than two. */
export function transitsChart(solved: Solved, companion: number): ChartDrawing | null {
  const { record } = solved;
  const own = record.companions[companion]!;
  const all = shownEvents(solved, own.letter);
  if (all.length < 2) return null;
  const events = evenly(all, MOST_IN_A_COLUMN * MOST_COLUMNS);
  const columns = Math.ceil(events.length / MOST_IN_A_COLUMN);
  const letter = cleanLabel(own.letter, 8);
  const widthMm = columns === 1 ? ONE_COLUMN_MM : TWO_COLUMNS_MM;
  const widthPx = Math.floor(widthMm * CSS_PX_PER_MM);
  let prepared: Stack | null = null;
  const get = (): Stack => (prepared ??= stackOf(solved, own.letter, events, columns, widthPx, HEADING_PX));
  const target = cleanLabel(record.target, 30);
  const name = target.endsWith('…') || target === '' ? `companion ${letter}` : `${target} ${letter}`;
  const headingText = `${name}: single transits`;
  const { stepText, hasMeans, heightPx } = get();
  return {
    name: `transits-${fileLetter(own.letter, companion)}`,
    widthMm,
    heightMm: (HEADING_PX + heightPx + STACK_EDGES_PX + 1) / CSS_PX_PER_MM,
    title: `Single transits of companion ${letter} of ${cleanLabel(record.target, 80)}`,
    caption: [
      `Single transits of companion ${letter}, each shifted down by ${stepText} of the flux, with its cycle, table and mid-time (BJD); colours tell the bands.`,
      'Line: model with the elements that all transits share.',
      hasMeans
        ? 'Pale: all points; circles: weighted means, where single points scatter by much of the depth.'
        : '',
      events.length < all.length
        ? `Of ${all.length} transits ${events.length} are shown, evenly over the cycles.`
        : '',
    ]
      .filter((sentence) => sentence !== '')
      .join(' '),
    configure: () =>
      freehand(headingText, (sheet) => {
        paintStack(sheet, get(), headingText);
      }),
  };
}
