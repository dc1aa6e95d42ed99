/** The reported point is a maximum of the density that is stated: a general-purpose optimiser finds nothing higher. */
import { describe, expect, it } from 'vitest';
import { nelderMead } from '../../src/numerics/nelder-mead.js';
import { RandomStream } from '../../src/numerics/random.js';
import type { Case, VelocitySet } from '../../src/observations/types.js';
import type { OrbitElements } from '../../src/orbit/elements.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import { curvatureAt, gaussianDraws } from '../../src/solving/curvature.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import { ROUGH } from '../../src/solving/fit-model.js';
import { polish, pointOfVector, vectorOfPoint } from '../../src/solving/polish.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { solveCase } from '../../src/solving/solve-case.js';
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated } from './helpers.js';

const orbit = (
  periodDays: number,
  eccentricity: number,
  argPeriastronStarRad: number,
  semiAmplitudeMps: number,
): OrbitElements => ({
  periodDays,
  eccentricity,
  argPeriastronStarRad,
  timePeriastronBjdTdb: 2459012,
  semiAmplitudeMps,
});

interface Trial {
  readonly name: string;
  readonly theCase: Case;
  readonly velocities: VelocitySet;
  readonly companions: number;
}

function trials(): Trial[] {
  const random = RandomStream.fromSeed(77);
  const times = (count: number, span: number): Float64Array => scatteredTimes(random, count, span);
  return [
    {
      name: 'eccentric, jitter larger than the errors',
      theCase: BARE_CASE,
      companions: 1,
      velocities: simulated(random, { times: times(45, 600), companions: [orbit(71, 0.45, 1.2, 30)], sigmaMps: 2, jitterMps: 4 }),
    },
    {
      name: 'errors too large, so that the jitter is 0',
      theCase: BARE_CASE,
      companions: 1,
      velocities: simulated(random, { times: times(40, 300), companions: [orbit(9.3, 0, 0, 20)], sigmaMps: 4, noise: 0.6 }),
    },
    {
      name: 'two companions, two instruments, drift',
      theCase: BARE_CASE,
      companions: 2,
      velocities: simulated(random, {
        times: times(80, 900),
        companions: [orbit(151, 0.3, 4, 25), orbit(12.7, 0.1, 2, 14)],
        sigmaMps: 2,
        jitterMps: 1,
        zeroPointsMps: [3, -250],
        slopeMpsPerDay: 0.03,
      }),
    },
    {
      name: 'e = 0.85',
      theCase: BARE_CASE,
      companions: 1,
      velocities: simulated(random, { times: times(60, 700), companions: [orbit(88, 0.85, 5.4, 120)], sigmaMps: 3, zeroPointsMps: [0, 40] }),
    },
    {
      name: 'priors on period, conjunction, zero point and jitter that pull away from the data',
      theCase: {
        ...BARE_CASE,
        companions: [
          {
            letter: 'b', circular: false, inclinationDeg: null,
            elements: { period: { kind: 'prior', value: 60.6, sigma: 0.1 }, eccentricity: { kind: 'prior', value: 0.1, sigma: 0.05 } },
          },
        ],
        instruments: { north: { zeroPointMps: { kind: 'prior', value: 4, sigma: 0.5 }, jitterMps: { kind: 'prior', value: 3, sigma: 0.5 } } },
      },
      companions: 1,
      velocities: simulated(random, { times: times(40, 500), companions: [orbit(60, 0.25, 1, 15)], sigmaMps: 2 }),
    },
  ]; // prettier-ignore
}

