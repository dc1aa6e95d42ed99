/** When the transits happened: each with a mid-time of its own, and the tables of mid-times. */
import type { PhotometryRecord, TransitEventRecord } from '../../solving/transit-types.js';
import type { Quantity } from '../../solving/types.js';
import { escapeMarkdown, markdownCode } from '../escape.js';
import { formatQuantity, significant } from '../numbers.js';
import { capitalised, counted } from '../titles.js';
import { chartBlocks, markdownTable, type ReportSection } from './section.js';

const MOST_ROWS = 40;
/** |O-C| beyond this many of its errors is named. */
const FAR_SIGMAS = 3;

function bare(quantity: Quantity): string {
  return formatQuantity(quantity, 'markdown', { withUnit: false });
}

function isFar({ oMinusC: { value, sigma } }: TransitEventRecord): boolean {
  return value !== null && sigma !== null && sigma > 0 && Math.abs(value) > FAR_SIGMAS * sigma;
}

function eventBlocks({ events }: PhotometryRecord): string[] {
  if (events.length === 0) return [];
  const shown = events.slice(0, MOST_ROWS);
  const far = events.filter(isFar);
  const farWords = far
    .slice(0, 5)
    .map(
      ({ letter, cycle, table }) => `cycle ${cycle} of ${escapeMarkdown(letter)} in ${escapeMarkdown(table)}`,
    )
    .join(', ');
  return [
    'Each transit in the light curves with a mid-time of its own, the shape kept as in the solution; O−C is against the ephemeris of this solution.',
    markdownTable(
      ['companion', 'cycle', 'light curve', 'points', 'mid-time (d)', 'O−C (min)'],
      shown.map((event) => [
        escapeMarkdown(event.letter),
        String(event.cycle),
        escapeMarkdown(event.table),
        String(event.points),
        bare(event.midTime),
        bare(event.oMinusC),
      ]),
      [1, 3, 4, 5],
    ),
    ...(events.length > shown.length
      ? [`The first ${shown.length} of ${events.length} are listed; solution.json has all of them.`]
      : []),
    ...(far.length === 0
      ? []
      : [
          `${far.length === 1 ? 'One transit lies' : `${far.length} transits lie`} more than ${FAR_SIGMAS} σ from the ephemeris: ${farWords}${far.length > 5 ? ' ...' : ''}.`,
        ]),
  ];
}

function tableBlocks({ midTimes }: PhotometryRecord): string[] {
  if (midTimes.length === 0) return [];
  return [
    `${capitalised(counted(midTimes.length, 'table'))} of mid-times entered the fit; a jitter is added in quadrature to the errors of each.`,
    markdownTable(
      ['table', 'companion', 'mid-times', 'jitter (min)', 'rms of residuals (min)'],
      midTimes.map(({ letter, path, count, jitter, rms }) => [
        markdownCode(path),
        escapeMarkdown(letter),
        String(count),
        formatQuantity(jitter, 'markdown', { withUnit: false, zeroBounded: true }),
        significant(rms, 3),
      ]),
      [2, 3, 4],
    ),
  ];
}

export const midTimes: ReportSection = {
  heading: 'Mid-times',
  blocks: ({ record: { photometry } }, context) => {
    if (photometry === undefined) return [];
    const body = [...eventBlocks(photometry), ...tableBlocks(photometry)];
    return body.length === 0 ? [] : [...chartBlocks(context, /^mid-times-/), ...body];
  },
};
