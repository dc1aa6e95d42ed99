/**
 * Mid-transit times of companions in one plane seen edge-on, fast enough to be called thousands of times in a fit. For
 * everything else there is `conjunctionTimes`, which is slower and more exact.
 */
import { Stormer } from '../../numerics/stormer.js';
import { GM_SUN_AU3_D2, planeState } from './initial-state.js';
import type { InteractingCompanion } from './initial-state.js';
import { PlanarPull } from './pull.js';

/** Steps a revolution of a circular orbit. */
const STEPS_CIRCULAR = 64;

/** Steps a revolution: more for eccentric orbits, whose periastron passage is quicker and of richer shape. */
function stepsPerRevolution(eccentricity: number): number {
  return (
    (STEPS_CIRCULAR * (1 + eccentricity) ** 2 * (1 + 2.5 * eccentricity)) / (1 - eccentricity ** 2) ** 1.5
  );
}

/** Elements of a companion in the common plane, times in days from the epoch. */
export type PlanarCompanion = Pick<
  InteractingCompanion,
  'massRatio' | 'periodDays' | 'conjunctionDays' | 'eCosOmega' | 'eSinOmega'
>;

export class SwiftTransits {
  /** Mid-transit times of each companion in the last `follow`, ascending, days from the epoch; `counts` of them are valid. */
  readonly times: readonly Float64Array[];
  readonly counts: Int32Array;

  private readonly gms: Float64Array;
  private readonly motion: Stormer;
  private readonly plane: Float64Array = new Float64Array(4);
  private readonly positions: Float64Array;
  private readonly velocities: Float64Array;
  private readonly polynomial: Float64Array = new Float64Array(10);

  /** @param capacity - room for so many transits of each companion */
  constructor(companionCount: number, capacity: number) {
    this.gms = new Float64Array(companionCount);
    // Times do not depend on the mass of the star once periods and mass ratios are given: one solar mass serves.
    this.motion = new Stormer(new PlanarPull(GM_SUN_AU3_D2, this.gms));
    this.positions = new Float64Array(2 * companionCount);
    this.velocities = new Float64Array(2 * companionCount);
    this.times = Array.from({ length: companionCount }, () => new Float64Array(capacity));
    this.counts = new Int32Array(companionCount);
  }

  /**
   * @param companions - osculating elements at time 0
   * @param untilDays - > 0: the transits between 0 and this time are found
   * @returns false when the motion cannot be followed, or leaves the neighbourhood of the orbits
   * @throws ModelDomainError for elements outside their ranges
   *
   * Accuracy: 5e-7 d over 1500 d for inner periods of 10 d and e up to 0.4 (against `conjunctionTimes`).
   */
  follow(companions: readonly PlanarCompanion[], untilDays: number): boolean {
    const { motion, plane, positions, velocities, counts, times, polynomial } = this;
    let step = Infinity;
    companions.forEach((companion, body) => {
      this.gms[body] = companion.massRatio * GM_SUN_AU3_D2;
      planeState(companion, 1, 0, plane);
      positions.set(plane.subarray(0, 2), 2 * body);
      velocities.set(plane.subarray(2, 4), 2 * body);
      const eccentricity = Math.hypot(companion.eCosOmega, companion.eSinOmega);
      step = Math.min(step, companion.periodDays / stepsPerRevolution(eccentricity));
    });
    counts.fill(0);
    if (!motion.start(0, positions, velocities, step)) return false;
    const count = companions.length;
    const now = motion.positions;
    const before = motion.previous;
    while (motion.time < untilDays) {
      motion.advance();
      for (let body = 0; body < count; body++) {
        const x = now[2 * body]!;
        if (x > 0 || before[2 * body]! <= 0 || now[2 * body + 1]! <= 0) continue;
        motion.polynomial(2 * body, polynomial);
        const at = counts[body]!;
        const list = times[body]!;
        if (at === list.length) return false;
        list[at] = motion.time + step * rootInStep(polynomial);
        counts[body] = at + 1;
      }
    }
    return Number.isFinite(now[0]!) && Number.isFinite(now[1]!);
  }
}

/** s in -1 .. 0 where the polynomial vanishes; it is nearly straight there. */
function rootInStep(polynomial: Float64Array): number {
  let s = -0.5;
  for (let step = 0; step < 8; step++) {
    let value = 0;
    let slope = 0;
    for (let k = 9; k >= 0; k--) {
      slope = slope * s + value;
      value = value * s + polynomial[k]!;
    }
    const change = value / slope;
    s -= change;
    if (Math.abs(change) < 1e-14) break;
  }
  return s;
}
