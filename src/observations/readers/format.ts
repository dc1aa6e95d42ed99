/** What a table format must offer; one file per format, listed in `index.ts`. */
import type { VelocityTable } from '../types.js';

/** A line of the file with its number (from 1), neither blank nor a comment. */
export interface DataLine {
  readonly number: number;
  readonly text: string;
}

export interface RawRow {
  readonly line: number;
  readonly cells: readonly string[];
}

export interface TableFormat {
  readonly delimiter: VelocityTable['delimiter'];
  /**
   * The one character between cells, a blank for runs of blanks: long tables are then read without `split`, except lines with
   * quotation marks or comments in them. `null` where cells are told apart otherwise.
   */
  readonly separator: string | null;
  /** Whether these lines (a sample of the first ones) look like this format. The first format of the list that says yes is taken. */
  looksLike(sample: readonly string[]): boolean;
  /** All rows in order. `broken` names lines that could not be split. */
  split(lines: readonly DataLine[]): {
    readonly rows: readonly RawRow[];
    readonly broken: readonly { readonly line: number; readonly message: string }[];
  };
  /** Cells of one header line; `expected` is the number of cells of the data rows, to rejoin a label such as `RV (km/s)`. */
  splitHeader(text: string, expected: number): readonly string[];
  /** Place in the line (from 1) at which cell `index` (from 0) begins; the end of the line when there is no such cell. */
  columnOf(text: string, index: number): number;
}
