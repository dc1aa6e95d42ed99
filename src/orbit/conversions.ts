/**
 * Times of the orbit's landmarks from one another.
 *
 * The argument of periastron is that of the star's orbit about the barycentre, so the companion is in front of the star
 * (inferior conjunction, where a transit would be) at true anomaly 90 deg - omega.
 */
import { meanFromTrueAnomaly } from './anomalies.js';
import { normaliseRadians, reduceAngleRad } from './angles.js';
import { TWO_PI } from './constants.js';
import { requireFinite, requirePositive } from './domain.js';

/** The elements that fix where in its orbit the companion is. */
export interface OrbitShape {
  readonly periodDays: number;
  /** 0 <= e < 1 */
  readonly eccentricity: number;
  readonly argPeriastronStarRad: number;
}

/**
 * Time of the inferior conjunction that is nearest to the given periastron passage (within half a period), BJD_TDB.
 *
 * @throws ModelDomainError for a period <= 0, an e outside [0, 1) or a non-finite angle or time
 */
export function inferiorConjunctionFromPeriastron(
  elements: OrbitShape & { readonly timePeriastronBjdTdb: number },
): number {
  requireFinite('time of periastron (BJD)', elements.timePeriastronBjdTdb);
  return elements.timePeriastronBjdTdb + conjunctionDelayDays(elements);
}

/** Time of the periastron passage that is nearest to the given inferior conjunction, BJD_TDB; inverse of the above. */
export function periastronFromInferiorConjunction(
  elements: OrbitShape & { readonly timeInferiorConjunctionBjdTdb: number },
): number {
  requireFinite('time of inferior conjunction (BJD)', elements.timeInferiorConjunctionBjdTdb);
  return elements.timeInferiorConjunctionBjdTdb - conjunctionDelayDays(elements);
}

/** Days from periastron to the nearest inferior conjunction, in [-P/2, P/2]. */
export function conjunctionDelayDays(elements: OrbitShape): number {
  requirePositive('period (d)', elements.periodDays);
  requireFinite('argument of periastron (rad)', elements.argPeriastronStarRad);
  const trueAnomalyRad = reduceAngleRad(Math.PI / 2 - elements.argPeriastronStarRad);
  return (elements.periodDays * meanFromTrueAnomaly(trueAnomalyRad, elements.eccentricity)) / TWO_PI;
}

/**
 * The passage nearest to a reference time, of an event that repeats with the period.
 *
 * @param epoch - any passage, days
 * @param periodDays - > 0
 * @param referenceTime - days, same scale as the epoch
 * @returns epoch + n P with whole n; at most P/2 from the reference time
 */
export function nearestPassage(epoch: number, periodDays: number, referenceTime: number): number {
  requireFinite('epoch (d)', epoch);
  requirePositive('period (d)', periodDays);
  requireFinite('reference time (d)', referenceTime);
  return epoch + Math.round((referenceTime - epoch) / periodDays) * periodDays;
}

/** First passage strictly after a time; arguments as `nearestPassage`. */
export function nextPassage(epoch: number, periodDays: number, afterTime: number): number {
  const near = nearestPassage(epoch, periodDays, afterTime);
  return near > afterTime ? near : near + periodDays;
}

/** Mean anomaly in [0, 2 pi) at a time, radians. */
export function meanAnomalyAt(
  timeBjdTdb: number,
  orbit: { readonly periodDays: number; readonly timePeriastronBjdTdb: number },
): number {
  requirePositive('period (d)', orbit.periodDays);
  return normaliseRadians((TWO_PI * (timeBjdTdb - orbit.timePeriastronBjdTdb)) / orbit.periodDays);
}

/**
 * Mean longitude (mean anomaly + argument of periastron of the star's orbit) at an epoch, radians in [0, 2 pi).
 * Unlike the time of periastron it stays well defined as e goes to 0.
 */
export function meanLongitudeAtEpoch(
  elements: OrbitShape & { readonly timePeriastronBjdTdb: number },
  epochBjdTdb: number,
): number {
  return normaliseRadians(meanAnomalyAt(epochBjdTdb, elements) + elements.argPeriastronStarRad);
}

/** Time of the periastron passage nearest to the epoch, from the mean longitude there (radians); inverse of the above. */
export function periastronFromMeanLongitude(
  elements: OrbitShape & { readonly meanLongitudeRad: number },
  epochBjdTdb: number,
): number {
  requirePositive('period (d)', elements.periodDays);
  const meanAnomalyRad = reduceAngleRad(elements.meanLongitudeRad - elements.argPeriastronStarRad);
  return epochBjdTdb - (elements.periodDays * meanAnomalyRad) / TWO_PI;
}
