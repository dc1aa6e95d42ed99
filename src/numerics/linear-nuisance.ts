/**
 * Nuisance parameters that enter a model linearly, with independent Gaussian priors, and the small system that is left of
 * them when they are integrated out: in units of the prior widths, M = I + D'^T·N^-1·D' and its Cholesky factor.
 */
import { choleskyInPlace, choleskySolveInPlace } from './linear-algebra.js';

/** The linear part of a model: data_i = model_i · sum_j A_ij c_j + noise, c_j drawn from N(priorMean_j, priorSigma_j²). */
export interface LinearNuisance {
  readonly rows: number;
  /** 1 .. 12 or so: the cost grows with the square. */
  readonly columns: number;
  /** A, row-major, rows·columns; read, never modified. */
  readonly design: Float64Array;
  readonly priorMean: Float64Array;
  /** Above 0. Wide is fine up to the point where (priorSigma·|A|)²·rows/variance nears 1e15 and dependent columns are no longer told apart. */
  readonly priorSigma: Float64Array;
}

/** What a likelihood with the linear nuisance parameters integrated out offers, whatever its noise is. */
export interface MarginalLikelihood {
  /**
   * ln L of the data, all constants included; fills everything below.
   *
   * @param model - the factor T_i in front of the linear part, per row; read
   * @param variances - white part of the noise, per row, above 0; read
   * @returns -Infinity where a variance is not above 0 or anything is not finite; what is below is then meaningless
   */
  evaluate(model: Float64Array, variances: Float64Array): number;
  /** d ln L / d model_i. */
  readonly byModel: Float64Array;
  /** d ln L / d variance_i. */
  readonly byVariance: Float64Array;
  /** Mean of the coefficients given data and model. */
  readonly coefficients: Float64Array;
  /** sum_j A_ij coefficients_j, per row, as of the last evaluation: what multiplies the model. A fresh array. */
  baseline(): Float64Array;
  /** Covariance of the coefficients given data and model; columns², row-major, overwrites `out`. */
  coefficientCovariance(out: Float64Array): Float64Array;
}

/** @throws RangeError when lengths disagree or a prior is not a proper Gaussian */
export function requireNuisance(data: Float64Array, nuisance: LinearNuisance): void {
  const { rows, columns, design, priorMean, priorSigma } = nuisance;
  if (data.length !== rows) throw new RangeError(`${data.length} data for ${rows} rows of the design`);
  if (!(columns >= 1)) throw new RangeError(`a design with ${columns} columns has nothing to integrate out`);
  if (design.length !== rows * columns)
    throw new RangeError(`a design of ${design.length} elements is not ${rows} x ${columns}`);
  if (priorMean.length !== columns || priorSigma.length !== columns)
    throw new RangeError(`${priorMean.length} means and ${priorSigma.length} widths for ${columns} columns`);
  for (let j = 0; j < columns; j++) {
    if (!Number.isFinite(priorMean[j]!) || !(priorSigma[j]! > 0) || priorSigma[j] === Infinity)
      throw new RangeError(
        `the prior of column ${j} is N(${priorMean[j]}, ${priorSigma[j]}²), which is not proper`,
      );
  }
}

/** A with every column multiplied by its prior width, row-major. */
export function scaledDesign(nuisance: LinearNuisance): Float64Array {
  const { columns, design, priorSigma } = nuisance;
  return design.map((element, at) => element * priorSigma[at % columns]!);
}

/** A·priorMean, per row. */
export function priorBaseline(nuisance: LinearNuisance): Float64Array {
  const { rows, columns, design, priorMean } = nuisance;
  const baseline = new Float64Array(rows);
  for (let i = 0; i < rows; i++)
    for (let j = 0; j < columns; j++) baseline[i]! += design[i * columns + j]! * priorMean[j]!;
  return baseline;
}

/** The m·m system of the scaled coefficients u = (c - priorMean)/priorSigma. Fill `normal` and `right`, then `solve`. */
export class NuisanceSystem {
  /** On entry D'^T·N^-1·D' (lower triangle); `solve` adds the prior's unit matrix and leaves the factor L, M = L·L^T. */
  readonly normal: Float64Array;
  /** On entry D'^T·N^-1·(data - prior's prediction); `solve` overwrites it by u. */
  readonly right: Float64Array;
  /** L^-1, lower triangle, row-major, zeros above: M^-1 = L^-T·L^-1. */
  readonly inverseFactor: Float64Array;
  readonly coefficients: Float64Array;
  /** ln det M. */
  logDeterminant = 0;
  /** u·u, what the prior adds to chi-square. */
  penalty = 0;
  readonly #columns: number;
  readonly #nuisance: LinearNuisance;

  constructor(nuisance: LinearNuisance) {
    const { columns } = nuisance;
    this.#columns = columns;
    this.#nuisance = nuisance;
    this.normal = new Float64Array(columns * columns);
    this.right = new Float64Array(columns);
    this.inverseFactor = new Float64Array(columns * columns);
    this.coefficients = new Float64Array(columns);
  }

  /** @returns false when the system is not positive definite to rounding, or not finite */
  solve(): boolean {
    const { normal, right, inverseFactor, coefficients } = this;
    const { priorMean, priorSigma } = this.#nuisance;
    const m = this.#columns;
    for (let j = 0; j < m; j++) normal[j * m + j]! += 1;
    if (!choleskyInPlace(normal, m)) return false;
    choleskySolveInPlace(normal, m, right);
    let product = 0;
    this.penalty = 0;
    for (let j = 0; j < m; j++) {
      product += Math.log(normal[j * m + j]!);
      this.penalty += right[j]! * right[j]!;
      coefficients[j] = priorMean[j]! + priorSigma[j]! * right[j]!;
      inverseFactor[j * m + j] = 1 / normal[j * m + j]!;
      for (let k = 0; k < j; k++) {
        let sum = 0;
        for (let l = k; l < j; l++) sum -= normal[j * m + l]! * inverseFactor[l * m + k]!;
        inverseFactor[j * m + k] = sum / normal[j * m + j]!;
      }
    }
    this.logDeterminant = 2 * product;
    return Number.isFinite(this.penalty) && Number.isFinite(product);
  }

  coefficientCovariance(out: Float64Array): Float64Array {
    const { inverseFactor } = this;
    const { priorSigma } = this.#nuisance;
    const m = this.#columns;
    for (let j = 0; j < m; j++) {
      for (let k = 0; k <= j; k++) {
        let sum = 0;
        for (let l = j; l < m; l++) sum += inverseFactor[l * m + j]! * inverseFactor[l * m + k]!;
        out[j * m + k] = out[k * m + j] = sum * priorSigma[j]! * priorSigma[k]!;
      }
    }
    return out;
  }
}