describe('nothing higher is found near the reported point', () => {
  for (const { name, theCase, velocities, companions } of trials()) {
    it(name, () => {
      const { explorer } = explorerFor(theCase, velocities);
      const { fit } = polish(findCompanions(explorer, () => undefined).best);
      const { problem, point } = fit;
      expect(problem.structure.companions).toHaveLength(companions);
      expect(fit.status).toBe('converged');
      expectWithin(problem.logDensity(point), fit.logDensity, {
        abs: 1e-9,
        unit: 'ln L',
        why: 'the same sum',
      });
      const { covariance, size } = curvatureAt(problem, point);
      const centre = vectorOfPoint(problem, point);
      const width = centre.map((_, j) => Math.sqrt(covariance![j * size + j]!));
      const descend = (start: Float64Array, edge: number): number => {
        const found = nelderMead(
          (vector) => -problem.logDensity(pointOfVector(problem, vector, point.jittersMps)),
          start,
          width.map((value) => edge * value),
          { maxEvaluations: 4000, valueTolerance: 1e-12 },
        );
        return -found.value;
      };
      for (const edge of [0.02, 0.5]) {
        expect(descend(centre, edge) - fit.logDensity).toBeLessThan(1e-6);
      }
      const random = RandomStream.fromSeed(3);
      for (const spread of [1e-3, 0.03, 1]) {
        const narrowed = covariance!.map((value) => value * spread * spread);
        const jumps = gaussianDraws(problem, point, narrowed, 1500, random);
        const highest = Math.max(...jumps.map((jump) => problem.logDensity(jump)));
        expect(highest - fit.logDensity).toBeLessThan(1e-6);
      }
    });
  }
});

describe('polish', () => {
  it('reaches from a rough fit the maximum of a thorough one, and says how flat it is there', () => {
    for (const { theCase, velocities } of trials().slice(0, 4)) {
      const { explorer } = explorerFor(theCase, velocities);
      const { best } = findCompanions(explorer, () => undefined);
      const rough = explorer.fit(best.plan, explorer.portable(best), ROUGH);
      const shifted = rough.fit.point.parameters.map((value, j) => value + (j % 2 === 0 ? 1e-4 : -1e-4));
      const point = { ...rough.fit.point, parameters: shifted };
      const moved = { ...rough.fit, point, logDensity: rough.fit.problem.logDensity(point) };
      const { fit } = polish({ plan: best.plan, fit: { ...moved, status: 'iteration-limit' } });
      expect(moved.logDensity).toBeLessThan(best.fit.logDensity - 1e-5);
      expectWithin(fit.logDensity, best.fit.logDensity, {
        abs: 1e-5,
        unit: 'ln L',
        why: 'slopes below 1e-3 per sigma',
      });
      expect(fit.status).toBe('converged');
      expect(fit.reason).toMatch(/slope/);
    }
  });
});

describe('the record', () => {
  it('states the ln L, chi square and rms of its own numbers', () => {
    for (const { theCase, velocities } of trials().slice(0, 3)) {
      const { record, best, residualsMps } = solveCase(theCase, velocities, OPTIONS);
      const model = evaluateVelocity(best, velocities.timesBjdTdb);
      let [logLikelihood, chiSquare, square] = [0, 0, 0];
      velocities.velocitiesMps.forEach((velocity, i) => {
        const instrument = velocities.instrumentOf[i]!;
        const residual = velocity - model[i]! - best.zeroPointsMps[instrument]!;
        expectWithin(residualsMps[i]!, residual, { abs: 1e-6, unit: 'm/s', why: 'dates of 2.46e6 d' });
        const variance = velocities.sigmasMps[i]! ** 2 + best.jittersMps[instrument]! ** 2;
        chiSquare += residual ** 2 / variance;
        square += residual ** 2 / velocities.count;
        logLikelihood -= 0.5 * (residual ** 2 / variance + Math.log(2 * Math.PI * variance));
      });
      const { fit } = record;
      expectWithin(fit.logLikelihood, logLikelihood, { abs: 1e-6, unit: 'ln L', why: 'dates of 2.46e6 d' });
      expectWithin(fit.chiSquare, chiSquare, { rel: 1e-7, unit: '1', why: 'dates of 2.46e6 d' });
      expectWithin(fit.rms, Math.sqrt(square), { rel: 1e-8, unit: 'm/s', why: 'dates of 2.46e6 d' });
      expectWithin(fit.bic, fit.freeParameters * Math.log(velocities.count) - 2 * logLikelihood, {
        abs: 1e-5,
        unit: '1',
        why: 'k ln n - 2 ln L',
      });
      expect(fit.degreesOfFreedom).toBe(velocities.count - fit.freeParameters);
    }
  });
});
