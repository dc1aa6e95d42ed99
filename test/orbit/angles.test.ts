import { describe, expect, it } from 'vitest';
import { normaliseDegrees, normaliseRadians, reduceAngleRad } from '../../src/orbit/index.js';
import { expectUlps, expectWithin } from '../support/expect-within.js';

// Math.sin and Math.cos reduce any argument with enough digits of pi: an outside authority for the remainder.
const ANGLES = [0.3, -3, 4, 7, -100, 1234.5, 1e6, 2.5e7, 2.7e7, -1e9, 1e15, 1e22];

describe('reduceAngleRad', () => {
  it('leaves angles within half a turn alone', () => {
    for (const angle of [0, 1e-300, -1e-9, 1, -3.14159, Math.PI]) expect(reduceAngleRad(angle)).toBe(angle);
  });

  it('gives the remainder by the true 2 pi, also just beside whole turns', () => {
    const besideTurns = [1, 7, 1000, 1e6, 4e6, 1e9].map((turns) => turns * 2 * Math.PI);
    for (const angle of [...ANGLES, ...besideTurns]) {
      const reduced = reduceAngleRad(angle);
      expect(Math.abs(reduced)).toBeLessThanOrEqual(Math.PI);
      expectWithin(Math.sin(reduced), Math.sin(angle), { abs: 4e-16, unit: '1', why: 'two roundings' });
      expectWithin(Math.cos(reduced), Math.cos(angle), { abs: 4e-16, unit: '1', why: 'two roundings' });
      // Beside a whole turn the remainder is tiny, and must be right to its own digits.
      if (Math.abs(reduced) < 1e-3) expectUlps(Math.sin(reduced), Math.sin(angle), 3);
    }
  });

  it('gives NaN for what is no angle', () => {
    for (const angle of [NaN, Infinity, -Infinity]) expect(reduceAngleRad(angle)).toBeNaN();
  });
});

describe('normalising', () => {
  it('radians land in [0, 2 pi) in the same direction', () => {
    for (const angle of [...ANGLES, -1e-20, 2 * Math.PI, -0]) {
      const turned = normaliseRadians(angle);
      expect(turned >= 0 && turned < 2 * Math.PI && !Object.is(turned, -0)).toBe(true);
      expectWithin(Math.cos(turned), Math.cos(angle), { abs: 6e-16, unit: '1', why: 'three roundings' });
    }
  });

  it('degrees land in [0, 360)', () => {
    const pairs = [[0, 0], [360, 0], [-90, 270], [725.5, 5.5], [-720, 0], [359.999, 359.999], [-1e-20, 0]] as const; // prettier-ignore
    for (const [angle, want] of pairs) expect(normaliseDegrees(angle)).toBe(want);
    expect(Object.is(normaliseDegrees(-360), 0)).toBe(true);
  });
});
