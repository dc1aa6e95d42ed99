/** The model as a curve: sampled as finely as its bends need, or as a band where single cycles would be a blur. */
import { evaluateVelocity } from '../../signals/evaluate-velocity.js';
import type { VelocityModelPoint } from '../../signals/velocity-model.js';

/** More cycles than this across a two-column chart (less than 3 mm each) are not drawn one by one. */
export const MOST_CYCLES_DRAWN = 60;

const SEEDS_PER_ORBIT = 24;
const SEEDS_PER_SPAN = 48;
const MOST_PASSES = 10;

/** Model of the star's velocity between two times, zero points left out. */
export interface ModelCurve {
  /** Ascending, BJD_TDB, days. */
  readonly timesBjdTdb: Float64Array;
  /** m/s; equal arrays where the model is drawn as a line. */
  readonly lowMps: Float64Array;
  readonly highMps: Float64Array;
  /** Companions (indices) whose cycles are too many to draw: the band spans their whole range. Empty for a line. */
  readonly bandOf: readonly number[];
}

/** The model over an interval: a line, or a band around the slow part of the model. */
export function sampleModel(best: VelocityModelPoint, fromBjdTdb: number, toBjdTdb: number): ModelCurve {
  const span = toBjdTdb - fromBjdTdb;
  const indices = best.companions.map((_, index) => index);
  const fast = indices.filter((index) => span / best.companions[index]!.periodDays > MOST_CYCLES_DRAWN);
  const slow = indices.filter((index) => !fast.includes(index));
  const line = sampleCompanions(best, slow, true, fromBjdTdb, toBjdTdb);
  // cos(nu + omega) runs from -1 to 1 in each cycle, so the extremes of a Keplerian are known exactly.
  let below = 0;
  let above = 0;
  for (const index of fast) {
    const orbit = best.companions[index]!;
    const centre = orbit.semiAmplitudeMps * orbit.eccentricity * Math.cos(orbit.argPeriastronStarRad);
    below += centre - Math.abs(orbit.semiAmplitudeMps);
    above += centre + Math.abs(orbit.semiAmplitudeMps);
  }
  return {
    timesBjdTdb: line.timesBjdTdb,
    lowMps: line.velocitiesMps.map((value) => value + below),
    highMps: line.velocitiesMps.map((value) => value + above),
    bandOf: fast,
  };
}

/**
 * Part of the model sampled so that straight lines between the samples stay within 0.03 % of its range (0.1 CSS px).
 * Starts from equal steps of true anomaly of every companion, so that no periastron passage falls between two samples.
 *
 * @param companions - indices of those included
 * @param drift - include slope and curvature
 * @returns ascending times, days, and velocities, m/s, without zero points
 */
export function sampleCompanions(
  best: VelocityModelPoint,
  companions: readonly number[],
  drift: boolean,
  fromBjdTdb: number,
  toBjdTdb: number,
): { timesBjdTdb: Float64Array; velocitiesMps: Float64Array } {
  const seeds = seedTimes(best, companions, fromBjdTdb, toBjdTdb);
  const evaluate = (times: Float64Array): Float64Array =>
    evaluateVelocity(best, times, { companions, drift });
  let times = seeds;
  let values = evaluate(times);
  const tolerance = 0.0003 * range(values);
  let open: boolean[] = new Array<boolean>(Math.max(0, times.length - 1)).fill(tolerance > 0);
  for (let pass = 0; pass < MOST_PASSES && open.includes(true); pass += 1) {
    const middles: number[] = [];
    for (let i = 0; i < open.length; i += 1) if (open[i]!) middles.push((times[i]! + times[i + 1]!) / 2);
    const middleTimes = Float64Array.from(middles);
    const middleValues = evaluate(middleTimes);
    const nextTimes = new Float64Array(times.length + middles.length);
    const nextValues = new Float64Array(nextTimes.length);
    const nextOpen: boolean[] = [];
    let middle = 0;
    let out = 0;
    for (let i = 0; i < times.length; i += 1) {
      nextTimes[out] = times[i]!;
      nextValues[out++] = values[i]!;
      if (i === open.length) break;
      if (!open[i]!) {
        nextOpen.push(false);
        continue;
      }
      const bent = Math.abs(middleValues[middle]! - (values[i]! + values[i + 1]!) / 2) > tolerance;
      nextTimes[out] = middleTimes[middle]!;
      nextValues[out++] = middleValues[middle++]!;
      nextOpen.push(bent, bent);
    }
    times = nextTimes;
    values = nextValues;
    open = nextOpen;
  }
  return { timesBjdTdb: times, velocitiesMps: values };
}

function seedTimes(
  best: VelocityModelPoint,
  companions: readonly number[],
  from: number,
  to: number,
): Float64Array {
  const seeds: number[] = [];
  for (let step = 0; step <= SEEDS_PER_SPAN; step += 1)
    seeds.push(from + ((to - from) * step) / SEEDS_PER_SPAN);
  for (const index of companions) {
    const { periodDays, eccentricity: e, timePeriastronBjdTdb } = best.companions[index]!;
    const firstOrbit = Math.floor((from - timePeriastronBjdTdb) / periodDays);
    const lastOrbit = Math.ceil((to - timePeriastronBjdTdb) / periodDays);
    const squeeze = Math.sqrt((1 - e) / (1 + e));
    for (let step = 0; step < SEEDS_PER_ORBIT; step += 1) {
      const halfTrueAnomaly = (Math.PI * step) / SEEDS_PER_ORBIT - Math.PI / 2;
      const E = 2 * Math.atan(squeeze * Math.tan(halfTrueAnomaly));
      const phase = (E - e * Math.sin(E)) / (2 * Math.PI);
      for (let orbit = firstOrbit; orbit <= lastOrbit; orbit += 1) {
        const time = timePeriastronBjdTdb + (orbit + phase) * periodDays;
        if (time > from && time < to) seeds.push(time);
      }
    }
  }
  const sorted = Float64Array.from(seeds).sort();
  return sorted.filter((time, index) => index === 0 || time > sorted[index - 1]!);
}

function range(values: Float64Array): number {
  let low = Infinity;
  let high = -Infinity;
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return high > low ? high - low : 0;
}
