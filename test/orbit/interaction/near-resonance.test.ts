import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../../src/errors.js';
import { laplaceCoefficient } from '../../../src/orbit/interaction/laplace.js';
import {
  nearestResonance,
  nearResonantVariation,
  resonanceCoefficients,
  superPeriodDays,
} from '../../../src/orbit/interaction/near-resonance.js';
import { expectWithin } from '../../support/expect-within.js';

interface Reference {
  readonly laplace: readonly { s: number; j: number; alpha: number; value: number; slope: number }[];
}
const reference = JSON.parse(
  readFileSync(new URL('../../reference/interaction/interaction.json', import.meta.url), 'utf8'),
) as Reference;

const MINUTES_PER_DAY = 1440;

describe('Laplace coefficients', () => {
  it('match 40-digit quadrature, with their derivatives (reference/interaction)', () => {
    for (const { s, j, alpha, value, slope } of reference.laplace) {
      const got = laplaceCoefficient(s, j, alpha);
      const name = `s ${s}, j ${j}, alpha ${alpha}`;
      expectWithin(got.value, value, {
        rel: 1e-12,
        unit: '1',
        why: `${name}: rounding of some hundred terms`,
      });
      expectWithin(got.slope, slope, { rel: 1e-12, unit: '1', why: `${name}: the same` });
    }
  });

  it('are 2, 0, 0 ... for alpha = 0, and even in j', () => {
    expect(laplaceCoefficient(0.5, 0, 0).value).toBeCloseTo(2, 14);
    expectWithin(laplaceCoefficient(1.5, 3, 0).value, 0, { abs: 1e-14, unit: '1', why: 'orthogonality' });
    expect(laplaceCoefficient(0.5, -2, 0.4)).toEqual(laplaceCoefficient(0.5, 2, 0.4));
  });

  it('refuse orbits that touch', () => {
    expect(() => laplaceCoefficient(0.5, 1, 1)).toThrow(ModelDomainError);
    expect(() => laplaceCoefficient(0.5, 1.5, 0.3)).toThrow(ModelDomainError);
  });
});

describe('near a resonance', () => {
  // Lithwick, Xie & Wu 2012, ApJ 761, 122, Table 3: leading terms; digits beyond the fourth by mpmath from the definition.
  it.each([
    [2, -1.1904936978495038, 0.42838983414389814],
    [3, -2.0252226899385932, 2.484005183303942],
    [4, -2.840431856721871, 3.2832567218222155],
    [5, -3.649618244115698, 4.083705371796216],
  ])('f and g of the resonance with j = %i', (j, f, g) => {
    const got = resonanceCoefficients(j);
    expectWithin(got.f, f, { rel: 1e-12, unit: '1', why: 'rounding' });
    expectWithin(got.g, g, { rel: 1e-12, unit: '1', why: 'rounding' });
  });

  // Amplitudes from the formula, computed outside the program with mpmath (f and g as above).
  it.each([
    [10, 20.4, 3e-5, 3e-5, 2, 0, 0, 5.156372877978837, 0, -3.0042993686891712, 0],
    [
      10, 20.4, 3e-5, 3e-5, 2, 0.01, -0.005, 1.9079057374387902, -1.6242335702700237, 2.255453190611776,
      2.6298762796504738,
    ],
    [6.2385, 12.7204, 2.5e-5, 6e-5, 2, 0, 0, 6.595900373875171, 0, -1.600487026303444, 0],
    [10, 15.2, 1e-5, 2e-5, 3, 0, 0, 5.313155107818924, 0, -4.326619604074836, 0],
    [10, 14.85, 1e-5, 2e-5, 3, 0.02, 0, -17.578173985916262, 0, 12.442729932514627, 0],
  ])('amplitudes of %f and %f d, masses %f and %f', (p, q, inner, outer, j, re, im, vRe, vIm, wRe, wIm) => {
    const got = nearResonantVariation({
      innerPeriodDays: p,
      outerPeriodDays: q,
      innerMassRatio: inner,
      outerMassRatio: outer,
      j,
      freeEccentricity: { re, im },
    });
    const bound = {
      abs: 2e-11,
      unit: 'min',
      why: 'rounding; the difference of periods from resonance loses three digits',
    };
    expectWithin(got.innerDays.re * MINUTES_PER_DAY, vRe, bound);
    expectWithin(got.innerDays.im * MINUTES_PER_DAY, vIm, bound);
    expectWithin(got.outerDays.re * MINUTES_PER_DAY, wRe, bound);
    expectWithin(got.outerDays.im * MINUTES_PER_DAY, wIm, bound);
    expectWithin(got.superPeriodDays, superPeriodDays(p, q, j), { abs: 0, unit: 'd', why: 'one function' });
  });

  it('super-period of 19.24 and 38.91 d (1/|2/P - 1/p| by hand: 1740.99628 d)', () => {
    expectWithin(superPeriodDays(19.24, 38.91, 2), 1740.9962790697718, {
      rel: 1e-12,
      unit: 'd',
      why: 'rounding',
    });
  });

  it('names the nearest resonance, or none', () => {
    expect(nearestResonance(10, 20.4, 0.06)).toBe(2);
    expect(nearestResonance(10, 15.2, 0.06)).toBe(3);
    expect(nearestResonance(10, 23, 0.06)).toBeNull();
  });

  it('refuses what it has no meaning for', () => {
    const pair = {
      innerPeriodDays: 10,
      outerPeriodDays: 20,
      innerMassRatio: 1e-5,
      outerMassRatio: 1e-5,
      j: 2,
      freeEccentricity: { re: 0, im: 0 },
    };
    expect(() => nearResonantVariation(pair)).toThrow(ModelDomainError);
    expect(() => nearResonantVariation({ ...pair, outerPeriodDays: 20.1, j: 1 })).toThrow(ModelDomainError);
    expect(() => nearResonantVariation({ ...pair, outerPeriodDays: 20.1, innerMassRatio: -1 })).toThrow(
      ModelDomainError,
    );
  });
});
