/** `light-curve.csv`: each point of a light curve that was fitted, beside what the model says about it. */
import type { SolvedPhotometry } from '../solving/transit-types.js';
import { csvLines, csvText } from './escape.js';
import { machineFixed, machineNumber } from './numbers.js';

/** A billionth of the flux: a thousandth of what the best light curves reach. */
const FLUX_PLACES = 9;

const HEADER = 'time_days,flux,error,baseline,transit_model,residual,table,band,cycle'.split(',');

/**
 * One row per point, table after table. `flux` is relative; `error` holds the fitted jitter; the model of the flux is
 * `baseline` times `transit_model`, and `residual` is the flux less that. `cycle` names the transits that the point is
 * near to, e.g. `b 12` or `b 12; c 3`.
 */
export function lightCurveTable({ fitted }: SolvedPhotometry): string {
  const rows: string[][] = [HEADER];
  for (const table of fitted) {
    const [name, band] = [csvText(table.name), csvText(table.band)];
    const cycles = new Array<string>(table.flux.length).fill('');
    for (const { start, end, events } of table.segments)
      cycles.fill(csvText(events.map(({ letter, cycle }) => `${letter} ${cycle}`).join('; ')), start, end);
    for (let row = 0; row < table.flux.length; row += 1) {
      const [flux, baseline, transit] = [table.flux[row]!, table.baseline[row]!, table.transit[row]!];
      rows.push([
        machineNumber(table.timesBjdTdb[row]!),
        machineFixed(flux, FLUX_PLACES),
        machineFixed(table.sigmas[row]!, FLUX_PLACES),
        machineFixed(baseline, FLUX_PLACES),
        machineFixed(transit, FLUX_PLACES),
        machineFixed(flux - baseline * transit, FLUX_PLACES),
        name,
        band,
        cycles[row]!,
      ]);
    }
  }
  return csvLines(rows);
}
