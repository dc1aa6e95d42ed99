/** Smooths equally spaced values with a Gaussian whose mass stays inside the interval. */

/** Weights beyond this many standard deviations are left out; they hold 5e-4 of the mass, which the others take over. */
const REACH_SIGMA = 3.5;

/**
 * Half of a Gaussian kernel: the weight of the centre, then of each step away from it; all weights of both sides sum to 1.
 *
 * @param sigmaSteps - standard deviation in steps of the grid, >= 0; 0 leaves values as they are
 */
export function gaussianWeights(sigmaSteps: number): Float64Array {
  const reach = Math.ceil(REACH_SIGMA * sigmaSteps);
  const weights = Float64Array.from({ length: reach + 1 }, (_, k) =>
    k === 0 ? 1 : Math.exp(-0.5 * (k / sigmaSteps) ** 2),
  );
  const sum = weights.reduce((total, weight, k) => total + (k === 0 ? weight : 2 * weight), 0);
  return weights.map((weight) => weight / sum);
}

/**
 * Convolves lines of a grid with a kernel, in place. What would leave the interval is reflected at its ends, or comes back
 * at the other end where it is periodic, so that the sum of each line stays.
 *
 * @param grid - values of all lines
 * @param lines - number of lines; line k starts at k·between
 * @param count - length of a line, at least 1
 * @param step - distance of neighbours within a line
 * @param between - distance of the starts of two lines
 * @param weights - from `gaussianWeights`
 * @param periodic - the ends of a line are neighbours
 */
export function smoothLines(
  grid: Float64Array,
  lines: number,
  count: number,
  step: number,
  between: number,
  weights: Float64Array,
  periodic: boolean,
): void {
  const reach = weights.length - 1;
  const padded = new Float64Array(count + 2 * reach);
  const source = Int32Array.from(padded, (_, k) => returned(k - reach, count, periodic));
  for (let line = 0; line < lines; line += 1) {
    const start = line * between;
    for (let k = 0; k < padded.length; k += 1) padded[k] = grid[start + source[k]! * step]!;
    for (let k = 0; k < count; k += 1) {
      let sum = weights[0]! * padded[k + reach]!;
      for (let d = 1; d <= reach; d += 1)
        sum += weights[d]! * (padded[k + reach - d]! + padded[k + reach + d]!);
      grid[start + k * step] = sum;
    }
  }
}

/** Index inside 0 .. count - 1 that stands for one outside: reflected at the outer edges of the end cells, or wrapped. */
export function returned(index: number, count: number, periodic: boolean): number {
  const cycle = periodic ? count : 2 * count;
  const wrapped = ((index % cycle) + cycle) % cycle;
  return wrapped < count ? wrapped : 2 * count - 1 - wrapped;
}
