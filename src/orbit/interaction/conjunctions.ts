/** Times of transits and occultations of companions that pull at each other, by integrating their motion. */
import { ConvergenceError, ModelDomainError } from '../../errors.js';
import { GaussRadau } from '../../numerics/gauss-radau.js';
import { GM_SUN_AU3_D2, initialState } from './initial-state.js';
import type { InteractingSystem } from './initial-state.js';
import { SpatialPull } from './pull.js';

/** Times of one companion, ascending, days on the axis of the system's epoch. */
export interface ConjunctionTimes {
  /** Closest to the star's centre in the sky, in front of it. */
  readonly transits: Float64Array;
  /** The same behind it. */
  readonly occultations: Float64Array;
}

/** Seventh divided difference over a step, see `GaussRadau`: about 8 steps a revolution when circular. */
const TOLERANCE = 1e-4;
/** At least so many steps in the shortest period, so that no step holds two conjunctions. */
const LEAST_STEPS = 6;

/**
 * All mid-times of every companion between two times. A mid-time is where x·dx/dt + y·dy/dt = 0, x and y the position
 * relative to the star in the sky. Light time is left out: across a system it is nearly the same at every transit.
 *
 * @param fromDays, toDays - days on the axis of the epoch, which may lie between them or outside
 * @returns one entry per companion
 * @throws ModelDomainError for elements outside their ranges, or times that are not finite and in order
 * @throws ConvergenceError when bodies meet so closely that the motion cannot be followed
 *
 * Accuracy: 1e-9 d over 2500 d against a Runge-Kutta integration at rtol 1e-13 (test/reference/interaction).
 */
export function conjunctionTimes(
  system: InteractingSystem,
  fromDays: number,
  toDays: number,
): ConjunctionTimes[] {
  if (!(Number.isFinite(fromDays) && Number.isFinite(toDays) && fromDays <= toDays))
    throw new ModelDomainError(
      'end of the times (d)',
      toDays,
      `the finite numbers from the start, ${fromDays} d, on`,
    );
  const found = system.companions.map(() => ({ transits: [] as number[], occultations: [] as number[] }));
  if (fromDays < system.epochDays) follow(system, fromDays, fromDays, toDays, found);
  if (toDays > system.epochDays) follow(system, toDays, fromDays, toDays, found);
  return found.map(({ transits, occultations }) => ({
    transits: Float64Array.from(transits).sort(),
    occultations: Float64Array.from(occultations).sort(),
  }));
}

interface Found {
  readonly transits: number[];
  readonly occultations: number[];
}

/** Integrates from the epoch to `endDays` and collects what lies in the wanted range. */
function follow(
  system: InteractingSystem,
  endDays: number,
  fromDays: number,
  toDays: number,
  found: readonly Found[],
): void {
  const { companions, epochDays, starMassSolar } = system;
  const starGm = GM_SUN_AU3_D2 * starMassSolar;
  const gms = Float64Array.from(companions, ({ massRatio }) => massRatio * starGm);
  const motion = new GaussRadau(new SpatialPull(starGm, gms), TOLERANCE);
  const { positions, velocities } = initialState(system);
  const span = endDays - epochDays;
  const shortest = Math.min(...companions.map(({ periodDays }) => periodDays));
  const longest = shortest / LEAST_STEPS;
  motion.start(0, positions, velocities, (Math.sign(span) * shortest) / 50);
  const before = companions.map((_, body) => approach(motion.positions, motion.velocities, body));
  const polynomials = [new Float64Array(10), new Float64Array(10), new Float64Array(10)] as const;
  while ((span - motion.time) * Math.sign(span) > 1e-12 * Math.abs(span)) {
    if (!motion.advance(Math.min(longest, Math.abs(span - motion.time))))
      throw new ConvergenceError(
        'the companions come so close to each other that their motion cannot be followed',
        {
          daysFromEpoch: motion.time,
        },
      );
    for (let body = 0; body < companions.length; body++) {
      const now = approach(motion.positions, motion.velocities, body);
      const last = before[body]!;
      before[body] = now;
      // Forwards in time the distance in the sky passes a minimum where its rate goes from negative to positive.
      const isMinimum = span > 0 ? last < 0 && now >= 0 : last > 0 && now <= 0;
      if (!isMinimum) continue;
      polynomials.forEach((polynomial, axis) => {
        motion.polynomial(3 * body + axis, polynomial);
      });
      const s = rootOfApproach(polynomials[0], polynomials[1]);
      const time = epochDays + (motion.stepStart + s * motion.stepLength);
      if (time < fromDays || time > toDays) continue;
      const list = valueAt(polynomials[2], s) > 0 ? found[body]!.transits : found[body]!.occultations;
      list.push(time);
    }
  }
}

/** Half the rate of the squared distance in the sky. */
function approach(positions: Float64Array, velocities: Float64Array, body: number): number {
  const at = 3 * body;
  return positions[at]! * velocities[at]! + positions[at + 1]! * velocities[at + 1]!;
}

function valueAt(polynomial: Float64Array, s: number): number {
  let value = 0;
  for (let k = polynomial.length - 1; k >= 0; k--) value = value * s + polynomial[k]!;
  return value;
}

/** s in 0 .. 1 where x x' + y y' = 0, which changes sign between the ends; Newton kept inside the bracket. */
function rootOfApproach(xs: Float64Array, ys: Float64Array): number {
  let low = 0;
  let high = 1;
  let s = 0.5;
  const signAtStart = Math.sign(xs[0]! * xs[1]! + ys[0]! * ys[1]!);
  for (let step = 0; step < 60; step++) {
    let value = 0;
    let slope = 0;
    for (const polynomial of [xs, ys]) {
      let p = 0;
      let d = 0;
      let dd = 0;
      for (let k = polynomial.length - 1; k >= 0; k--) {
        dd = dd * s + 2 * d;
        d = d * s + p;
        p = p * s + polynomial[k]!;
      }
      value += p * d;
      slope += d * d + p * dd;
    }
    if (value === 0) return s;
    if (Math.sign(value) === signAtStart) low = s;
    else high = s;
    const newton = s - value / slope;
    const next = newton > low && newton < high ? newton : 0.5 * (low + high);
    if (Math.abs(next - s) < 1e-15) return next;
    s = next;
  }
  return s;
}
