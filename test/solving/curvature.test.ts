import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { curvatureAt, expectedInformation, gaussianDraws } from '../../src/solving/curvature.js';
import { fitModel, THOROUGH } from '../../src/solving/fit-model.js';
import { explorerFor } from '../../src/solving/prepare.js';
import type { ModelPoint } from '../../src/solving/model-structure.js';
import type { VelocityProblem } from '../../src/solving/problem.js';
import fits from '../reference/fits/fits.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, scatteredTimes, simulated, velocitySet, inverse } from './helpers.js';

const LIMIT = {
  rel: 1e-8,
  unit: 'as named',
  why: 'inverse of a well-conditioned 4 x 4 matrix (fits.json, numpy)',
};

/** v = K sin(2 pi t/P + phi) on t = (i + 1/2) T/N without noise, circular, jitter fixed to 0. */
function evenlySampled(): { problem: VelocityProblem; point: ModelPoint } {
  const { count, spanDays, periodDays, semiAmplitudeMps, phaseRad, sigmaMps } = fits.fisher;
  const times = Array.from({ length: count }, (_, i) => ((i + 0.5) * spanDays) / count);
  const velocities = times.map((t) => semiAmplitudeMps * Math.sin((2 * Math.PI * t) / periodDays + phaseRad));
  const set = velocitySet({ times, velocities, sigmas: times.map(() => sigmaMps) });
  const jitterMps = { kind: 'fixed', value: 0 } as const;
  const theCase = { ...BARE_CASE, instruments: { north: { zeroPointMps: null, jitterMps } } };
  const { explorer, epochBjdTdb } = explorerFor(theCase, set);
  const problem = explorer.builder.problem({ companions: [{ choice: null, circular: true }], drift: 0 });
  // K cos(longitude) with longitude = 2 pi t/P + phi - pi/2 at the epoch.
  const longitude = (2 * Math.PI * epochBjdTdb) / periodDays + phaseRad - Math.PI / 2;
  return {
    problem,
    point: {
      parameters: Float64Array.of(Math.log(periodDays), longitude, semiAmplitudeMps, 0),
      jittersMps: Float64Array.of(0),
    },
  };
}

