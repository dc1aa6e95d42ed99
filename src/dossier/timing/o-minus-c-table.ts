/** `o-minus-c.csv`: each mid-time beside the ephemeris, and where it came from. */
import type { TimingSolved } from '../../solving/timing/types.js';
import { csvLines, csvText } from '../escape.js';
import { machineFixed, machineNumber } from '../numbers.js';

/** A ten-thousandth of a second. */
const MINUTE_PLACES = 6;
const HEADER = 'cycle,kind,time_days,error_min,o_minus_c_min,model_min,residual_min,source,file,line'.split(
  ',',
);

/**
 * One row per mid-time, sorted by time. `o_minus_c_min` is against the linear ephemeris (an occultation half a period after its
 * transit), `model_min` the preferred model against the same, `residual_min` observed minus preferred model; `error_min` is the
 * error of the table, without jitter.
 */
export function oMinusCTable({ rows }: TimingSolved): string {
  const lines: string[][] = [HEADER];
  for (let row = 0; row < rows.count; row++) {
    const observed = rows.oMinusCMinutes[row]!;
    const residual = rows.residualsMinutes[row]!;
    lines.push([
      String(rows.cycles[row]!),
      rows.isOccultation[row] === 1 ? 'occultation' : 'transit',
      machineNumber(rows.timesBjdTdb[row]!),
      machineFixed(rows.sigmasMinutes[row]!, MINUTE_PLACES),
      machineFixed(observed, MINUTE_PLACES),
      machineFixed(observed - residual, MINUTE_PLACES),
      machineFixed(residual, MINUTE_PLACES),
      csvText(rows.sources[row] ?? ''),
      csvText(rows.paths[row] ?? ''),
      String(rows.lines[row]!),
    ]);
  }
  return csvLines(lines);
}
