/** Puts the tables of one target together. */
import { InputDataError } from '../errors.js';
import { singleIssue } from './issues.js';
import { quoted } from './text.js';
import { LONGEST_SPAN_DAYS } from './table-reader.js';
import { worstTimeScale } from './time-scale.js';
import type { TableNotice, VelocitySet, VelocityTable } from './types.js';
import { similarNames } from './validate.js';

/**
 * All rows of `tables` sorted by time (rows of equal time keep the order of tables and lines). Instruments of exactly
 * the same name are one; names that differ only in case or hyphens stay apart and are said.
 *
 * @throws InputDataError with no rows, one row, all times equal, or dates that cannot be on one axis
 */
export function combineTables(tables: readonly VelocityTable[]): VelocitySet {
  const rows = tables.flatMap((table, tableIndex) =>
    Array.from({ length: table.used }, (_, row) => ({ table, tableIndex, row })),
  );
  rows.sort((a, b) => a.table.timesBjdTdb[a.row]! - b.table.timesBjdTdb[b.row]!);
  const first = rows[0];
  const last = rows.at(-1);
  const file = tables.map((table) => table.path).join(', ');
  if (first === undefined || last === undefined)
    throw singleIssue(file, 'no-rows', 'there is not a single velocity');
  if (rows.length === 1)
    throw oneIssue(first, 'one-row', 'there is only one velocity: an orbit cannot be found from it');
  const from = first.table.timesBjdTdb[first.row]!;
  const to = last.table.timesBjdTdb[last.row]!;
  if (from === to)
    throw oneIssue(first, 'equal-times', `all ${rows.length} velocities have the same time, ${from}`);
  if (to - from > LONGEST_SPAN_DAYS) {
    const names =
      first.table === last.table ? 'the table' : `${quoted(first.table.path)} and ${quoted(last.table.path)}`;
    throw oneIssue(
      first,
      'impossible-span',
      `the dates of ${names} are ${Math.round(to - from)} d apart`,
      'one of them leaves out the first digits: declare its offset, e.g. time: BJD_TDB - 2450000',
    );
  }
  const seen = new Map<string, string>();
  for (const table of tables) {
    const twin = seen.get(table.sha256);
    if (twin !== undefined) {
      const message = `this table has the same content as ${quoted(twin)}: its velocities would count twice`;
      const place = { file: table.path, line: null, column: null, field: null };
      throw new InputDataError([
        { code: 'same-table-twice', ...place, message, hint: 'name each table once' },
      ]);
    }
    seen.set(table.sha256, table.path);
  }
  const instruments = [...new Set(tables.flatMap((table) => table.instruments))];
  const place = new Map(instruments.map((name, index) => [name, index]));
  const scales = new Set(tables.map((table) => table.timeScale));
  return {
    count: rows.length,
    timesBjdTdb: Float64Array.from(rows, ({ table, row }) => table.timesBjdTdb[row]!),
    velocitiesMps: Float64Array.from(rows, ({ table, row }) => table.velocitiesMps[row]!),
    sigmasMps: Float64Array.from(rows, ({ table, row }) => table.sigmasMps[row]!),
    instrumentOf: Uint16Array.from(rows, ({ table, row }) =>
      place.get(table.instruments[table.instrumentOf[row]!]!)!,
    ),
    instruments,
    tableOf: Uint16Array.from(rows, ({ tableIndex }) => tableIndex),
    lines: Uint32Array.from(rows, ({ table, row }) => table.lines[row]!),
    tables: tables.map(({ path, sha256, rows: count, used }) => ({ path, sha256, rows: count, used })),
    timeScale: worstTimeScale([...scales]),
    notices: [
      ...tables.flatMap((table) => table.notices.map((notice) => ({ ...notice, path: table.path }))),
      ...acrossTables(tables, rows, instruments, file),
    ],
  };
}

interface PlacedRow {
  readonly table: VelocityTable;
  readonly tableIndex: number;
  readonly row: number;
}

function oneIssue({ table, row }: PlacedRow, code: string, message: string, hint = ''): InputDataError {
  return new InputDataError([
    { code, file: table.path, line: table.lines[row]!, column: null, field: 'time', message, hint },
  ]);
}

/** What only shows when the tables lie side by side. */
function acrossTables(
  tables: readonly VelocityTable[],
  rows: readonly PlacedRow[],
  instruments: readonly string[],
  path: string,
): (TableNotice & { path: string })[] {
  if (tables.length < 2) return [];
  const notices: TableNotice[] = [];
  const within = new Set(
    tables.flatMap((table) => similarNames(table.instruments).map((notice) => notice.message)),
  );
  notices.push(...similarNames(instruments).filter((notice) => !within.has(notice.message)));
  const scales = new Set(tables.map((table) => table.timeScale));
  if (scales.size > 1)
    notices.push({
      code: 'mixed-time-scales',
      message: `the tables are in different time scales (${[...scales].join(', ')}); all dates are taken as BJD_TDB`,
      lines: [],
    });
  const repeated: string[] = [];
  for (let at = 1; at < rows.length; at++) {
    // Rows are sorted: equal ones stand in one run of equal times.
    for (let before = at - 1; before >= Math.max(0, at - 20); before--) {
      const [a, b] = [rows[before]!, rows[at]!];
      if (a.table.timesBjdTdb[a.row] !== b.table.timesBjdTdb[b.row]) break;
      const isSame =
        a.table.velocitiesMps[a.row] === b.table.velocitiesMps[b.row] &&
        a.table.sigmasMps[a.row] === b.table.sigmasMps[b.row];
      if (a.tableIndex !== b.tableIndex && isSame)
        repeated.push(
          `${a.table.path}:${a.table.lines[a.row]!} and ${b.table.path}:${b.table.lines[b.row]!}`,
        );
    }
  }
  if (repeated.length > 0) {
    const shown =
      repeated.slice(0, 5).join('; ') + (repeated.length > 5 ? `; and ${repeated.length - 5} more` : '');
    notices.push({
      code: 'repeated-row',
      message: `the same measurement stands in two tables and counts twice: ${shown}`,
      lines: [],
    });
  }
  return notices.map((notice) => ({ ...notice, path }));
}
