/** First pass over a table: lines, comments, format, header, rows of cells. No meaning yet. */
import type { IssueList } from './issues.js';
import { isNumberLike } from './numbers.js';
import { recogniseFormat, type DataLine, type RawRow, type TableFormat } from './readers/index.js';
import { counted, quoted } from './text.js';
import { velocityUnit } from './units.js';

export interface TextTable {
  readonly format: TableFormat;
  /** `null` in a headerless table. */
  readonly labels: readonly string[] | null;
  readonly labelsFrom: 'header' | 'comment' | 'none';
  /** Units of a second header line, by position (from 0); empty text where there is none. */
  readonly unitRow: readonly string[];
  /** Number of cells of a row. */
  readonly width: number;
  readonly rows: readonly RawRow[];
  /** Line of the first row of data, header and units behind it. */
  readonly firstLine: number;
  readonly comments: readonly DataLine[];
  /** Place in its line (from 1) of a cell. */
  columnOf(line: number, cell: number): number;
}

/** Limits that keep memory and time bounded whatever the file holds. */
export const MOST_LINES = 250_000;
export const LONGEST_LINE = 65_536;
export const MOST_CELLS = 500;
const MOST_COMMENTS = 2000;

/** Text of all lines, without their ends and without a byte order mark. */
function linesOf(text: string): string[] {
  return text.replace(/^\ufeff/, '').split(/\r\n|\n|\r/, MOST_LINES + 1);
}

/**
 * Splits a table; problems go to `issues`.
 *
 * @returns `null` when there is nothing to go on with (the issues say why)
 */
