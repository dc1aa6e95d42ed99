/**
 * The ellipse for people: its measures, the speeds on it, and the time spent in each of its parts.
 *
 * Lengths come back in the unit of the semi-major axis given (au in the names below). Distances and speeds are those of
 * the relative orbit, companion as seen from the star, unless a name says otherwise.
 */
import { meanFromTrueAnomaly, eccentricFromTrueAnomaly } from './anomalies.js';
import { AU_M, SECONDS_PER_DAY, TWO_PI } from './constants.js';
import { requireEccentricity, requireFinite, requireNotNegative, requirePositive } from './domain.js';
import { ModelDomainError } from '../errors.js';
import { solveKepler, trueAnomaly } from './kepler.js';

/** A point in the orbit's plane; x towards periastron, y in the direction of motion there. */
export interface PlanePoint {
  readonly x: number;
  readonly y: number;
}

/** b = a sqrt(1 - e^2). a > 0, 0 <= e < 1. */
export function semiMinorAxisAu(semiMajorAxisAu: number, eccentricity: number): number {
  requireEllipse(semiMajorAxisAu, eccentricity);
  return semiMajorAxisAu * Math.sqrt((1 - eccentricity) * (1 + eccentricity));
}

/** Distance of either focus from the centre, c = a e. */
export function focusDistanceAu(semiMajorAxisAu: number, eccentricity: number): number {
  requireEllipse(semiMajorAxisAu, eccentricity);
  return semiMajorAxisAu * eccentricity;
}

/** Smallest distance, a (1 - e). */
export function periastronDistanceAu(semiMajorAxisAu: number, eccentricity: number): number {
  requireEllipse(semiMajorAxisAu, eccentricity);
  return semiMajorAxisAu * (1 - eccentricity);
}

/** Largest distance, a (1 + e). */
export function apastronDistanceAu(semiMajorAxisAu: number, eccentricity: number): number {
  requireEllipse(semiMajorAxisAu, eccentricity);
  return semiMajorAxisAu * (1 + eccentricity);
}

/**
 * Speed at a distance, km/s: v^2 = n^2 a^3 (2/r - 1/a), with n = 2 pi / P, so that no mass is needed.
 *
 * @throws ModelDomainError for a distance above 2 a (no bound orbit reaches it) or not above 0
 */
export function speedAtDistanceKmps(semiMajorAxisAu: number, periodDays: number, distanceAu: number): number {
  requirePositive('semi-major axis (au)', semiMajorAxisAu);
  requirePositive('period (d)', periodDays);
  if (!(distanceAu > 0 && distanceAu <= 2 * semiMajorAxisAu)) {
    throw new ModelDomainError(
      'distance (au)',
      distanceAu,
      `(0, ${2 * semiMajorAxisAu}], twice the semi-major axis`,
    );
  }
  return meanSpeedKmps(semiMajorAxisAu, periodDays) * Math.sqrt((2 * semiMajorAxisAu) / distanceAu - 1);
}

/** Speed at periastron, km/s. */
export function periastronSpeedKmps(
  semiMajorAxisAu: number,
  periodDays: number,
  eccentricity: number,
): number {
  requireEllipse(semiMajorAxisAu, eccentricity);
  return meanSpeedKmps(semiMajorAxisAu, periodDays) * Math.sqrt((1 + eccentricity) / (1 - eccentricity));
}

/** Speed at apastron, km/s. */
export function apastronSpeedKmps(semiMajorAxisAu: number, periodDays: number, eccentricity: number): number {
  requireEllipse(semiMajorAxisAu, eccentricity);
  return meanSpeedKmps(semiMajorAxisAu, periodDays) * Math.sqrt((1 - eccentricity) / (1 + eccentricity));
}

/** 2 pi a / P in km/s: the speed at distance a, and everywhere when e = 0. */
function meanSpeedKmps(semiMajorAxisAu: number, periodDays: number): number {
  requirePositive('period (d)', periodDays);
  return (TWO_PI * semiMajorAxisAu * AU_M) / (periodDays * SECONDS_PER_DAY) / 1000;
}

/** Days from periastron to a true anomaly (radians, any finite; negative before periastron, whole periods counted). */
export function timeFromPeriastronDays(
  trueAnomalyRad: number,
  periodDays: number,
  eccentricity: number,
): number {
  requirePositive('period (d)', periodDays);
  return (periodDays * meanFromTrueAnomaly(trueAnomalyRad, eccentricity)) / TWO_PI;
}

