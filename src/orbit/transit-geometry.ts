/**
 * Where and how long the companion crosses the star, or passes behind it: tilt, durations by formula, phase of the
 * occultation. Exact contact times are in `contact-times.ts`, the probability of a transit in `environment.ts`.
 *
 * The argument of periastron is that of the star's orbit, so that inferior conjunction is at true anomaly 90 deg - omega.
 */
import { ModelDomainError } from '../errors.js';
import { meanFromTrueAnomaly } from './anomalies.js';
import { TWO_PI } from './constants.js';
import { requireEccentricity, requireFinite, requireNotNegative, requirePositive } from './domain.js';

/** Shape of an orbit in units of the star. */
export interface ScaledOrbit {
  /** a / R_star > 0, relative orbit. */
  readonly scaledSemiMajorAxis: number;
  /** 0 <= e < 1 */
  readonly eccentricity: number;
  readonly argPeriastronStarRad: number;
}

/** The same, tilted; 0 <= i <= pi, 90 deg when seen edge-on. */
export interface TiltedOrbit extends ScaledOrbit {
  readonly inclinationRad: number;
}

/** Separation at inferior conjunction in stellar radii, (a/R) cos i (1 - e^2) / (1 + e sin omega) [Winn2010]; negative for i > 90 deg. */
export function transitImpactParameter(orbit: TiltedOrbit): number {
  requireInclination(orbit.inclinationRad);
  return cosine(orbit.inclinationRad) * transitDistance(orbit);
}

/** The same at superior conjunction, (a/R) cos i (1 - e^2) / (1 - e sin omega). */
export function occultationImpactParameter(orbit: TiltedOrbit): number {
  requireInclination(orbit.inclinationRad);
  return cosine(orbit.inclinationRad) * occultationDistance(orbit);
}

/**
 * Inclination of an orbit from the impact parameter of its transit, rad.
 *
 * @throws ModelDomainError when |b| exceeds the distance of the bodies at inferior conjunction (no inclination gives it)
 */
export function inclinationFromImpactParameterRad(impactParameter: number, orbit: ScaledOrbit): number {
  const distance = transitDistance(orbit);
  if (!(Math.abs(impactParameter) <= distance))
    throw new ModelDomainError(
      'impact parameter',
      impactParameter,
      `[-${distance}, ${distance}], the distance at conjunction in stellar radii`,
    );
  return Math.acos(impactParameter / distance);
}

/** Separation of the centres at inferior conjunction in three dimensions, stellar radii. */
export function transitDistance(orbit: ScaledOrbit): number {
  requireScaledOrbit(orbit);
  return (
    (orbit.scaledSemiMajorAxis * squeeze(orbit)) /
    (1 + orbit.eccentricity * Math.sin(orbit.argPeriastronStarRad))
  );
}

/** The same at superior conjunction. */
export function occultationDistance(orbit: ScaledOrbit): number {
  requireScaledOrbit(orbit);
  return (
    (orbit.scaledSemiMajorAxis * squeeze(orbit)) /
    (1 - orbit.eccentricity * Math.sin(orbit.argPeriastronStarRad))
  );
}

/**
 * Total duration of a transit (first to last contact), days, by the formula of [SeagerMallenOrnelas2003] with the factor
 * for eccentric orbits of [Winn2010]: (P/pi) asin{ (R/a) sqrt[(1 + k)^2 - b^2] / sin i } sqrt(1 - e^2) / (1 + e sin omega).
 *
 * Exact for a circular orbit; at e = 0.4 and a = 20 R_star off by 4e-4 of the duration (`transitContacts` is exact).
 *
 * @returns null where the discs do not meet
 */
export function totalDurationDays(
  orbit: TiltedOrbit,
  periodDays: number,
  radiusRatio: number,
): number | null {
  return crossingDays(orbit, periodDays, radiusRatio, 1 + radiusRatio);
}

/** Full duration (second to third contact), days, by the same formula with 1 - k; null when grazing. */
export function fullDurationDays(orbit: TiltedOrbit, periodDays: number, radiusRatio: number): number | null {
  return crossingDays(orbit, periodDays, radiusRatio, Math.abs(1 - radiusRatio));
}

/**
 * Time from inferior to the following superior conjunction as a fraction of the period, exact, light time not counted;
 * to first order 1/2 + (2/pi) e cos omega.
 */
export function occultationPhase(eccentricity: number, argPeriastronStarRad: number): number {
  requireEccentricity(eccentricity);
  requireFinite('argument of periastron (rad)', argPeriastronStarRad);
  const front = meanFromTrueAnomaly(Math.PI / 2 - argPeriastronStarRad, eccentricity);
  const behind = meanFromTrueAnomaly((3 * Math.PI) / 2 - argPeriastronStarRad, eccentricity);
  return (behind - front) / TWO_PI;
}

function crossingDays(
  orbit: TiltedOrbit,
  periodDays: number,
  radiusRatio: number,
  reach: number,
): number | null {
  requirePositive('period (d)', periodDays);
  requireNotNegative('radius ratio', radiusRatio);
  const impactParameter = transitImpactParameter(orbit);
  if (!(Math.abs(impactParameter) < reach)) return null;
  const chord = Math.sqrt((reach - impactParameter) * (reach + impactParameter));
  const sine = chord / (orbit.scaledSemiMajorAxis * Math.sin(orbit.inclinationRad));
  if (!(sine <= 1))
    throw new ModelDomainError('(R_star + R_companion) / a', sine, '(0, 1]: the orbit lies inside the star');
  const slowness =
    Math.sqrt(squeeze(orbit)) / (1 + orbit.eccentricity * Math.sin(orbit.argPeriastronStarRad));
  return (periodDays / Math.PI) * Math.asin(sine) * slowness;
}

/** cos i that is exactly 0 at the double nearest to 90 deg. */
function cosine(inclinationRad: number): number {
  return Math.sin(Math.PI / 2 - inclinationRad);
}

function squeeze(orbit: ScaledOrbit): number {
  return (1 - orbit.eccentricity) * (1 + orbit.eccentricity);
}

function requireScaledOrbit(orbit: ScaledOrbit): void {
  requirePositive('a / R_star', orbit.scaledSemiMajorAxis);
  requireEccentricity(orbit.eccentricity);
  requireFinite('argument of periastron (rad)', orbit.argPeriastronStarRad);
}

function requireInclination(inclinationRad: number): void {
  if (!(inclinationRad >= 0 && inclinationRad <= Math.PI))
    throw new ModelDomainError('inclination (rad)', inclinationRad, '[0, pi]');
}
