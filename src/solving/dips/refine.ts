/** From a peak of the spectrum to the best trapezoid near it: a finer grid of boxes, then a downhill simplex on the points. */
import { nelderMead } from '../../numerics/nelder-mead.js';
import { BoxSearch } from './box-search.js';
import { fixedLadder } from './period-grid.js';
import type { WeightedSeries } from './ticked-series.js';
import {
  fitTrapezoid,
  joinedPoints,
  levelOutside,
  pointsNear,
  type TrapezoidFit,
  type TrapezoidShape,
} from './trapezoid.js';

export interface RefinedDip extends TrapezoidFit {
  readonly shape: TrapezoidShape;
}

/** Longest and shortest duration that a refined dip may have, days. */
export interface DurationBounds {
  readonly shortestDays: number;
  readonly longestDays: number;
}

const PERIOD_STEPS = 20;
const DURATION_RATIO = 1.2;
/** A trapezoid starts from a box with slopes of this share, and from one with nothing but slopes. */
const START_SHARES = [0.1, 0.35] as const;
/** Above this many points near dips they are joined in thirtieths of the duration; the mid-time and depth do not notice. */
const MOST_POINTS = 20_000;
const LEAST_SHARE = 0.01;

/** Best box on a fine grid of periods within `halfWidth` (relative) of a period, at any phase; refined to a trapezoid. */
export function refineNear(
  series: WeightedSeries,
  periodDays: number,
  halfWidth: number,
  bounds: DurationBounds,
): RefinedDip | null {
  const frequency = 1 / periodDays;
  const frequenciesPerDay = Float64Array.from(
    { length: 2 * PERIOD_STEPS + 1 },
    (_, j) => frequency * (1 + (halfWidth * (j - PERIOD_STEPS)) / PERIOD_STEPS),
  );
  const search = new BoxSearch(series, {
    frequenciesPerDay,
    durationsAt: fixedLadder(bounds.shortestDays, bounds.longestDays, DURATION_RATIO),
  });
  let best = 0;
  for (let j = 1; j < frequenciesPerDay.length; j++)
    if (search.signalResidue[j]! > search.signalResidue[best]!) best = j;
  const peak = search.peakAt(best);
  if (!(peak.depth > 0)) return null;
  return refineTrapezoid(series, peak.periodDays, peak.midTimeDays, peak.durationDays, bounds);
}

/**
 * Best trapezoid from a box; period and mid-time move together so that the dips in the middle of the data stay in place.
 *
 * @param boxPeriodDays - `Infinity` for a dip that is seen once
 */
export function refineTrapezoid(
  series: WeightedSeries,
  boxPeriodDays: number,
  boxMidTimeDays: number,
  boxDurationDays: number,
  bounds: DurationBounds,
): RefinedDip | null {
  const { timesDays } = series;
  const n = timesDays.length;
  const spanDays = n > 0 ? timesDays[n - 1]! - timesDays[0]! : 0;
  const centre = n > 0 ? 0.5 * (timesDays[0]! + timesDays[n - 1]!) : 0;
  const isSingle = boxPeriodDays === Infinity;
  const shift = isSingle ? 0 : Math.round((centre - boxMidTimeDays) / boxPeriodDays);
  const start: TrapezoidShape = {
    periodDays: boxPeriodDays,
    midTimeDays: isSingle ? boxMidTimeDays : boxMidTimeDays + shift * boxPeriodDays,
    durationDays: boxDurationDays,
    slopeShare: 0,
  };
  const level = levelOutside(series, start, 0.8 * boxDurationDays);
  const reach = Math.min(2 * boxDurationDays, isSingle ? Infinity : 0.5 * boxPeriodDays);
  let local = pointsNear(series, start, reach);
  if (local.timesDays.length > MOST_POINTS) local = joinedPoints(local, boxDurationDays / 30);
  // Drift of a quarter of the duration at the ends of the span.
  const periodScale = isSingle
    ? 0
    : (0.5 * boxDurationDays * boxPeriodDays) / Math.max(spanDays, boxPeriodDays);
  const shapeOf = (p: Float64Array): TrapezoidShape => ({
    periodDays: isSingle ? Infinity : boxPeriodDays + p[3]! * periodScale,
    midTimeDays: start.midTimeDays + p[0]! * boxDurationDays,
    durationDays: boxDurationDays * Math.exp(p[1]!),
    slopeShare: Math.min(0.5, Math.max(LEAST_SHARE, p[2]!)),
  });
  const lowest = 0.5 * bounds.shortestDays;
  const highest = 1.3 * bounds.longestDays;
  const cost = (p: Float64Array): number => {
    const shape = shapeOf(p);
    if (shape.durationDays < lowest || shape.durationDays > highest) return Infinity;
    if (p[2]! < -0.1 || p[2]! > 0.7 || Math.abs(p[0]!) > 1) return Infinity;
    return -fitTrapezoid(local, shape, level).gain;
  };
  let best: RefinedDip | null = null;
  for (const share of START_SHARES) {
    const parameters = isSingle ? 3 : 4;
    // Equal area: the box is as long as the trapezoid at half depth.
    const from = Float64Array.of(0, -Math.log1p(-share), share, 0).subarray(0, parameters);
    const scale = Float64Array.of(0.12, 0.15, 0.12, 0.4).subarray(0, parameters);
    const found = nelderMead(cost, from, scale, { maxEvaluations: 600, valueTolerance: 1e-4, restarts: 1 });
    const shape = shapeOf(found.parameters);
    const fit = fitTrapezoid(local, shape, level);
    if (fit.depth > 0 && (best === null || fit.gain > best.gain)) best = { ...fit, shape };
  }
  return best;
}
