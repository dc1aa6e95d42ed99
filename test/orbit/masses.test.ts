import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import {
  apastronDistanceAu,
  companionMassSolar,
  DAYS_PER_YEAR,
  GM_SUN_M3_S2,
  massFunctionSolar,
  periastronDistanceAu,
  RAD_PER_DEG,
  relativeSemiMajorAxisAu,
  semiAmplitudeMps,
  SOLAR_MASS_IN_JUPITER,
  starOrbitSemiMajorAxisAu,
} from '../../src/orbit/index.js';
import { expectWithin } from '../support/expect-within.js';
import reference from './published-orbits.json' with { type: 'json' };

const computed = (unit: string): { rel: number; unit: string; why: string } => ({
  rel: 1e-13,
  unit,
  why: 'mpmath value printed to double; a few roundings here',
});

describe('published orbits (published-orbits.json names each paper)', () => {
  for (const orbit of reference.orbits) {
    it(`${orbit.name}: minimum mass and axis`, () => {
      const minimumMassSolar = companionMassSolar({
        massFunctionSolar: massFunctionSolar(orbit),
        starMassSolar: orbit.starMassSolar,
        sinInclination: 1,
      });
      const axisAu = relativeSemiMajorAxisAu(orbit.starMassSolar + minimumMassSolar, orbit.periodDays);
      const massJupiter = minimumMassSolar * SOLAR_MASS_IN_JUPITER;
      expectWithin(massJupiter, orbit.exactMassJupiter, computed('M_jup'));
      expectWithin(axisAu, orbit.semiMajorAxisAu, computed('au'));
      expectWithin(periastronDistanceAu(axisAu, orbit.eccentricity), orbit.periastronAu, computed('au'));
      expectWithin(apastronDistanceAu(axisAu, orbit.eccentricity), orbit.apastronAu, computed('au'));
      expectWithin(massJupiter, orbit.publishedMassJupiter, {
        abs: orbit.publishedMassSigma,
        unit: 'M_jup',
        why: 'published uncertainty',
      });
      expectWithin(axisAu, orbit.publishedAxisAu, {
        rel: 0.01,
        unit: 'au',
        why: 'published axes are rounded, and older ones leave the companion out or use another star mass',
      });
    });
  }

  it('HD 114762 b: the exact 11.07 M_jup (published 11.069 +- 0.063), not the 10.98 of a massless companion', () => {
    const orbit = reference.orbits.find((row) => row.name === 'HD114762b exact')!;
    const mass =
      SOLAR_MASS_IN_JUPITER *
      companionMassSolar({
        massFunctionSolar: massFunctionSolar(orbit),
        starMassSolar: 0.83,
        sinInclination: 1,
      });
    expectWithin(mass, 11.069, { abs: 0.063, unit: 'M_jup', why: 'published uncertainty' });
    expect(mass - orbit.lightCompanionMassJupiter).toBeGreaterThan(0.09);
  });
});

