/** A text file as a `SourceTable`: recognised from its head, and read line by line into arrays, however long it is. */
import { IssueList } from './issues.js';
import { readCell } from './numbers.js';
import { quickNumber } from './quick-number.js';
import { MOST_ODD_CELLS, type OddCell, type SourceColumns, type SourceTable } from './source-table.js';
import { LONGEST_LINE, readTableText, type TextTable } from './table-text.js';
import { counted } from './text.js';

/** Rows that recognition looks at. */
const SAMPLE_ROWS = 400;
/** Numbers kept of one table: 8 bytes each. */
const MOST_NUMBERS = 32e6;

/** Of rows with another number of cells; one cause usually makes thousands. */
const MOST_RAGGED_NAMED = 30;

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const QUOTE = 34;
const HASH = 35;
const BLANK = 32;

/** Place behind the last character of the line that begins at `start`. */
function lineEnd(text: string, start: number): number {
  let at = start;
  for (; at < text.length; at++) {
    const code = text.charCodeAt(at);
    if (code === LINE_FEED || code === CARRIAGE_RETURN) break;
  }
  return at;
}

/** Where the next line begins, given the end of this one: CR LF is one line end. */
function nextLine(text: string, end: number): number {
  return text.charCodeAt(end) === CARRIAGE_RETURN && text.charCodeAt(end + 1) === LINE_FEED
    ? end + 2
    : end + 1;
}

/** First character that is no blank. */
function firstInk(text: string, start: number, end: number): number {
  let at = start;
  while (at < end && text.charCodeAt(at) <= 32) at++;
  return at;
}

/** The text of a line, counted from 1. */
function lineNumber(text: string, wanted: number): string {
  let start = 0;
  for (let line = 1; line < wanted && start < text.length; line++)
    start = nextLine(text, lineEnd(text, start));
  return text.slice(start, lineEnd(text, start));
}

/** The first lines of a text: its comments, header and `SAMPLE_ROWS` rows. */
function headOf(text: string): string {
  let rows = 0;
  let start = 0;
  while (start < text.length) {
    const end = lineEnd(text, start);
    const ink = firstInk(text, start, end);
    if (ink < end && text.charCodeAt(ink) !== HASH && ++rows > SAMPLE_ROWS) return text.slice(0, start);
    start = nextLine(text, end);
  }
  return text;
}

/**
 * Recognises a text from its first rows; problems that leave nothing to go on with are added to `issues`.
 *
 * @returns `null` when it is no table (the issues say why)
 */
export function sourceOfText(text: string, issues: IssueList): SourceTable | null {
  const scratch = new IssueList(issues.file);
  const sample = readTableText(headOf(text), scratch);
  const problems = scratch.list();
  if (sample === null || sample.rows.length === 0 || problems.some((issue) => issue.code === 'not-a-table')) {
    for (const issue of problems) issues.add(issue);
    return null;
  }
  return {
    sample,
    placeOf: (line, column) => sample.format.columnOf(lineNumber(text, line), column),
    columns: (numbers, texts, found) => new TextScan(text, sample, numbers, texts, found).run(),
  };
}

class TextScan {
  private readonly lines: Uint32Array;
  private readonly numberArrays: Float64Array[];
  private readonly textArrays: string[][];
  private readonly odd: OddCell[] = [];
  /** Begin and end of each cell of the present line. */
  private readonly begins: Int32Array;
  private readonly ends: Int32Array;
  /** Code of the separating character; `null` needs the format's own splitting for every line. */
  private readonly separator: number | null;
  private rows = 0;
  private ragged = 0;

  constructor(
    private readonly text: string,
    private readonly table: TextTable,
    private readonly numbers: readonly number[],
    private readonly texts: readonly number[],
    private readonly issues: IssueList,
  ) {
    this.separator = table.format.separator?.charCodeAt(0) ?? null;
    const capacity = this.countLines();
    if (capacity * numbers.length > MOST_NUMBERS)
      issues.add({
        code: 'too-large',
        message: `the table has ${capacity} lines and ${counted(numbers.length, 'column')} of numbers; at most ${MOST_NUMBERS / 1e6} million numbers are kept`,
        hint: 'leave out columns that are not needed, or split the table',
      });
    const room = issues.count > 0 ? 0 : capacity;
    this.lines = new Uint32Array(room);
    this.numberArrays = numbers.map(() => new Float64Array(room));
    this.textArrays = texts.map(() => []);
    this.begins = new Int32Array(table.width + 2);
    this.ends = new Int32Array(table.width + 2);
  }

  run(): SourceColumns {
    if (this.lines.length > 0) this.scan();
    this.judgeRagged();
    return {
      rows: this.rows,
      lines: this.lines.subarray(0, this.rows),
      numbers: new Map(
        this.numbers.map((column, place) => [column, this.numberArrays[place]!.subarray(0, this.rows)]),
      ),
      texts: new Map(this.texts.map((column, place) => [column, this.textArrays[place]!])),
      odd: this.odd,
    };
  }

