/** The window function: what the times of observation alone imprint on a periodogram. */
import { NonuniformTransform } from '../numerics/nonuniform-fft.js';
import type { WindowFunction } from './types.js';

/** Natural frequencies of observing from the ground, 1/d. */
export const SIDEREAL_DAY_PER_DAY = 1.00273790935;
export const SYNODIC_MONTH_PER_DAY: number = 1 / 29.530588;
export const YEAR_PER_DAY: number = 1 / 365.2422;

const HIGHEST_FREQUENCY_PER_DAY = 2.2;
const LARGEST_GRID = 400_000;

const NAMED: readonly { readonly frequencyPerDay: number; readonly name: string }[] = [
  { frequencyPerDay: YEAR_PER_DAY, name: 'year' },
  { frequencyPerDay: 2 * YEAR_PER_DAY, name: 'half year' },
  { frequencyPerDay: SYNODIC_MONTH_PER_DAY, name: 'synodic month' },
  { frequencyPerDay: SIDEREAL_DAY_PER_DAY, name: 'sidereal day' },
  { frequencyPerDay: 1, name: 'solar day' },
  { frequencyPerDay: 2 * SIDEREAL_DAY_PER_DAY, name: 'half sidereal day' },
  { frequencyPerDay: 1 + SIDEREAL_DAY_PER_DAY, name: 'half day' },
  { frequencyPerDay: 2, name: 'half solar day' },
];

/**
 * |sum w exp(2 pi i f t)|^2 / (sum w)^2 from half a resolution element up to 2.2 per day.
 *
 * @param timesDays - (n), days since any epoch
 * @param weights - (n)
 */
export function windowFunction(
  timesDays: Float64Array,
  weights: Float64Array,
  spanDays: number,
): WindowFunction {
  const resolution = 1 / spanDays;
  const start = 0.7 * resolution;
  const step = Math.max(resolution / 8, HIGHEST_FREQUENCY_PER_DAY / LARGEST_GRID);
  const count = Math.max(16, Math.ceil((HIGHEST_FREQUENCY_PER_DAY - start) / step));
  const re = new Float64Array(count);
  const im = new Float64Array(count);
  new NonuniformTransform(start, step, count).transform(timesDays, weights, re, im);
  const total = weights.reduce((sum, w) => sum + w, 0);
  const frequenciesPerDay = Float64Array.from({ length: count }, (_, j) => start + j * step);
  const power = Float64Array.from({ length: count }, (_, j) => (re[j]! ** 2 + im[j]! ** 2) / (total * total));
  const indices: number[] = [];
  for (let j = 1; j < count - 1; j++) {
    // The flank of the central peak is no feature of its own.
    if (power[j]! > power[j - 1]! && power[j]! >= power[j + 1]!) indices.push(j);
  }
  indices.sort((a, b) => power[b]! - power[a]!);
  const chosen: number[] = [];
  for (const index of indices) {
    if (chosen.length >= 8) break;
    if (chosen.every((other) => Math.abs(other - index) * step > 1.5 * resolution)) chosen.push(index);
  }
  return {
    frequenciesPerDay,
    power,
    peaks: chosen.map((index) => {
      const frequencyPerDay = frequenciesPerDay[index]!;
      return {
        frequencyPerDay,
        periodDays: 1 / frequencyPerDay,
        power: power[index]!,
        name: nameOf(frequencyPerDay, resolution),
      };
    }),
  };
}

function nameOf(frequencyPerDay: number, resolution: number): string | null {
  const nearest = [...NAMED].sort(
    (a, b) => Math.abs(a.frequencyPerDay - frequencyPerDay) - Math.abs(b.frequencyPerDay - frequencyPerDay),
  )[0]!;
  return Math.abs(nearest.frequencyPerDay - frequencyPerDay) < 0.6 * resolution ? nearest.name : null;
}
