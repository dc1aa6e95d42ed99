/** Medians of work arrays that may be reordered, and places in ascending ones. */

/** Median; the values are sorted in place. `NaN` for none. */
export function medianInPlace(values: Float64Array): number {
  const n = values.length;
  if (n === 0) return NaN;
  values.sort();
  const middle = n >> 1;
  return n % 2 === 1 ? values[middle]! : 0.5 * (values[middle - 1]! + values[middle]!);
}

/** Median absolute value as the standard deviation of a normal distribution about zero; sorted and made positive in place. */
export function robustScatterInPlace(values: Float64Array): number {
  for (let i = 0; i < values.length; i++) values[i] = Math.abs(values[i]!);
  return 1.482602218505602 * medianInPlace(values);
}

/** Root mean square about zero without what is more than four robust standard deviations away. 0 for none. */
export function clippedRms(values: Float64Array): number {
  const cut = 4 * robustScatterInPlace(values.slice());
  let sum = 0;
  let count = 0;
  for (const value of values) {
    if (Math.abs(value) > cut) continue;
    sum += value * value;
    count++;
  }
  return count > 0 ? Math.sqrt(sum / count) : 0;
}

/** Index of the first of ascending times that is not before `time`; their number where all are. */
export function firstAtOrAfter(times: Float64Array, time: number): number {
  let low = 0;
  let high = times.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (times[middle]! < time) low = middle + 1;
    else high = middle;
  }
  return low;
}
