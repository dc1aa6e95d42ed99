/** Density of the draws of one quantity, as a smooth curve. */
import { gaussianWeights, smoothLines } from './smoothing.js';
import type { Spread } from './spread-of-draws.js';

export interface DensityCurve {
  /** (n), ascending, equally spaced: centres of cells that fill the interval. */
  readonly x: Float64Array;
  /** (n), per unit of x. Sum times spacing is the share of the draws inside the interval. */
  readonly density: Float64Array;
}

const CELLS = 256;

/**
 * Gaussian kernel density on the interval of an axis, reflected at its ends (at a bound such as e >= 0 the mass does not
 * leak out). Bandwidth 1.06 min(s, IQR/1.349) n^(-1/5) [Silverman1986].
 *
 * @param values - (n) draws, at least one; those outside the interval count in n but are not drawn
 * @param spread - of the same draws
 */
export function densityCurve(values: Float64Array, spread: Spread): DensityCurve {
  const { low, high } = spread;
  const width = (high - low) / CELLS;
  const density = new Float64Array(CELLS);
  for (const value of values) {
    const cell = Math.floor((value - low) / width);
    if (cell >= 0 && cell < CELLS) density[cell]! += 1;
  }
  const bandwidth = (1.06 * spread.scale) / values.length ** 0.2;
  smoothLines(density, 1, CELLS, 1, 0, gaussianWeights(bandwidth / width), spread.periodic);
  for (let i = 0; i < CELLS; i += 1) density[i]! /= values.length * width;
  return { x: Float64Array.from(density, (_, i) => low + (i + 0.5) * width), density };
}
