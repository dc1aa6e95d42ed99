/** Reading the draws of a posterior: columns by their path in `solution.json`, limits, widths, correlations. */
import { mean, quantileSorted } from '../numerics/summary.js';
import type { PosteriorColumn, PosteriorDraws } from '../solving/types.js';
import type { DrawnBound } from './numbers.js';

/** Share of the draws below an upper limit. */
const LIMIT_SHARE = 0.95;

/** Shares of a normal distribution within one and two standard deviations of its centre. */
const ONE_SIGMA = 0.682689492137086;
const TWO_SIGMA = 0.954499736103642;

/** Path of a quantity in `solution.json`, which is also the key of its column. */
export const keyOf = {
  element: (letter: string, element: string): string => `companions.${letter}.elements.${element}`,
  jitter: (instrument: string): string => `velocity.instruments.${instrument}.jitter`,
  lightCurveJitter: (table: string): string => `photometry.lightCurves.${table}.jitter`,
  zeroPoint: (instrument: string): string => `velocity.instruments.${instrument}.zeroPoint`,
} as const;

function columnOf(draws: PosteriorDraws | null, key: string): PosteriorColumn | null {
  return draws?.columns.find((column) => column.key === key) ?? null;
}

/** What the draws say of a quantity that cannot be negative; `null` without draws of it. */
export function drawnBoundOf(draws: PosteriorDraws | null, key: string): DrawnBound | null {
  const column = columnOf(draws, key);
  if (column === null || column.values.length === 0) return null;
  const sorted = Float64Array.from(column.values).sort();
  return {
    lower: quantileSorted(sorted, (1 - ONE_SIGMA) / 2),
    median: quantileSorted(sorted, 0.5),
    limit: quantileSorted(sorted, LIMIT_SHARE),
  };
}

/** How far a distribution is from a Gaussian, seen from its central intervals. */
export interface Shape {
  /** Upper over lower half of the central 68.3 % interval about the median; 1 when symmetric. */
  readonly sides: number;
  /** Width of the central 95.4 % interval over twice that of the central 68.3 %; 1 for a Gaussian. */
  readonly tails: number;
}

/** @returns `null` where half of the interval has no width, so that no ratio exists */
export function shapeOf(values: Float64Array): Shape | null {
  if (values.length === 0) return null;
  const sorted = Float64Array.from(values).sort();
  const at = (share: number): number => quantileSorted(sorted, share);
  const lower = at(0.5) - at((1 - ONE_SIGMA) / 2);
  const upper = at((1 + ONE_SIGMA) / 2) - at(0.5);
  if (!(lower > 0 && upper > 0)) return null;
  const wide = at((1 + TWO_SIGMA) / 2) - at((1 - TWO_SIGMA) / 2);
  return { sides: upper / lower, tails: wide / (2 * (upper + lower)) };
}

/** Pearson correlation, -1 .. 1; `null` where one of the two does not vary. */
export function correlationOf(one: Float64Array, other: Float64Array): number | null {
  if (one.length !== other.length || one.length === 0) return null;
  const [oneMean, otherMean] = [mean(one), mean(other)];
  let [cross, oneSquare, otherSquare] = [0, 0, 0];
  for (let i = 0; i < one.length; i += 1) {
    const a = one[i]! - oneMean;
    const b = other[i]! - otherMean;
    cross += a * b;
    oneSquare += a * a;
    otherSquare += b * b;
  }
  const scale = Math.sqrt(oneSquare * otherSquare);
  return scale > 0 ? cross / scale : null;
}