export function readTableText(text: string, issues: IssueList): TextTable | null {
  const lines = linesOf(text);
  if (lines.length > MOST_LINES) {
    issues.add({
      code: 'too-many-lines',
      message: `the file has more than ${MOST_LINES} lines`,
      hint: 'is this a table of velocities?',
    });
    return null;
  }
  const comments: DataLine[] = [];
  const data: DataLine[] = [];
  for (const [index, line] of lines.entries()) {
    const trimmed = line.trimStart();
    if (trimmed === '') continue;
    if (trimmed.startsWith('#')) {
      if (comments.length < MOST_COMMENTS)
        comments.push({ number: index + 1, text: trimmed.replace(/^#+/, '').trim().slice(0, 2000) });
    } else if (line.length > LONGEST_LINE) {
      issues.add({
        code: 'line-too-long',
        line: index + 1,
        message: `the line has ${line.length} characters; at most ${LONGEST_LINE} are read`,
        hint: 'is this a table?',
      });
      return null;
    } else if (trimmed.includes('\0')) {
      issues.add({
        code: 'binary-file',
        line: index + 1,
        message: 'the line contains a NUL byte: this is a binary file, not text',
      });
      return null;
    } else data.push({ number: index + 1, text: line });
  }
  if (data.length === 0) {
    issues.add({
      code: 'empty-file',
      message: comments.length > 0 ? 'the file has comments but no rows' : 'the file has no rows',
    });
    return null;
  }
  return arrange(data, comments, lines, issues);
}

function arrange(
  data: readonly DataLine[],
  comments: readonly DataLine[],
  lines: readonly string[],
  issues: IssueList,
): TextTable | null {
  const format = recogniseFormat(data);
  const { rows: all, broken } = format.split(data);
  for (const { line, message } of broken) issues.add({ code: 'broken-row', line, message });
  if (broken.length > 0 || all.length === 0) return null;
  const first = all[0]!.cells;
  const usual = usualWidth(all.length > 1 ? all.slice(1) : all);
  // `BJD - 2450000` in a blank-separated header is one label, not a number among labels.
  const candidate = first.length === usual ? first : format.splitHeader(data[0]!.text, usual);
  const hasHeader = !isNumberLike(first[0]!) && !candidate.some(isNumberLike);
  const { unitRow, start } = afterHeader(all, hasHeader ? 1 : 0);
  const rows = all.slice(start);
  if (rows.length === 0) {
    issues.add({
      code: 'no-rows',
      line: all[0]!.line,
      message: 'the table has a header but no rows',
      hint: `the header is ${quoted(lines[all[0]!.line - 1] ?? '')}`,
    });
    return null;
  }
  let labels: readonly string[] | null = hasHeader ? candidate : null;
  let labelsFrom: TextTable['labelsFrom'] = hasHeader ? 'header' : 'none';
  if (labels === null) {
    labels = headerInComment(comments, rows[0]!.line, format, usual);
    if (labels !== null) labelsFrom = 'comment';
  }
  const width = labels?.length ?? usual;
  const table: TextTable = {
    format, labels, labelsFrom, unitRow, width, comments, firstLine: rows[0]!.line,
    rows: evenRows(rows, width, labels !== null, issues),
    columnOf: (line, cell) => format.columnOf(lines[line - 1] ?? '', cell),
  }; // prettier-ignore
  if (width > MOST_CELLS) {
    issues.add({
      code: 'too-many-columns',
      line: rows[0]!.line,
      message: `the table has ${width} columns; at most ${MOST_CELLS} are read`,
    });
    return null;
  }
  return table;
}

/** Skips a line of units and a ruled line (`---`) under the header, as archives write them. */
function afterHeader(all: readonly RawRow[], from: number): { unitRow: readonly string[]; start: number } {
  let unitRow: readonly string[] = [];
  let start = from;
  while (from > 0 && start < Math.min(all.length, from + 3)) {
    const { cells } = all[start]!;
    if (cells.every((cell) => /^[-=+_]*$/.test(cell)) && cells.some((cell) => cell.length > 1)) start++;
    else if (unitRow.length === 0 && isUnitRow(cells)) {
      unitRow = cells;
      start++;
    } else break;
  }
  return { unitRow, start };
}

const UNIT_CELL = /^[[(]?(d(ays?)?|m?mag|ppm|e-\/s|adu)[\])]?$/i;

function isUnitRow(cells: readonly string[]): boolean {
  return (
    !cells.some(isNumberLike) && cells.some((cell) => velocityUnit(cell) !== null || UNIT_CELL.test(cell))
  );
}

/** Most frequent number of cells; the first of equals. */
function usualWidth(rows: readonly RawRow[]): number {
  const tally = new Map<number, number>();
  for (const row of rows) tally.set(row.cells.length, (tally.get(row.cells.length) ?? 0) + 1);
  return [...tally].sort((a, b) => b[1] - a[1])[0]![0];
}

/** The last comment before the first row that has as many words as a row has cells and none of them a number. */
function headerInComment(
  comments: readonly DataLine[],
  firstRow: number,
  format: TableFormat,
  width: number,
): readonly string[] | null {
  for (const comment of comments.filter((one) => one.number < firstRow).reverse()) {
    if (/^col(umn)?\b/i.test(comment.text)) continue;
    const labels = format.splitHeader(comment.text, width);
    if (labels.length === width && width > 1 && !labels.some(isNumberLike) && !isSentence(comment.text))
      return labels;
  }
  return null;
}

function isSentence(text: string): boolean {
  return /[.:;!?]$/.test(text) || /\b(the|of|from|with|and|is|are|for)\b/i.test(text);
}

/** Rows that have the right number of cells; the others become issues. An empty cell behind a last separator is let pass. */
function evenRows(
  rows: readonly RawRow[],
  width: number,
  hasLabels: boolean,
  issues: IssueList,
): readonly RawRow[] {
  const even: RawRow[] = [];
  const ragged: RawRow[] = [];
  for (const row of rows) {
    const cells =
      row.cells.length === width + 1 && row.cells[width] === '' ? row.cells.slice(0, width) : row.cells;
    if (cells.length === width) even.push({ line: row.line, cells });
    else ragged.push(row);
  }
  if (ragged.length > 3 && ragged.length > rows.length / 2) {
    const share = `${ragged.length} of ${rows.length} rows do not have ${width} columns`;
    issues.add({
      code: 'not-a-table',
      line: ragged[0]!.line,
      message: `this does not look like a table: ${share}`,
      hint: 'comments begin with #; text that contains the separator belongs in double quotes',
    });
    return even;
  }
  for (const { line, cells } of ragged) {
    const message = `found ${counted(cells.length, 'column')}; ${hasLabels ? 'the header has' : 'most rows have'} ${width}`;
    issues.add({
      code: 'ragged-row',
      line,
      message,
      hint: 'text that contains the separator belongs in double quotes',
    });
  }
  return even;
}
