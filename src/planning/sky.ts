/**
 * Where the Sun and a target stand in a site's sky, to the precision that planning needs: the worst altitude error against
 * astropy is 0.008 deg, a few seconds of clock time (test/planning/reference, 2013 to 2022). Not good enough to correct
 * a velocity or a time. Angles in degrees, times as Julian dates.
 *
 * References: J. Meeus, Astronomical Algorithms, 2nd ed. 1998, chapters 12 (sidereal time), 13 (altitude),
 * 21 (precession), 25 (Sun, low accuracy); F. Kasten & A. T. Young 1989, Appl. Opt. 28, 4735 (airmass).
 */
import type { Site } from '../observations/types.js';

/** A direction on the sky, equatorial, degrees. Which equator it belongs to is said where it is used. */
export interface SkyDirection {
  readonly rightAscensionDeg: number;
  readonly declinationDeg: number;
}

export interface SunPosition extends SkyDirection {
  /** Geometric longitude, mean equinox of date. */
  readonly trueLongitudeDeg: number;
  /** With aberration and the largest term of nutation. */
  readonly apparentLongitudeDeg: number;
  readonly distanceAu: number;
}

const RAD_PER_DEG = Math.PI / 180;
const J2000_JD = 2451545;
const DAYS_PER_CENTURY = 36525;

const sinDeg = (angleDeg: number): number => Math.sin(angleDeg * RAD_PER_DEG);
const cosDeg = (angleDeg: number): number => Math.cos(angleDeg * RAD_PER_DEG);
const turnDeg = (angleDeg: number): number => ((angleDeg % 360) + 360) % 360;

/**
 * Apparent position of the Sun, equator and equinox of date.
 *
 * @param julianDate - TT; a date in UT is 70 s off, which moves the Sun by 0.0008 deg
 * @returns right ascension 0..360 deg; 0.01 deg accuracy (Meeus, chapter 25, for some centuries about 2000)
 */
export function sunPosition(julianDate: number): SunPosition {
  const t = (julianDate - J2000_JD) / DAYS_PER_CENTURY;
  const meanLongitudeDeg = 280.46646 + t * (36000.76983 + t * 0.0003032);
  const meanAnomalyDeg = 357.52911 + t * (35999.05029 - t * 0.0001537);
  const eccentricity = 0.016708634 - t * (0.000042037 + t * 0.0000001267);
  const centreDeg =
    (1.914602 - t * (0.004817 + t * 0.000014)) * sinDeg(meanAnomalyDeg) +
    (0.019993 - 0.000101 * t) * sinDeg(2 * meanAnomalyDeg) +
    0.000289 * sinDeg(3 * meanAnomalyDeg);
  const trueLongitudeDeg = turnDeg(meanLongitudeDeg + centreDeg);
  const distanceAu =
    (1.000001018 * (1 - eccentricity ** 2)) / (1 + eccentricity * cosDeg(meanAnomalyDeg + centreDeg));
  const lunarNodeDeg = 125.04 - 1934.136 * t;
  const apparentLongitudeDeg = turnDeg(trueLongitudeDeg - 0.00569 - 0.00478 * sinDeg(lunarNodeDeg));
  const obliquityDeg =
    (84381.448 - t * (46.815 + t * (0.00059 - t * 0.001813))) / 3600 + 0.00256 * cosDeg(lunarNodeDeg);
  const east = cosDeg(obliquityDeg) * sinDeg(apparentLongitudeDeg);
  return {
    trueLongitudeDeg,
    apparentLongitudeDeg,
    distanceAu,
    rightAscensionDeg: turnDeg(Math.atan2(east, cosDeg(apparentLongitudeDeg)) / RAD_PER_DEG),
    declinationDeg: Math.asin(sinDeg(obliquityDeg) * sinDeg(apparentLongitudeDeg)) / RAD_PER_DEG,
  };
}

/** Mean sidereal time at Greenwich, 0..360 deg, from a Julian date in UT1 (UTC is at most 0.9 s = 0.004 deg off). Meeus, eq. 12.4. */
export function greenwichSiderealDeg(julianDateUt: number): number {
  const days = julianDateUt - J2000_JD;
  const t = days / DAYS_PER_CENTURY;
  return turnDeg(280.46061837 + 360.98564736629 * days + t * t * (0.000387933 - t / 38710000));
}

