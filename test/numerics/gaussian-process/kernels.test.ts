import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { DampedOscillatorProcess } from '../../../src/numerics/gaussian-process/damped-oscillator-process.js';
import {
  drivenOscillator,
  exponentialNoise,
  matern32,
  recurrentNoise,
  smoothNoise,
  sumOfKernels,
  type CovarianceKernel,
} from '../../../src/numerics/gaussian-process/kernels.js';
import {
  COSINE_WEIGHT,
  covarianceAt,
  DECAY_RATE,
  SINE_WEIGHT,
  SQUARED_FREQUENCY,
  TERM_SIZE,
  writeOscillation,
} from '../../../src/numerics/gaussian-process/oscillator-terms.js';
import { expectWithin } from '../../support/expect-within.js';

interface Reference {
  readonly times: number[];
  readonly values: number[];
  readonly sigmas: number[];
  readonly mean: number;
  readonly likelihoods: {
    readonly kernel: string;
    readonly parameters: number[];
    readonly lnL: number;
    readonly slopes: number[];
  }[];
}

const REFERENCE = JSON.parse(
  readFileSync(new URL('../../reference/gaussian-process/gaussian-process.json', import.meta.url), 'utf8'),
) as Reference;

/** exp(-cτ)(a cos dτ + b sin dτ) with parameters a, b, c, d. */
const oscillation: CovarianceKernel = {
  parameters: ['a', 'b', 'c', 'd'],
  termCount: 1,
  writeTerms(parameters, offset, terms, index) {
    const [a, b, c, d] = parameters.subarray(offset);
    writeOscillation(terms, index, { a: a!, b: b!, c: c!, d: d! });
  },
  pullBack(parameters, offset, byTerm, index, out) {
    const [, b, c, d] = parameters.subarray(offset);
    const at = index * TERM_SIZE;
    out[offset] = byTerm[at + COSINE_WEIGHT]!;
    out[offset + 1] = d! * byTerm[at + SINE_WEIGHT]!;
    out[offset + 2] = byTerm[at + DECAY_RATE]! + 2 * c! * byTerm[at + SQUARED_FREQUENCY]!;
    out[offset + 3] = b! * byTerm[at + SINE_WEIGHT]! + 2 * d! * byTerm[at + SQUARED_FREQUENCY]!;
  },
};

const KERNELS: Readonly<Record<string, CovarianceKernel>> = {
  oscillation,
  drivenOscillator,
  exponentialNoise,
  matern32,
  recurrentNoise,
  smoothNoise,
};

function evaluate(
  kernel: CovarianceKernel,
  parameters: readonly number[],
): { lnL: number; slopes: Float64Array } {
  const times = Float64Array.from(REFERENCE.times);
  const process = new DampedOscillatorProcess(times, kernel.termCount);
  const terms = new Float64Array(kernel.termCount * TERM_SIZE);
  const values = Float64Array.from(parameters);
  kernel.writeTerms(values, 0, terms, 0);
  expect(
    process.factor(
      terms,
      Float64Array.from(REFERENCE.sigmas, (sigma) => sigma * sigma),
    ),
  ).toBe(true);
  const lnL = process.differentiate(Float64Array.from(REFERENCE.values, (value) => value - REFERENCE.mean));
  const slopes = new Float64Array(values.length);
  kernel.pullBack(values, 0, process.byTerm, 0, slopes);
  return { lnL, slopes };
}

function covariance(kernel: CovarianceKernel, parameters: readonly number[], lag: number): number {
  const terms = new Float64Array(kernel.termCount * TERM_SIZE);
  kernel.writeTerms(Float64Array.from(parameters), 0, terms, 0);
  return covarianceAt(terms, kernel.termCount, lag);
}

