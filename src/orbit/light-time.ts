/** How the finite speed of light shifts what is seen. */
import { ModelDomainError } from '../errors.js';
import { AU_M, R_SUN_M, SECONDS_PER_DAY, SPEED_OF_LIGHT_MPS, TWO_PI } from './constants.js';
import { requireEccentricity, requireFinite, requireNotNegative, requirePositive } from './domain.js';

const LIGHT_DAYS_PER_M = 1 / (SPEED_OF_LIGHT_MPS * SECONDS_PER_DAY);

/**
 * Delay of the occultation, counted from the transit, days: the companion is behind by the sum of its distances at both
 * conjunctions, 2 a sin i (1 - e^2) / (1 - e^2 sin^2 omega) / c, which is 2a/c for a circular orbit seen edge-on.
 * The companion's mass is neglected against the star's; a mass ratio q shortens the delay by the factor (1 - q)/(1 + q).
 */
export function occultationLightDelayDays(orbit: {
  readonly semiMajorAxisAu: number;
  readonly eccentricity: number;
  readonly argPeriastronStarRad: number;
  readonly sinInclination: number;
}): number {
  requirePositive('semi-major axis (au)', orbit.semiMajorAxisAu);
  requireEccentricity(orbit.eccentricity);
  requireFinite('argument of periastron (rad)', orbit.argPeriastronStarRad);
  if (!(orbit.sinInclination >= 0 && orbit.sinInclination <= 1))
    throw new ModelDomainError('sine of the inclination', orbit.sinInclination, '[0, 1]');
  const squeeze = (1 - orbit.eccentricity) * (1 + orbit.eccentricity);
  const lean = orbit.eccentricity * Math.sin(orbit.argPeriastronStarRad);
  const depthAu = (2 * orbit.semiMajorAxisAu * orbit.sinInclination * squeeze) / ((1 - lean) * (1 + lean));
  return depthAu * AU_M * LIGHT_DAYS_PER_M;
}

/** Time that light takes for one stellar radius, days. */
export function starRadiusLightDays(starRadiusSolar: number): number {
  requirePositive('star radius (solar radii)', starRadiusSolar);
  return starRadiusSolar * R_SUN_M * LIGHT_DAYS_PER_M;
}

/**
 * How far a star's own orbit shifts the events it shows, days: a_star sin i / c = K P sqrt(1 - e^2) / (2 pi c) [Irwin1952]. For a
 * circular orbit events come early and late by this much.
 */
export function starRoemerAmplitudeDays(
  semiAmplitudeMps: number,
  periodDays: number,
  eccentricity: number,
): number {
  requireNotNegative('semi-amplitude (m/s)', semiAmplitudeMps);
  requirePositive('period (d)', periodDays);
  requireEccentricity(eccentricity);
  const squeeze = Math.sqrt((1 - eccentricity) * (1 + eccentricity));
  return (semiAmplitudeMps * squeeze * periodDays) / (TWO_PI * SPEED_OF_LIGHT_MPS);
}

/**
 * Apparent change of a period, days per day, of a system that is accelerated along the line of sight: P v'/c.
 *
 * @param accelerationMpsPerDay - positive when the velocity away from us grows
 */
export function apparentPeriodChange(periodDays: number, accelerationMpsPerDay: number): number {
  requirePositive('period (d)', periodDays);
  requireFinite('acceleration (m/s per day)', accelerationMpsPerDay);
  return (periodDays * accelerationMpsPerDay) / SPEED_OF_LIGHT_MPS;
}
