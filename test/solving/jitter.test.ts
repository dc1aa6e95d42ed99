import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { VelocityData } from '../../src/signals/velocity-term.js';
import { updateJitters } from '../../src/solving/jitter.js';
import type { JitterSetting } from '../../src/solving/model-structure.js';
import fits from '../reference/fits/fits.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

const FREE: JitterSetting = { lowMps: 0, highMps: 1e7, prior: null, isStated: false };

function dataOf(sigmas: readonly number[], instrumentOf: readonly number[] = []): VelocityData {
  return {
    timesDays: Float64Array.from(sigmas, (_, i) => i),
    velocitiesMps: new Float64Array(sigmas.length),
    sigmasMps: Float64Array.from(sigmas),
    instrumentOf: Uint16Array.from(sigmas, (_, i) => instrumentOf[i] ?? 0),
    instrumentCount: 1 + Math.max(0, ...instrumentOf),
  };
}

function best(
  data: VelocityData,
  residuals: readonly number[],
  settings: readonly JitterSetting[],
): Float64Array {
  const jitters = new Float64Array(data.instrumentCount).fill(NaN);
  updateJitters(data, Float64Array.from(residuals), settings, jitters);
  return jitters;
}

/** ln L plus prior of one instrument by its definition. */
function density(
  sigmas: readonly number[],
  residuals: readonly number[],
  setting: JitterSetting,
  s: number,
): number {
  const prior = setting.prior === null ? 0 : ((s - setting.prior.centre) / setting.prior.sigma) ** 2;
  return residuals.reduce((sum, r, i) => {
    const variance = sigmas[i]! ** 2 + s * s;
    return sum - 0.5 * (r ** 2 / variance + Math.log(2 * Math.PI * variance));
  }, -0.5 * prior);
}

describe('updateJitters', () => {
  it('finds the maximum-likelihood jitter of fits.json (scipy)', () => {
    const { residualsMps, sigmasMps, bestJitterMps, bestLogLikelihood } = fits.jitter;
    const [got] = best(dataOf(sigmasMps), residualsMps, [FREE]);
    expectWithin(got!, bestJitterMps, {
      abs: 1e-7,
      unit: 'm/s',
      why: 'a minimum is found to the root of the rounding',
    });
    expectWithin(density(sigmasMps, residualsMps, FREE, got!), bestLogLikelihood, {
      rel: 1e-13,
      unit: '1',
      why: 'at a maximum',
    });
  });

  it('with equal errors it is the root of the mean square less the variance, or 0', () => {
    const residuals = [3, -4, 1, 2, -5, 0.5];
    const meanSquare = residuals.reduce((sum, r) => sum + r * r, 0) / 6;
    expectWithin(
      best(dataOf(residuals.map(() => 1.5)), residuals, [FREE])[0]!,
      Math.sqrt(meanSquare - 1.5 ** 2),
      {
        rel: 1e-10,
        unit: 'm/s',
        why: 'closed form',
      },
    );
    expect(best(dataOf(residuals.map(() => 3.5)), residuals, [FREE])[0]).toBe(0);
    expect(best(dataOf([1, 1, 1]), [0, 0, 0], [FREE])[0]).toBe(0);
  });

  it('each instrument has its own; bounds and fixed values are kept', () => {
    const sigmas = [1, 1, 1, 1, 1, 1];
    const data = dataOf(sigmas, [0, 1, 0, 1, 2, 2]);
    const residuals = [3, 40, -3, -40, 0.2, 0.1];
    expectWithin(best(data, residuals, [FREE, FREE, FREE])[1]!, Math.sqrt(1599), {
      rel: 1e-10,
      unit: 'm/s',
      why: 'closed form',
    });
    const bounded = best(data, residuals, [
      { lowMps: 0, highMps: 2, prior: null, isStated: false },
      { lowMps: 7, highMps: 7, prior: null, isStated: false },
      { lowMps: 0.4, highMps: 5, prior: null, isStated: false },
    ]);
    expect([...bounded]).toEqual([2, 7, 0.4]);
  });

  it('no jitter on a fine grid is better, with and without a prior, 60 random sets', () => {
    const random = RandomStream.fromSeed(21);
    for (let turn = 0; turn < 60; turn++) {
      const n = 2 + random.integerBelow(20);
      const sigmas = Array.from({ length: n }, () => Math.exp(random.uniformBetween(-1, 1.5)));
      const spread = random.uniformBetween(0, 4);
      const residuals = sigmas.map((sigma) => Math.hypot(sigma, spread) * random.normal());
      const prior =
        turn % 2 === 0 ? null : { centre: random.uniformBetween(0, 5), sigma: random.uniformBetween(0.1, 3) };
      const setting = { ...FREE, prior };
      const [got] = best(dataOf(sigmas), residuals, [setting]);
      const reached = density(sigmas, residuals, setting, got!);
      for (let s = 0; s < 20; s += 0.005) {
        expect(density(sigmas, residuals, setting, s) - reached).toBeLessThan(1e-9);
      }
    }
  });
});
