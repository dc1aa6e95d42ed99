/** A dip as a trapezoid repeated with a period: the model of refined candidates. Its depth enters linearly. */
import { levelOf, type WeightedSeries } from './ticked-series.js';

export interface TrapezoidShape {
  /** Days; `Infinity` for a dip that is seen once. */
  readonly periodDays: number;
  /** Middle of one dip, days. */
  readonly midTimeDays: number;
  /** First to last contact, days. */
  readonly durationDays: number;
  /** Share of the duration that each slope takes, 0..0.5. */
  readonly slopeShare: number;
}

export interface TrapezoidFit {
  /** Loss in the middle relative to the level; negative for a bump. */
  readonly depth: number;
  readonly level: number;
  /** Chi-square of the level alone less that with the dip; 0 for a bump. */
  readonly gain: number;
  /** Of the depth, white noise. */
  readonly depthSigma: number;
}

/** Cycle whose dip is nearest to a time. */
export function cycleAt(shape: TrapezoidShape, timeDays: number): number {
  return shape.periodDays === Infinity ? 0 : Math.round((timeDays - shape.midTimeDays) / shape.periodDays);
}

/** Mid-time of a cycle. */
export function midTimeOf(shape: TrapezoidShape, cycle: number): number {
  return cycle === 0 ? shape.midTimeDays : shape.midTimeDays + cycle * shape.periodDays;
}

/** Distance to the nearest dip's middle, days, >= 0. */
export function distanceDays(shape: TrapezoidShape, timeDays: number): number {
  return Math.abs(timeDays - midTimeOf(shape, cycleAt(shape, timeDays)));
}

/** 1 in the flat part, 0 outside, linear between. */
export function trapezoidAt(offDays: number, durationDays: number, slopeShare: number): number {
  const inside = 0.5 * durationDays - offDays;
  if (inside <= 0) return 0;
  const slope = slopeShare * durationDays;
  return inside >= slope ? 1 : inside / slope;
}

/**
 * Weighted least squares for the depth below a known level. The level is that of the whole light curve: one from the neighbourhood
 * of the dips would be as noisy as they are, and a search would find where it is high.
 */
export function fitTrapezoid(series: WeightedSeries, shape: TrapezoidShape, level: number): TrapezoidFit {
  const { timesDays, values, weights } = series;
  const { midTimeDays, durationDays, slopeShare } = shape;
  // 1/Infinity is 0: one dip, cycle 0.
  const frequency = 1 / shape.periodDays;
  const period = frequency === 0 ? 0 : shape.periodDays;
  let mm = 0;
  let mx = 0;
  for (let i = 0; i < timesDays.length; i++) {
    const since = timesDays[i]! - midTimeDays;
    const off = Math.abs(since - Math.round(since * frequency) * period);
    const m = trapezoidAt(off, durationDays, slopeShare);
    if (m > 0) {
      const wm = weights[i]! * m;
      mm += wm * m;
      mx += wm * (level - values[i]!);
    }
  }
  if (!(mm > 0)) return { depth: 0, level, gain: 0, depthSigma: Infinity };
  const depth = mx / mm;
  return { depth, level, gain: depth > 0 ? mx * depth : 0, depthSigma: 1 / Math.sqrt(mm) };
}

/** Weighted mean farther than `reachDays` from a dip's middle; of everything where nothing is that far. */
export function levelOutside(series: WeightedSeries, shape: TrapezoidShape, reachDays: number): number {
  const { timesDays, values, weights } = series;
  let outside = 0;
  let sum = 0;
  for (let i = 0; i < timesDays.length; i++) {
    if (distanceDays(shape, timesDays[i]!) <= reachDays) continue;
    const w = weights[i]!;
    outside += w;
    sum += w * values[i]!;
  }
  return outside > 0 ? sum / outside : levelOf(series).mean;
}

/** Points within `reachDays` of a dip's middle that have weight. */
export function pointsNear(series: WeightedSeries, shape: TrapezoidShape, reachDays: number): WeightedSeries {
  const { timesDays, values, weights } = series;
  const rows: number[] = [];
  for (let i = 0; i < timesDays.length; i++)
    if (weights[i]! > 0 && distanceDays(shape, timesDays[i]!) <= reachDays) rows.push(i);
  return {
    timesDays: Float64Array.from(rows, (i) => timesDays[i]!),
    values: Float64Array.from(rows, (i) => values[i]!),
    weights: Float64Array.from(rows, (i) => weights[i]!),
  };
}

/** Points closer than `binDays` joined to their weighted means. */
export function joinedPoints(series: WeightedSeries, binDays: number): WeightedSeries {
  const { timesDays, values, weights } = series;
  const n = timesDays.length;
  const out = { timesDays: new Float64Array(n), values: new Float64Array(n), weights: new Float64Array(n) };
  let count = 0;
  let i = 0;
  while (i < n) {
    const first = timesDays[i]!;
    const cell = Math.floor(first / binDays);
    let w = 0;
    let wt = 0;
    let wx = 0;
    while (i < n && Math.floor(timesDays[i]! / binDays) === cell) {
      w += weights[i]!;
      wt += weights[i]! * (timesDays[i]! - first);
      wx += weights[i]! * values[i]!;
      i++;
    }
    if (!(w > 0)) continue;
    out.timesDays[count] = first + wt / w;
    out.values[count] = wx / w;
    out.weights[count] = w;
    count++;
  }
  return {
    timesDays: out.timesDays.subarray(0, count),
    values: out.values.subarray(0, count),
    weights: out.weights.subarray(0, count),
  };
}
