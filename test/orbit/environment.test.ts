import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import {
  astrometricSignatureMicroarcsec,
  AU_IN_SOLAR_RADII,
  centralTransitDurationHours,
  equilibriumTemperatureK,
  hillRadiusAu,
  irradiationEarth,
  mutualHillSpacing,
  nearPeriodRatio,
  R_EARTH_M,
  R_SUN_M,
  RAD_PER_DEG,
  SOLAR_MASS_IN_JUPITER,
  solveKepler,
  transitDepthPpm,
  transitProbability,
} from '../../src/orbit/index.js';
import { expectWithin } from '../support/expect-within.js';

/** a / R_star given directly, for a star of one solar radius. */
function geometry(scaledAxis: number, eccentricity: number, omegaDeg: number, radiusRatio: number) {
  return {
    semiMajorAxisAu: scaledAxis / AU_IN_SOLAR_RADII,
    eccentricity,
    argPeriastronStarRad: omegaDeg * RAD_PER_DEG,
    starRadiusSolar: 1,
    radiusRatio,
  };
}

describe('transits', () => {
  it('are as likely as the share of inclinations that show one', () => {
    for (const [scaledAxis, e, omegaDeg, k] of [
      [20, 0, 90, 0.1],
      [20, 0.4, 270, 0.1],
      [8.76, 0.7, 35, 0],
    ] as const) {
      // Count cos i on an even grid: an orbit drawn at random is even in cos i.
      let shown = 0;
      const trials = 200_000;
      const nu = (90 - omegaDeg) * RAD_PER_DEG;
      const distance = (scaledAxis * (1 - e * e)) / (1 + e * Math.cos(nu));
      for (let i = 0; i < trials; i++) if (distance * ((i + 0.5) / trials) < 1 + k) shown++;
      const got = transitProbability(geometry(scaledAxis, e, omegaDeg, k));
      expectWithin(got, shown / trials, { abs: 1 / trials, unit: '1', why: 'grid' });
    }
    expect(transitProbability(geometry(0.9, 0, 90, 0))).toBe(1);
  });

  it('last as long as the centres are closer than 1 + k, found by root search on the orbit', () => {
    for (const [e, omegaDeg, bound] of [
      [0, 90, 1e-12],
      [0.4, 90, 6e-4],
      [0.4, 270, 6e-4],
      [0.4, 0, 6e-4],
    ] as const) {
      const [scaledAxis, k, periodDays] = [20, 0.1, 10];
      const got = centralTransitDurationHours(geometry(scaledAxis, e, omegaDeg, k), periodDays);
      const contact = (sign: number): number => {
        // Seen from the side: the distance from the line of sight grows from conjunction to the contact.
        let [near, far] = [(90 - omegaDeg) * RAD_PER_DEG, (90 - omegaDeg) * RAD_PER_DEG + sign * 0.5];
        for (let i = 0; i < 80; i++) {
          const nu = (near + far) / 2;
          const r = (scaledAxis * (1 - e * e)) / (1 + e * Math.cos(nu));
          if (r * Math.abs(Math.cos(nu + omegaDeg * RAD_PER_DEG)) < 1 + k) near = nu;
          else far = nu;
        }
        const E =
          2 * Math.atan2(Math.sqrt(1 - e) * Math.sin(near / 2), Math.sqrt(1 + e) * Math.cos(near / 2));
        return E - e * Math.sin(E);
      };
      let turn = contact(1) - contact(-1);
      if (turn < 0) turn += 2 * Math.PI;
      const wantHours = (24 * periodDays * turn) / (2 * Math.PI);
      expectWithin(got, wantHours, {
        rel: bound,
        unit: 'h',
        why: 'uniform motion across the disc when e > 0',
      });
    }
    // 0.1751588224470238 d by mpmath for this circular case.
    const circular = centralTransitDurationHours(geometry(20, 0, 90, 0.1), 10);
    expectWithin(circular / 24, 0.1751588224470238, { rel: 1e-14, unit: 'd', why: 'roundings' });
    expect(() => centralTransitDurationHours(geometry(1.05, 0, 90, 0.1), 1)).toThrow(ModelDomainError);
  });

  it('are 84 ppm deep for the Earth and the Sun (well known; 84.05 from the nominal radii)', () => {
    const depth = transitDepthPpm(R_EARTH_M / R_SUN_M);
    expectWithin(depth, 84.05, { abs: 0.005, unit: 'ppm', why: 'rounded' });
    expect(transitDepthPpm(3)).toBe(1e6);
  });
});

