/** Where the draws of one quantity lie, and the interval of an axis that shows them. */
import { quantileSorted } from '../../numerics/summary.js';
import { paddedRange } from './axes.js';
import type { DrawnQuantity } from './posterior-quantities.js';

/** Shares within one and two standard deviations of a Gaussian, in one dimension. */
export const CENTRAL_SHARES = { one: 0.682689492137086, two: 0.954499736103642 } as const;

export interface Spread {
  readonly median: number;
  /** Central 68.3 % and 95.4 %. */
  readonly one: readonly [number, number];
  readonly two: readonly [number, number];
  /** min(standard deviation, interquartile range / 1.349): the scale of the bulk, which wild draws do not widen. */
  readonly scale: number;
  /** Interval that an axis shows. */
  readonly low: number;
  readonly high: number;
  /** The interval is one full cycle of an angle: its ends are the same direction. */
  readonly periodic: boolean;
}

const SHOWN_TAIL = 0.001;
const MARGIN = 0.08;
/** An angle whose draws fill more of its cycle than this is shown over the whole cycle. */
const NEARLY_ALL = 0.8;
const QUARTILES_PER_SIGMA = 1.348979500392163;

/** @param values - at least one draw (may be thinned) of the quantity */
export function spreadOf(quantity: DrawnQuantity, values: Float64Array): Spread {
  const sorted = Float64Array.from(values).sort();
  const at = (probability: number): number => quantileSorted(sorted, probability);
  const central = (share: number): readonly [number, number] => [at((1 - share) / 2), at((1 + share) / 2)];
  const statistics = {
    median: at(0.5),
    one: central(CENTRAL_SHARES.one),
    two: central(CENTRAL_SHARES.two),
    scale: Math.min(deviation(values, at(0.5)), (at(0.75) - at(0.25)) / QUARTILES_PER_SIGMA),
  };
  const { cycle, reported, bounds } = quantity;
  const [lowest, highest] = [at(SHOWN_TAIL), at(1 - SHOWN_TAIL)];
  if (cycle > 0 && highest - lowest > NEARLY_ALL * cycle) {
    const centre = reported ?? (lowest + highest) / 2;
    return { ...statistics, low: centre - cycle / 2, high: centre + cycle / 2, periodic: true };
  }
  const shown = reported ?? statistics.median;
  const { min, max } = paddedRange(Math.min(lowest, shown), Math.max(highest, shown), MARGIN);
  return { ...statistics, low: Math.max(min, bounds[0]), high: Math.min(max, bounds[1]), periodic: false };
}

function deviation(values: Float64Array, about: number): number {
  let sum = 0;
  for (const value of values) sum += (value - about) * (value - about);
  return Math.sqrt(sum / values.length);
}
