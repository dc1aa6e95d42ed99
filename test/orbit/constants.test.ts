import { describe, expect, it } from 'vitest';
import {
  AU_IN_SOLAR_RADII,
  AU_M,
  DAYS_PER_YEAR,
  GM_EARTH_M3_S2,
  GM_JUPITER_M3_S2,
  GM_SUN_M3_S2,
  GRAVITATIONAL_CONSTANT,
  JUPITER_MASS_IN_EARTH,
  L_SUN_W,
  R_EARTH_M,
  R_JUPITER_M,
  R_SUN_M,
  SECONDS_PER_DAY,
  SOLAR_MASS_IN_EARTH,
  SOLAR_MASS_IN_JUPITER,
  SOLAR_RADIUS_IN_JUPITER,
  SPEED_OF_LIGHT_MPS,
  TEFF_SUN_K,
} from '../../src/orbit/index.js';
import { expectWithin } from '../support/expect-within.js';

describe('constants', () => {
  it('are the defined ones (IAU 2015 Resolution B3, IAU 2012 Resolution B2, SI, CODATA 2018; as in astropy 5.2.1)', () => {
    expect(GM_SUN_M3_S2).toBe(1.3271244e20);
    expect(GM_JUPITER_M3_S2).toBe(1.2668653e17);
    expect(GM_EARTH_M3_S2).toBe(3.986004e14);
    expect([R_SUN_M, R_JUPITER_M, R_EARTH_M]).toEqual([6.957e8, 7.1492e7, 6.3781e6]);
    expect(L_SUN_W).toBe(3.828e26);
    expect(AU_M).toBe(149597870700);
    expect(SPEED_OF_LIGHT_MPS).toBe(299792458);
    expect(GRAVITATIONAL_CONSTANT).toBe(6.6743e-11);
  });

  it('agree with the Sun through the Stefan-Boltzmann law (sigma = 5.670374419e-8 W m-2 K-4, CODATA 2018)', () => {
    const radiatedW = 4 * Math.PI * R_SUN_M ** 2 * 5.670374419e-8 * TEFF_SUN_K ** 4;
    expectWithin(radiatedW, L_SUN_W, {
      rel: 2e-4,
      unit: 'W',
      why: 'the nominal temperature is rounded to 1 K',
    });
  });

  it('agree with the year: the Gaussian constant 0.01720209895 (IAU 1976) gives GM of the Sun from the au and the day', () => {
    const gm = (0.01720209895 ** 2 * AU_M ** 3) / SECONDS_PER_DAY ** 2;
    expectWithin(gm, GM_SUN_M3_S2, { rel: 1e-7, unit: 'm3/s2', why: 'nominal GM has eight digits' });
  });

  it('have the ratios that double arithmetic gives outside this program (Python, from the nominal values)', () => {
    const exact = { rel: 1e-14, unit: '1', why: 'one rounding' };
    expectWithin(SOLAR_MASS_IN_JUPITER, 1047.5655146604772, exact);
    expectWithin(SOLAR_MASS_IN_EARTH, 332946.07832806994, exact);
    expectWithin(JUPITER_MASS_IN_EARTH, 317.8284065946748, exact);
    expectWithin(1 / SOLAR_RADIUS_IN_JUPITER, 0.10276268506540176, exact);
    expectWithin(AU_IN_SOLAR_RADII, 215.03215567054764, exact);
    expect(DAYS_PER_YEAR * SECONDS_PER_DAY).toBe(31557600); // s, Julian year, IAU Style Manual
  });
});