describe('curvature', () => {
  it('gives the Cramér–Rao errors of a circular orbit on an even grid (fits.json), K included', () => {
    const { problem, point } = evenlySampled();
    const residuals = new Float64Array(40);
    problem.evaluate(point.parameters, residuals, null);
    residuals.forEach((r) => {
      expectWithin(r, 0, { abs: 1e-11, unit: '1', why: 'the same wave' });
    });
    const { covariance, source } = curvatureAt(problem, point);
    expect(source).toBe('observed information');
    const sigma = (j: number): number => Math.sqrt(covariance![j * 4 + j]!);
    const { fisher } = fits;
    // Observed information is taken by differences of the gradient; with no residuals it equals the expected one.
    const observed = { ...LIMIT, rel: 1e-5, why: 'central differences of 1e-3 sigma' };
    expectWithin(sigma(0) * fisher.periodDays, fisher.sigmaPeriod, observed);
    expectWithin(sigma(2), fisher.sigmaSemiAmplitude, observed);
    expectWithin(sigma(3), fisher.sigmaZeroPoint, observed);
    const direct = inverse(expectedInformation(problem, point), 4);
    expectWithin(Math.sqrt(direct[0]![0]!) * fisher.periodDays, fisher.sigmaPeriod, LIMIT);
    expectWithin(Math.sqrt(direct[2]![2]!), fisher.sigmaSemiAmplitude, LIMIT);
    expectWithin(Math.sqrt(direct[3]![3]!), fisher.sigmaZeroPoint, LIMIT);
    // The phase is counted from t = 0 in fits.json and from the epoch here: phi = longitude - 2 pi epoch/P.
    const lever = (2 * Math.PI * 100) / fisher.periodDays;
    const variance = direct[1]![1]! + 2 * lever * direct[0]![1]! + lever * lever * direct[0]![0]!;
    expectWithin(Math.sqrt(variance), fisher.sigmaPhase, LIMIT);
  });

  it('with whole periods sampled evenly sigma_K is sigma sqrt(2/n) (Cumming 2004, remembered), period and phase known', () => {
    const times = Array.from({ length: 50 }, (_, i) => i * 2);
    const set = velocitySet({
      times,
      velocities: times.map((t) => 5 * Math.cos(0.02 * Math.PI * t * 5)),
      sigmas: times.map(() => 2),
    });
    const { explorer } = explorerFor(BARE_CASE, set);
    const problem = explorer.builder.problem({ companions: [{ choice: null, circular: true }], drift: 0 });
    const point = { parameters: Float64Array.of(Math.log(20), 0, 5, 0), jittersMps: Float64Array.of(0) };
    const size = problem.freeCount;
    const information = expectedInformation(problem, point);
    expectWithin(1 / Math.sqrt(information[2 * size + 2]!), 0.4, {
      rel: 1e-12,
      unit: 'm/s',
      why: 'closed form: 2 sqrt(2/50)',
    });
  });

  it('observed information equals second differences of the log-density, jitters included', () => {
    const random = RandomStream.fromSeed(31);
    const set = simulated(random, {
      times: scatteredTimes(random, 50, 300),
      companions: [{ periodDays: 31, eccentricity: 0.3, argPeriastronStarRad: 1, timePeriastronBjdTdb: 2459003, semiAmplitudeMps: 20 }],
      sigmaMps: 2,
      jitterMps: 3,
      zeroPointsMps: [5, -40],
    }); // prettier-ignore
    const { explorer, epochBjdTdb } = explorerFor(BARE_CASE, set);
    const problem = explorer.builder.problem({ companions: [{ choice: null, circular: false }], drift: 1 });
    const start = explorer.builder.point(problem, {
      companions: [{ periodDays: 31, eccentricity: 0.3, argPeriastronStarRad: 1, timePeriastronDays: 2459003 - epochBjdTdb, semiAmplitudeMps: 20 }],
      zeroPointsMps: Float64Array.of(5, -40), drift: [0, 0], jittersMps: Float64Array.of(3, 3),
    }); // prettier-ignore
    const { point, status } = fitModel(problem, start, THOROUGH);
    expect(status).toBe('converged');
    const { covariance, size, source } = curvatureAt(problem, point);
    expect(source).toBe('observed information');
    const p = problem.parameterCount;
    const scale = Array.from({ length: size }, (_, j) => Math.sqrt(covariance![j * size + j]!));
    const density = (steps: readonly number[]): number =>
      problem.logDensity({
        parameters: point.parameters.map((value, j) => value + steps[j]! * scale[j]!),
        jittersMps: point.jittersMps.map(
          (value, i) => value + (steps[p + problem.freeJitters.indexOf(i)] ?? 0) * scale[p + i]!,
        ),
      });
    const unit = (j: number, by: number, k: number, other: number): number[] =>
      scale.map((_, at) => (at === j ? by : 0) + (at === k ? other : 0));
    const h = 0.02;
    const hessian = scale.map((_, j) =>
      scale.map(
        (__, k) =>
          -(
            density(unit(j, h, k, h)) -
            density(unit(j, h, k, -h)) -
            density(unit(j, -h, k, h)) +
            density(unit(j, -h, k, -h))
          ) /
          (4 * h * h),
      ),
    );
    const wanted = inverse(Float64Array.from(hessian.flat()), size);
    wanted.forEach((row, j) => {
      row.forEach((value, k) => {
        expectWithin(covariance![j * size + k]! / (scale[j]! * scale[k]!), value, {
          abs: 5e-3,
          unit: '1',
          why: 'second differences over 0.02 sigma',
        });
      });
    });
  });

  it('knows of a jitter what residuals of just the expected size tell: second differences of ln L', () => {
    const sigmas = Array.from({ length: 24 }, (_, i) => 1 + 0.2 * (i % 7));
    const jitter = 1.7;
    // Residuals +-sqrt(sigma^2 + s^2): for them the observed information is the expected one, sum of 2 s^2/v^2.
    const velocities = sigmas.map((sigma, i) => (i % 2 === 0 ? 1 : -1) * Math.hypot(sigma, jitter));
    const set = velocitySet({ times: sigmas.map((_, i) => i), velocities, sigmas });
    const { explorer } = explorerFor(BARE_CASE, set);
    const problem = explorer.builder.problem({ companions: [], drift: 0 });
    const density = (s: number): number =>
      problem.logDensity({ parameters: Float64Array.of(0), jittersMps: Float64Array.of(s) });
    const h = 1e-3;
    const second = (density(jitter + h) - 2 * density(jitter) + density(jitter - h)) / (h * h);
    const point = { parameters: Float64Array.of(0), jittersMps: Float64Array.of(jitter) };
    expectWithin(expectedInformation(problem, point)[3]!, -second, {
      rel: 1e-4,
      unit: '(m/s)^-2',
      why: 'rounding of ln L over a step of 1e-3',
    });
  });

  it('draws have the mean and the covariance of the Gaussian, and jitters stay positive', () => {
    const { problem, point } = evenlySampled();
    const { covariance, size } = curvatureAt(problem, point);
    const draws = gaussianDraws(problem, point, covariance!, 20000, RandomStream.fromSeed(5));
    expect(draws).toHaveLength(20000);
    for (let j = 0; j < size; j++) {
      const mean = draws.reduce((sum, draw) => sum + draw.parameters[j]!, 0) / draws.length;
      const sigma = Math.sqrt(covariance![j * size + j]!);
      expectWithin((mean - point.parameters[j]!) / sigma, 0, {
        abs: 4 / Math.sqrt(20000),
        unit: '1',
        why: 'four standard errors of the mean',
      });
      for (let k = 0; k <= j; k++) {
        const product = draws.reduce(
          (sum, draw) =>
            sum + (draw.parameters[j]! - point.parameters[j]!) * (draw.parameters[k]! - point.parameters[k]!),
          0,
        );
        const other = Math.sqrt(covariance![k * size + k]!);
        expectWithin(product / draws.length / (sigma * other), covariance![j * size + k]! / (sigma * other), {
          abs: (4 * Math.SQRT2) / Math.sqrt(20000),
          unit: '1',
          why: 'four standard errors of a second moment',
        });
      }
    }
  });

  it('says so when the data do not determine a parameter: nine parameters from five velocities', () => {
    const set = velocitySet({ times: [0, 1, 2, 3, 4], velocities: [1, 2, 1, 3, 2], sigmas: [1, 1, 1, 1, 1] });
    const { explorer } = explorerFor(BARE_CASE, set);
    const problem = explorer.builder.problem({ companions: [{ choice: null, circular: false }], drift: 2 });
    const point = {
      parameters: Float64Array.of(Math.log(1), 0, 0.1, 0.1, 1, 2, 0, 0),
      jittersMps: Float64Array.of(1),
    };
    expect(curvatureAt(problem, point).covariance).toBeNull();
  });
});
