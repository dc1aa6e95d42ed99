/** Intervals that hold what a panel shows. */

/**
 * Smallest interval that holds values with their error bars. Bars are counted up to three times the median error only:
 * one hopeless measurement must not squeeze all others flat (its bar is cut at the frame, its point is not).
 *
 * @returns (Infinity, -Infinity) for no values
 */
export function rangeWithBars(values: Float64Array, sigmas: Float64Array): { low: number; high: number } {
  const longest = 3 * median(sigmas);
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < values.length; i += 1) {
    const bar = Math.min(sigmas[i]!, longest);
    low = Math.min(low, values[i]! - bar);
    high = Math.max(high, values[i]! + bar);
  }
  return { low, high };
}

/** Middle value, the upper one of two; 0 for none. */
export function median(values: Float64Array): number {
  return values.length === 0 ? 0 : Float64Array.from(values).sort()[values.length >> 1]!;
}

/** Grows an interval so that it holds all values. */
export function grow(
  range: { low: number; high: number },
  values: Iterable<number>,
): { low: number; high: number } {
  let { low, high } = range;
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return { low, high };
}
