import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { adaptiveImportance } from '../../../src/numerics/sampling/adaptive-importance.js';
import type { WeightedDraws } from '../../../src/numerics/sampling/adaptive-importance.js';
import { addLogs, StudentDistribution, weightedCovariance } from '../../../src/numerics/sampling/student.js';
import { expectWithin } from '../../support/expect-within.js';

function identity(n: number, variance = 1): Float64Array {
  return Float64Array.from({ length: n * n }, (_, at) => (at % (n + 1) === 0 ? variance : 0));
}

function mean(draws: WeightedDraws, value: (x: Float64Array) => number): number {
  return draws.points.reduce((sum, point, i) => sum + draws.weights[i]! * value(point), 0);
}

describe('adaptiveImportance', () => {
  it('finds mean and covariance of a correlated normal distribution from a poor start', () => {
    // Precision matrix of variances 1 and 0.01 with correlation 0.9, centre (3, -2).
    const logDensity = (x: Float64Array): number => {
      const [a, b] = [x[0]! - 3, (x[1]! + 2) / 0.1];
      return (-0.5 * (a * a - 1.8 * a * b + b * b)) / (1 - 0.81);
    };
    const seeds = [{ centre: Float64Array.of(0, 0), covariance: identity(2, 4) }];
    const draws = adaptiveImportance(logDensity, seeds, RandomStream.fromSeed(5), { goal: 3000 });
    expect(draws.status).toBe('converged');
    const error = 4 / Math.sqrt(draws.effective);
    expectWithin(
      mean(draws, (x) => x[0]!),
      3,
      { abs: error, unit: '1', why: 'four standard errors' },
    );
    expectWithin(
      mean(draws, (x) => x[1]!),
      -2,
      { abs: 0.1 * error, unit: '1', why: 'four standard errors' },
    );
    expectWithin(
      mean(draws, (x) => (x[0]! - 3) * (x[1]! + 2)),
      0.09,
      { abs: 0.13 * error, unit: '1', why: 'four standard errors' },
    );
  });

  it('follows a bent valley: x normal, y normal about x^2', () => {
    const logDensity = (x: Float64Array): number =>
      -0.5 * x[0]! ** 2 - 0.5 * ((x[1]! - x[0]! ** 2) / 0.2) ** 2;
    const seeds = [{ centre: Float64Array.of(0, 0), covariance: Float64Array.of(0.5, 0, 0, 0.05) }];
    const draws = adaptiveImportance(logDensity, seeds, RandomStream.fromSeed(8), {
      goal: 1500,
    });
    expect(draws.status).toBe('converged');
    const error = 4 / Math.sqrt(draws.effective);
    expectWithin(
      mean(draws, (x) => x[0]! ** 2),
      1,
      { abs: 1.5 * error, unit: '1', why: 'variance of x^2 is 2; four standard errors' },
    );
    expectWithin(
      mean(draws, (x) => x[1]!),
      1,
      { abs: 1.5 * error, unit: '1', why: 'mean of x^2' },
    );
  });

  it('weighs two modes from two seeds: 3 to 1', () => {
    const logDensity = (x: Float64Array): number =>
      addLogs(Math.log(3) - 0.5 * (x[0]! + 6) ** 2, -0.5 * (x[0]! - 6) ** 2);
    const seeds = [-5, 5].map((at) => ({ centre: Float64Array.of(at), covariance: identity(1) }));
    const draws = adaptiveImportance(logDensity, seeds, RandomStream.fromSeed(2), { goal: 2000 });
    expectWithin(
      mean(draws, (x) => (x[0]! < 0 ? 1 : 0)),
      0.75,
      { abs: 1.8 / Math.sqrt(draws.effective), unit: '1', why: 'four standard errors' },
    );
  });

  it('does not call a few heavy draws convergence', () => {
    // Ten coordinates, a seed far away and much too narrow, two rounds of draws.
    const logDensity = (x: Float64Array): number => -0.5 * x.reduce((sum, value) => sum + value * value, 0);
    const seeds = [{ centre: new Float64Array(10).fill(5), covariance: identity(10, 0.01) }];
    const draws = adaptiveImportance(logDensity, seeds, RandomStream.fromSeed(1), { mostDraws: 700 });
    expect(draws.status).toBe('draw-limit');
    expect(draws.effective).toBeLessThan(50);
  });

  it('stays within a domain, repeats itself, and refuses impossible seeds', () => {
    const logDensity = (x: Float64Array): number => (x[0]! > 0 ? -x[0]! : -Infinity);
    const seeds = [{ centre: Float64Array.of(1), covariance: identity(1) }];
    const run = (): WeightedDraws =>
      adaptiveImportance(logDensity, seeds, RandomStream.fromSeed(3), { goal: 1000 });
    const draws = run();
    expect(run()).toEqual(draws);
    draws.points.forEach((point, i) => {
      if (point[0]! <= 0) expect(draws.weights[i]).toBe(0);
    });
    expectWithin(
      mean(draws, (x) => x[0]!),
      1,
      { abs: 4 / Math.sqrt(draws.effective), unit: '1', why: 'mean of an exponential' },
    );
    expect(() => adaptiveImportance(logDensity, [], RandomStream.fromSeed(3))).toThrow(RangeError);
    const singular = [{ centre: Float64Array.of(1), covariance: Float64Array.of(0) }];
    expect(() => adaptiveImportance(logDensity, singular, RandomStream.fromSeed(3))).toThrow(RangeError);
  });
});

it('covariance of weighted points by hand', () => {
  const points = [Float64Array.of(0, 0), Float64Array.of(4, 2)];
  expect(Array.from(weightedCovariance(points, Float64Array.of(3, 1)))).toEqual([3, 1.5, 1.5, 0.75]);
});

it('Student distribution: draws have the covariance of five degrees of freedom, 5/3 of the scale', () => {
  const student = new StudentDistribution(Float64Array.of(1, 2), Float64Array.of(2, 0.5, 0.5, 1));
  const random = RandomStream.fromSeed(12);
  const points = Array.from({ length: 40_000 }, () => student.draw(random));
  const [a, b, , d] = weightedCovariance(
    points,
    new Float64Array(points.length).fill(1),
  ) as unknown as number[];
  const bound = { abs: 0.15, unit: '1', why: 'kurtosis 9: standard errors 0.05 and less' };
  expectWithin(a!, (5 / 3) * 2, bound);
  expectWithin(b!, (5 / 3) * 0.5, bound);
  expectWithin(d!, 5 / 3, bound);
  // By hand: inverse of the scale is (1, -0.5; -0.5, 2)/1.75.
  expectWithin(student.distance(Float64Array.of(2, 2)), 1 / 1.75, { rel: 1e-14, unit: '1', why: 'rounding' });
});
