import { describe, expect, it } from 'vitest';
import { meanFromTrueAnomaly } from '../../src/orbit/anomalies.js';
import { conjunctionLongitude } from '../../src/orbit/conjunction-longitude.js';
import { expectWithin } from '../support/expect-within.js';

const TWO_PI = 2 * Math.PI;
const SIDES = [1, -1] as const;
const ECCENTRICITIES = [1e-7, 1e-3, 0.1, 0.45, 0.8, 0.97];
const OMEGAS = [-3, -1.6, -0.4, 0, 0.7, Math.PI / 2, 2.4, Math.PI];

function longitude(k: number, h: number, side: 1 | -1): Float64Array {
  const out = new Float64Array(3);
  if (!conjunctionLongitude(k, h, side, out)) throw new Error('outside the domain');
  return out;
}

describe('the mean longitude at conjunction', () => {
  it('is the mean anomaly at true anomaly 90 deg - omega (or -90 deg - omega), plus omega', () => {
    for (const e of ECCENTRICITIES)
      for (const omega of OMEGAS)
        for (const side of SIDES) {
          const nu = (side * Math.PI) / 2 - omega;
          const exact = meanFromTrueAnomaly(nu, e) + omega;
          const [got] = longitude(e * Math.cos(omega), e * Math.sin(omega), side);
          const turns = Math.round((got! - exact) / TWO_PI);
          expectWithin(got! - TWO_PI * turns, exact, {
            abs: 2e-14 / (1 - e),
            unit: 'rad',
            why: 'rounding; near e = 1 angles close to apastron lose digits',
          });
          expect(Math.abs(got! - (side * Math.PI) / 2), 'own revolution').toBeLessThan(Math.PI + 1e-9);
        }
  });

  it('for omega = 90 deg and -90 deg is the conjunction at periastron and apastron, whatever e', () => {
    for (const e of ECCENTRICITIES) {
      expectWithin(longitude(0, e, 1)[0]!, Math.PI / 2, { abs: 1e-14, unit: 'rad', why: 'M = 0' });
      expectWithin(longitude(0, -e, -1)[0]!, -Math.PI / 2, { abs: 1e-14, unit: 'rad', why: 'M = 0' });
      const behind = longitude(0, e, -1)[0]!;
      expectWithin(behind, -Math.PI / 2, {
        abs: 1e-14,
        unit: 'rad',
        why: 'M = 180 deg, half a period later',
      });
    }
  });

  it('has the slopes of difference quotients', () => {
    for (const e of [0.003, 0.1, 0.45, 0.8, 0.95])
      for (const omega of OMEGAS)
        for (const side of SIDES) {
          const k = e * Math.cos(omega);
          const h = e * Math.sin(omega);
          const step = 1e-6 * (1 - e);
          const [, byK, byH] = longitude(k, h, side);
          const quotient = (dk: number, dh: number): number => {
            const difference = longitude(k + dk, h + dh, side)[0]! - longitude(k - dk, h - dh, side)[0]!;
            return (difference - TWO_PI * Math.round(difference / TWO_PI)) / (2 * step);
          };
          const bound = {
            abs: 1e-6 / (1 - e) ** 2,
            unit: 'rad',
            why: 'central difference of step 1e-6 (1 - e)',
          };
          expectWithin(byK!, quotient(step, 0), bound);
          expectWithin(byH!, quotient(0, step), bound);
        }
  });

  it('is regular at e = 0: +-(90 deg - 2 k), and the series meets the formula where they change over', () => {
    for (const side of SIDES) {
      expect(Array.from(longitude(0, 0, side))).toEqual([(side * Math.PI) / 2, -2 * side, 0]);
      for (const omega of OMEGAS) {
        const below = longitude(0.999e-8 * Math.cos(omega), 0.999e-8 * Math.sin(omega), side);
        const above = longitude(1.001e-8 * Math.cos(omega), 1.001e-8 * Math.sin(omega), side);
        for (const j of [0, 1, 2])
          expectWithin(below[j]!, above[j]!, {
            abs: 1e-7,
            unit: 'rad',
            why: 'slopes change by order e = 1e-8',
          });
      }
    }
  });

  it('refuses e >= 1 and what is no number', () => {
    for (const [k, h] of [[1, 0], [0.8, 0.7], [NaN, 0]] as const)
      expect(conjunctionLongitude(k, h, 1, new Float64Array(3))).toBe(false); // prettier-ignore
  });
});
