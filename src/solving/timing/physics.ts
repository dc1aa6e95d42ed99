/** What changes of a period, light time and precession mean: conversions between the numbers of timing and those of orbits. */
import {
  AU_M,
  DAYS_PER_YEAR,
  GM_SUN_M3_S2,
  SECONDS_PER_DAY,
  SPEED_OF_LIGHT_MPS,
  TWO_PI,
} from '../../orbit/constants.js';

const MILLISECONDS_PER_SECOND = 1000;
/** Parsec, m: 648000/pi au. IAU 2015 Resolution B2. */
const PARSEC_M = (648_000 / Math.PI) * AU_M;
const MAS_PER_RAD = (180 / Math.PI) * 3600 * 1000;

/** dP/dt in ms/yr from the change per cycle: (dP/dE)/P. */
export function periodChangeMsPerYear(changeDaysPerCycle: number, periodDays: number): number {
  return (changeDaysPerCycle / periodDays) * DAYS_PER_YEAR * SECONDS_PER_DAY * MILLISECONDS_PER_SECOND;
}

/** dP/dt as a pure number (s/s) from ms/yr. */
export function dimensionlessChange(changeMsPerYear: number): number {
  return changeMsPerYear / (MILLISECONDS_PER_SECOND * DAYS_PER_YEAR * SECONDS_PER_DAY);
}

/** P/|dP/dt|, million years. */
export function changeTimescaleMyr(changeDaysPerCycle: number, periodDays: number): number {
  return (periodDays * periodDays) / Math.abs(changeDaysPerCycle) / DAYS_PER_YEAR / 1e6;
}

/**
 * Reduced tidal quality factor of the star that shrinks an orbit at this rate, Q' = (27 pi/2) (m/M) (R/a)^5 / |dP/dt|
 * [Patra2017; GoldreichSoter1966]; holds for a star that turns slower than the companion revolves.
 *
 * @param change - dP/dt, s/s; its sign is not looked at
 * @param massRatio - companion over star
 * @param scaledSemiMajorAxis - a/R of the star
 */
export function tidalQuality(change: number, massRatio: number, scaledSemiMajorAxis: number): number {
  return ((27 * Math.PI) / 2) * (massRatio / scaledSemiMajorAxis ** 5 / Math.abs(change));
}

/** Light time across the orbit, 2a/c, s: by so much an occultation is late. */
export function lightTimeAcrossSeconds(semiMajorAxisAu: number): number {
  return (2 * semiMajorAxisAu * AU_M) / SPEED_OF_LIGHT_MPS;
}

/** Amplitude of the light-time effect of a reflex motion on a circular orbit, K P/(2 pi c), s [Irwin1952]. */
export function lightTimeAmplitudeSeconds(semiAmplitudeMps: number, periodDays: number): number {
  return (semiAmplitudeMps * periodDays * SECONDS_PER_DAY) / (TWO_PI * SPEED_OF_LIGHT_MPS);
}

/** The reverse: velocity semi-amplitude of a circular reflex motion that gives this light-time amplitude, m/s. */
export function reflexSemiAmplitudeMps(amplitudeSeconds: number, periodDays: number): number {
  return (TWO_PI * SPEED_OF_LIGHT_MPS * amplitudeSeconds) / (periodDays * SECONDS_PER_DAY);
}

/** Projected radius a sin i of a circular reflex motion, au, from its light-time amplitude. */
export function reflexOrbitAu(amplitudeSeconds: number): number {
  return (amplitudeSeconds * SPEED_OF_LIGHT_MPS) / AU_M;
}

/** Mass function of the outer body, (a sin i)^3 4 pi^2/(G P^2), solar masses. */
export function lightTimeMassFunctionSolar(amplitudeSeconds: number, periodDays: number): number {
  const n = TWO_PI / (periodDays * SECONDS_PER_DAY);
  return ((amplitudeSeconds * SPEED_OF_LIGHT_MPS) ** 3 * n * n) / GM_SUN_M3_S2;
}

/** Apparent dP/dt of a system that is accelerated along the line of sight, P a/c, ms/yr. */
export function accelerationPeriodChangeMsPerYear(periodDays: number, accelerationMpsPerDay: number): number {
  const perDay = (periodDays * accelerationMpsPerDay) / SPEED_OF_LIGHT_MPS;
  return perDay * SECONDS_PER_DAY * MILLISECONDS_PER_SECOND * DAYS_PER_YEAR;
}

/** The reverse: acceleration along the line of sight, m/s/yr, that looks like this dP/dt. Positive recedes. */
export function mimickingAccelerationMpsPerYear(changeMsPerYear: number, periodDays: number): number {
  return (SPEED_OF_LIGHT_MPS * changeMsPerYear) / (MILLISECONDS_PER_SECOND * SECONDS_PER_DAY * periodDays);
}

/** Apparent dP/dt from proper motion, P mu^2 d/c, ms/yr [Shklovskii1970; Rafikov2009]. */
export function properMotionPeriodChangeMsPerYear(
  periodDays: number,
  properMotionMasPerYear: number,
  distanceParsec: number,
): number {
  const radPerYear = properMotionMasPerYear / MAS_PER_RAD;
  const yearSeconds = DAYS_PER_YEAR * SECONDS_PER_DAY;
  const perSecond = radPerYear / yearSeconds;
  const change =
    (periodDays * SECONDS_PER_DAY * perSecond ** 2 * distanceParsec * PARSEC_M) / SPEED_OF_LIGHT_MPS;
  return change * yearSeconds * MILLISECONDS_PER_SECOND;
}
