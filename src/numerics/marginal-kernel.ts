/**
 * Gaussian likelihood of data with correlated noise in which linear nuisance parameters are integrated out: as in
 * marginal-linear.ts, with N = (a process of a named kernel) + diag(variances). With α = N^-1·(data - conditional mean),
 * M = G^-T·G^-1 and v_k the columns of N^-1·D'·G, d ln L/dN = ½·(α·α^T + Σ_k v_k·v_k^T - N^-1).
 */
import { DampedOscillatorProcess } from './gaussian-process/damped-oscillator-process.js';
import type { CovarianceKernel } from './gaussian-process/kernels.js';
import { TERM_SIZE } from './gaussian-process/oscillator-terms.js';
import {
  NuisanceSystem,
  priorBaseline,
  requireNuisance,
  scaledDesign,
  type LinearNuisance,
  type MarginalLikelihood,
} from './linear-nuisance.js';

const LN_TWO_PI = Math.log(2 * Math.PI);

export class MarginalKernelLikelihood implements MarginalLikelihood {
  readonly byModel: Float64Array;
  readonly byVariance: Float64Array;
  readonly coefficients: Float64Array;
  /** Parameters of the kernel; set before `evaluate`. */
  readonly parameters: Float64Array;
  /** d ln L / d parameter of the kernel. */
  readonly byParameter: Float64Array;
  readonly #kernel: CovarianceKernel;
  readonly #process: DampedOscillatorProcess;
  readonly #terms: Float64Array;
  readonly #data: Float64Array;
  readonly #rows: number;
  readonly #columns: number;
  /** A·priorSigma, row-major. */
  readonly #scaled: Float64Array;
  readonly #priorBaseline: Float64Array;
  readonly #system: NuisanceSystem;
  /** Columns of D' = T·A·priorSigma, then those of N^-1·D', then those of N^-1·D'·G. */
  readonly #columnsOf: readonly Float64Array[];
  readonly #solvedOf: readonly Float64Array[];
  readonly #residuals: Float64Array;
  readonly #alpha: Float64Array;
  readonly #baseline: Float64Array;

  /**
   * @param times - ascending, length rows, unit of time of the kernel; copied
   * @param data - length rows; kept, not modified
   * @throws RangeError when lengths disagree, a prior is not proper, or times are not ascending
   */
  constructor(times: Float64Array, data: Float64Array, nuisance: LinearNuisance, kernel: CovarianceKernel) {
    requireNuisance(data, nuisance);
    if (times.length !== nuisance.rows)
      throw new RangeError(`${times.length} times for ${nuisance.rows} rows of the design`);
    const { rows, columns } = nuisance;
    this.#kernel = kernel;
    this.#process = new DampedOscillatorProcess(times, kernel.termCount);
    this.#terms = new Float64Array(kernel.termCount * TERM_SIZE);
    this.parameters = new Float64Array(kernel.parameters.length);
    this.byParameter = new Float64Array(kernel.parameters.length);
    this.#data = data;
    this.#rows = rows;
    this.#columns = columns;
    this.#scaled = scaledDesign(nuisance);
    this.#priorBaseline = priorBaseline(nuisance);
    this.#system = new NuisanceSystem(nuisance);
    this.#columnsOf = Array.from({ length: columns }, () => new Float64Array(rows));
    this.#solvedOf = Array.from({ length: columns }, () => new Float64Array(rows));
    this.#residuals = new Float64Array(rows);
    this.#alpha = new Float64Array(rows);
    this.#baseline = new Float64Array(rows);
    this.byModel = new Float64Array(rows);
    this.byVariance = this.#process.byDiagonal;
    this.coefficients = this.#system.coefficients;
  }

  evaluate(model: Float64Array, variances: Float64Array): number {
    this.#kernel.writeTerms(this.parameters, 0, this.#terms, 0);
    for (let i = 0; i < this.#rows; i++) if (!(variances[i]! > 0)) return -Infinity;
    if (!this.#process.factor(this.#terms, variances)) return -Infinity;
    this.#fillSystem(model);
    if (!this.#system.solve()) return -Infinity;
    const chiSquare = this.#fillResiduals(model) + this.#system.penalty;
    const value =
      -0.5 *
      (chiSquare + this.#process.logDeterminant + this.#system.logDeterminant + this.#rows * LN_TWO_PI);
    if (!Number.isFinite(value)) return -Infinity;
    this.#differentiate();
    return value;
  }

  /** D', N^-1·D' and the sums of the normal system. */
  #fillSystem(model: Float64Array): void {
    const { normal, right } = this.#system;
    const residuals = this.#residuals;
    const m = this.#columns;
    for (let i = 0; i < this.#rows; i++) residuals[i] = this.#data[i]! - model[i]! * this.#priorBaseline[i]!;
    for (let j = 0; j < m; j++) {
      const column = this.#columnsOf[j]!;
      const solved = this.#solvedOf[j]!;
      for (let i = 0; i < this.#rows; i++) column[i] = model[i]! * this.#scaled[i * m + j]!;
      this.#process.solve(column, solved);
      right[j] = dot(solved, residuals);
      for (let k = 0; k <= j; k++) normal[j * m + k] = dot(solved, this.#columnsOf[k]!);
    }
  }

  /** Baseline, residuals from the conditional mean of the coefficients, α; returns their chi-square. */
  #fillResiduals(model: Float64Array): number {
    const { right } = this.#system;
    const residuals = this.#residuals;
    const alpha = this.#alpha;
    const m = this.#columns;
    for (let i = 0; i < this.#rows; i++) {
      let base = this.#priorBaseline[i]!;
      for (let j = 0; j < m; j++) base += this.#scaled[i * m + j]! * right[j]!;
      this.#baseline[i] = base;
      residuals[i] = this.#data[i]! - model[i]! * base;
    }
    this.#process.solve(residuals, alpha);
    return dot(alpha, residuals);
  }

  #differentiate(): void {
    const { inverseFactor } = this.#system;
    const noise = this.#process;
    const alpha = this.#alpha;
    const m = this.#columns;
    const { byModel } = this;
    for (let i = 0; i < this.#rows; i++) byModel[i] = alpha[i]! * this.#baseline[i]!;
    noise.startGradient();
    noise.addToGradient(alpha);
    // M^-1 = G·G^T with G = L^-T, so that column j of N^-1·D'·G combines the first j + 1 columns; done from the last on in place.
    for (let j = m - 1; j >= 0; j--) {
      const combined = this.#solvedOf[j]!;
      for (let i = 0; i < this.#rows; i++) {
        let value = 0;
        let element = 0;
        for (let k = 0; k <= j; k++) {
          value += inverseFactor[j * m + k]! * this.#solvedOf[k]![i]!;
          element += inverseFactor[j * m + k]! * this.#scaled[i * m + k]!;
        }
        combined[i] = value;
        byModel[i]! -= value * element;
      }
      noise.addToGradient(combined);
    }
    noise.finishGradient();
    this.#kernel.pullBack(this.parameters, 0, noise.byTerm, 0, this.byParameter);
  }

  baseline(): Float64Array {
    return this.#baseline.slice();
  }

  /** Mean of the correlated part at its own times, given data, as of the last evaluation; a fresh array. */
  correlated(): Float64Array {
    const out = new Float64Array(this.#rows);
    this.#process.predictHere(this.#residuals, this.#alpha, out);
    return out;
  }

  coefficientCovariance(out: Float64Array): Float64Array {
    return this.#system.coefficientCovariance(out);
  }
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
