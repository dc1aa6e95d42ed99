/** The Sun as a star (test/reference/sun): what a distant observer would learn of Jupiter and Saturn, solved blind. */
import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { solveCase } from '../../src/solving/solve-case.js';
import type { CompanionRecord, Solved } from '../../src/solving/types.js';
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, velocitySet } from './helpers.js';

/** Two Keplerians with a quadratic drift, as scipy finds them: the table of test/reference/sun/README.md. */
const SCIPY = { chiSquare: 578.5, jupiterDays: 4330.2, jupiterMps: 12.471, jupiterE: 0.0499, saturnDays: 10741, saturnMps: 2.714, saturnE: 0.084 }; // prettier-ignore

describe('the Sun as a star, 55 years', () => {
  let solved: Solved;
  let jupiter: CompanionRecord;
  let saturn: CompanionRecord;

  beforeAll(() => {
    const text = readFileSync(new URL('../reference/sun/sun-as-star.csv', import.meta.url), 'utf8');
    const rows = text
      .split('\n')
      .filter((line) => /^\d/.test(line))
      .map((line) => line.split(',').map(Number));
    const set = velocitySet({
      times: rows.map((row) => row[0]!),
      velocities: rows.map((row) => row[1]!),
      sigmas: rows.map((row) => row[2]!),
    });
    expect(set.count).toBe(556);
    const star = { massSolar: { value: 1, sigma: 0 }, radiusSolar: null, effectiveTemperatureK: null };
    solved = solveCase({ ...BARE_CASE, target: 'the Sun', star }, set, OPTIONS);
    [jupiter, saturn] = [...solved.record.companions].sort(
      (a, b) => b.elements.semiAmplitude.value! - a.elements.semiAmplitude.value!,
    ) as [CompanionRecord, CompanionRecord];
  });

  it('has exactly two companions', () => {
    expect(solved.record.companions).toHaveLength(2);
    expect(solved.record.fit.status).toBe('converged');
  });

  it('Jupiter: 11.86 yr, e 0.048, one Jupiter mass within 3 %', () => {
    const { period, eccentricity, semiAmplitude } = jupiter.elements;
    // Mean elements of J2000 (Standish's table for 1800 to 2050, remembered): 11.862 yr and e = 0.0484.
    expectWithin(period.value! / 365.25, 11.862, {
      rel: 0.005,
      unit: 'yr',
      why: 'Saturn near the 5:2 resonance; README of the data',
    });
    expectWithin(eccentricity.value!, 0.0484, {
      abs: 0.006,
      unit: '1',
      why: 'a few sigma, and the same resonance',
    });
    expectWithin(semiAmplitude.value!, 12.474, {
      rel: 0.01,
      unit: 'm/s',
      why: 'two-body K of Jupiter (test/orbit/published-orbits.json)',
    });
    expectWithin(jupiter.derived.minimumMass.value!, 1, {
      rel: 0.03,
      unit: 'M_jup',
      why: 'by definition of the unit',
    });
    expectWithin(jupiter.derived.semiMajorAxis.value!, 5.2034, {
      rel: 0.005,
      unit: 'au',
      why: 'mean element of J2000, remembered',
    });
  });

  it('Saturn: 29.46 yr within 3 %, 0.2994 Jupiter masses within 10 %', () => {
    expectWithin(saturn.elements.period.value! / 365.25, 29.457, {
      rel: 0.03,
      unit: 'yr',
      why: 'less than two revolutions',
    });
    expectWithin(saturn.derived.minimumMass.value!, 0.2994, {
      rel: 0.1,
      unit: 'M_jup',
      why: 'README of the data',
    });
  });

  it('is the optimum that scipy finds with the same model (README of the data), where the models agree', () => {
    // The program fits the jitter as well; 0.3 m/s of noise is stated, so that it should find almost none.
    expect(solved.record.velocity.curvature.fixed).toBeUndefined();
    const { elements } = jupiter;
    const near = (got: number, want: number, sigma: number, unit: string): void => {
      expectWithin((got - want) / sigma, 0, {
        abs: 0.3,
        unit: `sigma of ${unit}`,
        why: 'printed digits, and a jitter beside it',
      });
    };
    near(elements.period.value!, SCIPY.jupiterDays, elements.period.sigma!, 'd');
    near(elements.semiAmplitude.value!, SCIPY.jupiterMps, elements.semiAmplitude.sigma!, 'm/s');
    near(elements.eccentricity.value!, SCIPY.jupiterE, elements.eccentricity.sigma!, 'e');
    near(saturn.elements.period.value!, SCIPY.saturnDays, saturn.elements.period.sigma!, 'd');
    near(saturn.elements.semiAmplitude.value!, SCIPY.saturnMps, saturn.elements.semiAmplitude.sigma!, 'm/s');
    near(saturn.elements.eccentricity.value!, SCIPY.saturnE, saturn.elements.eccentricity.sigma!, 'e');
  });

  it('sees the near 5:2 ratio of the two, and rivals do not beat the solution', () => {
    expect(solved.record.neighbours).toHaveLength(1);
    expect(solved.record.neighbours[0]!.nearRatio).toBe('5:2');
    for (const { rivals } of solved.record.companions) {
      for (const { deltaLogLikelihood } of rivals) expect(deltaLogLikelihood).toBeLessThan(1e-3);
    }
  });
});
