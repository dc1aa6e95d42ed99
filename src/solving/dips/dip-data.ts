/** Light-curve tables as one series for the search for dips. */
import type { LightCurveTable } from '../../observations/photometry-types.js';
import type { DipData } from './types.js';

/**
 * Joins tables in order of time; each keeps its own trend and noise through `segmentOf`.
 *
 * @param epochBjdTdb - day that times are counted from
 */
export function dipDataOf(tables: readonly LightCurveTable[], epochBjdTdb: number): DipData {
  const count = tables.reduce((sum, table) => sum + table.timesBjdTdb.length, 0);
  const times = new Float64Array(count);
  const tableOf = new Uint16Array(count);
  const rowOf = new Uint32Array(count);
  let at = 0;
  tables.forEach((table, index) => {
    for (let row = 0; row < table.timesBjdTdb.length; row++, at++) {
      times[at] = table.timesBjdTdb[row]! - epochBjdTdb;
      tableOf[at] = index;
      rowOf[at] = row;
    }
  });
  const order = Uint32Array.from({ length: count }, (_, i) => i);
  let ascending = true;
  for (let i = 1; i < count && ascending; i++) ascending = times[i]! >= times[i - 1]!;
  if (!ascending) order.sort((a, b) => times[a]! - times[b]! || a - b);
  const flux = new Float64Array(count);
  const sigmas = new Float64Array(count);
  const timesDays = new Float64Array(count);
  const segmentOf = new Uint16Array(count);
  for (let i = 0; i < count; i++) {
    const from = order[i]!;
    const table = tables[tableOf[from]!]!;
    timesDays[i] = times[from]!;
    flux[i] = table.flux[rowOf[from]!]!;
    sigmas[i] = table.sigmas[rowOf[from]!]!;
    segmentOf[i] = tableOf[from]!;
  }
  return { timesDays, flux, sigmas, segmentOf };
}
