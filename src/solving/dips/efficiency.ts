/** Signal detection efficiency: how far a spectrum stands above itself [Kovacs2002]. */
import { medianInPlace, robustScatterInPlace } from './order-statistics.js';

/** Level and scatter are taken over blocks of the grid, since both change with the period. */
const MOST_BLOCKS = 40;
const FEWEST_IN_BLOCK = 200;
/** A block scatters at least by this share of what blocks usually do. */
const LEAST_SCATTER = 0.1;

/**
 * (residue - level)/scatter, level the running median and scatter 1.48 times the running median absolute deviation over
 * blocks of 200 or more neighbouring frequencies, interpolated between their middles. Medians in place of mean and standard deviation
 * keep the peaks themselves out of both.
 */
export function detectionEfficiency(signalResidue: Float64Array): Float64Array {
  const n = signalResidue.length;
  const blocks = Math.max(1, Math.min(MOST_BLOCKS, Math.floor(n / FEWEST_IN_BLOCK)));
  const levels = new Float64Array(blocks);
  const scatters = new Float64Array(blocks);
  for (let b = 0; b < blocks; b++) {
    const part = signalResidue.slice(Math.floor((b * n) / blocks), Math.floor(((b + 1) * n) / blocks));
    const level = medianInPlace(part);
    levels[b] = level;
    for (let i = 0; i < part.length; i++) part[i]! -= level;
    scatters[b] = robustScatterInPlace(part);
  }
  // A block in which nearly nothing varies would make a mountain of a grain.
  const least = LEAST_SCATTER * medianInPlace(Float64Array.from(scatters));
  for (let b = 0; b < blocks; b++) scatters[b] = Math.max(scatters[b]!, least);
  const efficiency = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    const position = Math.min(Math.max(((j + 0.5) * blocks) / n - 0.5, 0), blocks - 1);
    const b = Math.min(Math.floor(position), Math.max(0, blocks - 2));
    const next = Math.min(b + 1, blocks - 1);
    const u = position - b;
    const level = (1 - u) * levels[b]! + u * levels[next]!;
    const scatter = (1 - u) * scatters[b]! + u * scatters[next]!;
    efficiency[j] = scatter > 0 ? (signalResidue[j]! - level) / scatter : 0;
  }
  return efficiency;
}

/**
 * Indices of the highest values, highest first, none within `apart` (relative) of the frequency of a higher one.
 *
 * @param frequencies - ascending
 */
export function highestPeaks(
  values: Float64Array,
  frequencies: Float64Array,
  most: number,
  apart: number,
): number[] {
  const maxima: number[] = [];
  for (let j = 0; j < values.length; j++)
    if (values[j]! >= (values[j - 1] ?? -Infinity) && values[j]! > (values[j + 1] ?? -Infinity))
      maxima.push(j);
  maxima.sort((a, b) => values[b]! - values[a]! || a - b);
  const kept: number[] = [];
  for (const j of maxima) {
    if (kept.length >= most) break;
    if (kept.every((k) => Math.abs(frequencies[j]! - frequencies[k]!) > apart * frequencies[k]!))
      kept.push(j);
  }
  return kept;
}