describe('warmth', () => {
  const earth = { effectiveTemperatureK: 5772, starRadiusSolar: 1, semiMajorAxisAu: 1, eccentricity: 0 };

  it('is 278.33 K and 254.59 K for the Earth with albedo 0 and 0.3 (double arithmetic outside this program)', () => {
    expectWithin(equilibriumTemperatureK(earth, 0), 278.3297440615529, {
      rel: 1e-13,
      unit: 'K',
      why: 'roundings',
    });
    expectWithin(equilibriumTemperatureK(earth, 0.3), 254.5857729432723, {
      rel: 1e-13,
      unit: 'K',
      why: 'roundings',
    });
    expectWithin(irradiationEarth(earth), 1, { abs: 1e-15, unit: 'Earth', why: 'definition' });
  });

  it('is 1449 K for HD 209458 b (Torres, Winn & Holman 2008: 1449 +- 12 K, remembered)', () => {
    const star = {
      effectiveTemperatureK: 6065,
      starRadiusSolar: 1,
      semiMajorAxisAu: 8.76 / AU_IN_SOLAR_RADII,
      eccentricity: 0,
    };
    expectWithin(equilibriumTemperatureK(star, 0), 1449, {
      abs: 12,
      unit: 'K',
      why: 'published uncertainty',
    });
    expectWithin(equilibriumTemperatureK(star, 0), 1448.9845483859335, {
      rel: 1e-12,
      unit: 'K',
      why: 'roundings',
    });
  });

  it('averages the flux over an eccentric orbit, by summing 1/r^2 at equal times', () => {
    for (const eccentricity of [0.1, 0.6, 0.9]) {
      let sum = 0;
      const steps = 4000;
      for (let i = 0; i < steps; i++) {
        const E = solveKepler((2 * Math.PI * i) / steps, eccentricity);
        sum += (1 - eccentricity * Math.cos(E)) ** -2;
      }
      const orbit = { ...earth, semiMajorAxisAu: 0.5, eccentricity };
      const mean = (4 * sum) / steps;
      expectWithin(irradiationEarth(orbit), mean, { rel: 1e-9, unit: 'Earth', why: 'the sum of a periodic function converges fast' }); // prettier-ignore
      const circular = equilibriumTemperatureK({ ...orbit, eccentricity: 0 }, 0);
      const want = circular * (mean / 4) ** 0.25;
      expectWithin(equilibriumTemperatureK(orbit, 0), want, { rel: 1e-9, unit: 'K', why: 'as above' });
    }
  });
});

describe('neighbourhood', () => {
  it("gives Jupiter's Hill radius, 0.3553 au (double arithmetic outside this program; 1 M_jup at 5.2044 au, e = 0)", () => {
    const mass = 1 / SOLAR_MASS_IN_JUPITER;
    expectWithin(hillRadiusAu(5.2044, 0, mass, 1), 0.3553065269765885, {
      rel: 1e-13,
      unit: 'au',
      why: 'roundings',
    });
    expectWithin(hillRadiusAu(5.2044, 0.5, mass, 1), 0.3553065269765885 / 2, {
      rel: 1e-13,
      unit: 'au',
      why: 'half of it',
    });
  });

  it('measures spacing in mutual Hill radii: by hand, two of 0.0015 M at 0.95 and 1.05 au are one apart', () => {
    const inner = { semiMajorAxisAu: 0.95, massSolar: 0.0015 };
    const outer = { semiMajorAxisAu: 1.05, massSolar: 0.0015 };
    const bound = { abs: 1e-13, unit: 'mutual Hill radii', why: 'difference of the axes' };
    expectWithin(mutualHillSpacing(inner, outer, 1), 1, bound); // cbrt(0.003 / 3) = 0.1, mean axis 1
    expectWithin(mutualHillSpacing(outer, inner, 1), 1, bound);
    expect(() => mutualHillSpacing({ ...inner, massSolar: 0 }, { ...outer, massSolar: 0 }, 1)).toThrow(
      ModelDomainError,
    );
  });

  it('gives the half milliarcsecond of the Sun moved by Jupiter at 10 pc (5.2044 au / 1048.3486 / 10 pc, by hand)', () => {
    const got = astrometricSignatureMicroarcsec(5.2044 / 1048.3486, 10);
    expectWithin(got, 496.438, { abs: 0.001, unit: 'microarcsec', why: 'rounded' });
  });

  it('names small period ratios of well-known pairs and stays silent otherwise', () => {
    expect(nearPeriodRatio(1.769138, 3.551181)).toBe('2:1'); // Io and Europa, d
    expect(nearPeriodRatio(90560, 60182)).toBe('3:2'); // Pluto and Neptune, d
    expect(nearPeriodRatio(10759.22, 4332.59)).toBe('5:2'); // Saturn and Jupiter, the great inequality
    expect(nearPeriodRatio(100, 100.5)).toBe('1:1');
    expect(nearPeriodRatio(2.0, 1)).toBe('2:1'); // never 4:2
    expect(nearPeriodRatio(2.021, 1)).toBeNull();
    expect(nearPeriodRatio(10, 1)).toBeNull();
    expect(() => nearPeriodRatio(0, 1)).toThrow(ModelDomainError);
  });
});
