/** `mid-times.csv`: all mid-times against the ephemeris of the solution. */
import type { SolvedPhotometry } from '../solving/transit-types.js';
import { csvLines, csvText } from './escape.js';
import { machineFixed, machineNumber } from './numbers.js';

/** A hundredth of a millisecond, in days and in minutes. */
const DAY_PLACES = 10;
const MINUTE_PLACES = 6;

const HEADER = 'companion,cycle,kind,time_days,error_days,o_minus_c_min,ephemeris_error_min,source'.split(
  ',',
);

/**
 * One row per mid-time, companion after companion. `kind` is `transit` or `occultation`; `o_minus_c_min` is the time less
 * that of the reported ephemeris, whose own error at this cycle is `ephemeris_error_min`; `source` is what the table says,
 * or the name of the light curve.
 */
export function midTimesTable({ midTimes }: SolvedPhotometry): string {
  const rows: string[][] = [HEADER];
  for (const one of midTimes)
    for (let row = 0; row < one.cycles.length; row += 1)
      rows.push([
        csvText(one.letter),
        String(one.cycles[row]!),
        one.isOccultation[row] === 1 ? 'occultation' : 'transit',
        machineNumber(one.timesBjdTdb[row]!),
        machineFixed(one.sigmasDays[row]!, DAY_PLACES),
        machineFixed(one.oMinusCMinutes[row]!, MINUTE_PLACES),
        machineFixed(one.ephemerisSigmaMinutes[row]!, MINUTE_PLACES),
        csvText(one.sources[row] ?? ''),
      ]);
  return csvLines(rows);
}
