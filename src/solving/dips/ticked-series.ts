/** Points on a fine comb of times, so that a phase is one integer multiplication. */

/** Departures from the mean level, with weights. Arrays of one length; times ascending. */
export interface WeightedSeries {
  readonly timesDays: Float64Array;
  readonly values: Float64Array;
  /** 1/sigma^2; 0 leaves a point out. */
  readonly weights: Float64Array;
}

export interface TickedSeries {
  readonly count: number;
  readonly tickDays: number;
  /** Time 0 of the ticks, days. */
  readonly originDays: number;
  readonly ticks: Int32Array;
  readonly weights: Float64Array;
  /** Weight times value. */
  readonly weighted: Float64Array;
  readonly totalWeight: number;
}

/** Sum of weights, and the weighted mean of the values (0 without weight). */
export function levelOf({ values, weights }: WeightedSeries): { total: number; mean: number } {
  let total = 0;
  let sum = 0;
  for (let i = 0; i < values.length; i++) {
    total += weights[i]!;
    sum += weights[i]! * values[i]!;
  }
  return { total, mean: total > 0 ? sum / total : 0 };
}

/**
 * Takes the weighted mean off, joins points that are closer than `binDays` in bins of that width, and puts each on the
 * nearest tick (its weighted mean time).
 *
 * @param binDays - 0 joins nothing
 * @param tickDays - > 0; the span may hold up to 2^31 ticks
 */
export function tickedSeries(series: WeightedSeries, binDays: number, tickDays: number): TickedSeries {
  const { timesDays, values, weights } = series;
  const n = timesDays.length;
  const originDays = n === 0 ? 0 : 0.5 * (timesDays[0]! + timesDays[n - 1]!);
  const ticks = new Int32Array(n);
  const sums = new Float64Array(n);
  const weighted = new Float64Array(n);
  const { total, mean } = levelOf(series);
  let count = 0;
  let i = 0;
  while (i < n) {
    const cell = binDays > 0 ? Math.floor((timesDays[i]! - originDays) / binDays) : 0;
    let w = 0;
    let wx = 0;
    let wt = 0;
    const first = timesDays[i]!;
    do {
      const weight = weights[i]!;
      w += weight;
      wx += weight * (values[i]! - mean);
      wt += weight * (timesDays[i]! - first);
      i++;
    } while (i < n && binDays > 0 && Math.floor((timesDays[i]! - originDays) / binDays) === cell);
    if (w > 0) {
      ticks[count] = Math.round((first + wt / w - originDays) / tickDays);
      sums[count] = w;
      weighted[count] = wx;
      count++;
    }
  }
  return { count, tickDays, originDays, ticks, weights: sums, weighted, totalWeight: total };
}
