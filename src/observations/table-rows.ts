/** Turns rows of cells into numbers; every cell that is not what its column needs becomes an issue with its place. */
import type { VelocityColumns } from './columns.js';
import type { IssueList } from './issues.js';
import { readCell } from './numbers.js';
import { plainWord } from './suggest.js';
import type { TextTable } from './table-text.js';
import { quoted, withoutControls } from './text.js';
import type { TableNotice } from './types.js';

/** The used rows in file order, numbers as written (no unit, no offset applied). All of one length. */
export interface NumberRows {
  readonly times: Float64Array;
  readonly velocities: Float64Array;
  readonly sigmas: Float64Array;
  /** Cleaned names, empty text without an instrument column. */
  readonly instruments: readonly string[];
  readonly lines: Uint32Array;
  /** Rows of `TextTable.rows` that are used. */
  readonly indices: readonly number[];
}

const MESSAGES = {
  'not-a-number': 'a number is expected',
  absent: 'a number is missing',
  infinite: 'a finite number is expected',
  'decimal-comma': 'a number with a decimal comma',
} as const;

export function readRows(
  table: TextTable,
  plan: VelocityColumns,
  issues: IssueList,
  notices: TableNotice[],
): NumberRows {
  const numeric = (['time', 'velocity', 'velocity-error'] as const).map((meaning) => ({
    meaning,
    index: plan.of.get(meaning)!,
  }));
  const quality = plan.of.get('quality') ?? null;
  const instrument = plan.of.get('instrument') ?? null;
  const usesOnes = quality !== null && plainWord(plan.labels?.[quality] ?? '') === 'use';
  const kept = {
    values: [[], [], []] as [number[], number[], number[]],
    names: [] as string[],
    lines: [] as number[],
    indices: [] as number[],
  };
  const flagged: number[] = [];
  const stripped: number[] = [];
  const commas = new Map<string, number>();
  for (const [rowIndex, row] of table.rows.entries()) {
    if (
      quality !== null &&
      isFlagged(row.cells[quality]!, usesOnes, row.line, quality, table, plan, issues)
    ) {
      flagged.push(row.line);
      continue;
    }
    let good = true;
    const values: [number, number, number] = [0, 0, 0];
    for (const [place, { meaning, index }] of numeric.entries()) {
      const cell = row.cells[index]!;
      const read = readCell(cell);
      const field = withoutControls(plan.labels?.[index] ?? `column ${index + 1}`);
      if (read.kind === 'number') {
        values[place] = read.value;
        if (meaning === 'velocity-error' && read.value <= 0) {
          good = false;
          issues.add({
            code: 'non-positive-error', line: row.line, column: table.columnOf(row.line, index), field,
            message: `found ${quoted(cell)}; a measurement error must be > 0`,
            hint: read.value < 0 ? 'is this a velocity column?' : 'flag the row, or give its real error',
          }); // prettier-ignore
        }
        continue;
      }
      good = false;
      const count = commas.get(field) ?? 0;
      if (read.kind === 'decimal-comma') commas.set(field, count + 1);
      if (read.kind === 'decimal-comma' && count > 0) continue; // once per column is enough: all its rows have them
      const code = read.kind === 'text' ? 'not-a-number' : read.kind;
      const name = code === 'absent' ? 'missing-value' : code === 'infinite' ? 'not-finite' : code;
      issues.add({
        code: name, line: row.line, column: table.columnOf(row.line, index), field,
        message: `found ${quoted(cell)}; ${MESSAGES[code]} (${meaning})`, hint: hintFor(code, cell),
      }); // prettier-ignore
    }
    let name = '';
    if (instrument !== null) {
      const written = row.cells[instrument]!;
      name = withoutControls(written);
      if (name !== written.trim()) stripped.push(row.line);
      if (name === '') {
        good = false;
        issues.add({
          code: 'missing-instrument',
          line: row.line,
          column: table.columnOf(row.line, instrument),
          message: 'the row names no instrument',
        });
      }
    }
    if (!good) continue;
    for (const place of [0, 1, 2] as const) kept.values[place].push(values[place]);
    kept.names.push(name);
    kept.lines.push(row.line);
    kept.indices.push(rowIndex);
  }
  if (stripped.length > 0) {
    notices.push({
      code: 'control-characters',
      message: 'control characters were taken out of the instrument names',
      lines: stripped,
    });
  }
  if (flagged.length > 0) {
    const rule = usesOnes ? 'zero in the column of rows to use' : 'not zero in the quality column';
    notices.push({ code: 'flagged-rows', message: `left out as flagged (${rule})`, lines: flagged });
  }
  if (kept.lines.length === 0 && issues.count === 0) {
    issues.add({
      code: 'no-rows-left',
      message: 'every row is flagged: nothing is left',
      hint: 'is the quality column really one? name another with --columns quality=LABEL',
    });
  }
  const [times, velocities, sigmas] = kept.values.map((list) => Float64Array.from(list)) as [
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  return {
    times,
    velocities,
    sigmas,
    instruments: kept.names,
    lines: Uint32Array.from(kept.lines),
    indices: kept.indices,
  };
}

function hintFor(code: keyof typeof MESSAGES, cell: string): string {
  if (code === 'decimal-comma')
    return 'write decimal points; this and all further decimal commas of the column are counted as one problem';
  if (code === 'absent' || code === 'infinite') return 'flag the row in a quality column, or put # before it';
  if (/^\d{4}-\d{2}-\d{2}/.test(cell)) return 'calendar dates are not read: give Julian dates';
  if (/^\d+(\.\d+)?\s*(\+-|±|\+\/-)/.test(cell)) return 'put the error in a column of its own';
  return 'text belongs in a further column, or behind #';
}

/** Non-zero is flagged; in a column called `use` it is the other way round. An empty cell is not flagged. */
function isFlagged(
  cell: string,
  usesOnes: boolean,
  line: number,
  index: number,
  table: TextTable,
  plan: VelocityColumns,
  issues: IssueList,
): boolean {
  const read = readCell(cell);
  if (read.kind === 'number') return usesOnes ? read.value === 0 : read.value !== 0;
  if (read.kind === 'absent') return false;
  issues.add({
    code: 'not-a-number',
    line,
    column: table.columnOf(line, index),
    field: withoutControls(plan.labels?.[index] ?? `column ${index + 1}`),
    message: `found ${quoted(cell)}; a flag is a number (${usesOnes ? '0 leaves the row out' : '0 is good'})`,
  });
  return true;
}
