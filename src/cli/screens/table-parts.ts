/** What the screens of all kinds of tables share: head, columns, notices, dates. */
import { counted } from '../../observations/text.js';
import type { ColumnReading, TableNotice, TimeScale } from '../../observations/types.js';
import { plainLabel } from '../../dossier/escape.js';
import { significant } from '../../dossier/numbers.js';
import { wrapped } from '../help.js';
import { noticeText } from '../inputs.js';
import type { Terminal } from '../terminal.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

const COLUMNS_SHOWN = 12;

const MEANINGS: Readonly<Record<ColumnReading['meaning'], string>> = {
  time: 'time',
  velocity: 'velocity',
  'velocity-error': 'velocity error',
  instrument: 'instrument',
  quality: 'quality flag',
  kept: 'kept, not used',
  flux: 'flux',
  magnitude: 'magnitude',
  error: 'error',
  exposure: 'exposure time',
  band: 'band',
  regressor: 'regressor',
  cycle: 'cycle',
  source: 'source',
  kind: 'kind',
};

export function columnLines(columns: readonly ColumnReading[]): string[] {
  const shown = columns
    .slice(0, COLUMNS_SHOWN)
    .map((column) => [
      String(column.position),
      column.label === null ? '-' : plainLabel(column.label, 24),
      MEANINGS[column.meaning],
      plainLabel(column.unit, 26),
      plainLabel(column.known, 40),
    ]);
  const hidden = columns.length - shown.length;
  return [
    ...columnsOf([['column', 'label', 'taken for', 'unit', 'known from'], ...shown], [0]),
    ...(hidden > 0 ? [`... and ${hidden} more columns`] : []),
  ];
}

/** Calendar-like dates: a hundredth of a day is enough to find a night. */
export function day(bjd: number): string {
  return bjd.toFixed(2);
}

/** The time scale, how far dates may be off, and what was added to them. */
export function timeScaleWords(timeScale: TimeScale, errorSeconds: number, offsetDays: number): string {
  const scale =
    errorSeconds === 0
      ? timeScale
      : `${timeScale}, taken as BJD_TDB: may be off by up to ${significant(errorSeconds, 3)} s`;
  return scale + (offsetDays === 0 ? '' : `; ${offsetDays} d added to the numbers in the file`);
}

export function noticeLines(notices: readonly TableNotice[], paint: Terminal['paint']): string[] {
  return notices.flatMap((notice) =>
    wrapped(noticeText(notice), SCREEN_WIDTH - 6).map((line, index) =>
      index === 0 ? `${paint('caution', '!')}  ${line}` : `   ${line}`,
    ),
  );
}

/** Heading and indented body; empty lines stay empty. */
export function screenOf(heading: string, body: readonly string[], paint: Terminal['paint']): string {
  return [paint('heading', heading), ...body.map((line) => (line === '' ? '' : `   ${line}`))].join('\n');
}

/** `data/north.csv: 48 rows, 2 left out`. */
export function headingOf(path: string, rows: number, used: number, rest: string): string {
  const left = rows - used;
  return `${plainLabel(path, 60)}: ${counted(rows, 'row')}${left === 0 ? '' : `, ${left} left out`}, ${rest}`;
}
