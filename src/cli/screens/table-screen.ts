/** What was understood of one table of velocities, on a screen. */
import type { VelocityTable } from '../../observations/types.js';
import type { TableSummary } from '../../observations/describe.js';
import { plainLabel } from '../../dossier/escape.js';
import { significant } from '../../dossier/numbers.js';
import type { Terminal } from '../terminal.js';
import { columnsOf } from './layout.js';
import { columnLines, day, headingOf, noticeLines, screenOf, timeScaleWords } from './table-parts.js';

const PAUSES_SHOWN = 4;

function factLines(table: VelocityTable, summary: TableSummary): string[] {
  const { seasonGaps, medianCadenceDays } = summary;
  const scale = timeScaleWords(summary.timeScale, summary.timeErrorSeconds, table.timeOffsetDays);
  const pauses = seasonGaps
    .slice(0, PAUSES_SHOWN)
    .map((gap) => `${gap.days.toFixed(0)} d from ${day(gap.fromBjdTdb)}`);
  if (seasonGaps.length > PAUSES_SHOWN) pauses.push(`${seasonGaps.length - PAUSES_SHOWN} more`);
  const cadence = medianCadenceDays === null ? '' : `; median step ${significant(medianCadenceDays, 3)} d`;
  return columnsOf([
    ['time scale', scale],
    ['span', `${day(summary.firstBjdTdb)} to ${day(summary.lastBjdTdb)}, ${significant(summary.spanDays, 5)} d; ${summary.nights} nights${cadence}`],
    ['seasons', seasonGaps.length === 0 ? 'one, without a pause of 60 d' : `${seasonGaps.length + 1}; pauses ${pauses.join(', ')}`],
    ['velocities', `read in ${table.velocityUnit}; ${significant(summary.lowestVelocityMps, 6)} to ${significant(summary.highestVelocityMps, 6)} m/s; median error ${significant(summary.medianErrorMps, 3)} m/s`],
  ]); // prettier-ignore
}

function instrumentLines(summary: TableSummary): string[] {
  return columnsOf(
    [
      ['instrument', 'n', 'from', 'to', 'median (m/s)', 'error (m/s)'],
      ...summary.instruments.map((instrument) => [
        plainLabel(instrument.name, 24),
        String(instrument.count),
        day(instrument.firstBjdTdb),
        day(instrument.lastBjdTdb),
        significant(instrument.medianVelocityMps, 6),
        significant(instrument.medianErrorMps, 3),
      ]),
    ],
    [1, 2, 3, 4, 5],
  );
}

export function tableScreen(table: VelocityTable, summary: TableSummary, paint: Terminal['paint']): string {
  const notices = noticeLines(table.notices, paint);
  const separated = table.delimiter === 'blanks' ? 'separated by blanks' : `separated by ${table.delimiter}`;
  const body = [
    '',
    ...columnLines(table.columns),
    '',
    ...factLines(table, summary),
    '',
    ...instrumentLines(summary),
    ...(notices.length === 0 ? [] : ['', ...notices]),
  ];
  return screenOf(headingOf(table.path, table.rows, table.used, separated), body, paint);
}

/** The same for scripts, without the arrays of the observations. */
export function tableJson(table: VelocityTable, summary: TableSummary): object {
  return {
    content: table.content,
    ...summary,
    sha256: table.sha256,
    delimiter: table.delimiter,
    timeOffsetDays: table.timeOffsetDays,
    velocityUnit: table.velocityUnit,
    columns: table.columns,
    notices: table.notices,
  };
}
