/**
 * Named covariances, each a fixed number of oscillator terms with parameters of its own. `writeTerms` lays the terms,
 * `pullBack` turns derivatives by the numbers of the terms into derivatives by the parameters.
 */
import { COSINE_WEIGHT, DECAY_RATE, SINE_WEIGHT, SQUARED_FREQUENCY, TERM_SIZE } from './oscillator-terms.js';

export interface CovarianceKernel {
  /** Names of the parameters, in order. */
  readonly parameters: readonly string[];
  readonly termCount: number;
  /** Writes terms from `index` on; parameters from `offset` on are read. Outside the domain the factorisation fails. */
  writeTerms(parameters: Float64Array, offset: number, terms: Float64Array, index: number): void;
  /** Writes derivatives by the parameters from `offset` of `out` on; `byTerm` is read from term `index` on. */
  pullBack(
    parameters: Float64Array,
    offset: number,
    byTerm: Float64Array,
    index: number,
    out: Float64Array,
  ): void;
}

function writeTerm(terms: Float64Array, index: number, a: number, s: number, c: number, w: number): void {
  const at = index * TERM_SIZE;
  terms[at + COSINE_WEIGHT] = a;
  terms[at + SINE_WEIGHT] = s;
  terms[at + DECAY_RATE] = c;
  terms[at + SQUARED_FREQUENCY] = w;
}

/**
 * An oscillator driven by white noise [ForemanMackey2017]: sigma (standard deviation, > 0), frequency (undamped, radians per
 * unit of time, > 0), quality (> 0; above 1/2 it oscillates). Exact at and around the critical quality 1/2.
 * Power spectrum proportional to 1/((ω² - ω0²)² + ω²·ω0²/Q²); sigma² = S0·ω0·Q in the notation of the source.
 */
export const drivenOscillator: CovarianceKernel = {
  parameters: ['sigma', 'frequency', 'quality'],
  termCount: 1,
  writeTerms(parameters, offset, terms, index) {
    const sigma = parameters[offset]!;
    const frequency = parameters[offset + 1]!;
    const quality = parameters[offset + 2]!;
    const a = sigma * sigma;
    const c = frequency / (2 * quality);
    writeTerm(terms, index, a, a * c, c, frequency * frequency);
  },
  pullBack(parameters, offset, byTerm, index, out) {
    const sigma = parameters[offset]!;
    const frequency = parameters[offset + 1]!;
    const quality = parameters[offset + 2]!;
    const at = index * TERM_SIZE;
    const a = sigma * sigma;
    const c = frequency / (2 * quality);
    const bySine = byTerm[at + SINE_WEIGHT]!;
    const byDecay = byTerm[at + DECAY_RATE]! + a * bySine;
    out[offset] = 2 * sigma * (byTerm[at + COSINE_WEIGHT]! + c * bySine);
    out[offset + 1] = byDecay / (2 * quality) + 2 * frequency * byTerm[at + SQUARED_FREQUENCY]!;
    out[offset + 2] = (-byDecay * c) / quality;
  },
};

/** An oscillator of fixed damping with its time of decay as parameter: s = a·c and w = ratio·c², c = rate/timescale. */
function relaxation(rate: number, ratio: number): CovarianceKernel {
  return {
    parameters: ['sigma', 'timescale'],
    termCount: 1,
    writeTerms(parameters, offset, terms, index) {
      const sigma = parameters[offset]!;
      const c = rate / parameters[offset + 1]!;
      writeTerm(terms, index, sigma * sigma, sigma * sigma * c, c, ratio * c * c);
    },
    pullBack(parameters, offset, byTerm, index, out) {
      const sigma = parameters[offset]!;
      const timescale = parameters[offset + 1]!;
      const at = index * TERM_SIZE;
      const c = rate / timescale;
      const bySine = byTerm[at + SINE_WEIGHT]!;
      const byRate =
        byTerm[at + DECAY_RATE]! + sigma * sigma * bySine + 2 * ratio * c * byTerm[at + SQUARED_FREQUENCY]!;
      out[offset] = 2 * sigma * (byTerm[at + COSINE_WEIGHT]! + c * bySine);
      out[offset + 1] = (-byRate * c) / timescale;
    },
  };
}

/**
 * The driven oscillator of quality 1/√2, smooth noise without a preferred period: sigma²·exp(-x)·(cos x + sin x) with
 * x = lag/timescale. Correlation 0.51 at one timescale; flat spectrum below 1/(√2·π·timescale) cycles per unit of time.
 */
