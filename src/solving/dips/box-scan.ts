/** Hot loops of the search for dips: fold a series into phase bins, and find the best box among them [Kovacs2002]. */
import type { TickedSeries } from './ticked-series.js';

const TURN = 2 ** 32;
const LARGEST_BIN_EXPONENT = 22;

/** Exponent of the least power of two, 2^3 to 2^22, that is so many phase bins or more. */
export function binExponentFor(binCount: number): number {
  let exponent = 3;
  while (2 ** exponent < binCount && exponent < LARGEST_BIN_EXPONENT) exponent++;
  return exponent;
}

/** Best box of one folded series. Overwritten by the next scan. */
export interface BestBox {
  /** sqrt(s^2/(r (1 - r))): r the share of weight in the box, s the weighted sum of departures in it over all weight. */
  signalResidue: number;
  startBin: number;
  lengthBins: number;
  /** Mean outside less mean inside the box, in units of the values. */
  depth: number;
  /** Share of weight in the box, 0..1. */
  share: number;
}

/** Work arrays for folding and scanning; nothing is allocated once they are large enough. */
export class BoxScan {
  readonly best: BestBox = { signalResidue: 0, startBin: 0, lengthBins: 0, depth: 0, share: 0 };
  /** Weight and weighted departure of bin b at 2b and 2b + 1. */
  #bins: Float64Array = new Float64Array(0);
  #cumulativeWeights: Float64Array = new Float64Array(0);
  #cumulative: Float64Array = new Float64Array(0);

  /**
   * Folds with a frequency and scans.
   *
   * @param frequencyPerDay - below 1/tick; rounded to a whole number of 2^-32 turns per tick
   * @param binExponent - 2^binExponent phase bins, 1..24
   * @param lengths - lengths of boxes in bins, ascending, below the number of bins
   * @param lengthCount - how many of `lengths` count
   * @returns `best.signalResidue`; phase 0 is the origin of the series
   */
  scanAt(
    series: TickedSeries,
    frequencyPerDay: number,
    binExponent: number,
    lengths: Int32Array,
    lengthCount: number,
  ): number {
    const binCount = 2 ** binExponent;
    if (this.#bins.length < 2 * binCount) this.#bins = new Float64Array(2 * binCount);
    const bins = this.#bins;
    bins.fill(0, 0, 2 * binCount);
    const increment = Math.round(frequencyPerDay * series.tickDays * TURN) | 0;
    foldInto(series, increment, 32 - binExponent, bins);
    return this.scan(bins, binCount, lengths, lengthCount);
  }

  /**
   * Finds the best box in bins that are already folded; boxes may wrap around.
   *
   * @param bins - (2 binCount) weight and weighted departure from the mean, in turns; read, not modified
   */
  scan(bins: Float64Array, binCount: number, lengths: Int32Array, lengthCount: number): number {
    const longest = lengths[lengthCount - 1]!;
    const needed = binCount + longest + 1;
    if (this.#cumulative.length < needed) {
      this.#cumulative = new Float64Array(2 * needed);
      this.#cumulativeWeights = new Float64Array(2 * needed);
    }
    const sums = this.#cumulative;
    const sumsOfWeights = this.#cumulativeWeights;
    let w = 0;
    let x = 0;
    sums[0] = 0;
    sumsOfWeights[0] = 0;
    for (let b = 0; b < binCount; b++) {
      w += bins[2 * b]!;
      x += bins[2 * b + 1]!;
      sumsOfWeights[b + 1] = w;
      sums[b + 1] = x;
    }
    const total = w;
    for (let b = 0; b < longest; b++) {
      w += bins[2 * b]!;
      x += bins[2 * b + 1]!;
      sumsOfWeights[binCount + b + 1] = w;
      sums[binCount + b + 1] = x;
    }
    return this.#bestOf(binCount, total, lengths, lengthCount);
  }

  #bestOf(binCount: number, total: number, lengths: Int32Array, lengthCount: number): number {
    const sums = this.#cumulative;
    const sumsOfWeights = this.#cumulativeWeights;
    // Below it a box holds nothing, or everything, but for rounding.
    const nothing = 1e-10 * total * total;
    let over = 0;
    let under = 1;
    let startBin = 0;
    let lengthBins = 0;
    for (let k = 0; k < lengthCount; k++) {
      const length = lengths[k]!;
      // Long boxes start at every eighth of their length.
      const stride = length < 16 ? 1 : length >> 3;
      for (let b = 0; b < binCount; b += stride) {
        const loss = sums[b]! - sums[b + length]!;
        const inside = sumsOfWeights[b + length]! - sumsOfWeights[b]!;
        const product = inside * (total - inside);
        const square = loss * loss;
        if (square * under > over * product && loss > 0 && product > nothing) {
          over = square;
          under = product;
          startBin = b;
          lengthBins = length;
        }
      }
    }
    const { best } = this;
    best.signalResidue = Math.sqrt(over / under);
    best.startBin = startBin;
    best.lengthBins = lengthBins;
    const loss = lengthBins === 0 ? 0 : sums[startBin]! - sums[startBin + lengthBins]!;
    const inside = lengthBins === 0 ? 0 : sumsOfWeights[startBin + lengthBins]! - sumsOfWeights[startBin]!;
    best.share = total > 0 ? inside / total : 0;
    best.depth = lengthBins === 0 ? 0 : (loss * total) / (inside * (total - inside));
    return best.signalResidue;
  }
}

/** Adds each point to its bin; the phase is the low 32 bits of tick times increment, the bin its leading bits. */
function foldInto(series: TickedSeries, increment: number, shift: number, bins: Float64Array): void {
  const { ticks, weights, weighted, count } = series;
  for (let i = 0; i < count; i++) {
    const at = (Math.imul(ticks[i]!, increment) >>> shift) << 1;
    bins[at]! += weights[i]!;
    bins[at + 1]! += weighted[i]!;
  }
}