describe('masses', () => {
  it('solve the cubic for any mass ratio (published-orbits.json massCases, mpmath 40 digits)', () => {
    for (const row of reference.massCases) {
      const f = massFunctionSolar(row);
      expectWithin(f, row.massFunctionSolar, computed('M_sun'));
      const sinInclination = Math.sin(row.inclinationDeg * RAD_PER_DEG);
      const { starMassSolar } = row;
      const mass = companionMassSolar({ massFunctionSolar: f, starMassSolar, sinInclination });
      expectWithin(mass, row.companionMassSolar, computed('M_sun'));
      expectWithin(mass * SOLAR_MASS_IN_JUPITER, row.companionMassJupiter, computed('M_jup'));
      expectWithin(
        relativeSemiMajorAxisAu(starMassSolar + mass, row.periodDays),
        row.relativeAxisAu,
        computed('au'),
      );
      const starAxisAu = starOrbitSemiMajorAxisAu(row.semiAmplitudeMps, row.periodDays, row.eccentricity);
      expectWithin(starAxisAu, row.starAxisAu, computed('au'));
      // Lever rule: the star's share of the relative orbit is m / (M + m).
      const lever =
        (relativeSemiMajorAxisAu(starMassSolar + mass, row.periodDays) * mass) / (starMassSolar + mass);
      expectWithin(starAxisAu, lever * sinInclination, computed('au'));
    }
  });

  it("give the planets' pull on the Sun (published-orbits.json planetsPullOnTheSun, mpmath)", () => {
    for (const planet of reference.planetsPullOnTheSun) {
      const pull = semiAmplitudeMps({
        starMassSolar: 1,
        companionMassSolar: planet.gmPlanetM3S2 / GM_SUN_M3_S2,
        periodDays: planet.periodDays,
        eccentricity: planet.eccentricity,
        sinInclination: 1,
      });
      expectWithin(pull, planet.semiAmplitudeMps, computed('m/s'));
    }
  });

  it('approach the coefficient 28.4329 m/s of a light 1 M_jup at one year (Lovis & Fischer 2010; digits remembered)', () => {
    const tiny = 1e-9;
    const perJupiter =
      semiAmplitudeMps({
        starMassSolar: 1,
        companionMassSolar: tiny / SOLAR_MASS_IN_JUPITER,
        periodDays: DAYS_PER_YEAR,
        eccentricity: 0,
        sinInclination: 1,
      }) / tiny;
    expectWithin(perJupiter, 28.432474077882805, {
      rel: 1e-11,
      unit: 'm/s',
      why: 'mpmath; the companion is 1e-12',
    });
    expectWithin(perJupiter, 28.4329, {
      rel: 2e-5,
      unit: 'm/s',
      why: 'the fifth digit depends on the constants',
    });
  });

  it('come back from the velocity they cause, for mass ratios from 1e-12 to 1e6 (property)', () => {
    const logs = (min: number, max: number): fc.Arbitrary<number> =>
      fc.double({ min, max, noNaN: true }).map((log) => 10 ** log);
    fc.assert(
      fc.property(
        logs(-12, 6),
        logs(-2, 2),
        logs(-1, 5),
        fc.double({ min: 0, max: 0.999, noNaN: true }),
        fc.double({ min: 0.01, max: 1, noNaN: true }),
        (ratio, starMassSolar, periodDays, eccentricity, sinInclination) => {
          const mass = ratio * starMassSolar;
          const amplitude = {
            starMassSolar,
            companionMassSolar: mass,
            periodDays,
            eccentricity,
            sinInclination,
          };
          const f = massFunctionSolar({
            periodDays,
            eccentricity,
            semiAmplitudeMps: semiAmplitudeMps(amplitude),
          });
          // The definition of the mass function, written with the masses.
          const defined = (mass * sinInclination) ** 3 / (starMassSolar + mass) ** 2;
          expectWithin(f, defined, { rel: 5e-15, unit: 'M_sun', why: 'about ten roundings' });
          const back = companionMassSolar({ massFunctionSolar: f, starMassSolar, sinInclination });
          expectWithin(back, mass, { rel: 1e-14, unit: 'M_sun', why: 'error of f, at most once' });
        },
      ),
      { seed: 20261201, numRuns: 2000 },
    );
  });

  it('stay finite and right at the ends of the range, where one of the masses is nothing beside the other', () => {
    const solve = (massFunction: number): number =>
      companionMassSolar({ massFunctionSolar: massFunction, starMassSolar: 1, sinInclination: 1 });
    const bound = { rel: 1e-15, unit: 'M_sun', why: 'limits of m^3 = f (1 + m)^2 by hand' };
    expectWithin(solve(1e-300), 1e-100, bound); // m -> f^(1/3)
    expectWithin(solve(1e300), 1e300, bound); // m -> f + 2
    expectWithin(solve(1e12), 1e12 + 2, bound);
    expectWithin(solve(1.001e12), 1.001e12 + 2, bound);
    expectWithin(solve(1 / 4), 1, bound); // 1 = 1/4 * 2^2
    expectWithin(solve(8 / 9), 2, bound); // 8 = 8/9 * 3^2
  });

  it('say what is outside their domain, and that no velocity is no mass', () => {
    expect(companionMassSolar({ massFunctionSolar: 0, starMassSolar: 1, sinInclination: 1 })).toBe(0);
    expect(massFunctionSolar({ periodDays: 3, semiAmplitudeMps: 0, eccentricity: 0.1 })).toBe(0);
    for (const bad of [-1, NaN, Infinity]) {
      expect(() => massFunctionSolar({ periodDays: bad, semiAmplitudeMps: 1, eccentricity: 0 })).toThrow(
        ModelDomainError,
      );
      expect(() => massFunctionSolar({ periodDays: 1, semiAmplitudeMps: bad, eccentricity: 0 })).toThrow(
        ModelDomainError,
      );
      expect(() => massFunctionSolar({ periodDays: 1, semiAmplitudeMps: 1, eccentricity: bad })).toThrow(
        ModelDomainError,
      );
      expect(() => relativeSemiMajorAxisAu(bad, 1)).toThrow(ModelDomainError);
    }
    for (const sinInclination of [0, -0.5, 1.0001, NaN]) {
      const known = { massFunctionSolar: 1e-9, starMassSolar: 1, sinInclination };
      expect(() => companionMassSolar(known)).toThrow(ModelDomainError);
    }
  });
});
