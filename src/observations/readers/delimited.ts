/** Comma, semicolon and tab separated tables: the splitting is csv-parse's, the places of cells are ours. */
import { CsvError, parse } from 'csv-parse/sync';
import type { VelocityTable } from '../types.js';
import type { DataLine, RawRow, TableFormat } from './format.js';

/** `12.5 # cloudy`: a comment behind the last number of a row. */
const TRAILING_COMMENT = /^([-+.\deEdD]+)\s+#.*$/s;

/** Start of each cell of a line (from 0), quotes respected. */
export function cellStarts(text: string, separator: string): number[] {
  const starts = [0];
  let insideQuotes = false;
  for (let at = 0; at < text.length; at++) {
    if (text[at] === '"') insideQuotes = !insideQuotes;
    else if (text[at] === separator && !insideQuotes) starts.push(at + 1);
  }
  return starts;
}

/** The cells of one line without csv-parse, for sniffing and places. */
export function roughCells(text: string, separator: string): string[] {
  const starts = cellStarts(text, separator);
  return starts.map((start, index) => text.slice(start, (starts[index + 1] ?? text.length + 1) - 1).trim());
}

/** Whether most lines (60 %: a table may have ragged rows) contain the separator outside quotes. */
export function isCommon(sample: readonly string[], separator: string): boolean {
  const having = sample.filter((line) => cellStarts(line, separator).length > 1);
  return having.length > 0 && having.length >= 0.6 * sample.length;
}

function parseText(text: string, separator: string): { record: string[]; info: { lines: number } }[] {
  return parse(text, {
    delimiter: separator,
    relax_column_count: true,
    relax_quotes: true,
    trim: true,
    info: true,
  }) as unknown as { record: string[]; info: { lines: number } }[];
}

function splitLines(lines: readonly DataLine[], separator: string): ReturnType<TableFormat['split']> {
  try {
    const rows: RawRow[] = [];
    let next = 0; // index of the line at which the next record begins; a quoted cell may hold line breaks
    for (const { record, info } of parseText(lines.map((line) => line.text).join('\n'), separator)) {
      const start = lines[next];
      if (start === undefined) break;
      next = info.lines;
      const last = record.length - 1;
      const comment = TRAILING_COMMENT.exec(record[last] ?? '');
      if (comment !== null) record[last] = comment[1]!;
      rows.push({ line: start.number, cells: record });
    }
    return { rows, broken: [] };
  } catch (cause) {
    if (!(cause instanceof CsvError)) throw cause;
    // The parser meets an open quotation mark at the end of the file; people look for the line that opens it.
    const open =
      cause.code === 'CSV_QUOTE_NOT_CLOSED'
        ? lines.find((line) => line.text.split('"').length % 2 === 0)
        : undefined;
    const culprit = open ?? lines[Number((cause as { lines?: unknown }).lines) - 1] ?? lines[0];
    const message =
      open === undefined
        ? 'the quotation marks of this row do not fit together'
        : 'a quotation mark is opened here and never closed';
    return { rows: [], broken: [{ line: culprit?.number ?? 1, message }] };
  }
}

/** A format with one separating character. */
export function delimitedFormat(
  delimiter: VelocityTable['delimiter'],
  separator: string,
  looksLike: (sample: readonly string[]) => boolean,
): TableFormat {
  return {
    delimiter,
    separator,
    looksLike,
    split: (lines) => splitLines(lines, separator),
    splitHeader: (text) =>
      splitLines([{ number: 1, text }], separator).rows[0]?.cells ?? roughCells(text, separator),
    columnOf(text, index) {
      const start = cellStarts(text, separator)[index] ?? text.length;
      return start + (/^ */.exec(text.slice(start))?.[0].length ?? 0) + 1;
    },
  };
}
