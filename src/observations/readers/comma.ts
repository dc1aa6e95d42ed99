import { delimitedFormat, isCommon, roughCells } from './delimited.js';
import type { TableFormat } from './format.js';

/**
 * `2459000.1,46.309,0.002`. A blank inside the first cell of data means that the commas stand elsewhere: in a note at the end of a
 * blank-separated row, or in decimal commas (`2459000,1 46,309 0,002`).
 */
export const commaFormat: TableFormat = delimitedFormat('comma', ',', (sample) => {
  if (!isCommon(sample, ',')) return false;
  const data = sample.filter((line) => /^\s*[-+.\d]/.test(line));
  const strange = data.filter((line) => {
    const words = line.trim().split(/\s+/);
    const decimalCommas = words.length > 1 && words.every((word) => /^[-+]?\d+(,\d+)?$/.test(word));
    return decimalCommas || /\S\s+\S/.test(roughCells(line, ',')[0] ?? '');
  });
  return strange.length <= data.length / 2;
});