export const smoothNoise: CovarianceKernel = relaxation(1, 2);

/** Matérn's covariance of order 3/2, sigma²·(1 + x)·exp(-x) with x = √3·lag/timescale: the driven oscillator of quality 1/2, exactly. */
export const matern32: CovarianceKernel = relaxation(Math.sqrt(3), 1);

/** sigma²·exp(-lag/timescale): continuous, nowhere smooth. */
export const exponentialNoise: CovarianceKernel = {
  parameters: ['sigma', 'timescale'],
  termCount: 1,
  writeTerms(parameters, offset, terms, index) {
    const c = 1 / parameters[offset + 1]!;
    writeTerm(terms, index, parameters[offset]! * parameters[offset]!, 0, c, c * c);
  },
  pullBack(parameters, offset, byTerm, index, out) {
    const timescale = parameters[offset + 1]!;
    const at = index * TERM_SIZE;
    const byRate = byTerm[at + DECAY_RATE]! + (2 / timescale) * byTerm[at + SQUARED_FREQUENCY]!;
    out[offset] = 2 * parameters[offset]! * byTerm[at + COSINE_WEIGHT]!;
    out[offset + 1] = -byRate / (timescale * timescale);
  },
};

/**
 * Noise that recurs with a period and at half of it: sigma² · Σ_k h_k·exp(-lag/lifetime)·(cos kνlag + sin(kνlag)/(kν·lifetime)),
 * k = 1, 2, ν = 2π/period, h_1 = 1 - halfShare, h_2 = halfShare. Parameters sigma, period, lifetime (all > 0),
 * halfShare (0 to 1). Both terms are driven oscillators that forget after the same lifetime.
 */
export const recurrentNoise: CovarianceKernel = {
  parameters: ['sigma', 'period', 'lifetime', 'halfShare'],
  termCount: 2,
  writeTerms(parameters, offset, terms, index) {
    const variance = parameters[offset]! * parameters[offset]!;
    const c = 1 / parameters[offset + 2]!;
    const share = parameters[offset + 3]!;
    for (let k = 0; k < 2; k++) {
      const d = (2 * Math.PI * (k + 1)) / parameters[offset + 1]!;
      const a = variance * (k === 0 ? 1 - share : share);
      writeTerm(terms, index + k, a, a * c, c, c * c + d * d);
    }
  },
  pullBack(parameters, offset, byTerm, index, out) {
    const sigma = parameters[offset]!;
    const period = parameters[offset + 1]!;
    const c = 1 / parameters[offset + 2]!;
    const share = parameters[offset + 3]!;
    out.fill(0, offset, offset + 4);
    for (let k = 0; k < 2; k++) {
      const at = (index + k) * TERM_SIZE;
      const d = (2 * Math.PI * (k + 1)) / period;
      const part = k === 0 ? 1 - share : share;
      const byVariance = byTerm[at + COSINE_WEIGHT]! + c * byTerm[at + SINE_WEIGHT]!;
      const byRate =
        byTerm[at + DECAY_RATE]! +
        sigma * sigma * part * byTerm[at + SINE_WEIGHT]! +
        2 * c * byTerm[at + SQUARED_FREQUENCY]!;
      out[offset]! += 2 * sigma * part * byVariance;
      out[offset + 1]! -= (2 * d * d * byTerm[at + SQUARED_FREQUENCY]!) / period;
      out[offset + 2]! -= c * c * byRate;
      out[offset + 3]! += sigma * sigma * byVariance * (k === 0 ? -1 : 1);
    }
  },
};

/** The sum of independent processes; parameters one kernel after the other, named `1.sigma`, `2.sigma` ... */
export function sumOfKernels(kernels: readonly CovarianceKernel[]): CovarianceKernel {
  const count = kernels.reduce((sum, kernel) => sum + kernel.termCount, 0);
  return {
    parameters: kernels.flatMap((kernel, k) => kernel.parameters.map((name) => `${k + 1}.${name}`)),
    termCount: count,
    writeTerms(parameters, offset, terms, index) {
      for (const kernel of kernels) {
        kernel.writeTerms(parameters, offset, terms, index);
        offset += kernel.parameters.length;
        index += kernel.termCount;
      }
    },
    pullBack(parameters, offset, byTerm, index, out) {
      for (const kernel of kernels) {
        kernel.pullBack(parameters, offset, byTerm, index, out);
        offset += kernel.parameters.length;
        index += kernel.termCount;
      }
    },
  };
}
