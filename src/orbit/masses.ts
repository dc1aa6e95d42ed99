/**
 * Masses and sizes of the two orbits, exact for any mass ratio.
 *
 * K = (2 pi G / P)^(1/3) m sin i (M + m)^(-2/3) (1 - e^2)^(-1/2) follows from Kepler's third law for the relative orbit
 * and from the barycentre; nothing here assumes that the companion is much lighter than the star.
 */
import { ConvergenceError, ModelDomainError } from '../errors.js';
import { AU_M, GM_SUN_M3_S2, SECONDS_PER_DAY, TWO_PI } from './constants.js';
import { requireEccentricity, requireNotNegative, requirePositive } from './domain.js';

/** What the velocities alone say about the star's orbit. */
export interface VelocityAmplitude {
  readonly periodDays: number;
  readonly semiAmplitudeMps: number;
  /** 0 <= e < 1 */
  readonly eccentricity: number;
}

/**
 * Mass function (m sin i)^3 / (M + m)^2 = P K^3 (1 - e^2)^(3/2) / (2 pi G), in nominal solar masses.
 *
 * @throws ModelDomainError unless P > 0, K >= 0 (finite), 0 <= e < 1
 */
export function massFunctionSolar(amplitude: VelocityAmplitude): number {
  const { periodDays, semiAmplitudeMps, eccentricity } = amplitude;
  requirePositive('period (d)', periodDays);
  requireNotNegative('semi-amplitude (m/s)', semiAmplitudeMps);
  requireEccentricity(eccentricity);
  const squeeze = Math.sqrt((1 - eccentricity) * (1 + eccentricity));
  const projectedMps = semiAmplitudeMps * squeeze;
  return (periodDays * SECONDS_PER_DAY * projectedMps ** 3) / (TWO_PI * GM_SUN_M3_S2);
}

/**
 * Companion mass, solar masses: the positive root m of (m sin i)^3 = f (M + m)^2.
 *
 * With sin i = 1 this is the minimum mass. It is *not* (m sin i) of a tilted orbit: the root is solved for the sin i given.
 *
 * @throws ModelDomainError unless f >= 0, M > 0 and 0 < sin i <= 1
 * Accuracy: relative 1e-14 after the way to the velocity and back, mass ratios 1e-12 to 1e6; 1e-13 against 40-digit roots
 * as printed (test/orbit/masses.test.ts).
 */
export function companionMassSolar(known: {
  readonly massFunctionSolar: number;
  readonly starMassSolar: number;
  readonly sinInclination: number;
}): number {
  requireNotNegative('mass function (solar masses)', known.massFunctionSolar);
  requirePositive('star mass (solar masses)', known.starMassSolar);
  requireSine(known.sinInclination);
  if (known.massFunctionSolar === 0) return 0;
  const scaled = known.massFunctionSolar / known.starMassSolar / known.sinInclination ** 3;
  return known.starMassSolar * massRatio(scaled);
}

/** The root y > 0 of y^3 = phi (1 + y)^2, phi > 0. */
function massRatio(phi: number): number {
  if (phi > 1e12) return phi + 2; // the next term, 3/phi at most, is below rounding; and phi^3 could overflow
  const c = Math.cbrt(phi);
  // Lies above the root for every phi; the cubic bends upwards from there on, so Newton falls onto the root one-sidedly.
  let ratio = c + (2 / 3) * c * c + phi;
  for (let iteration = 0; iteration < 60; iteration++) {
    const total = 1 + ratio;
    const step = (ratio ** 3 - phi * total * total) / (3 * ratio * ratio - 2 * phi * total);
    ratio -= step;
    if (Math.abs(step) <= 4e-16 * ratio) return ratio;
    // Rounding turns the fall into a rise when the root is reached.
    if (step <= 0) return ratio;
  }
  throw new ConvergenceError('mass function: 60 Newton steps did not suffice', { phi, ratio });
}

/**
 * Velocity semi-amplitude of the star, m/s.
 *
 * @throws ModelDomainError unless the star's mass and the period are > 0, the companion's mass >= 0, 0 <= e < 1, 0 < sin i <= 1
 */
export function semiAmplitudeMps(system: {
  readonly starMassSolar: number;
  readonly companionMassSolar: number;
  readonly periodDays: number;
  readonly eccentricity: number;
  readonly sinInclination: number;
}): number {
  const {
    starMassSolar,
    companionMassSolar: companionSolar,
    periodDays,
    eccentricity,
    sinInclination,
  } = system;
  requirePositive('star mass (solar masses)', starMassSolar);
  requireNotNegative('companion mass (solar masses)', companionSolar);
  requirePositive('period (d)', periodDays);
  requireEccentricity(eccentricity);
  requireSine(sinInclination);
  const totalSolar = starMassSolar + companionSolar;
  const relativeMps = Math.cbrt((TWO_PI * GM_SUN_M3_S2 * totalSolar) / (periodDays * SECONDS_PER_DAY));
  const squeeze = Math.sqrt((1 - eccentricity) * (1 + eccentricity));
  return (relativeMps * (companionSolar / totalSolar) * sinInclination) / squeeze;
}

/**
 * Semi-major axis of the relative orbit, au: a^3 = G (M + m) P^2 / (4 pi^2).
 *
 * @param totalMassSolar - star and companion together, > 0
 * @param periodDays - > 0
 */
export function relativeSemiMajorAxisAu(totalMassSolar: number, periodDays: number): number {
  requirePositive('total mass (solar masses)', totalMassSolar);
  requirePositive('period (d)', periodDays);
  const radiansPerSecond = TWO_PI / (periodDays * SECONDS_PER_DAY);
  return Math.cbrt((GM_SUN_M3_S2 * totalMassSolar) / radiansPerSecond ** 2) / AU_M;
}

/**
 * Projected semi-major axis of the star's own orbit about the barycentre, a_star sin i = K P sqrt(1 - e^2) / (2 pi), au.
 *
 * @throws ModelDomainError as `massFunctionSolar`
 */
export function starOrbitSemiMajorAxisAu(
  semiAmplitudeOfStarMps: number,
  periodDays: number,
  eccentricity: number,
): number {
  requireNotNegative('semi-amplitude (m/s)', semiAmplitudeOfStarMps);
  requirePositive('period (d)', periodDays);
  requireEccentricity(eccentricity);
  const squeeze = Math.sqrt((1 - eccentricity) * (1 + eccentricity));
  return (semiAmplitudeOfStarMps * periodDays * SECONDS_PER_DAY * squeeze) / TWO_PI / AU_M;
}

function requireSine(sinInclination: number): void {
  if (!(sinInclination > 0 && sinInclination <= 1)) {
    throw new ModelDomainError('sine of the inclination', sinInclination, '(0, 1]');
  }
}
