/** `residuals.csv`: each velocity beside what the model says about it, and where it came from. */
import type { Solved } from '../solving/types.js';
import { csvLines, csvText } from './escape.js';
import { machineFixed, machineNumber } from './numbers.js';

/** Micrometres per second: far below any measurement, far above the rounding noise of a change of units. */
const VELOCITY_PLACES = 6;

const HEADER = 'time_days,velocity_mps,error_mps,instrument,model_mps,residual_mps,file,line'.split(',');

/**
 * One row per velocity, sorted by time. `time_days` are full Julian dates in the time scale of the solution;
 * `error_mps` is the error of the table, without jitter; `model_mps` includes the zero point of the instrument.
 */
export function residualsTable(solved: Solved): string {
  const { velocities, residualsMps } = solved;
  const rows: string[][] = [HEADER];
  for (let row = 0; row < velocities.count; row += 1) {
    const velocityMps = velocities.velocitiesMps[row]!;
    const residualMps = residualsMps[row]!;
    rows.push([
      machineNumber(velocities.timesBjdTdb[row]!),
      machineFixed(velocityMps, VELOCITY_PLACES),
      machineFixed(velocities.sigmasMps[row]!, VELOCITY_PLACES),
      csvText(velocities.instruments[velocities.instrumentOf[row]!] ?? ''),
      machineFixed(velocityMps - residualMps, VELOCITY_PLACES),
      machineFixed(residualMps, VELOCITY_PLACES),
      csvText(velocities.tables[velocities.tableOf[row]!]?.path ?? ''),
      String(velocities.lines[row]!),
    ]);
  }
  return csvLines(rows);
}
