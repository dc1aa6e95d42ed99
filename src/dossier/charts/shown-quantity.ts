/** One quantity of a posterior as a panel shows it: thinned draws, where they lie, and the axis. */
import type { DrawnQuantity } from './posterior-quantities.js';
import { spreadOf } from './spread-of-draws.js';
import type { Spread } from './spread-of-draws.js';
import { pick } from './thin-draws.js';
import { valueAxis } from './value-axis.js';
import type { ValueAxis } from './value-axis.js';

export interface ShownQuantity {
  readonly quantity: DrawnQuantity;
  readonly values: Float64Array;
  readonly spread: Spread;
  readonly axis: ValueAxis;
}

/**
 * @param indices - of the draws that are shown, at least one
 * @param ticks - about how many
 * @param longest - most characters of a tick label
 */
export function shownQuantity(
  quantity: DrawnQuantity,
  indices: Int32Array,
  ticks: number,
  longest: number,
): ShownQuantity {
  const values = pick(quantity.values, indices);
  const spread = spreadOf(quantity, values);
  const axis = valueAxis(quantity.symbol, quantity.unit, spread.low, spread.high, ticks, longest);
  return { quantity, values, spread, axis };
}
