/** Order statistics and moments of plain arrays. Empty input is a mistake of the caller and throws. */

/**
 * Quantile of unsorted values, linear between order statistics ("type 7").
 *
 * @param values - at least one finite value; not modified
 * @param probability - 0 .. 1
 * @throws RangeError for no values or a probability outside 0 .. 1
 */
export function quantile(values: ArrayLike<number>, probability: number): number {
  return quantileSorted(Float64Array.from(values).sort(), probability);
}

/** As `quantile`, for values in ascending order. */
export function quantileSorted(ascending: ArrayLike<number>, probability: number): number {
  const count = ascending.length;
  if (count === 0) throw new RangeError('a quantile of no values was asked for');
  if (!(probability >= 0 && probability <= 1))
    throw new RangeError(`probability ${probability} is outside 0 .. 1`);
  const position = (count - 1) * probability;
  const below = Math.floor(position);
  const lower = ascending[below]!;
  const upper = ascending[Math.min(below + 1, count - 1)]!;
  return lower + (position - below) * (upper - lower);
}

export function median(values: ArrayLike<number>): number {
  return quantile(values, 0.5);
}

/** The middle value, the upper of two where their number is even: one of the values themselves. `undefined` without values. */
export function upperMedian(values: Iterable<number>): number | undefined {
  const sorted = Float64Array.from(values).sort();
  return sorted[Math.floor(sorted.length / 2)];
}

/** Median of |value - median|, without the factor 1.4826 that makes it a standard deviation for normal values. */
export function medianAbsoluteDeviation(values: ArrayLike<number>): number {
  const centre = median(values);
  return median(Float64Array.from(values, (value) => Math.abs(value - centre)));
}

/**
 * @param weights - as many as values, >= 0, not all zero
 * @throws RangeError when lengths differ or the weights do not sum to a positive finite number
 */
export function weightedMean(values: ArrayLike<number>, weights: ArrayLike<number>): number {
  if (values.length !== weights.length) {
    throw new RangeError(`${values.length} values but ${weights.length} weights`);
  }
  if (values.length === 0) throw new RangeError('a mean of no values was asked for');
  // Summing departures from a value among them keeps the digits of epochs like 2459000.5.
  const reference = values[0]!;
  let sum = 0;
  let total = 0;
  for (let i = 0; i < values.length; i++) {
    sum += weights[i]! * (values[i]! - reference);
    total += weights[i]!;
  }
  if (!(total > 0) || total === Infinity)
    throw new RangeError(`weights sum to ${total}; they must sum to > 0`);
  return reference + sum / total;
}

export function mean(values: ArrayLike<number>): number {
  if (values.length === 0) throw new RangeError('a mean of no values was asked for');
  const reference = values[0]!;
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]! - reference;
  return reference + sum / values.length;
}

/** Sample standard deviation (divisor n - 1), at least two values. */
export function standardDeviation(values: ArrayLike<number>): number {
  if (values.length < 2) throw new RangeError('a standard deviation needs at least two values');
  const centre = mean(values);
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += (values[i]! - centre) ** 2;
  return Math.sqrt(sum / (values.length - 1));
}

/** Root of the mean square of the values themselves (about zero, not about their mean). */
export function rootMeanSquare(values: ArrayLike<number>): number {
  if (values.length === 0) throw new RangeError('a root mean square of no values was asked for');
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]! ** 2;
  return Math.sqrt(sum / values.length);
}