  private judgeRagged(): void {
    const { ragged, table } = this;
    const all = this.rows + ragged;
    if (ragged > 3 && ragged > all / 2)
      this.issues.add({
        code: 'not-a-table',
        message: `this does not look like a table: ${ragged} of ${all} rows do not have ${table.width} columns`,
        hint: 'comments begin with #; text that contains the separator belongs in double quotes',
      });
    else if (ragged > MOST_RAGGED_NAMED)
      this.issues.add({
        code: 'ragged-row',
        message: `${ragged - MOST_RAGGED_NAMED} further rows do not have ${table.width} columns`,
      });
  }

  private countLines(): number {
    let lines = 0;
    for (let start = 0; start < this.text.length; lines++)
      start = nextLine(this.text, lineEnd(this.text, start));
    return lines;
  }

  private scan(): void {
    const { text, table } = this;
    let line = 0;
    for (let start = 0; start < text.length;) {
      line++;
      const end = lineEnd(text, start);
      if (line >= table.firstLine) {
        const ink = firstInk(text, start, end);
        if (ink < end && text.charCodeAt(ink) !== HASH) {
          if (end - start > LONGEST_LINE) {
            this.issues.add({ code: 'line-too-long', line, message: `the line has ${end - start} characters; at most ${LONGEST_LINE} are read`, hint: 'is this a table?' }); // prettier-ignore
            return;
          }
          this.readLine(start, end, line);
        }
      }
      start = nextLine(text, end);
    }
  }

  private readLine(start: number, end: number, line: number): void {
    const count = this.cut(start, end);
    if (count < 0) this.readUnusualLine(start, end, line);
    else if (this.fits(count, this.begins[count - 1] === this.ends[count - 1], line)) {
      for (const [place, column] of this.numbers.entries())
        this.keepNumber(place, column, this.text, this.begins[column]!, this.ends[column]!, start);
      for (const [place, column] of this.texts.entries())
        this.textArrays[place]!.push(this.text.slice(this.begins[column], this.ends[column]));
      this.lines[this.rows++] = line;
    }
  }

  /** Finds the cells of a line; -1 when it holds quotation marks or a comment, and needs the format's own splitting. */
  private cut(start: number, end: number): number {
    const { text, separator, begins, ends, table } = this;
    if (separator === null) return -1;
    const isBlanks = separator === BLANK;
    let count = 0;
    let begin = start;
    for (let at = start; at <= end; at++) {
      const code = at === end ? separator : text.charCodeAt(at);
      if (code === QUOTE || code === HASH) return -1;
      const isEnd = isBlanks ? code <= 32 : code === separator;
      if (!isEnd) continue;
      if (!isBlanks || at > begin) {
        if (count <= table.width + 1) {
          begins[count] = begin;
          ends[count] = at;
          if (!isBlanks) this.trim(count);
        }
        count++;
      }
      begin = at + 1;
    }
    return count;
  }

  private trim(cell: number): void {
    const { text, begins, ends } = this;
    let [begin, end] = [begins[cell]!, ends[cell]!];
    while (begin < end && text.charCodeAt(begin) <= 32) begin++;
    while (end > begin && text.charCodeAt(end - 1) <= 32) end--;
    begins[cell] = begin;
    ends[cell] = end;
  }

  private fits(count: number, lastIsEmpty: boolean, line: number): boolean {
    const { width, labels } = this.table;
    if (count === width || (count === width + 1 && lastIsEmpty)) return true;
    this.ragged++;
    if (this.ragged <= MOST_RAGGED_NAMED)
      this.issues.add({
        code: 'ragged-row',
        line,
        message: `found ${counted(count, 'column')}; ${labels === null ? 'most rows have' : 'the header has'} ${width}`,
        hint: 'text that contains the separator belongs in double quotes',
      });
    return false;
  }

  private readUnusualLine(start: number, end: number, line: number): void {
    const { rows, broken } = this.table.format.split([{ number: line, text: this.text.slice(start, end) }]);
    for (const { message } of broken) this.issues.add({ code: 'broken-row', line, message });
    const cells = rows[0]?.cells;
    if (cells === undefined || !this.fits(cells.length, cells.at(-1) === '', line)) return;
    for (const [place, column] of this.numbers.entries())
      this.keepNumber(place, column, cells[column]!, 0, cells[column]!.length, start);
    for (const [place, column] of this.texts.entries()) this.textArrays[place]!.push(cells[column]!);
    this.lines[this.rows++] = line;
  }

  private keepNumber(
    place: number,
    column: number,
    text: string,
    begin: number,
    end: number,
    lineStart: number,
  ): void {
    let value = quickNumber(text, begin, end);
    if (value !== value && end > begin) {
      const cell = text.slice(begin, end);
      const read = readCell(cell);
      if (read.kind === 'number') value = read.value;
      else if (read.kind !== 'absent' && this.odd.length < MOST_ODD_CELLS) {
        const lineText = this.text.slice(lineStart, lineEnd(this.text, lineStart));
        this.odd.push({
          row: this.rows, column, kind: read.kind, text: cell.slice(0, 80), place: this.table.format.columnOf(lineText, column),
        }); // prettier-ignore
      }
    }
    this.numberArrays[place]![this.rows] = value;
  }
}
