/**
 * Density of the draws of two quantities, smoothed on a grid, and its contours that hold given shares of the draws.
 * The grid follows a correlation (one quantity is taken relative to its regression on the other), so that a narrow
 * inclined ridge is not smeared; contours are turned back into the two quantities.
 */
import { isoLines } from './iso-lines.js';
import { gaussianWeights, returned, smoothLines } from './smoothing.js';
import type { Spread } from './spread-of-draws.js';

/** Shares within one and two standard deviations of a Gaussian in two dimensions: 1 - exp(-k²/2). */
export const CONTOUR_SHARES: readonly [number, number] = [1 - Math.exp(-0.5), 1 - Math.exp(-2)];

export interface PairDraws {
  /** (n) draws and where they lie. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly xSpread: Spread;
  readonly ySpread: Spread;
  /** An end of the interval is a bound of the quantity itself. */
  readonly xBounded: boolean;
  readonly yBounded: boolean;
}

export interface DensityMap {
  /** For each share asked for: closed lines of alternating x and y; the inside is where the density is higher. */
  readonly contours: readonly (readonly Float64Array[])[];
  /** (n) density at each draw, and the level of each contour, in the same arbitrary unit. */
  readonly atDraws: Float64Array;
  readonly levels: readonly number[];
}

const CELLS = 72;
/** Successive draws are correlated, so that there are fewer than it seems and the bandwidth must be wider. */
const WIDENING = 1.2;
/** Cells around the grid: a copy of the edge, so that a contour reaches the end of the axis, then nothing, which closes it. */
const RING = 2;

interface GridAxis {
  readonly low: number;
  readonly width: number;
  readonly periodic: boolean;
  readonly sigma: number;
}

/** @param shares - of the draws, each between 0 and 1 */
export function densityMap(pair: PairDraws, shares: readonly number[] = CONTOUR_SHARES): DensityMap {
  const { x, y, xSpread, ySpread } = pair;
  // Only the quantity that is not at its bound may be sheared: the bound must stay an edge of the grid.
  const straight = xSpread.periodic || ySpread.periodic || (pair.xBounded && pair.yBounded);
  const shearX = pair.yBounded;
  const slope = straight ? 0 : shearX ? regression(y, x, ySpread) : regression(x, y, xSpread);
  const pivot = shearX ? ySpread.median : xSpread.median;
  const base = shearX ? y : x;
  const other = shearX ? x : y;
  const sheared = other.map((value, i) => value - slope * (base[i]! - pivot));
  const baseAxis = axisOf(shearX ? ySpread : xSpread, x.length);
  const otherAxis =
    slope === 0 ? axisOf(shearX ? xSpread : ySpread, x.length) : axisOf(plainSpread(sheared), x.length);

  const grid = smoothedCounts(base, sheared, baseAxis, otherAxis);
  const atDraws = base.map((value, i) => densityAt(grid, baseAxis, otherAxis, value, sheared[i]!));
  const ranked = Float64Array.from(atDraws).sort();
  const levels = shares.map((share) => {
    const k = Math.round((1 - share) * ranked.length);
    const level = (ranked[Math.max(0, k - 1)]! + ranked[Math.min(k, ranked.length - 1)]!) / 2;
    return Math.max(level, Number.MIN_VALUE); // ground without any draw is never inside
  });
  const side = CELLS + 2 * RING;
  const ringed = withRing(grid, baseAxis.periodic, otherAxis.periodic);
  const contours = levels.map((level) =>
    isoLines(ringed, side, side, level).map((line) => {
      const turned = new Float64Array(line.length);
      for (let k = 0; k < line.length; k += 2) {
        const b = baseAxis.low + (line[k]! - RING + 0.5) * baseAxis.width;
        const o = otherAxis.low + (line[k + 1]! - RING + 0.5) * otherAxis.width + slope * (b - pivot);
        turned[k] = shearX ? o : b;
        turned[k + 1] = shearX ? b : o;
      }
      return turned;
    }),
  );
  return { contours, atDraws, levels };
}

