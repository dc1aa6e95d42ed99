import { describe, expect, it } from 'vitest';
import { checkJacobian } from '../../src/numerics/jacobian-check.js';
import type { LeastSquaresProblem } from '../../src/numerics/least-squares.js';
import { RandomStream } from '../../src/numerics/random.js';
import type { Case, VelocitySet } from '../../src/observations/types.js';
import { ModelBuilder, type ModelPlan } from '../../src/solving/model-builder.js';
import { explorerFor } from '../../src/solving/prepare.js';
import type { VelocityProblem } from '../../src/solving/problem.js';
import type { ModelPoint } from '../../src/solving/model-structure.js';
import fits from '../reference/fits/fits.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, scatteredTimes, simulated, velocitySet } from './helpers.js';

const EPOCH = 2459000.5;

function busyData(seed: number): VelocitySet {
  const random = RandomStream.fromSeed(seed);
  return simulated(random, {
    times: scatteredTimes(random, 45, 400),
    companions: [
      { periodDays: 37, eccentricity: 0.4, argPeriastronStarRad: 1.9, timePeriastronBjdTdb: EPOCH + 5, semiAmplitudeMps: 30 },
      { periodDays: 8.2, eccentricity: 0, argPeriastronStarRad: Math.PI / 2, timePeriastronBjdTdb: EPOCH + 2, semiAmplitudeMps: 9 },
    ],
    sigmaMps: 2,
    zeroPointsMps: [12, -300, 40],
    slopeMpsPerDay: 0.02,
    curvatureMpsPerDay2: 1e-4,
  }); // prettier-ignore
}

/** Priors and ranges of every kind that a case may state. */
const STATED: Case = {
  ...BARE_CASE,
  instruments: {
    north: {
      zeroPointMps: { kind: 'prior', value: 10, sigma: 3 },
      jitterMps: { kind: 'prior', value: 1, sigma: 0.5 },
    },
    south: { zeroPointMps: { kind: 'fixed', value: -300 }, jitterMps: { kind: 'fixed', value: 2 } },
    dome: {
      zeroPointMps: { kind: 'prior', value: 40, sigma: 11 },
      jitterMps: { kind: 'range', low: 0, high: 30 },
    },
  },
};

const CHOICE = {
  letter: 'b',
  circular: false,
  elements: {
    period: { kind: 'prior', value: 37.1, sigma: 0.2 },
    eccentricity: { kind: 'range', low: 0.1, high: 0.7 },
    timeOfInferiorConjunction: { kind: 'prior', value: EPOCH + 4, sigma: 1 },
  },
  inclinationDeg: null,
} as const;

interface Built {
  readonly problem: VelocityProblem;
  readonly point: ModelPoint;
}

function build(theCase: Case, plan: ModelPlan, jitters: readonly number[], velocities = busyData(3)): Built {
  const { explorer, epochBjdTdb } = explorerFor(theCase, velocities);
  const problem = explorer.builder.problem(plan);
  const days = EPOCH - epochBjdTdb;
  const point = explorer.builder.point(problem, {
    companions: [
      { periodDays: 36.8, eccentricity: 0.35, argPeriastronStarRad: 2, timePeriastronDays: days + 5.5, semiAmplitudeMps: 27 },
      { periodDays: 8.2, eccentricity: 0.05, argPeriastronStarRad: 1, timePeriastronDays: days + 2, semiAmplitudeMps: 8 },
    ].slice(0, plan.companions.length),
    zeroPointsMps: Float64Array.of(13, -298, 37),
    drift: [0.018, 1.4e-4],
    jittersMps: Float64Array.from(jitters),
  }); // prettier-ignore
  return { problem, point };
}

const PLANS: readonly { name: string; theCase: Case; plan: ModelPlan; jitters: readonly number[] }[] = [
  { name: 'no companion', theCase: BARE_CASE, plan: { companions: [], drift: 0 }, jitters: [1, 0, 4] },
  {
    name: 'eccentric and circular, quadratic drift',
    theCase: BARE_CASE,
    plan: {
      companions: [
        { choice: null, circular: false },
        { choice: null, circular: true },
      ],
      drift: 2,
    },
    jitters: [1, 0, 4],
  },
  {
    name: 'priors, ranges and fixed values, linear drift',
    theCase: STATED,
    plan: {
      companions: [
        { choice: CHOICE, circular: false },
        { choice: null, circular: false },
      ],
      drift: 1,
    },
    jitters: [0.7, 2, 3],
  },
];

