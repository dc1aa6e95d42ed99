/** A refined dip event by event: which cycles have data, how deep each is, and what the whole is worth without the strongest. */
import type { WeightedSeries } from './ticked-series.js';
import { cycleAt, midTimeOf, trapezoidAt, type TrapezoidShape } from './trapezoid.js';

export interface DipEvent {
  readonly cycle: number;
  readonly midTimeDays: number;
  readonly depth: number;
  /** With red noise, and with the event's own scatter where that is larger. */
  readonly depthSigma: number;
  /** Inside the dip. */
  readonly points: number;
  /** Data on both sides, and in most of the dip. */
  readonly isWhole: boolean;
}

export interface EventDepths {
  /** Cycles with data, in order of time. */
  readonly events: readonly DipEvent[];
  readonly depth: number;
  readonly depthSigma: number;
}

/** A cycle has data when its dip holds this share of the information of the best covered one. */
const LEAST_INFORMATION = 0.2;
/** Own scatter counts from this many points on. */
const FEWEST_FOR_SCATTER = 10;
const SCATTER_SEEN = 1.3;
/** Parts of the duration that are looked at for data: so many inside, and half a duration on either side. */
const CELLS = 6;

interface Sums {
  mm: number;
  mx: number;
  count: number;
  square: number;
  weightCount: number;
  before: boolean;
  after: boolean;
  cells: number;
}

/**
 * Depth of each event for one shape and level, weighted to one depth.
 *
 * @param redNoise - factor on standard errors, >= 1
 * @param spacingDays - usual spacing of the data, days
 */
export function eventDepths(
  series: WeightedSeries,
  shape: TrapezoidShape,
  fit: { readonly level: number; readonly depth: number },
  redNoise: number,
  spacingDays: number,
): EventDepths {
  const { timesDays, values, weights } = series;
  const { durationDays, slopeShare } = shape;
  const half = 0.5 * durationDays;
  const beside = half + Math.max(0.5 * durationDays, 2 * spacingDays);
  const found = new Map<number, Sums>();
  for (let i = 0; i < timesDays.length; i++) {
    const w = weights[i]!;
    if (!(w > 0)) continue;
    const cycle = cycleAt(shape, timesDays[i]!);
    const off = timesDays[i]! - midTimeOf(shape, cycle);
    if (Math.abs(off) > beside) continue;
    let sums = found.get(cycle);
    if (sums === undefined) {
      sums = { mm: 0, mx: 0, count: 0, square: 0, weightCount: 0, before: false, after: false, cells: 0 };
      found.set(cycle, sums);
    }
    const m = trapezoidAt(Math.abs(off), durationDays, slopeShare);
    const x = values[i]! - fit.level;
    sums.square += w * (x + fit.depth * m) ** 2;
    sums.weightCount++;
    if (off < -half) sums.before = true;
    else if (off > half) sums.after = true;
    else {
      sums.mm += w * m * m;
      sums.mx += w * m * x;
      sums.count++;
      sums.cells |= 1 << Math.min(CELLS - 1, Math.floor(((off + half) / durationDays) * CELLS));
    }
  }
  const largest = Math.max(0, ...Array.from(found.values(), ({ mm }) => mm));
  const expected = Math.min(CELLS, Math.max(1, Math.floor(durationDays / spacingDays)));
  const events: DipEvent[] = [];
  for (const [cycle, sums] of found) {
    if (!(sums.mm > 0) || sums.mm < LEAST_INFORMATION * largest) continue;
    const scatter =
      sums.weightCount >= FEWEST_FOR_SCATTER ? Math.sqrt(sums.square / (sums.weightCount - 1)) : 1;
    events.push({
      cycle,
      midTimeDays: midTimeOf(shape, cycle),
      depth: -sums.mx / sums.mm,
      depthSigma: (redNoise * (scatter > SCATTER_SEEN ? scatter : 1)) / Math.sqrt(sums.mm),
      points: sums.count,
      isWhole: sums.before && sums.after && bitsIn(sums.cells) >= 0.6 * expected,
    });
  }
  events.sort((a, b) => a.cycle - b.cycle);
  return { events, ...weightedDepth(events) };
}

function bitsIn(mask: number): number {
  let count = 0;
  for (let rest = mask; rest !== 0; rest >>= 1) count += rest & 1;
  return count;
}

/** Weighted mean depth of some events; depth 0 with an infinite error for none. */
export function weightedDepth(events: readonly DipEvent[]): { depth: number; depthSigma: number } {
  let total = 0;
  let sum = 0;
  for (const { depth, depthSigma } of events) {
    const weight = 1 / (depthSigma * depthSigma);
    total += weight;
    sum += weight * depth;
  }
  return total > 0
    ? { depth: sum / total, depthSigma: 1 / Math.sqrt(total) }
    : { depth: 0, depthSigma: Infinity };
}

/** Signal to noise of some events together. */
export function signalToNoiseOf(events: readonly DipEvent[]): number {
  const { depth, depthSigma } = weightedDepth(events);
  return depthSigma === Infinity ? 0 : depth / depthSigma;
}

/** The event that carries most of the signal: largest depth over variance. */
export function strongestEvent(events: readonly DipEvent[]): DipEvent {
  return events.reduce((a, b) => (b.depth / b.depthSigma ** 2 > a.depth / a.depthSigma ** 2 ? b : a));
}