describe('kernels', () => {
  it('give the likelihoods and slopes of dense matrices at 50 digits (reference/gaussian-process)', () => {
    for (const { kernel, parameters, lnL, slopes } of REFERENCE.likelihoods) {
      const got = evaluate(KERNELS[kernel]!, parameters);
      expectWithin(got.lnL, lnL, { abs: 1e-11, unit: '1', why: 'worst seen 6e-14' });
      slopes.forEach((slope, i) => {
        expectWithin(got.slopes[i]!, slope, {
          abs: 1e-10 * (1 + Math.abs(slope)),
          unit: '1',
          why: 'worst seen 4e-13',
        });
      });
    }
  });

  // ln L by a dense Cholesky in mpmath 1.2.1; kernel of [ForemanMackey2017] in S0, ω0, Q, with sigma² = S0·ω0·Q.
  it.each([
    [0.3, -167.32927152492323],
    [0.5, -155.18574217374237],
    [0.7071067811865475, -144.59408659973744],
    [5, -87.82563480103516],
  ])('a driven oscillator of S0 = 3, ω0 = 0.55, Q = %d has ln L = %d', (quality, lnL) => {
    const sigma = Math.sqrt(3 * 0.55 * quality);
    expectWithin(evaluate(drivenOscillator, [sigma, 0.55, quality]).lnL, lnL, {
      abs: 1e-10,
      unit: '1',
      why: 'printed to 1e-13',
    });
  });

  it('one term of a = 20, b = 2, c = 0.05, d = 0.5526 has ln L = -84.13627221 (dense Cholesky in mpmath 1.2.1)', () => {
    expectWithin(evaluate(oscillation, [20, 2, 0.05, 0.5526108449586268]).lnL, -84.13627221009354, {
      abs: 1e-10,
      unit: '1',
      why: 'printed to 1e-13',
    });
  });

  // Numerical Fourier transform of the power spectrum by scipy 1.10.1 (quad), good to 1e-11.
  it.each([
    [0.3, 2, 0.38365484933312716],
    [0.3, 9, 0.10694777088329176],
    [0.7071067811865475, 2, 0.7580007490118758],
    [0.7071067811865475, 9, -0.04534772276674125],
    [5, 2, 4.0487368649271165],
    [5, 9, 0.568069525599266],
  ])(
    'a driven oscillator of Q = %d has at lag %d the covariance that its spectrum says',
    (quality, lag, wanted) => {
      const sigma = Math.sqrt(3 * 0.55 * quality);
      expectWithin(covariance(drivenOscillator, [sigma, 0.55, quality], lag), wanted, {
        abs: 1e-10,
        unit: '1',
        why: 'of the quadrature',
      });
    },
  );

  it('pass through the critical quality without a step, in value and in slope', () => {
    const critical = evaluate(drivenOscillator, [2, 0.55, 0.5]);
    for (const shift of [-1e-6, -1e-9, -1e-12, -1e-15, 1e-15, 1e-12, 1e-9, 1e-6]) {
      const near = evaluate(drivenOscillator, [2, 0.55, 0.5 + shift]);
      const slope = critical.slopes[2]!;
      expectWithin(near.lnL, critical.lnL + shift * slope, {
        abs: 1e-9,
        unit: '1',
        why: 'curvature times 1e-12',
      });
      near.slopes.forEach((value, i) => {
        expectWithin(value, critical.slopes[i]!, {
          abs: 1e-9 + 1e3 * Math.abs(shift),
          unit: '1',
          why: 'curvature is below 1e3',
        });
      });
    }
  });

  it('are what their docstrings say at a few lags', () => {
    const bound = { abs: 1e-14, unit: '1', why: 'rounding of values of order 1' };
    for (const lag of [0, 0.1, 1, 7]) {
      const x = lag / 2.5;
      expectWithin(
        covariance(smoothNoise, [1.5, 2.5], lag),
        2.25 * Math.exp(-x) * (Math.cos(x) + Math.sin(x)),
        bound,
      );
      const y = Math.sqrt(3) * x;
      expectWithin(covariance(matern32, [1.5, 2.5], lag), 2.25 * (1 + y) * Math.exp(-y), bound);
      expectWithin(covariance(exponentialNoise, [1.5, 2.5], lag), 2.25 * Math.exp(-x), bound);
      // A driven oscillator of quality 1/√2 and frequency √2/timescale is the smooth noise.
      expectWithin(
        covariance(drivenOscillator, [1.5, Math.SQRT2 / 2.5, Math.SQRT1_2], lag),
        covariance(smoothNoise, [1.5, 2.5], lag),
        bound,
      );
      const sum = sumOfKernels([smoothNoise, recurrentNoise]);
      expectWithin(
        covariance(sum, [1.5, 2.5, 2, 10, 30, 0.3], lag),
        covariance(smoothNoise, [1.5, 2.5], lag) + covariance(recurrentNoise, [2, 10, 30, 0.3], lag),
        { ...bound, abs: 1e-13 },
      );
      expectWithin(
        covariance(sum, [1.5, 2.5, 2, 10, 30, 0.3], -lag),
        covariance(sum, [1.5, 2.5, 2, 10, 30, 0.3], lag),
        { ...bound, abs: 0 },
      );
    }
  });

  it('in a sum keep their parameters and slopes apart', () => {
    const sum = sumOfKernels([drivenOscillator, exponentialNoise]);
    expect(sum.parameters).toEqual(['1.sigma', '1.frequency', '1.quality', '2.sigma', '2.timescale']);
    const at = [3, 0.55, 4, 2, 5];
    const { slopes } = evaluate(sum, at);
    at.forEach((value, i) => {
      const h = 1e-4 * value;
      const shifted = (by: number): number =>
        evaluate(
          sum,
          at.map((x, j) => (j === i ? x + by : x)),
        ).lnL;
      const wanted = (8 * (shifted(h) - shifted(-h)) - (shifted(2 * h) - shifted(-2 * h))) / (12 * h);
      expectWithin(slopes[i]!, wanted, {
        abs: 1e-7 * (1 + Math.abs(wanted)),
        unit: '1',
        why: 'what the differences give',
      });
    });
  });
});
