/** Thins a spectrum to what a chart can show, without losing a peak. */

/**
 * Keeps the highest and the lowest sample of each column of an axis, in their order; all samples where there are few.
 *
 * @param positions - (n), monotone, in columns (one column is the finest detail worth drawing); samples outside
 *   [0, columns] are left out
 * @param values - (n)
 * @returns indices kept, in the order of the input
 */
export function keepExtremes(positions: Float64Array, values: Float64Array, columns: number): number[] {
  const kept: number[] = [];
  let column = -1;
  let lowest = -1;
  let highest = -1;
  const close = (): void => {
    if (highest < 0) return;
    if (lowest === highest) kept.push(highest);
    else kept.push(Math.min(lowest, highest), Math.max(lowest, highest));
  };
  for (let i = 0; i < positions.length; i += 1) {
    const position = positions[i]!;
    if (!(position >= 0 && position <= columns) || !Number.isFinite(values[i]!)) continue;
    const own = Math.floor(position);
    if (own !== column) {
      close();
      column = own;
      lowest = i;
      highest = i;
    } else {
      if (values[i]! < values[lowest]!) lowest = i;
      if (values[i]! > values[highest]!) highest = i;
    }
  }
  close();
  return kept;
}
