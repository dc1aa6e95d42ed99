import { describe, expect, test } from 'vitest';
import { barycentricMinusUtcDays } from '../../src/planning/site-clock.js';
import {
  airmass,
  altitudeDeg,
  altitudeOfAirmass,
  greenwichSiderealDeg,
  precessFromJ2000,
  separationDeg,
  sunPosition,
} from '../../src/planning/sky.js';
import { expectWithin } from '../support/expect-within.js';
import astropySky from './reference/astropy-sky.json' with { type: 'json' };

const AIRLESS = 'nutation and aberration are left out: 0.01 deg';

describe('the Sun and the sidereal clock', () => {
  test('the Sun on 1992 October 13.0 TD (Meeus 1998, example 25.a)', () => {
    const sun = sunPosition(2448908.5);
    const printed = { abs: 6e-6, unit: 'deg', why: 'the example prints five decimals' };
    expectWithin(sun.trueLongitudeDeg, 199.90987, printed);
    expectWithin(sun.apparentLongitudeDeg, 199.90895, { ...printed, abs: 1.2e-5 });
    expectWithin(sun.rightAscensionDeg, 198.38083, printed);
    expectWithin(sun.declinationDeg, -7.78507, printed);
    expectWithin(sun.distanceAu, 0.99766, { abs: 6e-6, unit: 'au', why: 'the example prints five decimals' });
  });

  test('Greenwich mean sidereal time on 1987 April 10, 0h UT: 13h10m46.3668s (Meeus 1998, example 12.a)', () => {
    expectWithin(greenwichSiderealDeg(2446895.5), 197.693195, {
      abs: 5e-7,
      unit: 'deg',
      why: 'the example prints six decimals',
    });
  });

  test('in a tropical year the stars turn once more than the mean Sun: 366.2422 times (Meeus 1998, chapter 12)', () => {
    const gained = greenwichSiderealDeg(2451545 + 365.2422) - greenwichSiderealDeg(2451545);
    const wanted = 360 * 0.2422;
    expectWithin((gained + 360) % 360, wanted, {
      abs: 0.02,
      unit: 'deg',
      why: 'the year is given to four decimals',
    });
  });
});

