/**
 * Least-squares periodogram with every linear part of the model (a mean per instrument, drift, companions) refitted at
 * each frequency [ZechmeisterKuerster2009, Baluev2008], evaluated on a uniform grid through fast trigonometric sums.
 */
import { NonuniformTransform } from '../numerics/nonuniform-fft.js';
import type { LinearBackground } from './linear-background.js';

export interface FrequencyGrid {
  readonly startPerDay: number;
  readonly stepPerDay: number;
  readonly count: number;
}

/** Share of a sinusoid's own norm that must survive the background; below it the frequency cannot be told from it. */
const SEPARABLE = 1e-7;

/** A transform plan per grid; plans hold the large work arrays, so they are reused between stages and permutations. */
export class Periodogram {
  readonly grid: FrequencyGrid;
  readonly #plan: NonuniformTransform;
  readonly #re: Float64Array;
  readonly #im: Float64Array;
  readonly #cosCos: Float64Array;
  readonly #cosSin: Float64Array;
  readonly #sinSin: Float64Array;
  #amplitudes: Float64Array = new Float64Array(0);

  constructor(grid: FrequencyGrid) {
    this.grid = grid;
    this.#plan = new NonuniformTransform(grid.startPerDay, grid.stepPerDay, grid.count);
    this.#re = new Float64Array(grid.count);
    this.#im = new Float64Array(grid.count);
    this.#cosCos = new Float64Array(grid.count);
    this.#cosSin = new Float64Array(grid.count);
    this.#sinSin = new Float64Array(grid.count);
  }

  /**
   * Norms of the cosine and sine columns after the background is projected out. They depend on times, weights and
   * background only, so that one preparation serves many sets of residuals (permutations).
   */
  prepare(background: LinearBackground): void {
    const { timesDays, weights, basis } = background;
    const n = timesDays.length;
    const count = this.grid.count;
    const re = this.#re;
    const im = this.#im;
    // sum w exp(2 i omega t): the plan's frequencies at doubled times.
    const doubled = new Float64Array(n);
    let total = 0;
    for (let i = 0; i < n; i++) {
      doubled[i] = 2 * timesDays[i]!;
      total += weights[i]!;
    }
    this.#plan.transform(doubled, weights, re, im);
    for (let j = 0; j < count; j++) {
      this.#cosCos[j] = 0.5 * (total + re[j]!);
      this.#sinSin[j] = 0.5 * (total - re[j]!);
      this.#cosSin[j] = 0.5 * im[j]!;
    }
    this.#amplitudes = new Float64Array(n);
    for (const column of basis) {
      for (let i = 0; i < n; i++) this.#amplitudes[i] = weights[i]! * column[i]!;
      this.#plan.transform(timesDays, this.#amplitudes, re, im);
      for (let j = 0; j < count; j++) {
        const c = re[j]!;
        const s = im[j]!;
        this.#cosCos[j]! -= c * c;
        this.#cosSin[j]! -= c * s;
        this.#sinSin[j]! -= s * s;
      }
    }
  }

  /**
   * Normalised power 1 - chi2/chi2_0 at each frequency for residuals of the prepared background.
   *
   * @param residuals - (n), orthogonal to the background under the weights
   * @param chiSquare - sum w r^2
   * @param power - (count), overwritten, 0..1
   */
  powerOf(
    background: LinearBackground,
    residuals: Float64Array,
    chiSquare: number,
    power: Float64Array,
  ): void {
    const { timesDays, weights } = background;
    const n = timesDays.length;
    const amplitudes = this.#amplitudes;
    for (let i = 0; i < n; i++) amplitudes[i] = weights[i]! * residuals[i]!;
    this.#plan.transform(timesDays, amplitudes, this.#re, this.#im);
    const { count } = this.grid;
    for (let j = 0; j < count; j++) {
      const cc = this.#cosCos[j]!;
      const cs = this.#cosSin[j]!;
      const ss = this.#sinSin[j]!;
      const yc = this.#re[j]!;
      const ys = this.#im[j]!;
      const determinant = cc * ss - cs * cs;
      const trace = cc + ss;
      let value = 0;
      if (determinant > SEPARABLE * trace * trace) {
        value = (ss * yc * yc + cc * ys * ys - 2 * cs * yc * ys) / (determinant * chiSquare);
      }
      power[j] = value > 0 ? (value < 1 ? value : 1) : 0;
    }
  }
}

/** Power on the whole grid for one background. */
export function periodogramPower(background: LinearBackground, grid: FrequencyGrid): Float64Array {
  const periodogram = new Periodogram(grid);
  const power = new Float64Array(grid.count);
  periodogram.prepare(background);
  periodogram.powerOf(background, background.residuals, background.chiSquare, power);
  return power;
}

/** Sinusoid that fits best at one frequency, by direct sums. */
export interface SinusoidFit {
  readonly power: number;
  /** m/s, amplitude of cos and sin of 2 pi f t with t in days since the epoch. */
  readonly cosAmplitude: number;
  readonly sinAmplitude: number;
}

/** The periodogram at a single frequency by direct summation: for refining peaks, and as the check of the fast one. */
export function sinusoidAt(background: LinearBackground, frequencyPerDay: number): SinusoidFit {
  const { timesDays, weights, basis, residuals, chiSquare } = background;
  const n = timesDays.length;
  const cosine = new Float64Array(n);
  const sine = new Float64Array(n);
  let cc = 0;
  let cs = 0;
  let ss = 0;
  let yc = 0;
  let ys = 0;
  for (let i = 0; i < n; i++) {
    const cycles = frequencyPerDay * timesDays[i]!;
    const angle = 2 * Math.PI * (cycles - Math.round(cycles));
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    cosine[i] = c;
    sine[i] = s;
    const w = weights[i]!;
    cc += w * c * c;
    cs += w * c * s;
    ss += w * s * s;
    yc += w * c * residuals[i]!;
    ys += w * s * residuals[i]!;
  }
  for (const column of basis) {
    let c = 0;
    let s = 0;
    for (let i = 0; i < n; i++) {
      const wb = weights[i]! * column[i]!;
      c += wb * cosine[i]!;
      s += wb * sine[i]!;
    }
    cc -= c * c;
    cs -= c * s;
    ss -= s * s;
  }
  const determinant = cc * ss - cs * cs;
  if (!(determinant > SEPARABLE * (cc + ss) ** 2)) return { power: 0, cosAmplitude: 0, sinAmplitude: 0 };
  const cosAmplitude = (ss * yc - cs * ys) / determinant;
  const sinAmplitude = (cc * ys - cs * yc) / determinant;
  const power = (cosAmplitude * yc + sinAmplitude * ys) / chiSquare;
  return { power: Math.min(1, Math.max(0, power)), cosAmplitude, sinAmplitude };
}
