import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { smoothNoise } from '../../src/numerics/gaussian-process/kernels.js';
import { MarginalKernelLikelihood } from '../../src/numerics/marginal-kernel.js';
import { MarginalLinearLikelihood, type LinearNuisance } from '../../src/numerics/marginal-linear.js';
import { RandomStream } from '../../src/numerics/random.js';
import { expectWithin } from '../support/expect-within.js';
import { slopeOf } from './gaussian-process/dense.js';
import { dense, LN_L, randomProblem, replaced, SIZES, SLOPE } from './marginal-problem.js';

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
