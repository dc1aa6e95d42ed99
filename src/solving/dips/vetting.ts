/** What else the folded light curve says about a dip: odd against even events, and dips at other phases. */
import { BoxScan, binExponentFor } from './box-scan.js';
import { weightedDepth, type DipEvent } from './events.js';
import { trialsFalseAlarm } from './false-alarm.js';
import { tickedSeries, type WeightedSeries } from './ticked-series.js';
import { distanceDays, type TrapezoidShape } from './trapezoid.js';
import type { OddEven, SecondaryDip } from './types.js';

/** Phase bins per duration of a secondary dip. */
const BINS_PER_DURATION = 16;
/** Independent boxes per duration in one folded light curve. */
const BOXES_PER_DURATION = 2;

/** Depths of odd and even events, counted from `evenCycle`; `null` where either is missing. */
export function oddEvenOf(events: readonly DipEvent[], evenCycle: number): OddEven | null {
  const isOdd = ({ cycle }: DipEvent): boolean => (cycle - evenCycle) % 2 !== 0;
  const odd = events.filter(isOdd);
  const even = events.filter((event) => !isOdd(event));
  if (odd.length === 0 || even.length === 0) return null;
  const { depth: oddDepth, depthSigma: oddDepthSigma } = weightedDepth(odd);
  const { depth: evenDepth, depthSigma: evenDepthSigma } = weightedDepth(even);
  return {
    oddDepth,
    oddDepthSigma,
    evenDepth,
    evenDepthSigma,
    differenceSigmas: Math.abs(oddDepth - evenDepth) / Math.hypot(oddDepthSigma, evenDepthSigma),
  };
}

/** The series without the points of a dip and a tenth of its duration on either side. */
function withoutDips(series: WeightedSeries, shape: TrapezoidShape): WeightedSeries {
  const reach = 0.6 * shape.durationDays;
  return {
    ...series,
    weights: series.weights.map((w, i) => (distanceDays(shape, series.timesDays[i]!) <= reach ? 0 : w)),
  };
}

/** Most significant dip of the same duration at any other phase. */
export function secondaryOf(
  series: WeightedSeries,
  shape: TrapezoidShape,
  redNoise: number,
): SecondaryDip | null {
  const { periodDays, durationDays, midTimeDays, slopeShare } = shape;
  const boxDays = durationDays * (1 - slopeShare);
  const ticked = tickedSeries(withoutDips(series, shape), 0, boxDays / 64);
  const exponent = binExponentFor((BINS_PER_DURATION * periodDays) / boxDays);
  const binDays = periodDays / 2 ** exponent;
  const length = Math.max(1, Math.round(boxDays / binDays));
  if (ticked.count === 0 || 2 * length >= 2 ** exponent) return null;
  const scan = new BoxScan();
  const residue = scan.scanAt(ticked, 1 / periodDays, exponent, Int32Array.of(length), 1);
  if (!(residue > 0)) return null;
  const signalToNoise = (residue * Math.sqrt(ticked.totalWeight)) / redNoise;
  const middle = ticked.originDays + (scan.best.startBin + 0.5 * length) * binDays;
  const turns = (middle - midTimeDays) / periodDays;
  return {
    phase: turns - Math.floor(turns),
    depth: scan.best.depth,
    depthSigma: scan.best.depth / signalToNoise,
    signalToNoise,
    falseAlarmProbability: trialsFalseAlarm(signalToNoise, (BOXES_PER_DURATION * periodDays) / boxDays),
  };
}
