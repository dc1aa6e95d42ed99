/**
 * Gaussian likelihood of data with white noise in which linear nuisance parameters are integrated out: data ~ N(D·c0, N + D·Λ·D^T)
 * with D_ij = T_i·A_ij, Λ = diag(priorSigma²), N = diag(variances).
 */
import {
  NuisanceSystem,
  priorBaseline,
  requireNuisance,
  scaledDesign,
  type LinearNuisance,
  type MarginalLikelihood,
} from './linear-nuisance.js';

export type { LinearNuisance, MarginalLikelihood } from './linear-nuisance.js';
export { MarginalProcessLikelihood } from './marginal-process.js';

const LN_TWO_PI = Math.log(2 * Math.PI);
/** Between these bounds a running product of variances takes one more factor from 1e-200 to 1e200 without harm. */
const PRODUCT_LOW = 1e-100;
const PRODUCT_HIGH = 1e100;

/**
 * White noise. Chi-square is summed over residuals from the conditional mean of the coefficients, where errors of that mean
 * count to second order only, so nothing cancels however wide the priors are.
 */
export class MarginalLinearLikelihood implements MarginalLikelihood {
  readonly byModel: Float64Array;
  readonly byVariance: Float64Array;
  readonly coefficients: Float64Array;
  readonly #data: Float64Array;
  readonly #columns: number;
  readonly #system: NuisanceSystem;
  /** A·priorSigma by blocks of four points: (points/4, columns, 4), filled up with zeros. */
  readonly #blocks: Float64Array;
  /** Per point, and zeros up to a multiple of four: A·priorMean, */
  readonly #priorBaseline: Float64Array;
  /** 1/variance, */
  readonly #weights: Float64Array;
  /** T·(data - prior's prediction)/variance, then the baseline, */
  readonly #pulls: Float64Array;
  /** T²/variance, then the leverage. */
  readonly #squares: Float64Array;

  /**
   * @param data - length rows; kept, not modified
   * @throws RangeError when lengths disagree or a prior is not proper
   */
  constructor(data: Float64Array, nuisance: LinearNuisance) {
    requireNuisance(data, nuisance);
    const { rows, columns } = nuisance;
    const padded = 4 * Math.ceil(rows / 4);
    this.#data = data;
    this.#columns = columns;
    this.#system = new NuisanceSystem(nuisance);
    this.#blocks = new Float64Array(padded * columns);
    scaledDesign(nuisance).forEach((element, at) => {
      const row = Math.floor(at / columns);
      const block = row - (row % 4);
      this.#blocks[block * columns + 4 * (at % columns) + (row % 4)] = element;
    });
    this.#priorBaseline = new Float64Array(padded);
    this.#priorBaseline.set(priorBaseline(nuisance));
    this.#weights = new Float64Array(padded);
    this.#pulls = new Float64Array(padded);
    this.#squares = new Float64Array(padded);
    this.byModel = new Float64Array(nuisance.rows);
    this.byVariance = new Float64Array(nuisance.rows);
    this.coefficients = this.#system.coefficients;
  }

