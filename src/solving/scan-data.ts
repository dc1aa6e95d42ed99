/** Velocities as the shape scan reads them: sorted by instrument, those of the same hours merged. */
import type { LinearBackground } from './linear-background.js';
import { ANCHORS } from './shape-grid.js';

/** Data of a scan sorted by instrument, so that a mean per instrument is projected out with one pair of sums each. */
export interface ScanData {
  readonly timesDays: Float64Array;
  readonly weights: Float64Array;
  readonly weightedResiduals: Float64Array;
  /** First index of each instrument's run, and the end of the last. */
  readonly groupStarts: Int32Array;
  readonly inverseGroupWeights: Float64Array;
  readonly totalWeight: number;
  /** Indices of the points that deviate most. */
  readonly anchors: readonly number[];
}

/** Velocities of one instrument closer together than this are scanned as one. */
const MERGED_DAYS = 0.1;

export function scanData(background: LinearBackground, instrumentOf: Uint16Array): ScanData {
  const order = Array.from(instrumentOf, (_, i) => i).sort(
    (a, b) => instrumentOf[a]! - instrumentOf[b]! || background.timesDays[a]! - background.timesDays[b]!,
  );
  const merged: { time: number; weight: number; product: number; instrument: number; first: number }[] = [];
  for (const i of order) {
    const weight = background.weights[i]!;
    const time = background.timesDays[i]!;
    const last = merged.at(-1);
    if (last !== undefined && last.instrument === instrumentOf[i] && time - last.first < MERGED_DAYS) {
      last.time += (weight * (time - last.time)) / (last.weight + weight);
      last.weight += weight;
      last.product += weight * background.residuals[i]!;
    } else {
      merged.push({
        time,
        weight,
        product: weight * background.residuals[i]!,
        instrument: instrumentOf[i]!,
        first: time,
      });
    }
  }
  const n = merged.length;
  const timesDays = Float64Array.from(merged, ({ time }) => time);
  const weights = Float64Array.from(merged, ({ weight }) => weight);
  const weightedResiduals = Float64Array.from(merged, ({ product }) => product);
  const starts: number[] = [];
  merged.forEach(({ instrument }, at) => {
    if (at === 0 || instrument !== merged[at - 1]!.instrument) starts.push(at);
  });
  const groupStarts = Int32Array.from([...starts, n]);
  const inverseGroupWeights = Float64Array.from(starts, (start, g) => {
    let sum = 0;
    for (let i = start; i < groupStarts[g + 1]!; i++) sum += weights[i]!;
    return 1 / sum;
  });
  const deviation = (i: number): number => Math.abs(weightedResiduals[i]!) / Math.sqrt(weights[i]!);
  return {
    timesDays,
    weights,
    weightedResiduals,
    groupStarts,
    inverseGroupWeights,
    totalWeight: weights.reduce((sum, w) => sum + w, 0),
    anchors: Array.from({ length: n }, (_, i) => i)
      .sort((a, b) => deviation(b) - deviation(a))
      .slice(0, ANCHORS),
  };
}
