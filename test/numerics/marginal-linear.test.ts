import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { recurrentNoise, smoothNoise } from '../../src/numerics/gaussian-process/kernels.js';
import {
  choleskyInPlace,
  choleskySolveInPlace,
  invertSymmetricPositive,
} from '../../src/numerics/linear-algebra.js';
import { MarginalKernelLikelihood } from '../../src/numerics/marginal-kernel.js';
import {
  MarginalLinearLikelihood,
  MarginalProcessLikelihood,
  type LinearNuisance,
} from '../../src/numerics/marginal-linear.js';
import { RandomStream } from '../../src/numerics/random.js';
import { expectWithin } from '../support/expect-within.js';
import { slopeOf } from './gaussian-process/dense.js';

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

interface Problem {
  readonly times: Float64Array;
  readonly data: Float64Array;
  readonly model: Float64Array;
  readonly variances: Float64Array;
  readonly nuisance: LinearNuisance;
}

/** Polynomials and a random column, dips in the model, data from the model itself. */
function randomProblem(seed: number, rows: number, columns: number): Problem {
  const random = RandomStream.fromSeed(seed);
  const times = Float64Array.from({ length: rows }, (_, i) => i + random.uniform());
  const design = Float64Array.from({ length: rows * columns }, (_, at) => {
    const j = at % columns;
    return j === 3 ? random.normal() : (times[Math.floor(at / columns)]! / rows - 0.5) ** j;
  });
  const priorMean = Float64Array.from({ length: columns }, () => random.normal());
  const priorSigma = Float64Array.from({ length: columns }, () => Math.exp(random.normal() + 1));
  const model = Float64Array.from({ length: rows }, (_, i) => (i % 4 === 0 ? 1 : 1 - 0.3 * random.uniform()));
  const variances = Float64Array.from({ length: rows }, () => Math.exp(random.normal() - 3));
  const coefficients = priorMean.map((mean, j) => mean + priorSigma[j]! * random.normal());
  const data = model.map((factor, i) => {
    let sum = Math.sqrt(variances[i]!) * random.normal();
    for (let j = 0; j < columns; j++) sum += factor * design[i * columns + j]! * coefficients[j]!;
    return sum;
  });
  return { times, data, model, variances, nuisance: { rows, columns, design, priorMean, priorSigma } };
}

/** ln N(data; D·c0, N + D·Λ·D^T), and the mean and covariance of the coefficients, straight from the definitions. */
function dense(
  { times, data, nuisance }: Problem,
  model: Float64Array,
  variances: Float64Array,
  covariance: (lag: number) => number = () => 0,
): { value: number; coefficients: Float64Array; coefficientCovariance: Float64Array } {
  const { rows: n, columns: m, design, priorMean, priorSigma } = nuisance;
  const noise = Float64Array.from({ length: n * n }, (_, at) => {
    const [i, k] = [Math.floor(at / n), at % n];
    return covariance(Math.abs(times[i]! - times[k]!)) + (i === k ? variances[i]! : 0);
  });
  const d = design.map((element, at) => element * model[Math.floor(at / m)]!);
  const residuals = data.map((value, i) => {
    for (let j = 0; j < m; j++) value -= d[i * m + j]! * priorMean[j]!;
    return value;
  });
  const total = noise.map((value, at) => {
    const [i, k] = [Math.floor(at / n), at % n];
    for (let j = 0; j < m; j++) value += d[i * m + j]! * d[k * m + j]! * priorSigma[j]! ** 2;
    return value;
  });
  expect(choleskyInPlace(total, n)).toBe(true);
  const alpha = residuals.slice();
  choleskySolveInPlace(total, n, alpha);
  let value = -0.5 * n * Math.log(2 * Math.PI);
  for (let i = 0; i < n; i++) value -= 0.5 * alpha[i]! * residuals[i]! + Math.log(total[i * n + i]!);
  const coefficients = priorMean.map((mean, j) => {
    for (let i = 0; i < n; i++) mean += priorSigma[j]! ** 2 * d[i * m + j]! * alpha[i]!;
    return mean;
  });
  const factor = noise.slice();
  expect(choleskyInPlace(factor, n)).toBe(true);
  const normal = new Float64Array(m * m);
  for (let j = 0; j < m; j++) {
    const column = Float64Array.from({ length: n }, (_, i) => d[i * m + j]!);
    choleskySolveInPlace(factor, n, column);
    for (let k = 0; k < m; k++) for (let i = 0; i < n; i++) normal[j * m + k]! += column[i]! * d[i * m + k]!;
    normal[j * m + j]! += priorSigma[j]! ** -2;
  }
  return { value, coefficients, coefficientCovariance: invertSymmetricPositive(normal, m)! };
}