/** True anomaly (radians, revolutions counted) some days after periastron; inverse of the above. */
export function trueAnomalyAfterPeriastron(days: number, periodDays: number, eccentricity: number): number {
  requirePositive('period (d)', periodDays);
  return trueAnomaly((TWO_PI * days) / periodDays, eccentricity);
}

/** Days spent between two true anomalies (radians), in the direction of motion when `to` is larger. */
export function timeBetweenDays(
  fromTrueAnomalyRad: number,
  toTrueAnomalyRad: number,
  periodDays: number,
  eccentricity: number,
): number {
  return (
    timeFromPeriastronDays(toTrueAnomalyRad, periodDays, eccentricity) -
    timeFromPeriastronDays(fromTrueAnomalyRad, periodDays, eccentricity)
  );
}

/** Area swept about the focus between two true anomalies (radians), in units of a^2; the whole ellipse is pi b / a. */
export function areaSwept(
  fromTrueAnomalyRad: number,
  toTrueAnomalyRad: number,
  eccentricity: number,
): number {
  const sweptMean =
    meanFromTrueAnomaly(toTrueAnomalyRad, eccentricity) -
    meanFromTrueAnomaly(fromTrueAnomalyRad, eccentricity);
  return 0.5 * Math.sqrt((1 - eccentricity) * (1 + eccentricity)) * sweptMean;
}

/** Place on the ellipse at an eccentric anomaly (radians), in units of a, the occupied focus at the origin. */
export function positionInOrbit(eccentricAnomalyRad: number, eccentricity: number): PlanePoint {
  requireFinite('eccentric anomaly', eccentricAnomalyRad);
  requireEccentricity(eccentricity);
  const halfSine = Math.sin(eccentricAnomalyRad / 2);
  return {
    x: 1 - eccentricity - 2 * halfSine * halfSine, // cos E - e without cancellation at periastron
    y: Math.sqrt((1 - eccentricity) * (1 + eccentricity)) * Math.sin(eccentricAnomalyRad),
  };
}

/** As `positionInOrbit`, at a true anomaly (radians). */
export function positionAtTrueAnomaly(trueAnomalyRad: number, eccentricity: number): PlanePoint {
  return positionInOrbit(eccentricFromTrueAnomaly(trueAnomalyRad, eccentricity), eccentricity);
}

/**
 * Cuts the orbit into parts of equal time (and so of equal area), beginning at periastron.
 *
 * @param count - number of parts, a whole number >= 1
 * @returns (count + 1) eccentric anomalies, radians, from 0 to 2 pi ascending
 */
export function equalTimeSectors(eccentricity: number, count: number): Float64Array {
  requireEccentricity(eccentricity);
  if (!(Number.isInteger(count) && count >= 1)) {
    throw new ModelDomainError('number of sectors', count, 'the whole numbers from 1');
  }
  const anomaliesRad = new Float64Array(count + 1);
  for (let i = 1; i < count; i++) anomaliesRad[i] = solveKepler((TWO_PI * i) / count, eccentricity);
  anomaliesRad[count] = TWO_PI;
  return anomaliesRad;
}

/**
 * Both bodies about their barycentre, in units of the relative orbit's a.
 *
 * The two ellipses are scaled copies of the relative one: the star's by m / (M + m) and turned by half a turn.
 * @throws ModelDomainError unless starMassSolar > 0 and companionMassSolar >= 0
 */
export function bodiesAboutBarycentre(
  eccentricAnomalyRad: number,
  eccentricity: number,
  starMassSolar: number,
  companionMassSolar: number,
): { readonly star: PlanePoint; readonly companion: PlanePoint } {
  requirePositive('star mass (solar masses)', starMassSolar);
  requireNotNegative('companion mass (solar masses)', companionMassSolar);
  const { x, y } = positionInOrbit(eccentricAnomalyRad, eccentricity);
  const starShare = companionMassSolar / (starMassSolar + companionMassSolar);
  const companionShare = starMassSolar / (starMassSolar + companionMassSolar);
  return {
    star: { x: -starShare * x, y: -starShare * y },
    companion: { x: companionShare * x, y: companionShare * y },
  };
}

function requireEllipse(semiMajorAxisAu: number, eccentricity: number): void {
  requirePositive('semi-major axis (au)', semiMajorAxisAu);
  requireEccentricity(eccentricity);
}
