/** Box-shaped dips over period, phase and duration [Kovacs2002]: the spectrum of a whole grid of periods. */
import { BoxScan, binExponentFor } from './box-scan.js';
import { tickedSeries, type TickedSeries, type WeightedSeries } from './ticked-series.js';

const TURN = 2 ** 32;
/** Phase bins are a power of two, at least this many per shortest duration (so up to twice as many). */
const BINS_PER_DURATION = 4;
/** Points closer than this share of the shortest duration are joined before folding. */
const TIME_BINS_PER_DURATION = 6;
const TICKS_PER_DURATION = 32;
const LEAST_TICKS_PER_DURATION = 8;
/** Periods share one set of time bins while their shortest durations differ by less than this factor. */
const BAND = 1.4;
const MOST_DURATIONS = 64;
const PROGRESS_EVERY = 2048;

/** Periods to search and the durations at each. */
export interface BoxGrid {
  /** Ascending. */
  readonly frequenciesPerDay: Float64Array;
  /** Writes ascending durations (days) of a period into `out` (64 at most) and returns their number, >= 1. */
  readonly durationsAt: (periodDays: number, out: Float64Array) => number;
}

export interface BoxPeak {
  readonly periodDays: number;
  /** Middle of a dip, days. */
  readonly midTimeDays: number;
  readonly durationDays: number;
  readonly depth: number;
  readonly signalResidue: number;
}

/** One band of periods: the series for it and the indices of its frequencies. */
interface Band {
  readonly from: number;
  readonly to: number;
  readonly series: TickedSeries;
}

/**
 * Spectrum of boxes. With durations four to eight bins long, starting points an eighth of a duration apart at most, points joined
 * within a sixth of the shortest duration and steps of period and duration as in `period-grid.ts`, the highest peak of a box without
 * noise has 94 % of its signal to noise on average, 85 % at worst (150 random boxes in 27 d at 2 min); peaks are refined
 * without any of it.
 */
export class BoxSearch {
  readonly grid: BoxGrid;
  /** Signal residue at each frequency; times sqrt(totalWeight) it is the signal to noise of white noise. */
  readonly signalResidue: Float64Array;
  readonly totalWeight: number;
  readonly #bands: readonly Band[];
  readonly #scan: BoxScan = new BoxScan();
  readonly #durations: Float64Array = new Float64Array(MOST_DURATIONS);
  readonly #lengths: Int32Array = new Int32Array(MOST_DURATIONS);
  #lengthCount = 0;
  #binExponent = 0;

  /**
   * @param joining - joins points in time before folding; `exact` folds every point
   * @param onProgress - called now and then with the share of the frequencies done
   */
  constructor(
    series: WeightedSeries,
    grid: BoxGrid,
    joining: 'joined' | 'exact' = 'joined',
    onProgress: (share: number) => void = () => undefined,
  ) {
    this.grid = grid;
    const { frequenciesPerDay } = grid;
    this.signalResidue = new Float64Array(frequenciesPerDay.length);
    this.#bands = this.#bandsFor(series, joining);
    this.totalWeight = this.#bands[0]?.series.totalWeight ?? 0;
    for (const band of this.#bands)
      for (let j = band.from; j < band.to; j++) {
        this.signalResidue[j] = this.#scanAt(band.series, frequenciesPerDay[j]!);
        if (j % PROGRESS_EVERY === 0) onProgress(j / frequenciesPerDay.length);
      }
  }

  /** The best box at one frequency of the grid. */
  peakAt(index: number): BoxPeak {
    const band = this.#bands.find(({ to }) => index < to)!;
    const frequency = this.grid.frequenciesPerDay[index]!;
    const periodDays = 1 / frequency;
    this.#scanAt(band.series, frequency);
    const { signalResidue, startBin, lengthBins, depth } = this.#scan.best;
    const binDays = periodDays / 2 ** this.#binExponent;
    return {
      periodDays,
      midTimeDays: band.series.originDays + (startBin + 0.5 * lengthBins) * binDays,
      durationDays: lengthBins * binDays,
      depth,
      signalResidue,
    };
  }

  #scanAt(series: TickedSeries, frequencyPerDay: number): number {
    this.#prepareLengths(1 / frequencyPerDay);
    return this.#scan.scanAt(series, frequencyPerDay, this.#binExponent, this.#lengths, this.#lengthCount);
  }

  /** Number of phase bins and lengths of the boxes in bins at a period. */
  #prepareLengths(periodDays: number): void {
    const durations = this.#durations;
    const count = this.grid.durationsAt(periodDays, durations);
    const exponent = binExponentFor((BINS_PER_DURATION * periodDays) / durations[0]!);
    const binCount = 2 ** exponent;
    let kept = 0;
    for (let k = 0; k < count; k++) {
      const length = Math.min(
        Math.max(1, Math.round((durations[k]! / periodDays) * binCount)),
        binCount >> 1,
      );
      if (kept === 0 || length > this.#lengths[kept - 1]!) this.#lengths[kept++] = length;
    }
    this.#lengthCount = kept;
    this.#binExponent = exponent;
  }

  #bandsFor(series: WeightedSeries, joining: 'joined' | 'exact'): Band[] {
    const { frequenciesPerDay } = this.grid;
    const bands: Band[] = [];
    let from = 0;
    while (from < frequenciesPerDay.length) {
      const longest = this.#shortestDuration(from);
      let to = from + 1;
      while (to < frequenciesPerDay.length && this.#shortestDuration(to) * BAND > longest) to++;
      const shortest = this.#shortestDuration(to - 1);
      const stepPerDay = (frequenciesPerDay[to - 1]! - frequenciesPerDay[from]!) / Math.max(1, to - 1 - from);
      // Coarser ticks where 2^-32 of a turn per tick would not resolve the grid.
      let perDuration = TICKS_PER_DURATION;
      while (perDuration > LEAST_TICKS_PER_DURATION && 2 * perDuration > stepPerDay * TURN * shortest)
        perDuration /= 2;
      const binDays = joining === 'joined' ? shortest / TIME_BINS_PER_DURATION : 0;
      bands.push({ from, to, series: tickedSeries(series, binDays, shortest / perDuration) });
      from = to;
    }
    return bands;
  }

  #shortestDuration(index: number): number {
    this.grid.durationsAt(1 / this.grid.frequenciesPerDay[index]!, this.#durations);
    return this.#durations[0]!;
  }
}
