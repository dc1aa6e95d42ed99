/** Likelihood of one run of points of a light curve, its baseline integrated out, with white or with correlated noise. */
import { MarginalProcessLikelihood } from '../../numerics/marginal-process.js';
import { MarginalLinearLikelihood } from '../../numerics/marginal-linear.js';
import type { LinearNuisance, MarginalLikelihood } from '../../numerics/linear-nuisance.js';

export interface SegmentNoise {
  readonly byModel: Float64Array;
  readonly byVariance: Float64Array;
  /** Slopes by standard deviation and time scale of the correlated noise; 0 for white noise. */
  readonly byAmplitude: number;
  readonly byTimescale: number;
  /**
   * @param model - relative flux of the transits
   * @param variances - white part of the noise
   * @returns ln L with all constants; -Infinity outside the domain
   */
  evaluate(model: Float64Array, variances: Float64Array, amplitude: number, timescaleDays: number): number;
  /** What multiplies the transits, with the correlated noise's conditional mean, at the last evaluation; a copy. */
  baseline(model: Float64Array): Float64Array;
}

export function whiteNoise(flux: Float64Array, nuisance: LinearNuisance): SegmentNoise {
  const likelihood: MarginalLikelihood = new MarginalLinearLikelihood(flux, nuisance);
  return {
    byModel: likelihood.byModel,
    byVariance: likelihood.byVariance,
    byAmplitude: 0,
    byTimescale: 0,
    evaluate: (model, variances) => likelihood.evaluate(model, variances),
    baseline: () => likelihood.baseline(),
  };
}

/** A damped-oscillator process beside the white noise. */
export class CorrelatedNoise implements SegmentNoise {
  readonly byModel: Float64Array;
  readonly byVariance: Float64Array;
  readonly #likelihood: MarginalProcessLikelihood;
  #variances: Float64Array = new Float64Array(0);
  #amplitude = 0;
  #timescaleDays = 1;

  constructor(timesDays: Float64Array, flux: Float64Array, nuisance: LinearNuisance) {
    this.#likelihood = new MarginalProcessLikelihood(timesDays, flux, nuisance);
    this.byModel = this.#likelihood.byModel;
    this.byVariance = this.#likelihood.byVariance;
  }

  get byAmplitude(): number {
    return this.#likelihood.byAmplitude;
  }

  get byTimescale(): number {
    return this.#likelihood.byTimescale;
  }

  evaluate(model: Float64Array, variances: Float64Array, amplitude: number, timescaleDays: number): number {
    this.#variances = variances;
    this.#amplitude = amplitude;
    this.#timescaleDays = timescaleDays;
    return this.#likelihood.evaluate(model, variances, amplitude, timescaleDays);
  }

  baseline(model: Float64Array): Float64Array {
    return this.#likelihood.baseline(model, this.#variances, this.#amplitude, this.#timescaleDays);
  }
}
