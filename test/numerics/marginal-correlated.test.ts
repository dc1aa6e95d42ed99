import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { recurrentNoise, smoothNoise } from '../../src/numerics/gaussian-process/kernels.js';
import { choleskyInPlace, choleskySolveInPlace } from '../../src/numerics/linear-algebra.js';
import { MarginalKernelLikelihood } from '../../src/numerics/marginal-kernel.js';
import {
  MarginalLinearLikelihood,
  MarginalProcessLikelihood,
  type LinearNuisance,
} from '../../src/numerics/marginal-linear.js';
import { expectWithin } from '../support/expect-within.js';
import { slopeOf } from './gaussian-process/dense.js';
import { dense, LN_L, randomProblem, replaced, SIZES, SLOPE } from './marginal-problem.js';

interface Reference {
  readonly times: number[];
  readonly values: number[];
  readonly sigmas: number[];
  readonly marginal: {
    readonly model: number[];
    readonly design: number[][];
    readonly priorMean: number[];
    readonly priorSigma: number[];
    readonly cases: {
      readonly kernel: string | null;
      readonly parameters: number[];
      readonly lnL: number;
      readonly slopes: number[];
      readonly byModel: number[];
    }[];
  };
}

const REFERENCE = JSON.parse(
  readFileSync(new URL('../reference/gaussian-process/gaussian-process.json', import.meta.url), 'utf8'),
) as Reference;

