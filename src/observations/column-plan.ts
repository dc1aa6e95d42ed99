/** Choosing columns, whatever a table holds: those that are named, those whose label says it, and what is said when several might do. */
import type { IssueList } from './issues.js';
import { readLabel } from './labels.js';
import { readCell } from './numbers.js';
import { didYouMean, plainWord } from './suggest.js';
import type { TextTable } from './table-text.js';
import { quoted, withoutControls } from './text.js';
import { readTimeLabel } from './time-label.js';
import { timeScaleError } from './time-scale.js';
import type { ColumnMeaning, TableNotice, TableRequest } from './types.js';

export interface ColumnPlan<M extends ColumnMeaning> {
  /** Index of the column (from 0) for each meaning that was found. */
  readonly of: ReadonlyMap<M, number>;
  /** How each is known, for `ColumnReading.known`. */
  readonly known: ReadonlyMap<number, string>;
  /** Labels by index; from the header, or from the column list in the comments; `null` when neither names them. */
  readonly labels: readonly string[] | null;
  /** Descriptions of the columns in the comments (`# Col 2: RV = radial velocity in km/s`), by index. */
  readonly descriptions: ReadonlyMap<number, { readonly line: number; readonly text: string }>;
}

const COLUMN_LIST_LINE = /^col(?:umn)?s?\.?\s*#?\s*(\d{1,3})\s*[:=).-]?\s*(\S.*)$/i;

function descriptionsOf(table: TextTable): Map<number, { line: number; text: string }> {
  const found = new Map<number, { line: number; text: string }>();
  for (const { number, text } of table.comments) {
    const match = COLUMN_LIST_LINE.exec(text);
    if (match !== null) found.set(Number(match[1]) - 1, { line: number, text: match[2]! });
  }
  return found;
}

export interface ColumnNames extends Pick<ColumnPlan<ColumnMeaning>, 'labels' | 'descriptions'> {
  /** Where the labels come from, for `ColumnReading.known`. */
  readonly source: string;
}

/** The names that header, commented header or column list give to the columns. */
export function namesOf(table: TextTable): ColumnNames {
  const descriptions = descriptionsOf(table);
  const source = table.labelsFrom === 'comment' ? 'header in a comment' : 'header name';
  if (table.labels !== null) return { labels: table.labels, descriptions, source };
  const listed = Array.from({ length: table.width }, (_, index) => descriptions.get(index));
  if (!listed.every((entry) => entry !== undefined)) return { labels: null, descriptions, source };
  const labels = listed.map((entry) => entry.text.split('=')[0]!.trim());
  return { labels, descriptions, source: 'column list in the comments' };
}

/** Whether most cells of a column (of its first hundred) are numbers or absent. */
export function isNumeric(table: TextTable, index: number): boolean {
  const sample = table.rows.slice(0, 100);
  return sample.filter((row) => readCell(row.cells[index]!).kind === 'text').length <= sample.length / 2;
}

/** Index of the column that is called `wanted`, or stands at that position; `null` (and an issue) when there is none. */
function findColumn(
  wanted: string,
  names: readonly string[],
  table: TextTable,
  meaning: string,
  issues: IssueList,
): number | null {
  const exact = names.indexOf(wanted.trim());
  if (exact >= 0) return exact;
  const loose = names.flatMap((name, index) =>
    plainWord(name) === plainWord(wanted) || readLabel(name).word === plainWord(wanted) ? [index] : [],
  );
  if (loose.length === 1 && plainWord(wanted) !== '') return loose[0]!;
  if (/^\d{1,4}$/.test(wanted.trim())) {
    const position = Number(wanted);
    if (position >= 1 && position <= table.width) return position - 1;
  }
  const positions = `give a position from 1 to ${table.width}`;
  const hint =
    names.length === 0
      ? `the table has no header: ${positions}`
      : /^\d+$/.test(wanted)
        ? positions
        : didYouMean(wanted, names.map(withoutControls));
  issues.add({
    code: 'no-such-column',
    field: meaning,
    message: `there is no column ${quoted(wanted)} for ${meaning}`,
    hint,
  });
  return null;
}

