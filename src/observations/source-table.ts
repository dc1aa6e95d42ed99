/**
 * What a file gives before anything is understood: a sample for recognition, and its columns of numbers on request. Another
 * kind of file (a binary table of an archive, say) is one more maker of a `SourceTable`; what follows knows no formats.
 */
import type { IssueList } from './issues.js';
import type { TextTable } from './table-text.js';

/** A cell in a column of numbers that is neither a number nor absent. */
export interface OddCell {
  /** Index of the row, from 0. */
  readonly row: number;
  /** Index of the column, from 0. */
  readonly column: number;
  readonly kind: 'text' | 'infinite' | 'decimal-comma';
  /** As written, cut. */
  readonly text: string;
  /** Place in the line, from 1. */
  readonly place: number;
}

/** All data rows, in file order. */
export interface SourceColumns {
  readonly rows: number;
  /** Line in the file per row. */
  readonly lines: Uint32Array;
  /** By index of the column; NaN where there is no number. */
  readonly numbers: ReadonlyMap<number, Float64Array>;
  readonly texts: ReadonlyMap<number, readonly string[]>;
  /** In file order, at most `MOST_ODD_CELLS` of them. */
  readonly odd: readonly OddCell[];
}

export const MOST_ODD_CELLS = 100_000;

export interface SourceTable {
  /** Labels, units, comments, and the first rows. */
  readonly sample: TextTable;
  /** Place in its line (from 1) of a cell, for messages; `null` where the file has no lines. */
  placeOf(line: number, column: number): number | null;
  /** Reads the wanted columns of all rows; rows that do not fit the table go to the issues. */
  columns(numbers: readonly number[], texts: readonly number[], issues: IssueList): SourceColumns;
}