const LN_L = { abs: 1e-10, unit: '1', why: 'rounding of the dense side; worst seen 7e-12' };
const SLOPE = 'what the differences of the dense likelihood give';
const SIZES = [1, 2, 3, 4, 5, 8, 30, 59].flatMap((rows, r) =>
  [1, 2, 3, 5].map((columns, c) => [rows, columns, 10 * r + c + 1] as const),
);

function replaced(array: Float64Array, at: number, value: number): Float64Array {
  const copy = array.slice();
  copy[at] = value;
  return copy;
}

describe('white noise with linear parameters integrated out', () => {
  it.each(SIZES)(
    '%d points, %d columns: likelihood and coefficients as from the dense matrix',
    (rows, columns, seed) => {
      const problem = randomProblem(seed, rows, columns);
      const likelihood = new MarginalLinearLikelihood(problem.data, problem.nuisance);
      const wanted = dense(problem, problem.model, problem.variances);
      expectWithin(likelihood.evaluate(problem.model, problem.variances), wanted.value, LN_L);
      const covariance = likelihood.coefficientCovariance(new Float64Array(columns * columns));
      for (let j = 0; j < columns; j++) {
        const sigma = Math.sqrt(wanted.coefficientCovariance[j * columns + j]!);
        expectWithin(likelihood.coefficients[j]!, wanted.coefficients[j]!, {
          abs: 1e-8 * sigma + 1e-11,
          unit: '1',
          why: 'the dense side rounds at the prior widths',
        });
        for (let k = 0; k < columns; k++) {
          const scale = sigma * Math.sqrt(wanted.coefficientCovariance[k * columns + k]!);
          expectWithin(covariance[j * columns + k]!, wanted.coefficientCovariance[j * columns + k]!, {
            abs: 1e-9 * scale,
            unit: '1',
            why: 'of the sigmas',
          });
        }
      }
      const baseline = likelihood.baseline();
      for (let i = 0; i < rows; i++) {
        let sum = 0;
        for (let j = 0; j < columns; j++)
          sum += problem.nuisance.design[i * columns + j]! * likelihood.coefficients[j]!;
        expectWithin(baseline[i]!, sum, { abs: 1e-12, unit: '1', why: 'order of summation' });
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
    const likelihood = new MarginalLinearLikelihood(problem.data, problem.nuisance);
    likelihood.evaluate(model, variances);
    for (let i = 0; i < rows; i++) {
      const byModel = slopeOf((x) => dense(problem, replaced(model, i, x), variances).value, model[i]!, 1e-3);
      expectWithin(likelihood.byModel[i]!, byModel, {
        abs: 1e-8 * (1 + Math.abs(byModel)),
        unit: '1',
        why: SLOPE,
      });
      const step = 0.02 * variances[i]!;
      const byVariance = slopeOf(
        (x) => dense(problem, model, replaced(variances, i, x)).value,
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

  it('keeps its digits where the data are 1 with errors of 1e-5 and the priors are wide', () => {
    // Constant alone, in closed form: with the width s of the prior, ln L = -½[Σ(y - ȳ)²/v + (ȳ - c0)²/(s² + v/n) + ...].
    const n = 400;
    const random = RandomStream.fromSeed(4);
    const data = Float64Array.from({ length: n }, () => 1 + 1e-5 * random.normal());
    const one = new Float64Array(n).fill(1);
    const v = 1e-10;
    const s = 10;
    const mean = data.reduce((sum, value) => sum + (value - 1), 0) / n;
    const scatter = data.reduce((sum, value) => sum + (value - 1 - mean) ** 2, 0);
    const wanted =
      -0.5 *
      (scatter / v +
        (1 + mean) ** 2 / (s * s + v / n) +
        n * Math.log(2 * Math.PI * v) +
        Math.log(1 + (n * s * s) / v));
    const nuisance = {
      rows: n,
      columns: 1,
      design: one,
      priorMean: Float64Array.of(0),
      priorSigma: Float64Array.of(s),
    };
    const likelihood = new MarginalLinearLikelihood(data, nuisance);
    expectWithin(likelihood.evaluate(one, new Float64Array(n).fill(v)), wanted, {
      abs: 1e-9,
      unit: '1',
      why: 'data of 1 are rounded at 1e-16, 1e-11 of their errors',
    });
  });

  it('hardly notices what the design takes up, when the prior is wide', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1e6 }),
        fc.double({ min: -50, max: 50, noNaN: true }),
        (seed, shift) => {
          const { data, model, variances, nuisance } = randomProblem(seed, 25, 3);
          const wide = { ...nuisance, priorSigma: new Float64Array(3).fill(1e4) };
          const moved = data.map((value, i) => value + shift * model[i]!);
          const before = new MarginalLinearLikelihood(data, wide);
          const after = new MarginalLinearLikelihood(moved, wide);
          const value = before.evaluate(model, variances);
          expectWithin(after.evaluate(model, variances), value, {
            abs: 1e-4,
            unit: '1',
            why: '(shift + coefficients)²/prior²',
          });
          expectWithin(after.coefficients[0]! - before.coefficients[0]!, shift, {
            abs: 1e-5,
            unit: '1',
            why: 'shrunk by (error/1e4)²',
          });
        },
      ),
      { seed: 1, numRuns: 100 },
    );
  });

  it('does not depend on the order of points or columns, nor on the scale of a column with its prior', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1e6 }),
        fc.double({ min: -6, max: 6, noNaN: true }),
        (seed, exponent) => {
          const { data, model, variances, nuisance } = randomProblem(seed, 18, 3);
          const { rows, columns, design, priorMean, priorSigma } = nuisance;
          const factor = 10 ** exponent;
          const to = [2, 0, 1];
          const changed: LinearNuisance = {
            rows,
            columns,
            design: Float64Array.from(design, (_, at) => {
              const [i, j] = [rows - 1 - Math.floor(at / columns), to[at % columns]!];
              return design[i * columns + j]! * (j === 1 ? factor : 1);
            }),
            priorMean: Float64Array.from(to, (j) => priorMean[j]! / (j === 1 ? factor : 1)),
            priorSigma: Float64Array.from(to, (j) => priorSigma[j]! / (j === 1 ? factor : 1)),
          };
          const one = new MarginalLinearLikelihood(data, nuisance);
          const other = new MarginalLinearLikelihood(data.slice().reverse(), changed);
          const value = one.evaluate(model, variances);
          expectWithin(other.evaluate(model.slice().reverse(), variances.slice().reverse()), value, {
            rel: 1e-9,
            unit: '1',
            why: 'rounding',
          });
        },
      ),
      { seed: 2, numRuns: 100 },
    );
  });

  it('is -Infinity where a variance is not above 0 or something is not finite', () => {
    const { data, model, variances, nuisance } = randomProblem(3, 9, 2);
    const likelihood = new MarginalLinearLikelihood(data, nuisance);
    for (const bad of [0, -1, NaN])
      expect(likelihood.evaluate(model, replaced(variances, 4, bad))).toBe(-Infinity);
    for (const bad of [NaN, Infinity])
      expect(likelihood.evaluate(replaced(model, 8, bad), variances)).toBe(-Infinity);
    expect(likelihood.evaluate(model, replaced(variances, 4, Infinity))).toBe(-Infinity);
    expect(Number.isFinite(likelihood.evaluate(model, variances))).toBe(true); // and recovers
  });

  it('refuses shapes that disagree and priors that are not proper', () => {
    const { data, nuisance } = randomProblem(3, 9, 2);
    expect(() => new MarginalLinearLikelihood(data.slice(1), nuisance)).toThrow(/8 data for 9 rows/);
    expect(() => new MarginalLinearLikelihood(data, { ...nuisance, columns: 3 })).toThrow(/not 9 x 3/);
    expect(() => new MarginalLinearLikelihood(data, { ...nuisance, columns: 0 })).toThrow(RangeError);
    for (const sigma of [0, -1, NaN, Infinity])
      expect(
        () => new MarginalLinearLikelihood(data, { ...nuisance, priorSigma: Float64Array.of(1, sigma) }),
      ).toThrow(/column 1/);
    const short = Float64Array.of(0, 1);
    expect(() => new MarginalKernelLikelihood(short, data, nuisance, smoothNoise)).toThrow(
      /2 times for 9 rows/,
    );
  });
});

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
