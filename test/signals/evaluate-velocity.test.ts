import { describe, expect, it } from 'vitest';
import type { OrbitElements } from '../../src/orbit/elements.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import type { VelocityModelPoint } from '../../src/signals/velocity-model.js';
import samples from '../orbit/velocity-samples.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

const EPOCH = 2459100.5;

function pointOf(
  companions: readonly OrbitElements[],
  slopeMpsPerDay = 0,
  curvatureMpsPerDay2 = 0,
): VelocityModelPoint {
  return {
    companions,
    letters: companions.map((_, i) => 'bcd'[i]!),
    zeroPointsMps: Float64Array.of(1e6),
    jittersMps: new Float64Array(1),
    epochBjdTdb: EPOCH,
    slopeMpsPerDay,
    curvatureMpsPerDay2,
  };
}

function orbit(periodDays: number, eccentricity: number, argPeriastronStarRad: number): OrbitElements {
  return {
    periodDays,
    eccentricity,
    argPeriastronStarRad,
    timePeriastronBjdTdb: EPOCH + 3,
    semiAmplitudeMps: 50,
  };
}

describe('evaluateVelocity', () => {
  it('matches velocity-samples.json (mpmath, 50 digits)', () => {
    for (const row of samples.rows) {
      const [periodDays, passage, eccentricity, omegaDeg, semiAmplitudeMps, zeroPoint, time, , , want] =
        row as [number, number, number, number, number, number, number, number, number, number];
      const [got] = evaluateVelocity(
        pointOf([
          {
            periodDays,
            eccentricity,
            argPeriastronStarRad: (omegaDeg * Math.PI) / 180,
            timePeriastronBjdTdb: passage,
            semiAmplitudeMps,
          },
        ]),
        Float64Array.of(time),
      );
      // The sample's zero point is added here: the function leaves zero points out.
      expectWithin(zeroPoint + got!, want, {
        abs: 2e-9 * semiAmplitudeMps,
        unit: 'm/s',
        why: 'a date of 2.45e6 d carries 5e-10 d, amplified near periastron of e = 0.93',
      });
    }
  });

  it('averages to the zero point over one revolution, for any shape', () => {
    for (const e of [0, 0.1, 0.5, 0.9, 0.97]) {
      for (const omega of [0, 1, 2.5, 4, 5.5]) {
        const count = 40000;
        const times = Float64Array.from({ length: count }, (_, i) => EPOCH + (73.1 * i) / count);
        const mean =
          evaluateVelocity(pointOf([orbit(73.1, e, omega)]), times).reduce((sum, v) => sum + v, 0) / count;
        expectWithin(mean, 0, {
          abs: 1e-5,
          unit: 'm/s',
          why: 'the average in time of cos(nu) is -e; what is left is rounding of dates, 5e-10 d, at steep slopes',
        });
      }
    }
  });

  it('at periastron the velocity is K (1 + e) cos omega, at apastron K (e - 1) cos omega', () => {
    for (const e of [0, 0.3, 0.9]) {
      for (const omega of [0.2, 2, 3.7]) {
        const [peri, apo] = evaluateVelocity(
          pointOf([orbit(64, e, omega)]),
          Float64Array.of(EPOCH + 3, EPOCH + 35),
        );
        const limit = { abs: 1e-10, unit: 'm/s', why: 'dates here are exact in binary; a few roundings' };
        expectWithin(peri!, 50 * (1 + e) * Math.cos(omega), limit);
        expectWithin(apo!, 50 * (e - 1) * Math.cos(omega), limit);
      }
    }
  });

  it('the drift is slope t + curvature t^2/2 about the epoch; parts can be asked for singly and add up', () => {
    const point = pointOf([orbit(20, 0.2, 1), orbit(333, 0.6, 4)], 0.25, -0.5);
    const times = Float64Array.of(EPOCH, EPOCH + 2, EPOCH - 4, EPOCH + 1000);
    const drift = evaluateVelocity(point, times, { companions: [] });
    expect([...drift]).toEqual([0, -0.5, -5, -249750]);
    const parts = [0, 1].map((index) =>
      evaluateVelocity(point, times, { companions: [index], drift: false }),
    );
    evaluateVelocity(point, times).forEach((value, i) => {
      expectWithin(value, drift[i]! + parts[0]![i]! + parts[1]![i]!, {
        abs: 1e-9,
        unit: 'm/s',
        why: 'rounding of a sum near 2.5e5',
      });
    });
    expect(evaluateVelocity(pointOf([]), times).every((value) => value === 0)).toBe(true);
    expect(evaluateVelocity(point, new Float64Array(0))).toHaveLength(0);
  });
});
