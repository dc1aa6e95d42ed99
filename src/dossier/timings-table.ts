/** Mid-times of the single transits of the light curves, as a table that `timing` reads. */
import type { TransitEventRecord } from '../solving/transit-types.js';
import type { Solved } from '../solving/types.js';
import type { DossierFile } from './write-dossier.js';
import { csvLines, csvText } from './escape.js';
import { machineFixed, machineNumber } from './numbers.js';

const HEADER = ['mid-time (BJD_TDB)', 'error (d)', 'cycle', 'source'];
/** A hundredth of a millisecond, in days. */
const DAY_PLACES = 10;

/**
 * One table per companion: one row per transit that could be timed by itself, in order of time.
 *
 * @param name - file name; with several transiting companions its stem gets their letters, since a table of mid-times belongs to one
 */
export function timingsTables({ record }: Solved, name: string): DossierFile[] {
  const events = record.photometry?.events ?? [];
  const letters = record.companions
    .map(({ letter }) => letter)
    .filter((letter) => events.some((event) => event.letter === letter));
  if (letters.length === 0) return [{ name, bytes: csvLines([HEADER]) }];
  const dot = name.lastIndexOf('.');
  const [stem, ending] = dot > 0 ? [name.slice(0, dot), name.slice(dot)] : [name, ''];
  return letters.map((letter) => ({
    name: letters.length === 1 ? name : `${stem}-${letter}${ending}`,
    bytes: tableOf(events.filter((event) => event.letter === letter)),
  }));
}

function tableOf(events: readonly TransitEventRecord[]): string {
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
