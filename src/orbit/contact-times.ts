/** Exact contact times of a transit or an occultation, by root finding on the separation of the centres. */
import { ModelDomainError } from '../errors.js';
import { EventContacts } from './contacts.js';
import { requireNotNegative, requirePositive } from './domain.js';
import { ProjectedOrbit } from './projected-orbit.js';
import { transitImpactParameter, type TiltedOrbit } from './transit-geometry.js';

/** Days from the inferior conjunction that the event belongs to; null for contacts that do not happen. */
export interface ContactTimes {
  readonly firstDays: number | null;
  readonly secondDays: number | null;
  /** Smallest separation of the centres. */
  readonly middleDays: number;
  readonly thirdDays: number | null;
  readonly fourthDays: number | null;
  /** Stellar radii. */
  readonly leastSeparation: number;
}

/** An orbit and a size, as the contacts need them. */
export interface CrossingOrbit extends TiltedOrbit {
  readonly periodDays: number;
  /** Companion's radius over the star's, >= 0. */
  readonly radiusRatio: number;
  /** R_star / c, days, for the light time across the orbit; 0 ignores it. */
  readonly starRadiusLightDays: number;
}

/**
 * Contacts of the transit at the inferior conjunction at time 0.
 *
 * Accuracy: 1e-13 rad of mean longitude, that is 2e-14 P (test/orbit/transit-geometry.test.ts).
 * @throws ModelDomainError outside the elements' domains, and when the bodies touch at periastron
 */
export function transitContacts(crossing: CrossingOrbit): ContactTimes {
  return contactsOf(crossing, new EventContacts(true));
}

/** Contacts of the occultation that follows the inferior conjunction at time 0. */
export function occultationContacts(crossing: CrossingOrbit): ContactTimes {
  return contactsOf(crossing, new EventContacts(false));
}

function contactsOf(crossing: CrossingOrbit, contacts: EventContacts): ContactTimes {
  const { eccentricity, scaledSemiMajorAxis, radiusRatio } = crossing;
  requirePositive('period (d)', crossing.periodDays);
  requireNotNegative('radius ratio', radiusRatio);
  requireNotNegative('R_star / c (d)', crossing.starRadiusLightDays);
  const impactParameter = transitImpactParameter(crossing);
  const periastron = scaledSemiMajorAxis * (1 - eccentricity);
  if (!(periastron > 1 + radiusRatio))
    throw new ModelDomainError(
      'periastron distance (stellar radii)',
      periastron,
      `(${1 + radiusRatio}, inf): the bodies would touch`,
    );
  const orbit = new ProjectedOrbit();
  const prepared = orbit.prepare(
    Math.log(crossing.periodDays),
    0,
    eccentricity * Math.cos(crossing.argPeriastronStarRad),
    eccentricity * Math.sin(crossing.argPeriastronStarRad),
    impactParameter,
    Math.log(scaledSemiMajorAxis),
    crossing.starRadiusLightDays,
  );
  if (!prepared)
    throw new ModelDomainError(
      'inclination (rad)',
      crossing.inclinationRad,
      '(0, pi): seen face-on, nothing is crossed',
    );
  contacts.find(orbit, radiusRatio);
  const conjunctionRad = orbit.observedLongitude(orbit.longitudeAtReach(0, true));
  const days = (longitudeRad: number): number => (longitudeRad - conjunctionRad) / orbit.rate;
  const daysOrNull = (longitudeRad: number): number | null =>
    Number.isNaN(longitudeRad) ? null : days(longitudeRad);
  return {
    firstDays: daysOrNull(contacts.first),
    secondDays: daysOrNull(contacts.second),
    middleDays: days(contacts.middle),
    thirdDays: daysOrNull(contacts.third),
    fourthDays: daysOrNull(contacts.last),
    leastSeparation: contacts.leastSeparation,
  };
}
