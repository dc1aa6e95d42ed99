/** The table formats, in the order in which they are tried. A new format is one file here and one line below. */
import { blanksFormat } from './blanks.js';
import { commaFormat } from './comma.js';
import type { TableFormat } from './format.js';
import { semicolonFormat } from './semicolon.js';
import { tabFormat } from './tab.js';

export const TABLE_FORMATS: readonly TableFormat[] = [semicolonFormat, tabFormat, commaFormat, blanksFormat];

const SAMPLE_LINES = 40;

/** The first format that recognises the table's first lines; `blanks` takes whatever is left. */
export function recogniseFormat(lines: readonly { readonly text: string }[]): TableFormat {
  const sample = lines.slice(0, SAMPLE_LINES).map((line) => line.text);
  return TABLE_FORMATS.find((format) => format.looksLike(sample)) ?? blanksFormat;
}

export type { DataLine, RawRow, TableFormat } from './format.js';
