/** An optimum that is known from outside (fits.json: best of twelve starts of scipy's least squares), along the real path. */
import { beforeAll, describe, expect, it } from 'vitest';
import type { Case, VelocitySet } from '../../src/observations/types.js';
import { curvatureAt, expectedInformation } from '../../src/solving/curvature.js';
import type { PlannedFit } from '../../src/solving/explorer.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import { polish } from '../../src/solving/polish.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { solveCase } from '../../src/solving/solve-case.js';
import type { Solved } from '../../src/solving/types.js';
import data from '../reference/fits/two-companions-data.json' with { type: 'json' };
import fits from '../reference/fits/fits.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, velocitySet, inverse } from './helpers.js';

const { optimum } = fits;
const { parameters, sigmas } = optimum;
const K = 11;

const SET: VelocitySet = velocitySet({
  times: data.rows.map((row) => row[0]!),
  velocities: data.rows.map((row) => row[1]!),
  sigmas: data.rows.map((row) => row[2]!),
  instruments: data.rows.map((row) => row[3]!),
});
const FIXED = { zeroPointMps: null, jitterMps: { kind: 'fixed', value: 0 } } as const;
const CASE: Case = { ...BARE_CASE, instruments: { north: FIXED, south: FIXED } };
const BIC = K * Math.log(data.rows.length) - 2 * optimum.logLikelihood;

/** The two companions and everything beside them, in the coordinates of fits.json. */
function expectOptimum(solved: Solved): void {
  const { best } = solved;
  expect(best.epochBjdTdb).toBe(optimum.epochBjd);
  expect(best.companions).toHaveLength(2);
  const [wide, close] = best.companions as [Solved['best']['companions'][0], Solved['best']['companions'][0]];
  const e = wide.eccentricity;
  const turns = (wide.timePeriastronBjdTdb - best.epochBjdTdb - parameters.timePeriastronDays) / parameters.P;
  const longitude =
    Math.PI / 2 + (2 * Math.PI * (best.epochBjdTdb - close.timePeriastronBjdTdb)) / close.periodDays;
  const longitudeTurns = (longitude - parameters.longitude2) / (2 * Math.PI);
  const rows: [keyof typeof parameters, number][] = [
    ['P', wide.periodDays],
    ['K', wide.semiAmplitudeMps],
    ['eCosOmega', e * Math.cos(wide.argPeriastronStarRad)],
    ['eSinOmega', e * Math.sin(wide.argPeriastronStarRad)],
    ['P2', close.periodDays],
    ['K2', close.semiAmplitudeMps],
    ['zeroPoint0', best.zeroPointsMps[0]!],
    ['zeroPoint1', best.zeroPointsMps[1]!],
    ['slope', best.slopeMpsPerDay],
  ];
  const limit = { abs: 1e-3, unit: 'sigma', why: 'both are at the same maximum' };
  for (const [name, got] of rows) expectWithin((got - parameters[name]) / sigmas[name], 0, limit);
  // Passages some revolutions off move with the period as well: compared as phases.
  const passageLimit = { ...limit, abs: 5e-3 };
  expectWithin(((turns - Math.round(turns)) * parameters.P) / sigmas.timePeriastronDays, 0, passageLimit);
  expectWithin(
    ((longitudeTurns - Math.round(longitudeTurns)) * 2 * Math.PI) / sigmas.longitude2,
    0,
    passageLimit,
  );
  expect(close.eccentricity).toBe(0);
}

function expectFit(fit: Solved['record']['fit']): void {
  expect(fit.status).toBe('converged');
  expect(fit.freeParameters).toBe(K);
  expect(fit.degreesOfFreedom).toBe(48 - K);
  expectWithin(fit.chiSquare, optimum.chiSquare, { rel: 1e-7, unit: '1', why: 'at a minimum' });
  expectWithin(fit.logLikelihood, optimum.logLikelihood, { rel: 1e-9, unit: '1', why: 'at a maximum' });
  expectWithin(fit.bic, BIC, { rel: 1e-9, unit: '1', why: 'k ln n - 2 ln L' });
  // AICc = 2k - 2 ln L + 2k(k + 1)/(n - k - 1) (Hurvich & Tsai 1989, remembered).
  expectWithin(fit.aicc!, 2 * K - 2 * optimum.logLikelihood + (2 * K * (K + 1)) / (48 - K - 1), {
    rel: 1e-9,
    unit: '1',
    why: 'closed form',
  });
}

describe('two companions in two instruments with a drift, jitters fixed to 0', () => {
  let fitted: PlannedFit;
  let asked: Solved;
  beforeAll(() => {
    const theCase: Case = { ...CASE, companions: 2 };
    const { explorer } = explorerFor(theCase, SET);
    fitted = polish(findCompanions(explorer, () => undefined).best);
    asked = solveCase(theCase, SET, OPTIONS);
  });

  it('ends at the optimum: chi square to 1e-7, every parameter to 1e-3 sigma, ln L, BIC, AICc', () => {
    expectOptimum(asked);
    expectFit(asked.record.fit);
  });

  it('has the errors of the optimum within 1 % from J^T J, and near them from the curvature', () => {
    const { problem, point } = fitted.fit;
    const size = problem.freeCount;
    expect(size).toBe(K);
    const isWideFirst = !fitted.plan.companions[0]!.circular;
    const [wide, close] = isWideFirst ? [0, 5] : [3, 0];
    const order: [number, number][] = [
      [wide, sigmas.P / parameters.P],
      [wide + 2, sigmas.eCosOmega],
      [wide + 3, sigmas.eSinOmega],
      [wide + 4, sigmas.K],
      [close, sigmas.P2 / parameters.P2],
      [close + 1, sigmas.longitude2],
      [close + 2, sigmas.K2],
      [8, sigmas.zeroPoint0],
      [9, sigmas.zeroPoint1],
      [10, sigmas.slope],
    ];
    const expected = inverse(expectedInformation(problem, point), size);
    const { covariance, source } = curvatureAt(problem, point);
    expect(source).toBe('observed information');
    for (const [j, want] of order) {
      expectWithin(Math.sqrt(expected[j]![j]!), want, {
        rel: 0.01,
        unit: 'sigma',
        why: 'the same matrix in other coordinates',
      });
      expectWithin(Math.sqrt(covariance![j * size + j]!), want, {
        rel: 0.2,
        unit: 'sigma',
        why: 'the curvature sees the residuals too; 48 velocities',
      });
    }
  });

  it('the record carries those errors, in the units of solution.json', () => {
    const wide = asked.record.companions.find(({ circular }) => !circular)!;
    const limit = { rel: 0.2, unit: 'sigma', why: 'curvature instead of J^T J, 4000 draws' };
    expectWithin(wide.elements.period.sigma!, sigmas.P, limit);
    expectWithin(wide.elements.semiAmplitude.sigma!, sigmas.K, limit);
    expectWithin(asked.record.velocity.slope.sigma!, sigmas.slope * 365.25, limit);
    expectWithin(asked.record.velocity.instruments[1]!.zeroPoint.sigma!, sigmas.zeroPoint1, limit);
    const { names, matrix } = asked.record.fit.covariance;
    const at = names.indexOf(`companions.${wide.letter}.period`);
    expectWithin(Math.sqrt(matrix[at]![at]!), wide.elements.period.sigma!, {
      rel: 0.05,
      unit: 'd',
      why: 'draws against linear propagation',
    });
    expect(names).toHaveLength(K);
  });

  it('blind, the same optimum is found', () => {
    const solved = solveCase(CASE, SET, OPTIONS);
    expectOptimum(solved);
    expectFit(solved.record.fit);
  });
});
