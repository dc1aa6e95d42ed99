/** Correlated noise of one amplitude and one timescale, as a likelihood with linear nuisance parameters integrated out. */
import { smoothNoise } from './gaussian-process/kernels.js';
import type { LinearNuisance } from './linear-nuisance.js';
import { MarginalKernelLikelihood } from './marginal-kernel.js';

/**
 * N = process + diag(variances), the process being the driven oscillator of quality 1/√2: covariance
 * amplitude²·exp(-x)·(cos x + sin x), x = lag/timescale (correlation 0.51 at one timescale).
 */
export class MarginalProcessLikelihood {
  readonly byModel: Float64Array;
  readonly byVariance: Float64Array;
  readonly coefficients: Float64Array;
  byAmplitude = 0;
  byTimescale = 0;
  readonly #likelihood: MarginalKernelLikelihood;

  /**
   * @param times - ascending, length rows; copied
   * @param data - length rows; kept, not modified
   * @throws RangeError when lengths disagree, a prior is not proper, or times are not ascending
   */
  constructor(times: Float64Array, data: Float64Array, nuisance: LinearNuisance) {
    this.#likelihood = new MarginalKernelLikelihood(times, data, nuisance, smoothNoise);
    this.byModel = this.#likelihood.byModel;
    this.byVariance = this.#likelihood.byVariance;
    this.coefficients = this.#likelihood.coefficients;
  }

  /**
   * ln L, all constants included; fills the derivatives.
   *
   * @param amplitude - standard deviation of the process, unit of the data; 0 is white noise
   * @param timescale - above 0, unit of the times
   * @returns -Infinity outside the domain
   */
  evaluate(model: Float64Array, variances: Float64Array, amplitude: number, timescale: number): number {
    const { parameters, byParameter } = this.#likelihood;
    parameters[0] = amplitude;
    parameters[1] = timescale;
    const value = this.#likelihood.evaluate(model, variances);
    this.byAmplitude = byParameter[0]!;
    this.byTimescale = byParameter[1]!;
    return value;
  }

  /** What multiplies the model: linear part, plus the mean of the process given the data over the model (above 0). A fresh array. */
  baseline(model: Float64Array, variances: Float64Array, amplitude: number, timescale: number): Float64Array {
    this.evaluate(model, variances, amplitude, timescale);
    const baseline = this.#likelihood.baseline();
    const correlated = this.#likelihood.correlated();
    return baseline.map((value, i) => value + correlated[i]! / model[i]!);
  }

  coefficientCovariance(out: Float64Array): Float64Array {
    return this.#likelihood.coefficientCovariance(out);
  }
}