/**
 * Carries a catalogue position (J2000) to the mean equator and equinox of a date. Meeus, eqs. 21.3 and 21.4.
 * Without it a target is 0.3 deg off by 2020. Proper motion, aberration and nutation (0.01 deg together) are left out.
 */
export function precessFromJ2000(direction: SkyDirection, julianDate: number): SkyDirection {
  const t = (julianDate - J2000_JD) / DAYS_PER_CENTURY;
  const zetaDeg = (t * (2306.2181 + t * (0.30188 + t * 0.017998))) / 3600;
  const zDeg = (t * (2306.2181 + t * (1.09468 + t * 0.018203))) / 3600;
  const thetaDeg = (t * (2004.3109 - t * (0.42665 + t * 0.041833))) / 3600;
  const alphaDeg = direction.rightAscensionDeg + zetaDeg;
  const cosDec = cosDeg(direction.declinationDeg);
  const sinDec = sinDeg(direction.declinationDeg);
  const a = cosDec * sinDeg(alphaDeg);
  const b = cosDeg(thetaDeg) * cosDec * cosDeg(alphaDeg) - sinDeg(thetaDeg) * sinDec;
  const c = sinDeg(thetaDeg) * cosDec * cosDeg(alphaDeg) + cosDeg(thetaDeg) * sinDec;
  return {
    rightAscensionDeg: turnDeg(Math.atan2(a, b) / RAD_PER_DEG + zDeg),
    // atan2 keeps its precision near the poles, where asin would lose it
    declinationDeg: Math.atan2(c, Math.hypot(a, b)) / RAD_PER_DEG,
  };
}

/**
 * Altitude above the horizontal plane of the site, -90..90 deg, without refraction.
 *
 * @param direction - equator and equinox of date
 * @param julianDateUt - UT1 or UTC
 */
export function altitudeDeg(direction: SkyDirection, site: Site, julianDateUt: number): number {
  const hourAngleDeg =
    greenwichSiderealDeg(julianDateUt) + site.longitudeEastDeg - direction.rightAscensionDeg;
  const sine =
    sinDeg(site.latitudeDeg) * sinDeg(direction.declinationDeg) +
    cosDeg(site.latitudeDeg) * cosDeg(direction.declinationDeg) * cosDeg(hourAngleDeg);
  return Math.asin(Math.max(-1, Math.min(1, sine))) / RAD_PER_DEG;
}

/** Angle between two directions on the same equator, 0..180 deg. */
export function separationDeg(first: SkyDirection, second: SkyDirection): number {
  const cosine =
    sinDeg(first.declinationDeg) * sinDeg(second.declinationDeg) +
    cosDeg(first.declinationDeg) *
      cosDeg(second.declinationDeg) *
      cosDeg(first.rightAscensionDeg - second.rightAscensionDeg);
  return Math.acos(Math.max(-1, Math.min(1, cosine))) / RAD_PER_DEG;
}

/**
 * Relative airmass of Kasten & Young 1989: 0.9997 in the zenith, 37.92 at the horizon, `Infinity` below it.
 * The formula takes the apparent altitude; with an airless one it is 0.2 % too large at airmass 3.
 */
export function airmass(altitude: number): number {
  if (altitude < 0) return Infinity;
  return 1 / (sinDeg(altitude) + 0.50572 * (altitude + 6.07995) ** -1.6364);
}

/**
 * Altitude in degrees at which the airmass reaches a value: the inverse of `airmass`, to 1e-9 deg (to 0.1 deg above
 * 89.9 deg, where the formula is flat).
 * 90 for airmasses that even the zenith does not beat, 0 for more than the horizon has.
 */
export function altitudeOfAirmass(value: number): number {
  let low = 0;
  let high = 90;
  while (high - low > 1e-10) {
    const middle = (low + high) / 2;
    if (airmass(middle) > value) low = middle;
    else high = middle;
  }
  return high;
}
