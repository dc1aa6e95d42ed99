/** The mid-time of each transit by itself, with the shape that the joint solution found. */
import { TWO_PI } from '../../orbit/constants.js';
import { TRANSIT_COORDINATES } from '../../signals/transit/light-curve-kernel.js';
import { CurveLikelihood, type CurvePoint } from './curve-likelihood.js';
import type { EventTime } from './curve-windows.js';
import type { CurveData } from './joint-data.js';
import type { JointFit } from './joint-fit.js';
import { CONJUNCTION, LOG_PERIOD } from './natural.js';
import type { PreparedCurve } from './prepare-curve.js';

export interface TimedEvent {
  readonly curve: number;
  readonly companion: number;
  /** Counted from the companion's reference transit. */
  readonly cycle: number;
  readonly points: number;
  /** Days since the epoch; bounds where ln L has fallen by a half. `null` where the points do not bound it. */
  readonly midTimeDays: number | null;
  readonly lowerDays: number | null;
  readonly upperDays: number | null;
}

/** A transit must be bounded within this share of its duration on either side. */
const FARTHEST_SHIFT = 0.5;
const SCAN = 24;
/** Fewer points within a transit than this tell no time. */
const FEWEST_INSIDE = 3;

/** One segment of a curve as a curve of its own. */
function segmentCurve(curve: CurveData, segment: number): CurveData {
  const { start, end } = curve.segments[segment]!;
  return {
    ...curve,
    timesDays: curve.timesDays.subarray(start, end),
    flux: curve.flux.subarray(start, end),
    sigmas: curve.sigmas.subarray(start, end),
    averaged: curve.averaged.subarray(start, end),
    segments: [{ ...curve.segments[segment]!, start: 0, end: end - start }],
  };
}

/** Times of all transits of all curves, in the order of curves and time. */
export function timeEvents(fit: JointFit, curves: readonly PreparedCurve[]): TimedEvent[] {
  const { density, recipe } = fit;
  density.evaluate(fit.maximum.position, new Float64Array(density.size));
  const letters = recipe.companions.map(({ letter }) => letter);
  return curves.flatMap((curve, i) =>
    curve.windows.flatMap((window, s) =>
      window.events.flatMap((event): TimedEvent[] => {
        const companion = letters.indexOf(event.letter);
        if (companion < 0 || !isTransit(fit, companion, event)) return [];
        const likelihood = new CurveLikelihood(
          segmentCurve(curve.data, s),
          recipe.companions.map(({ transits }) => transits),
          recipe.starRadiusLightDays,
        );
        return [timeOf(likelihood, fit, density.curvePoints[i]!, i, companion, event)];
      }),
    ),
  );
}

function ephemerisOf(fit: JointFit, companion: number): { period: number; conjunction: number } {
  const { natural, index } = fit.density.coordinates;
  const base = index.companion(companion);
  return { period: Math.exp(natural[base + LOG_PERIOD]!), conjunction: natural[base + CONJUNCTION]! };
}

/** Events near a conjunction; what is farther away is an occultation. */
function isTransit(fit: JointFit, companion: number, event: EventTime): boolean {
  const { period, conjunction } = ephemerisOf(fit, companion);
  const phase = (event.midTimeDays - conjunction) / period;
  return Math.abs(phase - Math.round(phase)) * period < event.durationDays;
}

function timeOf(
  likelihood: CurveLikelihood,
  fit: JointFit,
  joint: CurvePoint,
  curve: number,
  companion: number,
  event: EventTime,
): TimedEvent {
  const { period, conjunction } = ephemerisOf(fit, companion);
  const cycle = fit.recipe.companions[companion]!.isPeriodUnknown
    ? 0
    : Math.round((event.midTimeDays - conjunction) / period);
  const point: CurvePoint = { ...joint, coordinates: Float64Array.from(joint.coordinates) };
  const at = companion * TRANSIT_COORDINATES + 1;
  const longitude = point.coordinates[at]!;
  const rate = TWO_PI / period;
  const valueAt = (shift: number): number => {
    point.coordinates[at] = longitude - rate * shift;
    return likelihood.evaluate(point);
  };
  const points = likelihood.curve.timesDays.length;
  const unknown = { curve, companion, cycle, points, midTimeDays: null, lowerDays: null, upperDays: null };
  const reach = FARTHEST_SHIFT * event.durationDays;
  let best = 0;
  let height = -Infinity;
  for (let s = -SCAN; s <= SCAN; s++) {
    const shift = (s / SCAN) * reach;
    const value = valueAt(shift);
    if (value > height) [best, height] = [shift, value];
  }
  const step = reach / SCAN;
  best = goldenMaximum(valueAt, best - step, best + step);
  height = valueAt(best);
  if (likelihood.kernels[companion]!.touchedCount < FEWEST_INSIDE) return unknown;
  const lower = crossing(valueAt, best, -reach, height - 0.5);
  const upper = crossing(valueAt, best, reach, height - 0.5);
  if (lower === null || upper === null) return unknown;
  const expected = conjunction + cycle * period;
  return {
    ...unknown,
    midTimeDays: expected + best,
    lowerDays: expected + lower,
    upperDays: expected + upper,
  };
}

function goldenMaximum(value: (x: number) => number, from: number, to: number): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let [a, b] = [from, to];
  let c = b - ratio * (b - a);
  let d = a + ratio * (b - a);
  let [vc, vd] = [value(c), value(d)];
  for (let i = 0; i < 40; i++) {
    if (vc > vd) {
      [b, d, vd] = [d, c, vc];
      c = b - ratio * (b - a);
      vc = value(c);
    } else {
      [a, c, vc] = [c, d, vd];
      d = a + ratio * (b - a);
      vd = value(d);
    }
  }
  return 0.5 * (a + b);
}

/** Where the value falls to `level` between the maximum and `end`; `null` where it does not. */
function crossing(value: (x: number) => number, top: number, end: number, level: number): number | null {
  const sign = Math.sign(end);
  let inside = top;
  let step = Math.abs(end) / 256;
  let outside: number;
  for (;;) {
    outside = sign * Math.min(sign * (inside + sign * step), Math.abs(end));
    if (value(outside) < level) break;
    if (outside === end) return null;
    inside = outside;
    step *= 1.5;
  }
  for (let i = 0; i < 40; i++) {
    const middle = 0.5 * (inside + outside);
    if (value(middle) < level) outside = middle;
    else inside = middle;
  }
  return 0.5 * (inside + outside);
}
