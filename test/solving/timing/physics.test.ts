import { describe, it } from 'vitest';
import {
  accelerationPeriodChangeMsPerYear,
  changeTimescaleMyr,
  dimensionlessChange,
  lightTimeAcrossSeconds,
  lightTimeAmplitudeSeconds,
  lightTimeMassFunctionSolar,
  mimickingAccelerationMpsPerYear,
  periodChangeMsPerYear,
  properMotionPeriodChangeMsPerYear,
  reflexOrbitAu,
  reflexSemiAmplitudeMps,
  tidalQuality,
} from '../../../src/solving/timing/physics.js';
import { massFunctionSolar, starOrbitSemiMajorAxisAu } from '../../../src/orbit/masses.js';
import { DAYS_PER_YEAR } from '../../../src/orbit/constants.js';
import { expectWithin } from '../../support/expect-within.js';

const exact = { rel: 1e-9, why: 'the same formula in double precision' };

describe('what timing means', () => {
  it.each([
    // Yee et al. 2020, ApJL 888, L5: -29 +- 2 ms/yr, 3.25 +- 0.23 Myr.
    [1.091420107, -29, 3.251679215337931, 3.25, 0.005],
    // Patra et al. 2017, AJ 154, 4: -29 +- 3 ms/yr, 3.2 Myr.
    [1.0914203, -29, 3.251679790344827, 3.2, 0.06],
    // Turner et al. 2021, AJ 161, 72: -32.53 +- 1.62 ms/yr, 2.90 +- 0.14 Myr.
    [1.09142009, -32.53, 2.898822495419612, 2.9, 0.005],
    // Kutluay et al. 2023, TJAA 4, 10: -31.03 +- 0.94 ms/yr, 3.04 +- 0.09 Myr.
    [1.0914202527, -31.03, 3.0389529433864, 3.04, 0.005],
  ])(
    'time scale of a period of %d d that changes by %d ms/yr',
    (period, change, computed, published, half) => {
      const perCycle = dimensionlessChange(change) * period;
      expectWithin(changeTimescaleMyr(perCycle, period), computed, { ...exact, unit: 'Myr' });
      expectWithin(changeTimescaleMyr(perCycle, period), published, {
        abs: half,
        unit: 'Myr',
        why: 'as printed',
      });
    },
  );

  it('change per cycle to ms/yr (table of Yee et al. 2020, ApJL 888, L5: -29.0)', () => {
    const change = periodChangeMsPerYear(-1.004e-9, 1.091420107);
    expectWithin(change, -29.02991267687906, { ...exact, unit: 'ms/yr' });
  });

  it('tidal quality factor (1.8e5 in the abstract of Yee et al. 2020, ApJL 888, L5)', () => {
    const quality = tidalQuality(-9.189545466068396e-10, 0.00099, 3.039);
    expectWithin(quality, 176267.11832448767, { ...exact, unit: '1' });
    expectWithin(quality, 1.8e5, { abs: 0.05e5, unit: '1', why: 'printed with two digits' });
  });

  it.each([
    [0.0234, 23.35342388353212],
    [0.04707, 46.976310350335766],
    [0.03142, 31.357460616264063],
    [1, 998.0095676723129],
  ])('light time across an orbit of %d au', (axis, seconds) => {
    expectWithin(lightTimeAcrossSeconds(axis), seconds, { rel: 1e-10, unit: 's', why: 'exact constants' });
  });

  it('light-time amplitude of a reflex motion, and back', () => {
    const seconds = lightTimeAmplitudeSeconds(100, 3650);
    expectWithin(seconds, 16.741949810311812, { rel: 1e-10, unit: 's', why: 'exact constants' });
    expectWithin(reflexSemiAmplitudeMps(seconds, 3650), 100, { ...exact, unit: 'm/s' });
    expectWithin(reflexOrbitAu(seconds), starOrbitSemiMajorAxisAu(100, 3650, 0), { ...exact, unit: 'au' });
    const massFunction = massFunctionSolar({ periodDays: 3650, semiAmplitudeMps: 100, eccentricity: 0 });
    expectWithin(lightTimeMassFunctionSolar(seconds, 3650), massFunction, { ...exact, unit: 'M_sun' });
  });

  it('apparent change of a period from an acceleration, and back', () => {
    const change = accelerationPeriodChangeMsPerYear(1.0914203, 0.1);
    expectWithin(change, 11.488816459578842, { ...exact, unit: 'ms/yr' });
    const back = mimickingAccelerationMpsPerYear(change, 1.0914203);
    expectWithin(back, 0.1 * DAYS_PER_YEAR, { ...exact, unit: 'm/s/yr' });
  });

  it('apparent change of a period from proper motion', () => {
    const change = properMotionPeriodChangeMsPerYear(1.0914203, 10, 400);
    expectWithin(change, 0.00028916209987084, { rel: 1e-8, unit: 'ms/yr', why: 'length of the parsec' });
  });
});
