/** What was understood of one table, on a screen. */
import type { ColumnReading, VelocityTable } from '../../observations/types.js';
import type { TableSummary } from '../../observations/describe.js';
import { plainLabel } from '../../dossier/escape.js';
import { significant } from '../../dossier/numbers.js';
import { wrapped } from '../help.js';
import { noticeText } from '../inputs.js';
import type { Terminal } from '../terminal.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

const PAUSES_SHOWN = 4;
const COLUMNS_SHOWN = 12;

const MEANINGS: Readonly<Record<ColumnReading['meaning'], string>> = {
  time: 'time',
  velocity: 'velocity',
  'velocity-error': 'velocity error',
  instrument: 'instrument',
  quality: 'quality flag',
  kept: 'kept, not used',
};

function columnLines(table: VelocityTable): string[] {
  const shown = table.columns
    .slice(0, COLUMNS_SHOWN)
    .map((column) => [
      String(column.position),
      column.label === null ? '-' : plainLabel(column.label, 24),
      MEANINGS[column.meaning],
      plainLabel(column.unit, 26),
      plainLabel(column.known, 40),
    ]);
  const hidden = table.columns.length - shown.length;
  return [
    ...columnsOf([['column', 'label', 'taken for', 'unit', 'known from'], ...shown], [0]),
    ...(hidden > 0 ? [`... and ${hidden} more columns`] : []),
  ];
}

/** Calendar-like dates: a hundredth of a day is enough to find a night. */
function day(bjd: number): string {
  return bjd.toFixed(2);
}

function factLines(table: VelocityTable, summary: TableSummary): string[] {
  const { seasonGaps, medianCadenceDays } = summary;
  const scale =
    summary.timeErrorSeconds === 0
      ? summary.timeScale
      : `${summary.timeScale}, taken as BJD_TDB: may be off by up to ${significant(summary.timeErrorSeconds, 3)} s`;
  const offset =
    table.timeOffsetDays === 0 ? '' : `; ${table.timeOffsetDays} d added to the numbers in the file`;
  const pauses = seasonGaps
    .slice(0, PAUSES_SHOWN)
    .map((gap) => `${gap.days.toFixed(0)} d from ${day(gap.fromBjdTdb)}`);
  if (seasonGaps.length > PAUSES_SHOWN) pauses.push(`${seasonGaps.length - PAUSES_SHOWN} more`);
  const cadence = medianCadenceDays === null ? '' : `; median step ${significant(medianCadenceDays, 3)} d`;
  return columnsOf([
    ['time scale', scale + offset],
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

function noticeLines(table: VelocityTable, paint: Terminal['paint']): string[] {
  return table.notices.flatMap((notice) =>
    wrapped(noticeText(notice), SCREEN_WIDTH - 6).map((line, index) =>
      index === 0 ? `${paint('caution', '!')}  ${line}` : `   ${line}`,
    ),
  );
}

export function tableScreen(table: VelocityTable, summary: TableSummary, paint: Terminal['paint']): string {
  const left = table.rows - table.used;
  const notices = noticeLines(table, paint);
  const separated = table.delimiter === 'blanks' ? 'separated by blanks' : `separated by ${table.delimiter}`;
  const body = [
    '',
    ...columnLines(table),
    '',
    ...factLines(table, summary),
    '',
    ...instrumentLines(summary),
    ...(notices.length === 0 ? [] : ['', ...notices]),
  ];
  return [
    paint(
      'heading',
      `${plainLabel(table.path, 60)}: ${table.rows} rows${left === 0 ? '' : `, ${left} left out`}, ${separated}`,
    ),
    ...body.map((line) => (line === '' ? '' : `   ${line}`)),
  ].join('\n');
}

/** The same for scripts, without the arrays of the observations. */
export function tableJson(table: VelocityTable, summary: TableSummary): object {
  return {
    ...summary,
    sha256: table.sha256,
    delimiter: table.delimiter,
    timeOffsetDays: table.timeOffsetDays,
    velocityUnit: table.velocityUnit,
    columns: table.columns,
    notices: table.notices,
  };
}