describe('VelocityProblem', () => {
  for (const { name, theCase, plan, jitters } of PLANS) {
    it(`Jacobian equals difference quotients: ${name}`, () => {
      const { problem, point } = build(theCase, plan, jitters);
      problem.setJitters(point.jittersMps);
      const check = checkJacobian(problem, point.parameters, 1e-3);
      expectWithin(check.worstRelativeError, 0, {
        abs: 1e-7,
        unit: '1',
        why: 'what extrapolated quotients can tell',
      });
    });

    it(`gradient of the log-density equals difference quotients, jitters included: ${name}`, () => {
      const { problem, point } = build(theCase, plan, jitters);
      const p = problem.parameterCount;
      const gradient = new Float64Array(problem.freeCount);
      expect(problem.logDensityGradient(point, gradient)).toBe(true);
      const moved = (j: number, by: number): number => {
        const parameters = Float64Array.from(point.parameters);
        const jittersMps = Float64Array.from(point.jittersMps);
        if (j < p) parameters[j]! += by;
        else jittersMps[problem.freeJitters[j - p]!]! += by;
        return problem.logDensity({ parameters, jittersMps });
      };
      gradient.forEach((got, j) => {
        const size = j < p ? Math.max(1e-2, Math.abs(point.parameters[j]!)) : 1;
        const central = (h: number): number => (moved(j, h) - moved(j, -h)) / (2 * h);
        const h = 5e-5 * size;
        const want = (4 * central(h / 2) - central(h)) / 3;
        expectWithin(got, want, {
          abs: 1e-6 * (1 + Math.abs(want)),
          unit: '1',
          why: 'ln L of some thousands is rounded to 1e-12 and differenced over 1e-4',
        });
      });
    });
  }

  it('a wrong Jacobian would be seen: one element made wrong by 1e-5', () => {
    const { problem, point } = build(BARE_CASE, PLANS[1]!.plan, [0, 0, 0]);
    const poisoned: LeastSquaresProblem = {
      parameterCount: problem.parameterCount,
      residualCount: problem.residualCount,
      evaluate(parameters, residuals, jacobian) {
        const ok = problem.evaluate(parameters, residuals, jacobian);
        if (jacobian !== null) jacobian[7 * problem.parameterCount + 2]! *= 1 + 1e-3;
        return ok;
      },
    };
    const check = checkJacobian(poisoned, point.parameters, 1e-3);
    expect(check.worstRelativeError).toBeGreaterThan(1e-5);
    expect([check.residualIndex, check.parameterIndex]).toEqual([7, 2]);
  });

  it('ln L is the sum of Gaussian logarithms (fits.json, scipy.stats.norm)', () => {
    const { residualsMps, sigmasMps, logLikelihoods } = fits.jitter;
    const rows = {
      times: residualsMps.map((_, i) => EPOCH + i),
      velocities: residualsMps,
      sigmas: sigmasMps,
    };
    const { explorer } = explorerFor(BARE_CASE, velocitySet(rows));
    const problem = explorer.builder.problem({ companions: [], drift: 0 });
    for (const [jitter, want] of logLikelihoods as [number, number][]) {
      const point = { parameters: Float64Array.of(0), jittersMps: Float64Array.of(jitter) };
      const limit = { rel: 1e-14, unit: '1', why: 'a sum of six terms' };
      expectWithin(problem.logLikelihood(point), want, limit);
      expectWithin(problem.logDensity(point), want, limit);
    }
  });

  it('the density is ln L minus half the square of every stated prior', () => {
    const { problem, point } = build(STATED, PLANS[2]!.plan, [0.7, 2, 3]);
    // North zero point 13 under 10 +- 3, dome zero point 37 under 40 +- 11,
    // jitter 0.7 under 1 +- 0.5, period 36.8 under 37.1 +- 0.2; conjunction is read from the coordinates.
    const [lnP, longitude, k, h] = problem.coordinatesAt(point.parameters);
    const e = Math.hypot(k!, h!);
    const omega = Math.atan2(h!, k!);
    const E = 2 * Math.atan(Math.sqrt((1 - e) / (1 + e)) * Math.tan((Math.PI / 2 - omega) / 2));
    const meanAtConjunction = E - e * Math.sin(E);
    const period = Math.exp(lnP!);
    const conjunction = ((meanAtConjunction + omega - longitude!) * period) / (2 * Math.PI);
    const off = conjunction + explorerEpoch() - (EPOCH + 4);
    const squares = [
      ((13 - 10) / 3) ** 2,
      ((37 - 40) / 11) ** 2,
      ((0.7 - 1) / 0.5) ** 2,
      ((36.8 - 37.1) / 0.2) ** 2,
      (off - period * Math.round(off / period)) ** 2,
    ];
    const want = problem.logLikelihood(point) - 0.5 * squares.reduce((sum, value) => sum + value, 0);
    expectWithin(problem.logDensity(point), want, { rel: 1e-10, unit: '1', why: 'dates of 2.46e6 d' });
    expect(problem.residualCount).toBe(45 + 4);
  });

  it('does not depend on the order of the rows', () => {
    const data = busyData(4);
    const order = Float64Array.from({ length: data.count }, (_, i) => i);
    RandomStream.fromSeed(6).shuffle(order);
    const take = (values: Float64Array | Uint16Array): number[] => Array.from(order, (i) => values[i]!);
    const shuffled: VelocitySet = {
      ...data,
      timesBjdTdb: Float64Array.from(take(data.timesBjdTdb)),
      velocitiesMps: Float64Array.from(take(data.velocitiesMps)),
      instrumentOf: Uint16Array.from(take(data.instrumentOf)),
    };
    const [plain, other] = [data, shuffled].map((set) => {
      const { explorer } = explorerFor(BARE_CASE, data);
      const timesDays = set.timesBjdTdb.map((t) => t - explorer.builder.epochBjdTdb);
      const builder = new ModelBuilder(
        {
          ...explorer.builder.data,
          timesDays,
          velocitiesMps: set.velocitiesMps,
          instrumentOf: set.instrumentOf,
        },
        data.instruments,
        BARE_CASE,
        explorer.builder.epochBjdTdb,
      );
      return builder.problem(PLANS[1]!.plan);
    });
    const { point } = build(BARE_CASE, PLANS[1]!.plan, [1, 2, 3], data);
    expectWithin(other!.logLikelihood(point), plain!.logLikelihood(point), {
      rel: 1e-13,
      unit: '1',
      why: 'sums in another order',
    });
    const [first, second] = [plain!, other!].map((problem) => {
      const gradient = new Float64Array(problem.freeCount);
      problem.logDensityGradient(point, gradient);
      return gradient;
    });
    first!.forEach((value, j) => {
      expectWithin(second![j]!, value, {
        abs: 1e-9 * (1 + Math.abs(value)),
        unit: '1',
        why: 'sums in another order',
      });
    });
  });

  it('counts what is free, jitters included', () => {
    const counts = PLANS.map(({ theCase, plan, jitters }) => build(theCase, plan, jitters).problem.freeCount);
    // 3 zero points + 3 jitters; 5 + 3 elements, 2 drift more; 2 + 5 + 5 elements, slope, 2 zero points, 2 jitters.
    expect(counts).toEqual([6, 16, 15]);
  });

  it('outside the domain ln L is minus infinity and no gradient is given', () => {
    const { problem, point } = build(BARE_CASE, PLANS[1]!.plan, [1, 1, 1]);
    const beyond = { ...point, parameters: point.parameters.map((value, j) => (j === 2 ? 1.5 : value)) };
    expect(problem.logLikelihood(beyond)).toBe(-Infinity);
    expect(problem.logDensity(beyond)).toBe(-Infinity);
    expect(problem.predictionAt(beyond.parameters)).toBeNull();
    expect(problem.logDensityGradient(beyond, new Float64Array(problem.freeCount))).toBe(false);
  });
});

/** Middle of 400 days from EPOCH, rounded to half a day. */
function explorerEpoch(): number {
  return EPOCH + 200;
}