  evaluate(model: Float64Array, variances: Float64Array): number {
    const logDeterminant = this.#weigh(model, variances);
    if (!Number.isFinite(logDeterminant)) return -Infinity;
    this.#accumulate();
    if (!this.#system.solve()) return -Infinity;
    this.#project();
    const chiSquare = this.#differentiate(model) + this.#system.penalty;
    const constant = this.#data.length * LN_TWO_PI;
    const value = -0.5 * (chiSquare + logDeterminant + this.#system.logDeterminant + constant);
    return Number.isFinite(value) ? value : -Infinity;
  }

  baseline(): Float64Array {
    return this.#pulls.slice(0, this.#data.length);
  }

  coefficientCovariance(out: Float64Array): Float64Array {
    return this.#system.coefficientCovariance(out);
  }

  /** Weights and weighted prior residuals of all points; ln det N, or NaN when a variance is not above 0. */
  #weigh(model: Float64Array, variances: Float64Array): number {
    const data = this.#data;
    const prior = this.#priorBaseline;
    const weights = this.#weights;
    const pulls = this.#pulls;
    const squares = this.#squares;
    let logarithms = 0;
    let product = 1;
    for (let i = 0; i < data.length; i++) {
      const variance = variances[i]!;
      if (!(variance > 0)) return NaN;
      product *= variance;
      if (product < PRODUCT_LOW || product > PRODUCT_HIGH) {
        logarithms += Math.log(product);
        product = 1;
      }
      const weight = 1 / variance;
      const factor = model[i]!;
      const weighted = weight * factor;
      weights[i] = weight;
      squares[i] = weighted * factor;
      pulls[i] = weighted * (data[i]! - factor * prior[i]!);
    }
    return logarithms + Math.log(product);
  }

  /** Sums of the normal system, four points at a time. */
  #accumulate(): void {
    const { normal, right } = this.#system;
    const blocks = this.#blocks;
    const squares = this.#squares;
    const pulls = this.#pulls;
    const m = this.#columns;
    normal.fill(0);
    right.fill(0);
    for (let i = 0, at = 0; i < squares.length; i += 4, at += 4 * m) {
      const square0 = squares[i]!;
      const square1 = squares[i + 1]!;
      const square2 = squares[i + 2]!;
      const square3 = squares[i + 3]!;
      const pull0 = pulls[i]!;
      const pull1 = pulls[i + 1]!;
      const pull2 = pulls[i + 2]!;
      const pull3 = pulls[i + 3]!;
      for (let j = 0, own = at, to = 0; j < m; j++, own += 4, to += m) {
        const element0 = blocks[own]!;
        const element1 = blocks[own + 1]!;
        const element2 = blocks[own + 2]!;
        const element3 = blocks[own + 3]!;
        right[j]! += pull0 * element0 + pull1 * element1 + (pull2 * element2 + pull3 * element3);
        const scaled0 = square0 * element0;
        const scaled1 = square1 * element1;
        const scaled2 = square2 * element2;
        const scaled3 = square3 * element3;
        for (let k = 0, other = at; k <= j; k++, other += 4)
          normal[to + k]! +=
            scaled0 * blocks[other]! +
            scaled1 * blocks[other + 1]! +
            (scaled2 * blocks[other + 2]! + scaled3 * blocks[other + 3]!);
      }
    }
  }

  /** Baseline and leverage A'_i·M^-1·A'_i of all points, four at a time; they take the places of pulls and squares. */
  #project(): void {
    const { right, inverseFactor } = this.#system;
    const blocks = this.#blocks;
    const baselines = this.#pulls;
    const leverages = this.#squares;
    const prior = this.#priorBaseline;
    const m = this.#columns;
    for (let i = 0, at = 0; i < baselines.length; i += 4, at += 4 * m) {
      let base0 = prior[i]!;
      let base1 = prior[i + 1]!;
      let base2 = prior[i + 2]!;
      let base3 = prior[i + 3]!;
      let leverage0 = 0;
      let leverage1 = 0;
      let leverage2 = 0;
      let leverage3 = 0;
      for (let j = 0, own = at, row = 0; j < m; j++, own += 4, row += m) {
        const coefficient = right[j]!;
        base0 += coefficient * blocks[own]!;
        base1 += coefficient * blocks[own + 1]!;
        base2 += coefficient * blocks[own + 2]!;
        base3 += coefficient * blocks[own + 3]!;
        let part0 = 0;
        let part1 = 0;
        let part2 = 0;
        let part3 = 0;
        for (let k = 0, other = at; k <= j; k++, other += 4) {
          const element = inverseFactor[row + k]!;
          part0 += element * blocks[other]!;
          part1 += element * blocks[other + 1]!;
          part2 += element * blocks[other + 2]!;
          part3 += element * blocks[other + 3]!;
        }
        leverage0 += part0 * part0;
        leverage1 += part1 * part1;
        leverage2 += part2 * part2;
        leverage3 += part3 * part3;
      }
      baselines[i] = base0;
      baselines[i + 1] = base1;
      baselines[i + 2] = base2;
      baselines[i + 3] = base3;
      leverages[i] = leverage0;
      leverages[i + 1] = leverage1;
      leverages[i + 2] = leverage2;
      leverages[i + 3] = leverage3;
    }
  }

  /** Partial derivatives, and chi-square of the residuals. */
  #differentiate(model: Float64Array): number {
    const { byModel, byVariance } = this;
    const data = this.#data;
    const weights = this.#weights;
    const baselines = this.#pulls;
    const leverages = this.#squares;
    let chiSquare = 0;
    for (let i = 0; i < data.length; i++) {
      const weight = weights[i]!;
      const weighted = weight * model[i]!;
      const residual = data[i]! - model[i]! * baselines[i]!;
      const pull = weight * residual;
      const shared = weighted * leverages[i]!;
      chiSquare += pull * residual;
      byModel[i] = pull * baselines[i]! - shared;
      byVariance[i] = 0.5 * (pull * pull - weight + weighted * shared);
    }
    return chiSquare;
  }
}