/** Collects the columns of one table; what cannot be decided goes to the issues. */
export class ColumnChooser<M extends ColumnMeaning> implements ColumnPlan<M> {
  readonly of: Map<M, number> = new Map();
  readonly known: Map<number, string> = new Map();
  readonly labels: readonly string[] | null;
  readonly descriptions: ColumnNames['descriptions'];
  private readonly source: string;

  constructor(
    private readonly table: TextTable,
    /** Meanings of which two equal candidates are an issue and not a notice. */
    private readonly needed: readonly M[],
    private readonly issues: IssueList,
    private readonly notices: TableNotice[],
  ) {
    ({ labels: this.labels, descriptions: this.descriptions, source: this.source } = namesOf(table));
  }

  assign(meaning: M, index: number, how: string): void {
    this.of.set(meaning, index);
    this.known.set(index, how);
  }

  /** Takes the column that was declared for `meaning`, if any; `others` are further names that it may have been declared by. */
  takeNamed(meaning: M, columns: TableRequest['columns'], others: readonly ColumnMeaning[] = []): void {
    const wanted = [meaning, ...others].map((name) => columns[name]).find((name) => name !== undefined);
    if (wanted === undefined) return;
    const index = findColumn(wanted, this.labels ?? [], this.table, meaning, this.issues);
    if (index === null) return;
    const other = [...this.of].find(([, taken]) => taken === index);
    if (other === undefined) this.assign(meaning, index, '--columns');
    else
      this.issues.add({
        code: 'column-twice',
        field: meaning,
        message: `column ${quoted(wanted)} was named both for ${other[0]} and for ${meaning}`,
      });
  }

  /** Takes the free column whose label has the lowest rank; `null` excludes a column. */
  choose(meaning: M, rankOf: (label: string, index: number) => number | null): void {
    const { labels } = this;
    if (labels === null || this.of.has(meaning)) return;
    const taken = new Set(this.of.values());
    const candidates = labels.flatMap((label, index) => {
      const rank = taken.has(index) ? null : rankOf(label, index);
      return rank === null ? [] : [{ index, rank }];
    });
    candidates.sort((a, b) => a.rank - b.rank || a.index - b.index);
    const [best, second] = candidates;
    if (best === undefined) return;
    const names = candidates.map(({ index }) => quoted(labels[index]!)).join(', ');
    if (second?.rank === best.rank && this.needed.includes(meaning)) {
      this.issues.add({
        code: 'ambiguous-column',
        field: meaning,
        message: `several columns may be the ${meaning}: ${names}`,
        hint: `say which with --columns ${meaning}=${best.index + 1} (a position or a label)`,
      });
      return;
    }
    this.assign(meaning, best.index, this.source);
    if (second !== undefined) {
      this.notices.push({
        code: 'several-columns',
        message: `several columns may be the ${meaning} (${names}); ${quoted(labels[best.index]!)} was taken`,
        lines: [],
      });
    }
  }

  /** A quality column that holds text says nothing that can be obeyed: it is kept, and that is said. */
  withoutTextQuality(quality: M, declared: boolean): void {
    const index = this.of.get(quality);
    if (index === undefined || declared || isNumeric(this.table, index)) return;
    this.notices.push({
      code: 'quality-not-used',
      message: `column ${index + 1} looks like a quality column but holds text: kept, and no row is left out`,
      lines: [],
    });
    this.of.delete(quality);
    this.known.delete(index);
  }
}

/** Rank of a time label: the better its scale is known, the lower; `null` when it is no time. */
export function timeRank(label: string): number | null {
  const read = readTimeLabel(label);
  if (read === null) return null;
  return timeScaleError(read.scale).maximumSeconds + (read.scale === 'unknown' ? 1000 : 0);
}

/** Reports each needed meaning without a column, with the labels that there are. */
export function reportMissingColumns(
  missing: readonly string[],
  labels: readonly string[],
  issues: IssueList,
): void {
  const found = labels
    .map((label) => quoted(label))
    .join(', ')
    .slice(0, 400);
  for (const meaning of missing) {
    issues.add({
      code: 'missing-column',
      field: meaning,
      message: `no ${meaning} column was recognised; the labels are ${found}`,
      hint: `name it: --columns ${meaning}=LABEL`,
    });
  }
}
