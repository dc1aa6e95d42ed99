import { delimitedFormat, isCommon } from './delimited.js';
import type { TableFormat } from './format.js';

/** `2459000.1;46.309;0.002`. Tried first: such tables may hold decimal commas, which are then said and not split. */
export const semicolonFormat: TableFormat = delimitedFormat('semicolon', ';', (sample) =>
  isCommon(sample, ';'),
);
