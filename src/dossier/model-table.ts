/** `model.csv`: the velocity model on a time grid that follows every periastron passage. */
import type { OrbitElements } from '../orbit/elements.js';
import { evaluateVelocity } from '../signals/evaluate-velocity.js';
import type { Solved } from '../solving/types.js';
import { csvLines } from './escape.js';
import { machineFixed } from './numbers.js';

/** Equal steps of true anomaly per revolution: the velocity is a sinusoid of that angle, so none of its bends is missed. */
const STEPS_PER_ORBIT = 72;
const STEPS_OVER_SPAN = 240;
/** Longer grids are cut to a stretch around the middle of the data (`modelGrid` says which). */
const MOST_ROWS = 20_000;
const MARGIN_OF_SPAN = 0.05;
/** 1e-5 d is about a second. */
const TIME_PLACES = 5;

export interface ModelGrid {
  readonly timesBjdTdb: Float64Array;
  /** False when orbits are so many that the grid covers only the middle part of the data. */
  readonly whole: boolean;
}

function timeSincePeriastronDays(orbit: OrbitElements, trueAnomalyRad: number): number {
  const e = orbit.eccentricity;
  const eccentricAnomalyRad =
    2 *
    Math.atan2(
      Math.sqrt(1 - e) * Math.sin(trueAnomalyRad / 2),
      Math.sqrt(1 + e) * Math.cos(trueAnomalyRad / 2),
    );
  const meanAnomalyRad = eccentricAnomalyRad - e * Math.sin(eccentricAnomalyRad);
  return (meanAnomalyRad / (2 * Math.PI)) * orbit.periodDays;
}

function addOrbitTimes(times: Set<number>, orbit: OrbitElements, from: number, to: number): void {
  const firstOrbit = Math.floor((from - orbit.timePeriastronBjdTdb) / orbit.periodDays);
  const lastOrbit = Math.ceil((to - orbit.timePeriastronBjdTdb) / orbit.periodDays);
  for (let step = 0; step < STEPS_PER_ORBIT; step += 1) {
    const offsetDays = timeSincePeriastronDays(orbit, -Math.PI + (2 * Math.PI * step) / STEPS_PER_ORBIT);
    for (let number = firstOrbit; number <= lastOrbit; number += 1) {
      const time = orbit.timePeriastronBjdTdb + number * orbit.periodDays + offsetDays;
      if (time >= from && time <= to) times.add(Number(machineFixed(time, TIME_PLACES)));
    }
  }
}

/** Times from 5 % of the span before the first observation to 5 % after the last, BJD_TDB, ascending, all different. */
export function modelGrid(solved: Solved): ModelGrid {
  const { timesBjdTdb, count } = solved.velocities;
  const first = timesBjdTdb[0] ?? solved.best.epochBjdTdb;
  const last = timesBjdTdb[count - 1] ?? first;
  const margin = Math.max(MARGIN_OF_SPAN * (last - first), 0.5);
  let from = first - margin;
  let to = last + margin;
  const rowsPerDay = solved.best.companions.reduce(
    (sum, orbit) => sum + STEPS_PER_ORBIT / orbit.periodDays,
    0,
  );
  const roomDays = (MOST_ROWS - STEPS_OVER_SPAN) / Math.max(rowsPerDay, Number.MIN_VALUE);
  const whole = to - from <= roomDays;
  if (!whole) {
    const middle = (first + last) / 2;
    from = middle - roomDays / 2;
    to = middle + roomDays / 2;
  }
  const times = new Set<number>();
  for (let step = 0; step <= STEPS_OVER_SPAN; step += 1)
    times.add(Number(machineFixed(from + ((to - from) * step) / STEPS_OVER_SPAN, TIME_PLACES)));
  for (const orbit of solved.best.companions) addOrbitTimes(times, orbit, from, to);
  return { timesBjdTdb: Float64Array.from(times).sort(), whole };
}

/**
 * Columns: `time_days`, `model_mps` (drift and all companions, without any zero point), `drift_mps`, and one
 * `companion_<letter>_mps` per companion; the parts add up to the model.
 */
export function modelTable(solved: Solved): string {
  const { best } = solved;
  const times = modelGrid(solved).timesBjdTdb;
  const total = evaluateVelocity(best, times);
  const drift = evaluateVelocity(best, times, { companions: [] });
  const parts = best.companions.map((_, index) =>
    evaluateVelocity(best, times, { companions: [index], drift: false }),
  );
  const rows: string[][] = [
    ['time_days', 'model_mps', 'drift_mps', ...best.letters.map((letter) => `companion_${letter}_mps`)],
  ];
  for (let row = 0; row < times.length; row += 1)
    rows.push([
      machineFixed(times[row]!, TIME_PLACES),
      machineFixed(total[row]!, 4),
      machineFixed(drift[row]!, 4),
      ...parts.map((part) => machineFixed(part[row]!, 4)),
    ]);
  return csvLines(rows);
}
