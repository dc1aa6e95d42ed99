/** Mid-times of the single transits of the light curves, as a table that `timing` reads. */
import type { Solved } from '../solving/types.js';
import { csvLines, csvText } from './escape.js';
import { machineFixed, machineNumber } from './numbers.js';

const HEADER = ['mid-time (BJD_TDB)', 'error (d)', 'cycle', 'source'];
/** A hundredth of a millisecond, in days. */
const DAY_PLACES = 10;

/**
 * One row per transit that could be timed by itself, in order of time. Of several transiting companions only the first
 * one's: a table of mid-times belongs to one companion.
 */
export function timingsTable({ record }: Solved): string {
  const events = (record.photometry?.events ?? []).filter(
    ({ letter }) => letter === record.companions[0]?.letter,
  );
  const timed = events.filter(({ midTime }) => midTime.value !== null);
  timed.sort((a, b) => a.midTime.value! - b.midTime.value!);
  return csvLines([
    HEADER,
    ...timed.map(({ midTime, cycle, table }) => [
      machineNumber(midTime.value),
      machineFixed(midTime.sigma!, DAY_PLACES),
      String(cycle),
      csvText(table),
    ]),
  ]);
}
