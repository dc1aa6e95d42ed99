import { describe, expect, it } from 'vitest';
import {
  apparentPeriodChange,
  AU_M,
  DAYS_PER_YEAR,
  GM_JUPITER_M3_S2,
  GM_SUN_M3_S2,
  isPhysicalLimbDarkening,
  limbDarkeningFromTriangle,
  meanDensityGramsPerCm3,
  occultationLightDelayDays,
  R_JUPITER_M,
  R_SUN_M,
  RAD_PER_DEG,
  scaledSemiMajorAxisFromDensity,
  SECONDS_PER_DAY,
  semiAmplitudeMps,
  solveTransitShape,
  starDensityGramsPerCm3,
  starRadiusLightDays,
  starRoemerAmplitudeDays,
  surfaceGravityMps2,
  totalDurationDays,
  fullDurationDays,
  triangleFromLimbDarkening,
} from '../../src/orbit/index.js';
import { ModelDomainError } from '../../src/errors.js';
import { expectWithin } from '../support/expect-within.js';

describe('density of the star', () => {
  it('3 pi (a/R)^3 / (G P^2) with published numbers', () => {
    // P and a/R of Torres, Winn & Holman 2008, ApJ 677, 1324 (from memory); evaluated independently
    expectWithin(starDensityGramsPerCm3(8.76, 3.52474859), 1.0235143744094237, {
      rel: 1e-12,
      unit: 'g/cm3',
      why: 'formula',
    });
    // The Sun from the orbit of the Earth: P = 365.256363 d, a/R = 215.032
    expectWithin(starDensityGramsPerCm3(215.03215567054764, 365.256363), 1.4097839571536577, {
      rel: 1e-12,
      unit: 'g/cm3',
      why: 'formula',
    });
    // nominal GM and radius of IAU 2015 Resolution B3, G of CODATA 2018
    expectWithin(meanDensityGramsPerCm3(1, 1), 1409.7798243075254 / 1000, {
      rel: 1e-14,
      unit: 'g/cm3',
      why: 'formula',
    });
  });

  it('and back', () => {
    expectWithin(scaledSemiMajorAxisFromDensity(starDensityGramsPerCm3(12.5, 7.7), 7.7), 12.5, {
      rel: 1e-14,
      unit: '1',
      why: 'inverse',
    });
    expect(() => scaledSemiMajorAxisFromDensity(0, 1)).toThrow(ModelDomainError);
  });
});

describe('shape of a transit', () => {
  it('inverts durations made from b = 0.4, a/R = 12', () => {
    const solved = solveTransitShape({
      depth: 0.11 ** 2,
      periodDays: 5,
      totalDays: 0.13757480930674973,
      fullDays: 0.10558246216211155,
    });
    const rounding = { rel: 1e-9, unit: '1', why: 'differences of nearly equal squares' };
    expectWithin(solved.radiusRatio, 0.11, rounding);
    expectWithin(solved.impactParameter, 0.4, rounding);
    expectWithin(solved.scaledSemiMajorAxis, 12, rounding);
    expectWithin(solved.inclinationRad / RAD_PER_DEG, 88.08978682829007, rounding);
    expectWithin(starDensityGramsPerCm3(solved.scaledSemiMajorAxis, 5), 1.3074998516655907, rounding);
  });

  it('is the inverse of the durations, also at b = 0 and when just grazing', () => {
    for (const [b, k, axis] of [
      [0, 0.1, 5],
      [0.3, 0.02, 40],
      [0.75, 0.15, 8],
    ] as const) {
      const orbit = {
        scaledSemiMajorAxis: axis,
        eccentricity: 0,
        argPeriastronStarRad: 0,
        inclinationRad: Math.acos(b / axis),
      };
      const solved = solveTransitShape({
        depth: k * k,
        periodDays: 3,
        totalDays: totalDurationDays(orbit, 3, k)!,
        fullDays: fullDurationDays(orbit, 3, k)!,
      });
      expectWithin(solved.impactParameter, b, {
        abs: 3e-6,
        unit: 'R_star',
        why: 'a root: rounding of b^2 is 1e-12 here',
      });
      expectWithin(solved.scaledSemiMajorAxis, axis, {
        rel: 1e-10,
        unit: '1',
        why: 'differences of nearly equal squares',
      });
    }
    const grazing = solveTransitShape({ depth: 0.01, periodDays: 3, totalDays: 0.05, fullDays: 0 });
    expectWithin(grazing.impactParameter, 0.9, { rel: 1e-12, unit: 'R_star', why: '1 - k' });
  });

  it('says which number is impossible and what the limit is', () => {
    const shape = { depth: 0.01, periodDays: 3, totalDays: 0.1, fullDays: 0.09 };
    expect(() => solveTransitShape(shape)).toThrow(/full duration.*0\.08176/);
    expect(() => solveTransitShape({ ...shape, depth: 1 })).toThrow(/depth/);
    expect(() => solveTransitShape({ ...shape, totalDays: 1.6 })).toThrow(/half a period/);
    expect(() => solveTransitShape({ ...shape, fullDays: 0.11 })).toThrow(/total duration/);
  });
});

