/** Numbers with uncertainty from draws. */
import { quantileSorted, standardDeviation } from '../numerics/summary.js';
import type { Quantity } from './types.js';

/** Probability below one standard deviation under the mean of a Gaussian, and its mirror. */
export const LOWER_TAIL = 0.158655253931457;

export function unknownQuantity(unit: string, why: string): Quantity {
  return { value: null, sigma: null, lower: null, upper: null, unit, why };
}

export function fixedQuantity(value: number, unit: string): Quantity {
  return { value, sigma: null, lower: null, upper: null, unit, fixed: true };
}

/**
 * The value with the central 68.3 % of the draws and their standard deviation.
 *
 * @param draws - may hold NaN, which are left out; without enough draws the uncertainty is unknown
 * @param cycle - period of an angle: draws are unwrapped to within half a cycle of the value
 */
export function centralInterval(value: number, draws: Float64Array, unit: string, cycle = 0): Quantity {
  if (!Number.isFinite(value)) return unknownQuantity(unit, 'it has no value for this orbit');
  const finite = draws.filter(Number.isFinite);
  if (cycle > 0) {
    for (let i = 0; i < finite.length; i++) finite[i]! -= cycle * Math.round((finite[i]! - value) / cycle);
  }
  if (finite.length < 100) {
    return {
      value,
      sigma: null,
      lower: null,
      upper: null,
      unit,
      why: 'the data do not determine its uncertainty',
    };
  }
  finite.sort();
  return {
    value,
    sigma: standardDeviation(finite),
    lower: quantileSorted(finite, LOWER_TAIL),
    upper: quantileSorted(finite, 1 - LOWER_TAIL),
    unit,
  };
}
