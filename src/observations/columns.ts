/** Decides which column of a table is what: by `--columns`, by the names in the header, by the column list in a comment, by position. */
import type { IssueList } from './issues.js';
import { errorRank, instrumentRank, qualityRank, readLabel, velocityRank } from './labels.js';
import { readCell } from './numbers.js';
import { didYouMean, plainWord } from './suggest.js';
import type { TextTable } from './table-text.js';
import { quoted, withoutControls } from './text.js';
import { readTimeLabel } from './time-label.js';
import { timeScaleError } from './time-scale.js';
import type { ColumnReading, TableNotice, TableRequest } from './types.js';

export type Meaning = Exclude<ColumnReading['meaning'], 'kept'>;
const MEANINGS: readonly Meaning[] = ['time', 'velocity', 'velocity-error', 'instrument', 'quality'];
const NEEDED: readonly Meaning[] = ['time', 'velocity', 'velocity-error'];

export interface ColumnPlan {
  /** Index of the column (from 0) for each meaning that was found. */
  readonly of: ReadonlyMap<Meaning, number>;
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

/**
 * @returns `null` when a needed column is missing or ambiguous; the issues say which
 */
export function planColumns(
  table: TextTable,
  request: TableRequest,
  issues: IssueList,
  notices: TableNotice[],
): ColumnPlan | null {
  const descriptions = descriptionsOf(table);
  let labels = table.labels;
  let source = table.labelsFrom === 'comment' ? 'header in a comment' : 'header name';
  if (
    labels === null &&
    Array.from({ length: table.width }, (_, index) => descriptions.has(index)).every(Boolean)
  ) {
    labels = Array.from({ length: table.width }, (_, index) =>
      descriptions.get(index)!.text.split('=')[0]!.trim(),
    );
    source = 'column list in the comments';
  }
  const of = new Map<Meaning, number>();
  const known = new Map<number, string>();
  const assign = (meaning: Meaning, index: number, how: string): void => {
    of.set(meaning, index);
    known.set(index, how);
  };
  const before = issues.count;
  for (const meaning of MEANINGS) {
    const wanted = request.columns[meaning];
    if (wanted === undefined) continue;
    const index = findColumn(wanted, labels, table, meaning, issues);
    if (index === null) continue;
    const other = [...of].find(([, taken]) => taken === index);
    if (other === undefined) assign(meaning, index, '--columns');
    else
      issues.add({
        code: 'column-twice',
        field: meaning,
        message: `column ${quoted(wanted)} was named both for ${other[0]} and for ${meaning}`,
      });
  }
  if (labels !== null) recogniseNames(labels, source, of, assign, issues, notices);
  else if (of.size === 0) assignByPosition(table, assign, notices);
  const isTextQuality =
    of.has('quality') && !request.columns.quality && !isNumeric(table, of.get('quality')!);
  if (isTextQuality) {
    const index = of.get('quality')!;
    notices.push({
      code: 'quality-not-used',
      message: `column ${index + 1} looks like a quality column but holds text: kept, and no row is left out`,
      lines: [],
    });
    of.delete('quality');
    known.delete(index);
  }
  if (issues.count === before) reportMissing(of, labels, table, issues);
  return issues.count > before ? null : { of, known, labels, descriptions };
}

function findColumn(
  wanted: string,
  labels: readonly string[] | null,
  table: TextTable,
  meaning: Meaning,
  issues: IssueList,
): number | null {
  const names = labels ?? [];
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
    labels === null
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

type Assign = (meaning: Meaning, index: number, how: string) => void;

function recogniseNames(
  labels: readonly string[],
  source: string,
  of: Map<Meaning, number>,
  assign: Assign,
  issues: IssueList,
  notices: TableNotice[],
): void {
  const read = labels.map(readLabel);
  const choose = (meaning: Meaning, rankOf: (index: number) => number | null): void => {
    if (of.has(meaning)) return;
    const taken = new Set(of.values());
    const candidates = labels.flatMap((_, index) => {
      const rank = taken.has(index) ? null : rankOf(index);
      return rank === null ? [] : [{ index, rank }];
    });
    candidates.sort((a, b) => a.rank - b.rank || a.index - b.index);
    const [best, second] = candidates;
    if (best === undefined) return;
    const names = candidates.map(({ index }) => quoted(labels[index]!)).join(', ');
    if (second?.rank === best.rank && (NEEDED.includes(meaning) || meaning === 'instrument')) {
      const hint = `say which with --columns ${meaning}=${best.index + 1} (a position or a label)`;
      issues.add({
        code: 'ambiguous-column',
        field: meaning,
        message: `several columns may be the ${meaning}: ${names}`,
        hint,
      });
      return;
    }
    assign(meaning, best.index, source);
    if (second !== undefined) {
      notices.push({
        code: 'several-columns',
        message: `several columns may be the ${meaning} (${names}); ${quoted(labels[best.index]!)} was taken`,
        lines: [],
      });
    }
  };
  choose('time', (index) => {
    const label = readTimeLabel(labels[index]!);
    if (label === null) return null;
    return timeScaleError(label.scale).maximumSeconds + (label.scale === 'unknown' ? 1000 : 0);
  });
  choose('velocity', (index) => velocityRank(read[index]!.word));
  const velocity = of.get('velocity');
  choose('velocity-error', (index) =>
    errorRank(read[index]!.word, velocity === undefined ? '' : read[velocity]!.word),
  );
  choose('instrument', (index) => instrumentRank(read[index]!.word));
  choose('quality', (index) => qualityRank(read[index]!.word));
}

function isNumeric(table: TextTable, index: number): boolean {
  const sample = table.rows.slice(0, 100);
  return sample.filter((row) => readCell(row.cells[index]!).kind === 'text').length <= sample.length / 2;
}

/** A headerless table: three columns of numbers are time, velocity and error; one further column of text is the instrument. */
function assignByPosition(table: TextTable, assign: Assign, notices: TableNotice[]): void {
  const indices = Array.from({ length: table.width }, (_, index) => index);
  const numeric = indices.filter((index) => isNumeric(table, index));
  const text = indices.filter((index) => !numeric.includes(index));
  if (numeric.length !== 3 || text.length > 1) return;
  for (const [place, meaning] of NEEDED.entries())
    assign(meaning, numeric[place]!, 'position (headerless table)');
  if (text.length === 1) assign('instrument', text[0]!, 'position (headerless table)');
  const list = numeric.map((index) => index + 1).join(', ');
  const instrument = text.length === 1 ? `, column ${text[0]! + 1} as the instrument` : '';
  notices.push({
    code: 'headerless',
    message: `the table has no header: columns ${list} were read as time, velocity and error${instrument}`,
    lines: [],
  });
}

function reportMissing(
  of: ReadonlyMap<Meaning, number>,
  labels: readonly string[] | null,
  table: TextTable,
  issues: IssueList,
): void {
  const missing = NEEDED.filter((meaning) => !of.has(meaning));
  if (missing.length === 0) return;
  const line = table.rows[0]?.line ?? null;
  if (labels === null) {
    issues.add({
      code: 'columns-unknown',
      line,
      message: `the table has no header and ${table.width} columns; only three columns of numbers (time, velocity, error), with at most one column of text, are understood without a header`,
      hint: 'name the columns: --columns time=1,velocity=2,velocity-error=3',
    });
    return;
  }
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
