import { delimitedFormat, isCommon, roughCells } from './delimited.js';
import type { TableFormat } from './format.js';

/**
 * One tab between cells. Tabs used as blanks (in runs, which leaves cells that are empty in every line, or mixed with blanks
 * between numbers or in the header) are left to the blank-separated format.
 */
export const tabFormat: TableFormat = delimitedFormat('tab', '\t', (sample) => {
  if (!isCommon(sample, '\t') || !sample[0]!.includes('\t')) return false;
  const mixed = sample.filter((line) => /[-+\d.] +[-+\d.]/.test(line) && /^\s*[-+.\d]/.test(line));
  if (mixed.length > sample.length / 2) return false;
  const rows = sample.map((line) => roughCells(line, '\t'));
  const width = Math.max(...rows.map((cells) => cells.length));
  for (let index = 0; index < width - 1; index++) {
    if (rows.every((cells) => (cells[index] ?? '') === '')) return false;
  }
  return true;
});
