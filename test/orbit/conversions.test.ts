import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import {
  conjunctionDelayDays,
  inferiorConjunctionFromPeriastron,
  meanAnomalyAt,
  meanLongitudeAtEpoch,
  nearestPassage,
  nextPassage,
  periastronFromInferiorConjunction,
  periastronFromMeanLongitude,
  RAD_PER_DEG,
  trueAnomaly,
  TWO_PI,
  type OrbitShape,
} from '../../src/orbit/index.js';
import { expectWithin } from '../support/expect-within.js';
import samples from './velocity-samples.json' with { type: 'json' };

describe('star velocity', () => {
  it('follows from the true anomaly as in velocity-samples.json (mpmath, 50 digits), e up to 0.93', () => {
    for (const [P, Tp, e, omegaDeg, K, gamma, t, , nu, velocityMps] of samples.rows) {
      const got = trueAnomaly((TWO_PI * (t! - Tp!)) / P!, e!);
      expectWithin(Math.cos(got), Math.cos(nu!), {
        abs: 2e-14,
        unit: '1',
        why: 'M of some turns rounds by 1e-15',
      });
      const omegaRad = omegaDeg! * RAD_PER_DEG;
      const v = gamma! + K! * (Math.cos(got + omegaRad) + e! * Math.cos(omegaRad));
      expectWithin(v, velocityMps!, { abs: 1e-8, unit: 'm/s', why: 'measured below 1e-10' });
    }
  });
});

describe('conjunctions', () => {
  const shapes: OrbitShape[] = [];
  for (const eccentricity of [0, 0.1, 0.5, 0.93]) {
    for (const omegaDeg of [-170, -90, 0, 30, 90, 180, 270, 300.6]) {
      shapes.push({ periodDays: 12.5, eccentricity, argPeriastronStarRad: omegaDeg * RAD_PER_DEG });
    }
  }

  it('fall where the star stands farthest from us: its velocity is K e cos(omega) and falling', () => {
    for (const shape of shapes) {
      const { periodDays, eccentricity: e, argPeriastronStarRad: omega } = shape;
      const velocity = (day: number): number =>
        Math.cos(trueAnomaly((TWO_PI * day) / periodDays, e) + omega) + e * Math.cos(omega);
      const delay = conjunctionDelayDays(shape);
      expectWithin(velocity(delay), e * Math.cos(omega), { abs: 1e-12, unit: 'K', why: 'cos 90 deg' });
      expect(velocity(delay + 0.01)).toBeLessThan(velocity(delay - 0.01));
      expect(Math.abs(delay)).toBeLessThanOrEqual(periodDays / 2);
    }
  });

  it('come after periastron by the area swept, integrated over the true anomaly', () => {
    for (const shape of shapes) {
      const { periodDays, eccentricity: e } = shape;
      const wanted = Math.atan2(Math.cos(shape.argPeriastronStarRad), Math.sin(shape.argPeriastronStarRad)); // 90 deg - omega
      const steps = 4000;
      const h = wanted / steps;
      const rate = (nu: number): number =>
        ((1 - e * e) ** 1.5 / (1 + e * Math.cos(nu)) ** 2 / TWO_PI) * periodDays;
      let days = 0;
      for (let i = 0; i < steps; i++)
        days += (h / 6) * (rate(i * h) + 4 * rate((i + 0.5) * h) + rate((i + 1) * h));
      const got = conjunctionDelayDays(shape);
      const miss = Math.abs(got - days);
      // Half a turn before periastron is half a turn after it.
      expect(Math.min(miss, Math.abs(miss - periodDays))).toBeLessThan(1e-8);
    }
  });

  it('coincide with periastron for omega = 90 deg', () => {
    for (const eccentricity of [0, 0.3, 0.9]) {
      const shape = {
        periodDays: 5,
        eccentricity,
        argPeriastronStarRad: Math.PI / 2,
        timePeriastronBjdTdb: 2459000,
      };
      expect(inferiorConjunctionFromPeriastron(shape)).toBe(2459000);
    }
  });

  it('go back to the periastron they came from', () => {
    for (const shape of shapes) {
      const timePeriastronBjdTdb = 2459123.456;
      const timeInferiorConjunctionBjdTdb = inferiorConjunctionFromPeriastron({
        ...shape,
        timePeriastronBjdTdb,
      });
      expect(Math.abs(timeInferiorConjunctionBjdTdb - timePeriastronBjdTdb)).toBeLessThanOrEqual(6.25 + 1e-9);
      const back = periastronFromInferiorConjunction({ ...shape, timeInferiorConjunctionBjdTdb });
      expectWithin(back, timePeriastronBjdTdb, {
        abs: 1e-9,
        unit: 'd',
        why: 'one ulp of a Julian date is 5e-10',
      });
    }
  });
});

describe('passages', () => {
  it('are the nearest and the next (property)', () => {
    const day = fc.double({ min: 2450000, max: 2470000, noNaN: true });
    fc.assert(
      fc.property(
        day,
        fc.double({ min: 0.3, max: 9000, noNaN: true }),
        day,
        (epoch, periodDays, reference) => {
          const near = nearestPassage(epoch, periodDays, reference);
          expect(Math.abs(near - reference)).toBeLessThanOrEqual(periodDays / 2 + 1e-8);
          const turns = (near - epoch) / periodDays;
          expectWithin(turns, Math.round(turns), {
            abs: 1e-8,
            unit: 'periods',
            why: 'ulp of a Julian date over 0.3 d',
          });
          const next = nextPassage(epoch, periodDays, reference);
          expect(next).toBeGreaterThan(reference);
          expect(next - reference).toBeLessThanOrEqual(periodDays + 1e-8);
        },
      ),
      { seed: 20261201, numRuns: 1000 },
    );
    expect(nearestPassage(100, 10, 131)).toBe(130);
    expect(nextPassage(100, 10, 130)).toBe(140); // strictly after
    expect(() => nearestPassage(100, 0, 131)).toThrow(ModelDomainError);
    expect(() => nearestPassage(NaN, 1, 131)).toThrow(ModelDomainError);
  });

  it('follow from the mean longitude and give it back', () => {
    for (const omegaDeg of [-170, 0, 90, 271]) {
      const shape = { periodDays: 33, eccentricity: 0.2, argPeriastronStarRad: omegaDeg * RAD_PER_DEG };
      for (const timePeriastronBjdTdb of [2459000, 2459010, 2459032.9]) {
        const elements = { ...shape, timePeriastronBjdTdb };
        const meanLongitudeRad = meanLongitudeAtEpoch(elements, 2459016);
        // By hand: the mean anomaly is the share of the period gone since periastron.
        const want = (TWO_PI * (2459016 - timePeriastronBjdTdb)) / 33 + omegaDeg * RAD_PER_DEG;
        expectWithin(Math.cos(meanLongitudeRad), Math.cos(want), { abs: 1e-12, unit: '1', why: 'roundings' });
        expectWithin(Math.sin(meanLongitudeRad), Math.sin(want), { abs: 1e-12, unit: '1', why: 'roundings' });
        const back = periastronFromMeanLongitude({ ...shape, meanLongitudeRad }, 2459016);
        const turns = (back - timePeriastronBjdTdb) / 33;
        expectWithin(turns, Math.round(turns), { abs: 1e-9, unit: 'periods', why: 'ulp of a Julian date' });
        expect(Math.abs(back - 2459016)).toBeLessThanOrEqual(16.5 + 1e-9);
      }
    }
    expect(meanAnomalyAt(7, { periodDays: 4, timePeriastronBjdTdb: 0 })).toBe(1.5 * Math.PI);
  });
});
