/** Which rows of a light curve or of mid-times are used: flagged ones are left out, gaps counted, cells that are no numbers named. */
import type { IssueList } from './issues.js';
import { plainWord } from './suggest.js';
import type { OddCell, SourceColumns } from './source-table.js';
import { counted, quoted } from './text.js';
import type { TableNotice } from './types.js';

const MOST_LINES_NAMED = 200;
/** Of one kind of problem; one cause usually makes thousands. */
const MOST_ODD_NAMED = 30;

export interface RowPlan {
  readonly labels: readonly string[] | null;
  readonly quality: number | null;
  /** Columns in which each used row has a number. */
  readonly needed: readonly number[];
  /** Whether a row without a number in a needed column is a gap to be skipped, or a problem. */
  readonly gapsAreAllowed: boolean;
}

/** Name of a column for messages. */
export function columnName(labels: readonly string[] | null, index: number): string {
  const label = labels?.[index] ?? '';
  return label === '' ? `column ${index + 1}` : label;
}

/** @returns indices of the used rows, in file order */
export function usedRows(
  columns: SourceColumns,
  plan: RowPlan,
  issues: IssueList,
  notices: TableNotice[],
): Uint32Array {
  const { rows, lines } = columns;
  const flags = plan.quality === null ? null : columns.numbers.get(plan.quality)!;
  const usesOnes = plan.quality !== null && plainWord(plan.labels?.[plan.quality] ?? '') === 'use';
  const needed = plan.needed.map((index) => columns.numbers.get(index)!);
  const isFlagged = (row: number): boolean => {
    const flag = flags === null ? NaN : flags[row]!;
    return flag === flag && (usesOnes ? flag === 0 : flag !== 0); // an absent flag is none
  };
  const oddRows = new Set<number>();
  reportOdd(columns.odd, plan, lines, (row) => isFlagged(row), oddRows, issues);
  const used = new Uint32Array(rows);
  const [flagged, gaps] = [new LineTally(lines), new LineTally(lines)];
  let count = 0;
  for (let row = 0; row < rows; row++) {
    if (isFlagged(row)) {
      flagged.add(row);
      continue;
    }
    let complete = true;
    for (const values of needed) if (Number.isNaN(values[row]!)) complete = false;
    if (complete) used[count++] = row;
    else if (!oddRows.has(row)) gaps.add(row);
  }
  const rule = usesOnes ? 'zero in the column of rows to use' : 'not zero in the quality column';
  if (flagged.count > 0) notices.push(flagged.notice('flagged-rows', `left out as flagged (${rule})`));
  if (gaps.count > 0) reportGaps(gaps, plan, issues, notices);
  if (count === 0 && issues.count === 0)
    issues.add({
      code: 'no-rows-left',
      message:
        flagged.count === rows
          ? `every row is flagged (${rule}): nothing is left`
          : `no row is left: ${counted(flagged.count, 'row')} flagged, ${gaps.count} without a number where one is needed`,
      hint: 'is the quality column really one? name another with --columns quality=LABEL',
    });
  return used.slice(0, count);
}

function reportGaps(gaps: LineTally, plan: RowPlan, issues: IssueList, notices: TableNotice[]): void {
  const names = plan.needed.map((index) => quoted(columnName(plan.labels, index))).join(', ');
  if (plan.gapsAreAllowed) {
    notices.push(gaps.notice('gap-rows', `skipped, because a number is missing in one of ${names}`));
    return;
  }
  for (const line of gaps.lines.slice(0, MOST_ODD_NAMED))
    issues.add({
      code: 'missing-value',
      line,
      message: `a number is missing in one of ${names}`,
      hint: 'flag the row in a quality column, or put # before it',
    });
}

const MESSAGES = { text: 'a number is expected', infinite: 'a finite number is expected', 'decimal-comma': 'a number with a decimal comma' } as const; // prettier-ignore
const CODES = { text: 'not-a-number', infinite: 'not-finite', 'decimal-comma': 'decimal-comma' } as const;

function reportOdd(
  odd: readonly OddCell[],
  plan: RowPlan,
  lines: Uint32Array,
  isFlagged: (row: number) => boolean,
  oddRows: Set<number>,
  issues: IssueList,
): void {
  const tally = new Map<string, number>();
  for (const cell of odd) {
    const isQuality = cell.column === plan.quality;
    if ((!plan.needed.includes(cell.column) && !isQuality) || isFlagged(cell.row)) continue;
    oddRows.add(cell.row);
    const key = `${cell.column} ${cell.kind}`;
    const count = (tally.get(key) ?? 0) + 1;
    tally.set(key, count);
    if (count > (cell.kind === 'decimal-comma' ? 1 : MOST_ODD_NAMED)) continue;
    issues.add({
      code: CODES[cell.kind],
      line: lines[cell.row]!,
      column: cell.place,
      field: columnName(plan.labels, cell.column),
      message: `found ${quoted(cell.text)}; ${isQuality ? 'a flag is a number (0 is good)' : MESSAGES[cell.kind]}`,
      hint: hintFor(cell),
    });
  }
}

function hintFor(cell: OddCell): string {
  if (cell.kind === 'decimal-comma')
    return 'write decimal points; this and all further decimal commas of the column are counted as one problem';
  if (cell.kind === 'infinite') return 'flag the row in a quality column, or put # before it';
  if (/^\d{4}-\d{2}-\d{2}/.test(cell.text)) return 'calendar dates are not read: give Julian dates';
  return /^\d+(\.\d+)?\s*(\+-|±|\+\/-)/.test(cell.text) ? 'put the error in a column of its own' : '';
}

/** Counts rows and keeps the first lines of them. */
export class LineTally {
  readonly lines: number[] = [];
  count = 0;

  constructor(private readonly lineOf: Uint32Array) {}

  add(row: number): void {
    this.count++;
    if (this.lines.length < MOST_LINES_NAMED) this.lines.push(this.lineOf[row]!);
  }

  notice(code: string, message: string): TableNotice {
    const all =
      this.count > this.lines.length ? `${counted(this.count, 'row')}; the first ${this.lines.length} are named` : counted(this.count, 'row'); // prettier-ignore
    return { code, message: `${message} (${all})`, lines: this.lines };
  }
}
