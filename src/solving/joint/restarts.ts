/** The joint fit again from other places nearby: ln L of a faint transit has several maxima. */
import { transitFlux } from '../../signals/transit/transit-flux.js';
import { fitOf, type JointFit } from './joint-fit.js';
import { START_LIMB } from './joint-start.js';
import { BRIEF, FULL, maximise, type Maximum } from './maximise.js';
import { CONJUNCTION, LOG_PERIOD, RADIUS_RATIO, RELATIVE_IMPACT } from './natural.js';

/** Of the brief fits this many are carried on, unless ln L is this much below. */
const CARRIED = 4;
const HOPELESS = 8;
/** Impact parameters over 1 + k from which the shape is tried again, each with limb darkening of the first start. */
const IMPACTS: readonly number[] = [0.1, 0.4, 0.65, 0.82, 0.94];
/** The same for faint transits with a star darker at its limb: where the data hardly tell, ln L has maxima in corners. */
const DARK_IMPACTS: readonly number[] = [0.4, 0.65];
const DARK_LIMB: readonly [number, number] = [0.6, 0.35];

/**
 * The same fit from other impact parameters, each with the density and the radius that keep duration and depth, and with
 * the limb darkening of the first start.
 *
 * @param shiftedOver - duration, days, over parts of which phase and period are shifted as well; `null` leaves them
 */
export function withOtherShapes(fit: JointFit, companion: number, shiftedOver: number | null): JointFit {
  const { recipe, density, natural } = fit;
  const { index } = density.coordinates;
  const at = index.companion(companion) + RELATIVE_IMPACT;
  const ratioAt = index.companion(companion) + RADIUS_RATIO;
  const flux = new Float64Array(5);
  /** Loss of light in mid-transit with the limb darkening of the first start. */
  const depthOf = (values: Float64Array, relativeImpact: number): number => {
    const ratio = values[ratioAt]!;
    transitFlux(relativeImpact * (1 + ratio), ratio, START_LIMB[0], START_LIMB[1], flux);
    return 1 - flux[0]!;
  };
  const startAt = (impact: number, limb: readonly [number, number]): Float64Array => {
    const start = Float64Array.from(natural);
    const before = Math.min(0.999, Math.abs(natural[at]!));
    start[at] = impact;
    start[ratioAt] = natural[ratioAt]! * Math.sqrt(depthOf(natural, before) / depthOf(natural, impact));
    start[index.logStarDensity]! += 1.5 * Math.log((1 - impact * impact) / (1 - before * before));
    recipe.bands.forEach(({ u1, u2 }, b) => {
      if (u1 !== null || u2 !== null) return;
      start[index.band(b)] = limb[0];
      start[index.band(b) + 1] = limb[1];
    });
    return start;
  };
  const bright = IMPACTS.map((impact) => startAt(impact, START_LIMB));
  const positionOf = (start: Float64Array): Float64Array => density.coordinates.position(start);
  const positions =
    shiftedOver === null
      ? bright.map(positionOf)
      : [...bright, ...DARK_IMPACTS.map((impact) => startAt(impact, DARK_LIMB))].flatMap((start) => [
          positionOf(start),
          // At another shape another phase may fit better.
          shifted(fit, start, companion, shiftedOver)[0]!,
        ]);
  const starts = positions.map((position) => maximise(density, position, BRIEF));
  // The density remembers the last point that it was asked about: the better one is asked again.
  return fitOf(recipe, density, bestOf(fit, starts)) ?? fit;
}

/** Positions at shifted phases and periods, the highest ln L first; nothing is fitted. */
function shifted(
  { recipe, density }: JointFit,
  natural: Float64Array,
  companion: number,
  durationDays: number,
): Float64Array[] {
  const at = density.coordinates.index.companion(companion);
  const times = recipe.curves.flatMap(({ timesDays }) => [timesDays[0]!, timesDays.at(-1)!]);
  const period = Math.exp(natural[at + LOG_PERIOD]!);
  const conjunction = natural[at + CONJUNCTION]!;
  const halfCycles = Math.max(1, ...times.map((time) => Math.abs(time - conjunction) / period));
  const gradient = new Float64Array(density.size);
  const trials = SHIFTS.flatMap((shift) =>
    SHIFTS.map((stretch) => {
      const start = Float64Array.from(natural);
      start[at + CONJUNCTION]! += shift * durationDays;
      start[at + LOG_PERIOD] = Math.log(period + (stretch * durationDays) / halfCycles);
      const position = density.coordinates.position(start);
      return { position, value: density.evaluate(position, gradient) };
    }),
  );
  return trials.sort((a, b) => b.value - a.value).map(({ position }) => position);
}

/** The highest of a fit and of brief fits carried to their end; those that lie far below are not carried on. */
function bestOf(fit: JointFit, starts: readonly Maximum[]): Maximum {
  return [...starts]
    .sort((a, b) => b.value - a.value)
    .slice(0, CARRIED)
    .filter(({ value }) => value > fit.maximum.value - HOPELESS && !isThere(fit, value))
    .map(({ position }) => maximise(fit.density, position, FULL))
    .reduce((a, b) => (b.value > a.value + RESTART_GAIN ? b : a), fit.maximum);
}

/** A brief fit that ends this little below the maximum is on its way there. */
const SAME_MAXIMUM = 0.02;

function isThere(fit: JointFit, value: number): boolean {
  return value < fit.maximum.value + RESTART_GAIN && value > fit.maximum.value - SAME_MAXIMUM;
}

/** Shifts of a mid-time, and of the transits at either end of the data, in durations: neighbouring maxima lie about so far apart. */
const SHIFTS: readonly number[] = [-0.3, -0.15, -0.07, 0, 0.07, 0.15, 0.3];
const RESTARTS = 4;
const RESTART_ROUNDS = 3;
/** What a restart must gain in ln L to be adopted. */
const RESTART_GAIN = 1e-3;

/**
 * The same fit from other phases and periods nearby: where single transits hardly rise above the noise, ln L has several
 * maxima in both.
 *
 * @param durationDays - first to last contact
 */
export function withShiftedEphemeris(fit: JointFit, companion: number, durationDays: number): JointFit {
  let best = fit;
  const { recipe } = fit;
  for (let round = 0; round < RESTART_ROUNDS; round++) {
    const starts = shifted(best, best.natural, companion, durationDays)
      .slice(0, RESTARTS)
      .map((position) => maximise(best.density, position, BRIEF));
    const found = bestOf(best, starts);
    const next = found === best.maximum ? null : fitOf(recipe, best.density, found);
    if (next === null) break;
    best = next;
  }
  // The density remembers the last point that it was asked about.
  return fitOf(recipe, best.density, best.maximum) ?? best;
}