/** Slope of the regression of one quantity on another; draws far outside the bulk of the latter do not pull on it. */
function regression(base: Float64Array, other: Float64Array, { low, high }: Spread): number {
  let [n, baseMean, otherMean] = [0, 0, 0];
  for (let i = 0; i < base.length; i += 1) {
    if (base[i]! < low || base[i]! > high) continue;
    n += 1;
    baseMean += (base[i]! - baseMean) / n;
    otherMean += (other[i]! - otherMean) / n;
  }
  let [square, cross] = [0, 0];
  for (let i = 0; i < base.length; i += 1) {
    if (base[i]! < low || base[i]! > high) continue;
    square += (base[i]! - baseMean) ** 2;
    cross += (base[i]! - baseMean) * (other[i]! - otherMean);
  }
  return square > 0 ? cross / square : 0;
}

function plainSpread(values: Float64Array): Pick<Spread, 'low' | 'high' | 'scale' | 'periodic'> {
  const sorted = Float64Array.from(values).sort();
  const at = (share: number): number => sorted[Math.round(share * (sorted.length - 1))]!;
  const margin = 0.08 * (at(0.999) - at(0.001));
  const scale = (at(0.841) - at(0.159)) / 2;
  return { low: at(0.001) - margin, high: at(0.999) + margin, scale, periodic: false };
}

/** Bandwidth of each axis by the rule for two dimensions, n^(-1/6) of the scale of the bulk [Silverman1986]. */
function axisOf(spread: Pick<Spread, 'low' | 'high' | 'scale' | 'periodic'>, count: number): GridAxis {
  const { low, high, scale, periodic } = spread;
  // A grid needs an extent, also where nearly all draws agree.
  const extent = high > low ? high - low : Math.max(1e-12, Math.abs(low) * 1e-12);
  return { low, width: extent / CELLS, periodic, sigma: (WIDENING * scale) / count ** (1 / 6) };
}

/** Counts on (base, other) cells, index = other·CELLS + base, smoothed along both. */
function smoothedCounts(
  base: Float64Array,
  other: Float64Array,
  baseAxis: GridAxis,
  otherAxis: GridAxis,
): Float64Array {
  const grid = new Float64Array(CELLS * CELLS);
  for (let i = 0; i < base.length; i += 1) {
    const b = Math.floor((base[i]! - baseAxis.low) / baseAxis.width);
    const o = Math.floor((other[i]! - otherAxis.low) / otherAxis.width);
    if (b >= 0 && b < CELLS && o >= 0 && o < CELLS) grid[o * CELLS + b]! += 1;
  }
  const weights = (axis: GridAxis): Float64Array =>
    gaussianWeights(Math.min(CELLS / 4, axis.sigma / axis.width));
  smoothLines(grid, CELLS, CELLS, 1, CELLS, weights(baseAxis), baseAxis.periodic);
  smoothLines(grid, CELLS, CELLS, CELLS, 1, weights(otherAxis), otherAxis.periodic);
  return grid;
}

/** Density between the centres of cells, linear in both directions; 0 outside the grid. */
function densityAt(
  grid: Float64Array,
  baseAxis: GridAxis,
  otherAxis: GridAxis,
  base: number,
  other: number,
): number {
  const b = (base - baseAxis.low) / baseAxis.width - 0.5;
  const o = (other - otherAxis.low) / otherAxis.width - 0.5;
  if (!(b >= -0.5 && b <= CELLS - 0.5 && o >= -0.5 && o <= CELLS - 0.5)) return 0;
  const b0 = returned(Math.floor(b), CELLS, baseAxis.periodic);
  const b1 = returned(Math.floor(b) + 1, CELLS, baseAxis.periodic);
  const row0 = CELLS * returned(Math.floor(o), CELLS, otherAxis.periodic);
  const row1 = CELLS * returned(Math.floor(o) + 1, CELLS, otherAxis.periodic);
  const fb = b - Math.floor(b);
  const fo = o - Math.floor(o);
  const lower = (1 - fb) * grid[row0 + b0]! + fb * grid[row0 + b1]!;
  const upper = (1 - fb) * grid[row1 + b0]! + fb * grid[row1 + b1]!;
  return (1 - fo) * lower + fo * upper;
}

function withRing(grid: Float64Array, basePeriodic: boolean, otherPeriodic: boolean): Float64Array {
  const side = CELLS + 2 * RING;
  const ringed = new Float64Array(side * side);
  for (let j = 1; j < side - 1; j += 1) {
    for (let i = 1; i < side - 1; i += 1) {
      ringed[j * side + i] =
        grid[returned(j - RING, CELLS, otherPeriodic) * CELLS + returned(i - RING, CELLS, basePeriodic)]!;
    }
  }
  return ringed;
}