describe('altitudes', () => {
  // astropy 5.2.1 / pyerfa 2.0.0.1, pressure 0; `simple` is the spherical formula with the J2000 position, same source
  const CASES = [
    { jdUtc: 2458543.6666667, lat: -24.6272, lon: -70.4042, ra: 150, dec: -30, altitude: 84.2663717730734, simple: 84.41276000389786, gmst: 218.67761616618574 },
    { jdUtc: 2458680.4791667, lat: 28.7606, lon: -17.8792, ra: 295, dec: 44.5, altitude: 63.394377555077455, simple: 63.51899118291734, gmst: 286.02616443423494 },
    { jdUtc: 2458462.8854167, lat: 19.8208, lon: -155.4681, ra: 83.633, dec: 0, altitude: 61.05639336403989, simple: 61.226027522775304, gmst: 217.8060809130799 },
    { jdUtc: 2458859.3333333, lat: 60, lon: 20, ra: 10, dec: 75, altitude: 64.44625911399265, simple: 64.36732755466801, gmst: 49.8132611346122 },
  ]; // prettier-ignore

  test.each(CASES)('a target at declination $dec from latitude $lat (astropy)', (sample) => {
    const site = { name: '', latitudeDeg: sample.lat, longitudeEastDeg: sample.lon, elevationM: 0 };
    const catalogue = { rightAscensionDeg: sample.ra, declinationDeg: sample.dec };
    const ofDate = precessFromJ2000(catalogue, sample.jdUtc);
    expectWithin(altitudeDeg(ofDate, site, sample.jdUtc), sample.altitude, {
      abs: 0.01,
      unit: 'deg',
      why: AIRLESS,
    });
    // unprecessed: the formula alone, to what UT1 - UTC moves it
    expectWithin(altitudeDeg(catalogue, site, sample.jdUtc), sample.simple, {
      abs: 0.001,
      unit: 'deg',
      why: 'UT1 - UTC of 0.2 s is 0.0008 deg',
    });
    expectWithin(greenwichSiderealDeg(sample.jdUtc), sample.gmst, {
      abs: 0.005,
      unit: 'deg',
      why: 'UT1 - UTC is at most 0.9 s = 0.004 deg',
    });
  });

  test('Sun and target over ten years from five invented sites (reference/astropy-sky.json)', () => {
    let worstSun = 0;
    let worstTarget = 0;
    for (const sample of astropySky.sky) {
      const { jdUtc } = sample;
      const sun = altitudeDeg(sunPosition(jdUtc), sample.site, jdUtc);
      const target = altitudeDeg(precessFromJ2000(sample.target, jdUtc), sample.site, jdUtc);
      worstSun = Math.max(worstSun, Math.abs(sun - sample.sunAltitudeDeg));
      worstTarget = Math.max(worstTarget, Math.abs(target - sample.targetAltitudeDeg));
    }
    console.log(`worst altitude error: Sun ${worstSun.toFixed(4)} deg, target ${worstTarget.toFixed(4)} deg`);
    expectWithin(worstSun, 0, {
      abs: 0.012,
      unit: 'deg',
      why: 'parallax of the Sun, 0.0024 deg, on top of 0.01 deg',
    });
    expectWithin(worstTarget, 0, { abs: 0.012, unit: 'deg', why: AIRLESS });
  });

  test('a quarter turn in hour angle brings an equatorial target from the zenith to the horizon', () => {
    const equator = { name: '', latitudeDeg: 0, longitudeEastDeg: 0, elevationM: 0 };
    const jd = 2459000.25;
    const overhead = { rightAscensionDeg: greenwichSiderealDeg(jd), declinationDeg: 0 };
    const setting = { rightAscensionDeg: greenwichSiderealDeg(jd) - 90, declinationDeg: 0 };
    // arcsin near 1 turns rounding of 1e-16 into 1e-6 deg
    expectWithin(altitudeDeg(overhead, equator, jd), 90, {
      abs: 2e-6,
      unit: 'deg',
      why: 'rounding at the zenith',
    });
    expectWithin(altitudeDeg(setting, equator, jd), 0, { abs: 1e-9, unit: 'deg', why: 'rounding' });
  });

  test('precession carries theta Persei of J2000 to 2028 November 13.19 TD (Meeus 1998, example 21.b)', () => {
    // the example's position with its proper motion already applied; printed result 41.547214, +49.348483
    const there = precessFromJ2000({ rightAscensionDeg: 41.054063, declinationDeg: 49.22775 }, 2462088.69);
    const printed = { abs: 2e-6, unit: 'deg', why: 'the example prints six decimals, in and out' };
    expectWithin(there.rightAscensionDeg, 41.547214, printed);
    expectWithin(there.declinationDeg, 49.348483, printed);
  });

  test('separations: poles, a right angle, itself', () => {
    const north = { rightAscensionDeg: 12, declinationDeg: 90 };
    const side = { rightAscensionDeg: 100, declinationDeg: 0 };
    expectWithin(separationDeg(north, { rightAscensionDeg: 200, declinationDeg: -90 }), 180, {
      abs: 2e-6,
      unit: 'deg',
      why: 'rounding',
    });
    expectWithin(separationDeg(north, side), 90, { abs: 1e-9, unit: 'deg', why: 'rounding' });
    expect(separationDeg(side, side)).toBe(0);
  });
});

describe('airmass', () => {
  // Kasten & Young 1989, Appl. Opt. 28, 4735: their formula evaluated independently with numpy 1.24.2
  const TABLE = [
    [90, 0.9997119918558381], [75, 1.034868701066905], [60, 1.153992233363676], [45, 1.4125952520262746], [30, 1.9942928525292503],
    [20, 2.9031466488031006], [15, 3.812911869220776], [10, 5.586035879851202], [5, 10.305791327930303], [2, 19.43324510757205],
    [1, 26.310555068385327], [0, 37.91960837783633],
  ] as const; // prettier-ignore

  test.each(TABLE)('at altitude %d deg: %d', (altitude, expected) => {
    expectWithin(airmass(altitude), expected, { rel: 1e-12, unit: '1', why: 'same formula, rounding only' });
    expectWithin(altitudeOfAirmass(expected), altitude, {
      abs: altitude > 89 ? 0.1 : 1e-6,
      unit: 'deg',
      why: 'the formula is flat at the zenith; rounding elsewhere',
    });
  });

  test('there is none below the horizon, and limits beyond both ends are the ends', () => {
    expect(airmass(-0.001)).toBe(Infinity);
    expectWithin(altitudeOfAirmass(100), 0, { abs: 1e-9, unit: 'deg', why: 'bisection stops at 1e-10' });
    expect(altitudeOfAirmass(0.5)).toBe(90);
  });
});

test('BJD_TDB - JD_UTC agrees with light travel time and clocks of astropy (reference/astropy-sky.json)', () => {
  let worst = 0;
  for (const sample of astropySky.sky) {
    const seconds = 86400 * barycentricMinusUtcDays(sample.jdUtc, sample.target);
    worst = Math.max(worst, Math.abs(seconds - sample.bjdTdbMinusJdUtcSeconds));
  }
  console.log(`worst clock error: ${worst.toFixed(2)} s`);
  expectWithin(worst, 0, {
    abs: 10,
    unit: 's',
    why: 'Sun for barycentre 4 s, leap seconds 2 s, Earth radius 0.02 s',
  });
});
