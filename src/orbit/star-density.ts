/** What the size of the orbit in stellar radii says about the star's density, and the other way round. */
import { GM_SUN_M3_S2, GRAVITATIONAL_CONSTANT, R_SUN_M, SECONDS_PER_DAY } from './constants.js';
import { requirePositive } from './domain.js';

const GRAMS_PER_CM3_PER_SI = 1e-3;

/** ln of the factor F in (a/R)^3 = F rho P^2, rho in g/cm3 and P in days: G/(3 pi). */
export const LOG_SCALED_AXIS_FACTOR: number = Math.log(
  (GRAVITATIONAL_CONSTANT * 1000 * SECONDS_PER_DAY ** 2) / (3 * Math.PI),
);

/**
 * Mean density of the star, g/cm3: 3 pi (a/R)^3 / (G P^2) [SeagerMallenOrnelas2003]. The companion's mass is neglected: what
 * comes out is the star's density plus k^3 times the companion's.
 */
export function starDensityGramsPerCm3(scaledSemiMajorAxis: number, periodDays: number): number {
  requirePositive('a / R_star', scaledSemiMajorAxis);
  requirePositive('period (d)', periodDays);
  const periodSeconds = periodDays * SECONDS_PER_DAY;
  const densitySi =
    (3 * Math.PI * scaledSemiMajorAxis ** 3) / (GRAVITATIONAL_CONSTANT * periodSeconds * periodSeconds);
  return densitySi * GRAMS_PER_CM3_PER_SI;
}

/** a/R_star from the star's density, g/cm3; inverse of the above, companion's mass neglected. */
export function scaledSemiMajorAxisFromDensity(densityGramsPerCm3: number, periodDays: number): number {
  requirePositive('star density (g/cm3)', densityGramsPerCm3);
  requirePositive('period (d)', periodDays);
  const periodSeconds = periodDays * SECONDS_PER_DAY;
  const densitySi = densityGramsPerCm3 / GRAMS_PER_CM3_PER_SI;
  return Math.cbrt((GRAVITATIONAL_CONSTANT * densitySi * periodSeconds * periodSeconds) / (3 * Math.PI));
}

/** Mean density of a body from its mass and radius in nominal solar units, g/cm3. */
export function meanDensityGramsPerCm3(massSolar: number, radiusSolar: number): number {
  requirePositive('mass (solar masses)', massSolar);
  requirePositive('radius (solar radii)', radiusSolar);
  const massKg = (massSolar * GM_SUN_M3_S2) / GRAVITATIONAL_CONSTANT;
  const volumeM3 = (4 / 3) * Math.PI * (radiusSolar * R_SUN_M) ** 3;
  return (massKg / volumeM3) * GRAMS_PER_CM3_PER_SI;
}
