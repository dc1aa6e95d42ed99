/** Light-curve tables as one series for the search for dips. */
import { median } from '../../numerics/summary.js';
import type { LightCurveTable } from '../../observations/photometry-types.js';
import type { DipData } from './types.js';

/** With more points than this, neighbours are averaged: the search needs several points in the shortest dip, not thousands. */
const MOST_POINTS = 250_000;
/** Averages are no longer than this, a sixth of the shortest dips that are searched; longer ones would flatten them. */
const LONGEST_AVERAGE_DAYS = 0.004;
/** An average does not reach across a distance of this many usual steps. */
const GAP_STEPS = 1.5;

/** The series, and which rows of which table each of its points is made of. */
export interface JoinedDipData extends DipData {
  readonly segmentOf: Uint16Array;
  readonly firstRow: Uint32Array;
  readonly rowCount: Uint16Array;
  /** Neighbours per point, at most. */
  readonly averaged: number;
}

/** A run of neighbouring rows of one table. */
interface Run {
  readonly table: number;
  readonly from: number;
  readonly to: number;
  readonly timeDays: number;
}

/**
 * Joins tables in order of time; each keeps its own trend and noise through `segmentOf`.
 *
 * @param epochBjdTdb - day that times are counted from
 */
export function dipDataOf(tables: readonly LightCurveTable[], epochBjdTdb: number): JoinedDipData {
  const total = tables.reduce((sum, table) => sum + table.timesBjdTdb.length, 0);
  const averaged = Math.max(1, Math.ceil(total / MOST_POINTS));
  const runs = tables.flatMap((table, index) => runsOf(table, index, epochBjdTdb, averaged));
  if (tables.length > 1) runs.sort((a, b) => a.timeDays - b.timeDays || a.table - b.table || a.from - b.from);
  const count = runs.length;
  const timesDays = new Float64Array(count);
  const flux = new Float64Array(count);
  const sigmas = new Float64Array(count);
  const segmentOf = new Uint16Array(count);
  const firstRow = new Uint32Array(count);
  const rowCount = new Uint16Array(count);
  for (let i = 0; i < count; i++) {
    const { table: index, from, to, timeDays } = runs[i]!;
    const table = tables[index]!;
    timesDays[i] = timeDays;
    segmentOf[i] = index;
    firstRow[i] = from;
    rowCount[i] = to - from;
    let [weights, sum] = [0, 0];
    for (let row = from; row < to; row++) {
      const weight = table.sigmas[row]! ** -2;
      weights += weight;
      sum += weight * table.flux[row]!;
    }
    flux[i] = to === from + 1 ? table.flux[from]! : sum / weights;
    sigmas[i] = to === from + 1 ? table.sigmas[from]! : 1 / Math.sqrt(weights);
  }
  return { timesDays, flux, sigmas, segmentOf, firstRow, rowCount, averaged };
}

function runsOf(table: LightCurveTable, index: number, epochBjdTdb: number, averaged: number): Run[] {
  const times = table.timesBjdTdb;
  const n = times.length;
  const step = averaged > 1 ? median(times.subarray(1).map((time, i) => time - times[i]!)) : 0;
  const most = averaged > 1 ? Math.max(1, Math.min(averaged, Math.floor(LONGEST_AVERAGE_DAYS / step))) : 1;
  const runs: Run[] = [];
  for (let from = 0; from < n;) {
    let to = from + 1;
    while (to < n && to < from + most && times[to]! - times[to - 1]! <= GAP_STEPS * step) to++;
    runs.push({ table: index, from, to, timeDays: 0.5 * (times[from]! + times[to - 1]!) - epochBjdTdb });
    from = to;
  }
  return runs;
}
