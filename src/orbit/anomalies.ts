/** The three anomalies into one another. All keep the revolution they are given. */
import { reduceAngleRad } from './angles.js';
import { requireEccentricity, requireFinite } from './domain.js';
import { arcMinusSine } from './near-periastron.js';

/** True anomaly (radians) of an eccentric anomaly (radians, any finite value); 0 <= e < 1. */
export function trueFromEccentricAnomaly(eccentricAnomalyRad: number, eccentricity: number): number {
  return stretchHalfTangent(
    eccentricAnomalyRad,
    Math.sqrt(1 + eccentricity),
    Math.sqrt(1 - eccentricity),
    eccentricity,
  );
}

/** Eccentric anomaly (radians) of a true anomaly (radians, any finite value); 0 <= e < 1. */
export function eccentricFromTrueAnomaly(trueAnomalyRad: number, eccentricity: number): number {
  return stretchHalfTangent(
    trueAnomalyRad,
    Math.sqrt(1 - eccentricity),
    Math.sqrt(1 + eccentricity),
    eccentricity,
  );
}

/**
 * Mean anomaly (radians) of an eccentric anomaly (radians, any finite value); 0 <= e < 1.
 * Nothing cancels near periastron of a nearly parabolic orbit.
 */
export function meanFromEccentricAnomaly(eccentricAnomalyRad: number, eccentricity: number): number {
  requireFinite('eccentric anomaly', eccentricAnomalyRad);
  requireEccentricity(eccentricity);
  const reduced = reduceAngleRad(eccentricAnomalyRad);
  if (reduced !== eccentricAnomalyRad) return eccentricAnomalyRad - eccentricity * Math.sin(reduced);
  const size = Math.abs(reduced);
  const mean = (1 - eccentricity) * size + eccentricity * arcMinusSine(size);
  return reduced < 0 ? -mean : mean;
}

/** Mean anomaly (radians) of a true anomaly (radians, any finite value); 0 <= e < 1. */
export function meanFromTrueAnomaly(trueAnomalyRad: number, eccentricity: number): number {
  return meanFromEccentricAnomaly(eccentricFromTrueAnomaly(trueAnomalyRad, eccentricity), eccentricity);
}

/** The angle whose half has its sine and cosine stretched by the two factors, on the revolution of the one given. */
function stretchHalfTangent(
  angleRad: number,
  alongSine: number,
  alongCosine: number,
  eccentricity: number,
): number {
  requireFinite('anomaly', angleRad);
  requireEccentricity(eccentricity);
  const reduced = reduceAngleRad(angleRad);
  const turned = 2 * Math.atan2(alongSine * Math.sin(reduced / 2), alongCosine * Math.cos(reduced / 2));
  return reduced === angleRad ? turned : angleRad + (turned - reduced);
}