describe('correlated noise with linear parameters integrated out', () => {
  const covariance = (lag: number): number =>
    0.4 * Math.exp(-lag / 3) * (Math.cos(lag / 3) + Math.sin(lag / 3));
  const amplitude = Math.sqrt(0.4);

  it.each(SIZES)(
    '%d points, %d columns: likelihood and coefficients as from the dense matrix',
    (rows, columns, seed) => {
      const problem = randomProblem(seed, rows, columns);
      const likelihood = new MarginalProcessLikelihood(problem.times, problem.data, problem.nuisance);
      const wanted = dense(problem, problem.model, problem.variances, covariance);
      expectWithin(likelihood.evaluate(problem.model, problem.variances, amplitude, 3), wanted.value, LN_L);
      const got = likelihood.coefficientCovariance(new Float64Array(columns * columns));
      for (let j = 0; j < columns; j++) {
        const variance = wanted.coefficientCovariance[j * columns + j]!;
        expectWithin(likelihood.coefficients[j]!, wanted.coefficients[j]!, {
          abs: 1e-8 * Math.sqrt(variance) + 1e-11,
          unit: '1',
          why: 'the dense side rounds at the prior widths',
        });
        expectWithin(got[j * columns + j]!, variance, { rel: 1e-9, unit: '1', why: 'dense inverse' });
      }
    },
  );

  it.each([
    [7, 1],
    [12, 3],
    [21, 5],
  ] as const)('%d points, %d columns: slopes as of the dense matrix', (rows, columns) => {
    const problem = randomProblem(rows, rows, columns);
    const { model, variances } = problem;
    const likelihood = new MarginalProcessLikelihood(problem.times, problem.data, problem.nuisance);
    likelihood.evaluate(model, variances, amplitude, 3);
    for (let i = 0; i < rows; i++) {
      const byModel = slopeOf(
        (x) => dense(problem, replaced(model, i, x), variances, covariance).value,
        model[i]!,
        1e-3,
      );
      expectWithin(likelihood.byModel[i]!, byModel, {
        abs: 1e-8 * (1 + Math.abs(byModel)),
        unit: '1',
        why: SLOPE,
      });
      const step = 0.02 * variances[i]!;
      const byVariance = slopeOf(
        (x) => dense(problem, model, replaced(variances, i, x), covariance).value,
        variances[i]!,
        step,
      );
      expectWithin(likelihood.byVariance[i]!, byVariance, {
        abs: 1e-7 * (1 / step + Math.abs(byVariance)) * 0.02,
        unit: '1',
        why: SLOPE,
      });
    }
  });

  it('has the likelihoods and slopes of dense matrices at 50 digits (reference/gaussian-process)', () => {
    const { model, design, priorMean, priorSigma, cases } = REFERENCE.marginal;
    const nuisance: LinearNuisance = {
      rows: model.length,
      columns: 3,
      design: Float64Array.from(design.flat()),
      priorMean: Float64Array.from(priorMean),
      priorSigma: Float64Array.from(priorSigma),
    };
    const times = Float64Array.from(REFERENCE.times);
    const data = Float64Array.from(REFERENCE.values);
    const variances = Float64Array.from(REFERENCE.sigmas, (sigma) => sigma * sigma);
    const close = (got: number, want: number): void => {
      expectWithin(got, want, { abs: 1e-10 * (1 + Math.abs(want)), unit: '1', why: 'worst seen 4e-15' });
    };
    for (const { kernel, parameters, lnL, slopes, byModel } of cases) {
      if (kernel === null) {
        const white = new MarginalLinearLikelihood(data, nuisance);
        close(white.evaluate(Float64Array.from(model), variances), lnL);
        byModel.forEach((slope, i) => {
          close(white.byModel[i]!, slope);
        });
        continue;
      }
      const named = kernel === 'smoothNoise' ? smoothNoise : recurrentNoise;
      const likelihood = new MarginalKernelLikelihood(times, data, nuisance, named);
      likelihood.parameters.set(parameters);
      close(likelihood.evaluate(Float64Array.from(model), variances), lnL);
      byModel.forEach((slope, i) => {
        close(likelihood.byModel[i]!, slope);
      });
      slopes.forEach((slope, i) => {
        close(likelihood.byParameter[i]!, slope);
      });
      if (kernel !== 'smoothNoise') continue;
      const simple = new MarginalProcessLikelihood(times, data, nuisance);
      close(simple.evaluate(Float64Array.from(model), variances, parameters[0]!, parameters[1]!), lnL);
      close(simple.byAmplitude, slopes[0]!);
      close(simple.byTimescale, slopes[1]!);
    }
  });

  it('of no amplitude is white noise', () => {
    const { times, data, model, variances, nuisance } = randomProblem(6, 40, 3);
    const white = new MarginalLinearLikelihood(data, nuisance);
    const process = new MarginalProcessLikelihood(times, data, nuisance);
    const value = white.evaluate(model, variances);
    expectWithin(process.evaluate(model, variances, 0, 2), value, LN_L);
    for (let i = 0; i < 40; i++) {
      expectWithin(process.byModel[i]!, white.byModel[i]!, {
        abs: 1e-9,
        unit: '1',
        why: 'slopes of order 10',
      });
      expectWithin(process.byVariance[i]!, white.byVariance[i]!, {
        abs: 1e-8,
        unit: '1',
        why: 'slopes of order 100',
      });
    }
    expectWithin(process.byAmplitude, 0, { abs: 0, unit: '1', why: 'symmetric in the amplitude' });
  });

  it('gives a baseline that leaves white residuals divided among linear part, process and noise', () => {
    const problem = randomProblem(6, 40, 3);
    const { times, data, model, variances, nuisance } = problem;
    const likelihood = new MarginalProcessLikelihood(times, data, nuisance);
    const baseline = likelihood.baseline(model, variances, amplitude, 3);
    // The noise that is left is variance·α with α from the dense matrix of everything.
    const n = 40;
    const total = Float64Array.from({ length: n * n }, (_, at) => {
      const [i, k] = [Math.floor(at / n), at % n];
      let value = covariance(Math.abs(times[i]! - times[k]!)) + (i === k ? variances[i]! : 0);
      for (let j = 0; j < 3; j++)
        value +=
          model[i]! *
          model[k]! *
          nuisance.design[i * 3 + j]! *
          nuisance.design[k * 3 + j]! *
          nuisance.priorSigma[j]! ** 2;
      return value;
    });
    expect(choleskyInPlace(total, n)).toBe(true);
    const alpha = data.map((value, i) => {
      for (let j = 0; j < 3; j++) value -= model[i]! * nuisance.design[i * 3 + j]! * nuisance.priorMean[j]!;
      return value;
    });
    choleskySolveInPlace(total, n, alpha);
    for (let i = 0; i < n; i++)
      expectWithin(data[i]! - model[i]! * baseline[i]!, variances[i]! * alpha[i]!, {
        abs: 1e-11,
        unit: '1',
        why: 'data of order 10',
      });
  });

  it('is -Infinity outside its domain', () => {
    const { times, data, model, variances, nuisance } = randomProblem(3, 9, 2);
    const likelihood = new MarginalProcessLikelihood(times, data, nuisance);
    for (const timescale of [0, -1, NaN, Infinity])
      expect(likelihood.evaluate(model, variances, 1, timescale)).toBe(-Infinity);
    expect(likelihood.evaluate(model, variances, NaN, 1)).toBe(-Infinity);
    expect(likelihood.evaluate(model, replaced(variances, 0, 0), 1, 1)).toBe(-Infinity);
    expect(Number.isFinite(likelihood.evaluate(model, variances, 1, 1))).toBe(true);
  });
});
