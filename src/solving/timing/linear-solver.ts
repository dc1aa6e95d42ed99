/** Weighted linear least squares for a handful of coefficients, without allocation in its loops. */
import { choleskyInPlace, choleskySolveInPlace } from '../../numerics/linear-algebra.js';
import type { ModelForm, TimingProblem } from './model-forms.js';

const LOG_TWO_PI = Math.log(2 * Math.PI);

export class LinearSolver {
  readonly problem: TimingProblem;
  readonly form: ModelForm;
  /** (count x size), row-major: partial derivatives at the frequency of `setFrequency`. */
  private readonly design: Float64Array;
  private readonly target: Float64Array;
  private readonly weights: Float64Array;
  private readonly factor: Float64Array;
  private readonly row: Float64Array;
  private logVariances = 0;
  private weighted = 0;
  /** Coefficients of the last `solve`, overwritten by the next. */
  readonly beta: Float64Array;
  /** Of the last `solve`. */
  chiSquare = 0;
  logDeterminant = 0;

  constructor(problem: TimingProblem, form: ModelForm) {
    const { count } = problem.times;
    this.problem = problem;
    this.form = form;
    this.design = new Float64Array(count * form.size);
    this.target = new Float64Array(count);
    this.weights = new Float64Array(count);
    this.factor = new Float64Array(form.size * form.size);
    this.row = new Float64Array(form.size);
    this.beta = new Float64Array(form.size);
    this.setFrequency(0.25);
    this.setJitter(0);
  }

  setFrequency(frequency: number): void {
    const { times, referenceCycle, yDays } = this.problem;
    const { size } = this.form;
    const { row } = this;
    for (let i = 0; i < times.count; i++) {
      const shift = this.form.row(
        times.cycles[i]! - referenceCycle,
        times.isOccultation[i] === 1,
        frequency,
        row,
      );
      this.target[i] = yDays[i]! - shift;
      for (let k = 0; k < size; k++) this.design[i * size + k] = row[k]!;
    }
  }

  setJitter(jitterDays: number): void {
    const { sigmasDays, count } = this.problem.times;
    this.logVariances = count * LOG_TWO_PI;
    for (let i = 0; i < count; i++) {
      const variance = sigmasDays[i]! ** 2 + jitterDays * jitterDays;
      this.weights[i] = 1 / variance;
      this.logVariances += Math.log(variance);
    }
  }

  /**
   * Best coefficients at the present frequency and jitter.
   *
   * @returns ln L there, variances included; -Infinity where the coefficients are not all determined
   */
  solve(): number {
    const { design, target, weights, factor, beta } = this;
    const { size } = this.form;
    const n = target.length;
    factor.fill(0);
    beta.fill(0);
    this.weighted = 0;
    for (let i = 0; i < n; i++) {
      const w = weights[i]!;
      const y = target[i]!;
      const at = i * size;
      this.weighted += w * y * y;
      for (let k = 0; k < size; k++) {
        const wx = w * design[at + k]!;
        beta[k] = beta[k]! + wx * y;
        for (let l = 0; l <= k; l++) factor[k * size + l] = factor[k * size + l]! + wx * design[at + l]!;
      }
    }
    let floor = Infinity;
    for (let k = 0; k < size; k++) floor = Math.min(floor, factor[k * size + k]!);
    const scale = factor[0]!;
    if (!(floor > 1e-12 * scale) || !choleskyInPlace(factor, size)) return -Infinity;
    this.logDeterminant = 0;
    for (let k = 0; k < size; k++) {
      const pivot = factor[k * size + k]!;
      // A pivot that lost twelve digits against its column's neighbours is rounding, not information.
      if (pivot * pivot < 1e-11 * scale) return -Infinity;
      this.logDeterminant += 2 * Math.log(pivot);
    }
    choleskySolveInPlace(factor, size, beta);
    let chiSquare = 0;
    for (let i = 0; i < n; i++) {
      let residual = target[i]!;
      for (let k = 0; k < size; k++) residual -= design[i * size + k]! * beta[k]!;
      chiSquare += weights[i]! * residual * residual;
    }
    this.chiSquare = chiSquare;
    return -0.5 * (chiSquare + this.logVariances);
  }

  /** ln of the integral of the likelihood over all coefficients (flat, density 1), after `solve` gave `logLikelihood`. */
  marginal(logLikelihood: number): number {
    return logLikelihood + 0.5 * (this.form.size * LOG_TWO_PI - this.logDeterminant);
  }

  /** Covariance of the coefficients of the last `solve`, fresh, (size x size). */
  covariance(): Float64Array {
    const { size } = this.form;
    const inverse = new Float64Array(size * size);
    const column = new Float64Array(size);
    for (let j = 0; j < size; j++) {
      column.fill(0);
      column[j] = 1;
      choleskySolveInPlace(this.factor, size, column);
      for (let i = 0; i < size; i++) inverse[i * size + j] = column[i]!;
    }
    return inverse;
  }

  /** Observed minus model of the last `solve`, days, fresh. */
  residuals(): Float64Array {
    const { size } = this.form;
    return this.target.map((y, i) => {
      let residual = y;
      for (let k = 0; k < size; k++) residual -= this.design[i * size + k]! * this.beta[k]!;
      return residual;
    });
  }
}