describe('surface gravity from observables', () => {
  it('of a published planet', () => {
    // Formula of Southworth, Wheatley & Sams 2007, MNRAS 379, L11; numbers of Torres, Winn & Holman 2008 (from memory)
    const gravity = surfaceGravityMps2({
      periodDays: 3.52474859,
      eccentricity: 0,
      semiAmplitudeMps: 84.67,
      companionRadiusOverAxis: 0.013796803652968037,
      sinInclination: Math.sin(86.71 * RAD_PER_DEG),
    });
    expectWithin(Math.log10(100 * gravity), 2.963426946413504, { abs: 1e-12, unit: 'dex', why: 'formula' });
  });

  it('is G m / R^2 of the body that causes the velocities', () => {
    const [starSolar, companionSolar, periodDays, eccentricity, sinInclination] = [
      1,
      GM_JUPITER_M3_S2 / GM_SUN_M3_S2,
      12,
      0.3,
      0.98,
    ] as const;
    const rate = (2 * Math.PI) / (periodDays * SECONDS_PER_DAY);
    const axisM = Math.cbrt((GM_SUN_M3_S2 * (starSolar + companionSolar)) / rate ** 2);
    const gravity = surfaceGravityMps2({
      periodDays,
      eccentricity,
      semiAmplitudeMps: semiAmplitudeMps({
        starMassSolar: starSolar,
        companionMassSolar: companionSolar,
        periodDays,
        eccentricity,
        sinInclination,
      }),
      companionRadiusOverAxis: R_JUPITER_M / axisM,
      sinInclination,
    });
    // GM/R^2 of the nominal jovian values: log g = 3.3942155474041624 (cm/s2)
    expectWithin(Math.log10(100 * gravity), 3.3942155474041624, { abs: 1e-12, unit: 'dex', why: 'identity' });
  });
});

describe('limb-darkening triangle', () => {
  it.each([
    // definitions of Kipping 2013, MNRAS 435, 2152, evaluated
    [0.4, 0.3, 0.49, 0.28571428571428575],
    [0, 0.5, 0.25, 0],
    [0.6, 0, 0.36, 0.5],
    [0.1, 0.2, 0.09, 0.16666666666666666],
  ])('u = %f, %f', (u1, u2, q1, q2) => {
    const sample = triangleFromLimbDarkening({ u1, u2 });
    const rounding = { abs: 1e-15, unit: '1', why: 'definition' };
    expectWithin(sample.q1, q1, rounding);
    expectWithin(sample.q2, q2, rounding);
    const back = limbDarkeningFromTriangle(sample);
    expectWithin(back.u1, u1, rounding);
    expectWithin(back.u2, u2, rounding);
  });

  it('the square covers the triangle of darkening stars and nothing else', () => {
    for (let i = 0; i <= 20; i++) {
      for (let j = 0; j <= 20; j++) {
        const law = limbDarkeningFromTriangle({ q1: (i / 20) ** 2, q2: j / 20 });
        const intensity = (mu: number): number => 1 - law.u1 * (1 - mu) - law.u2 * (1 - mu) ** 2;
        let [least, leastRise] = [Infinity, Infinity];
        for (let mu = 0; mu < 1; mu += 0.05) {
          least = Math.min(least, intensity(mu));
          leastRise = Math.min(leastRise, intensity(mu + 0.05) - intensity(mu));
        }
        expect(Math.min(least, leastRise)).toBeGreaterThanOrEqual(-1e-15);
      }
    }
    for (const [u1, u2] of [
      [-0.1, 0.5],
      [0.9, 0.3],
      [0.5, -0.3],
      [0.1, -0.2],
    ] as const) {
      expect(isPhysicalLimbDarkening({ u1, u2 })).toBe(false);
      expect(() => triangleFromLimbDarkening({ u1, u2 })).toThrow(ModelDomainError);
    }
    expect(isPhysicalLimbDarkening({ u1: 0.5, u2: -0.2 })).toBe(true);
    expect(triangleFromLimbDarkening({ u1: 0, u2: 0 })).toEqual({ q1: 0, q2: 0.5 });
    expect(() => limbDarkeningFromTriangle({ q1: 1.1, q2: 0 })).toThrow(/q1/);
  });
});

describe('light time', () => {
  const circular = { eccentricity: 0, argPeriastronStarRad: 0, sinInclination: 1 };

  it.each([
    // 2 a / c, s
    [0.0234, 23.35342388353212],
    [0.04707, 46.976310350335766],
    [0.03142, 31.357460616264063],
    [1, 998.0095676723129],
  ])('across a circular orbit of %f au', (semiMajorAxisAu, seconds) => {
    expectWithin(occultationLightDelayDays({ ...circular, semiMajorAxisAu }) * SECONDS_PER_DAY, seconds, {
      rel: 1e-14,
      unit: 's',
      why: 'definition of the astronomical unit and of c',
    });
  });

  it('across an eccentric orbit: the sum of both distances', () => {
    const [e, omega] = [0.4, 0.9];
    const along = (side: number): number => (1 - e * e) / (1 + side * e * Math.sin(omega));
    const delay = occultationLightDelayDays({
      semiMajorAxisAu: 1,
      eccentricity: e,
      argPeriastronStarRad: omega,
      sinInclination: 0.99,
    });
    expectWithin(delay * SECONDS_PER_DAY, 0.5 * 998.0095676723129 * 0.99 * (along(1) + along(-1)), {
      rel: 1e-14,
      unit: 's',
      why: 'definition',
    });
  });

  it('the star itself', () => {
    // K P / (2 pi c), s; Irwin 1952, ApJ 116, 211 for the geometry
    expectWithin(starRoemerAmplitudeDays(100, 3650, 0) * SECONDS_PER_DAY, 16.741949810311812, {
      rel: 1e-14,
      unit: 's',
      why: 'formula',
    });
    // P v'/c, ms a year
    expectWithin(
      apparentPeriodChange(1.0914203, 0.1) * DAYS_PER_YEAR * SECONDS_PER_DAY * 1000,
      11.488816459578842,
      {
        rel: 1e-12,
        unit: 'ms/yr',
        why: 'formula',
      },
    );
    expectWithin(starRadiusLightDays(AU_M / R_SUN_M) * SECONDS_PER_DAY, 998.0095676723129 / 2, {
      rel: 1e-14,
      unit: 's',
      why: 'one au',
    });
  });
});
