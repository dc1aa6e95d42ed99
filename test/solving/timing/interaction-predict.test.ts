import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../../src/errors.js';
import { nearResonantVariation } from '../../../src/orbit/interaction/near-resonance.js';
import { compareVariation, predictMidTimes } from '../../../src/solving/timing/interaction-predict.js';
import type { PredictedCompanion } from '../../../src/solving/timing/interaction-predict.js';
import { expectWithin } from '../../support/expect-within.js';

function companion(
  letter: string,
  periodDays: number,
  massRatio: number,
  count: number,
  eccentricity = 0,
  argPeriastronStarRad = 0,
): PredictedCompanion {
  return {
    letter,
    periodDays,
    conjunctionDays: 2000 + periodDays / 3,
    eccentricity,
    argPeriastronStarRad,
    massRatio,
    inclinationRad: Math.PI / 2,
    cycles: Array.from({ length: count }, (_, k) => k),
  };
}

describe('predictMidTimes', () => {
  it('is the ephemeris when nobody pulls', () => {
    const [b] = predictMidTimes([companion('b', 10, 0, 30, 0.2, 1), companion('c', 21, 0, 10)], 2000, 0.8);
    b!.timesDays.forEach((time, k) => {
      expectWithin(time, 2000 + 10 / 3 + 10 * k, { abs: 1e-8, unit: 'd', why: 'integration' });
    });
    expectWithin(b!.amplitudeMinutes, 0, { abs: 1e-5, unit: 'min', why: 'integration' });
  });

  // The published formula drops terms of relative order Delta; direct integrations outside the program (scipy DOP853)
  // found it 2 and 5 % high at Delta = 0.005. Conventions of omega are at stake here: free eccentricities of every direction.
  it.each([0, 1.3, 2.9, 4.4])('agrees with the near-resonant formula, omega = %f', (omega) => {
    const [p, q, mass, e, cycles] = [10, 20.1, 1e-6, 0.03, 402];
    const [b, c] = predictMidTimes(
      [companion('b', p, mass, cycles), companion('c', q, mass, 200, e, omega)],
      2000,
      1,
    );
    const z = 0.42838983414389814 * e; // g of the 2:1 resonance, Lithwick et al. 2012, Table 3
    const { innerDays, outerDays } = nearResonantVariation({
      innerPeriodDays: p,
      outerPeriodDays: q,
      innerMassRatio: mass,
      outerMassRatio: mass,
      j: 2,
      freeEccentricity: { re: z * Math.sin(omega), im: -z * Math.cos(omega) },
    });
    const bound = {
      rel: 0.2,
      unit: 'min',
      why: 'order Delta and e, and half the swing beside a line through two super-periods is no exact amplitude',
    };
    expectWithin(b!.amplitudeMinutes, 1440 * Math.hypot(innerDays.re, innerDays.im), bound);
    expectWithin(c!.amplitudeMinutes, 1440 * Math.hypot(outerDays.re, outerDays.im), bound);
  });

  it('counts cycles from the epoch, wherever cycle 0 is', () => {
    const near = companion('b', 10, 1e-5, 40);
    const far = { ...near, conjunctionDays: near.conjunctionDays - 2000, cycles: near.cycles as number[] };
    const shifted = { ...far, cycles: (near.cycles as number[]).map((cycle) => cycle + 200) };
    const other = companion('c', 20.4, 1e-5, 20);
    const [a] = predictMidTimes([near, other], 2000, 1);
    const [b] = predictMidTimes([shifted, other], 2000, 1);
    b!.timesDays.forEach((time, k) => {
      expectWithin(time, a!.timesDays[k]!, { abs: 1e-10, unit: 'd', why: 'rounding of the phase' });
    });
  });

  it('refuses cycles that are none', () => {
    expect(() =>
      predictMidTimes([{ ...companion('b', 10, 0, 3), cycles: [0.5] }, companion('c', 21, 0, 3)], 0, 1),
    ).toThrow(ModelDomainError);
    expect(() => predictMidTimes([{ ...companion('b', 10, 0, 3), cycles: [] }], 0, 1)).toThrow(
      ModelDomainError,
    );
  });
});

describe('compareVariation', () => {
  it('removes a straight line from both sides', () => {
    const cycles = [0, 1, 2, 5, 7];
    const wiggle = [0.01, -0.02, 0.015, 0, -0.004];
    const observed = cycles.map((k, i) => 100 + 3 * k + wiggle[i]!);
    const predicted = cycles.map((k, i) => 50 + 3.001 * k + wiggle[i]!);
    const sigmas = cycles.map(() => 0.001);
    const { chiSquare, chiSquareLine, observedMinutes } = compareVariation(
      cycles,
      observed,
      sigmas,
      predicted,
    );
    expectWithin(chiSquare, 0, { abs: 1e-15, unit: '1', why: 'rounding' });
    expect(chiSquareLine).toBeGreaterThan(100);
    expectWithin(
      observedMinutes.reduce((sum, r) => sum + r, 0),
      0,
      { abs: 1e-9, unit: 'min', why: 'least squares' },
    );
  });
});
