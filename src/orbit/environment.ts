/** What the companion meets where it is: light, warmth, neighbours, and the chance to see it cross its star. */
import { AU_IN_SOLAR_RADII, TEFF_SUN_K } from './constants.js';
import { requireEccentricity, requireFinite, requireNotNegative, requirePositive } from './domain.js';
import { ModelDomainError } from '../errors.js';

/** Orbit and star as the transit estimates need them. */
export interface TransitGeometry {
  /** Relative orbit. */
  readonly semiMajorAxisAu: number;
  /** 0 <= e < 1 */
  readonly eccentricity: number;
  readonly argPeriastronStarRad: number;
  readonly starRadiusSolar: number;
  /** Companion's radius over the star's; 0 leaves the companion's size out. */
  readonly radiusRatio: number;
}

/**
 * Probability that a randomly tilted orbit shows a transit: the chance that the inclination brings the centres closer
 * than R_star (1 + k) at inferior conjunction, (R_star / a) (1 + k) (1 + e sin omega) / (1 - e^2).
 *
 * @returns 0..1; 1 when the star reaches beyond the orbit there
 */
export function transitProbability(geometry: TransitGeometry): number {
  requireTransitGeometry(geometry);
  return Math.min(1, (1 + geometry.radiusRatio) / distanceAtConjunctionStellarRadii(geometry));
}

/**
 * Duration of a central transit (impact parameter 0), first to last contact, hours:
 * (P / pi) asin[(1 + k) R_star / a] sqrt(1 - e^2) / (1 + e sin omega).
 *
 * Exact for a circular orbit; otherwise the motion is taken as uniform while the disc is crossed, which at e = 0.4 and
 * a = 20 R_star is off by 4e-4 of the duration.
 *
 * @throws ModelDomainError when the disc is not smaller than the orbit (no contacts exist)
 */
export function centralTransitDurationHours(geometry: TransitGeometry, periodDays: number): number {
  requireTransitGeometry(geometry);
  requirePositive('period (d)', periodDays);
  const { eccentricity, argPeriastronStarRad } = geometry;
  const reach =
    ((1 + geometry.radiusRatio) * geometry.starRadiusSolar) / (geometry.semiMajorAxisAu * AU_IN_SOLAR_RADII);
  if (reach > 1)
    throw new ModelDomainError('(R_star + R_companion) / a', reach, '(0, 1]: the orbit lies inside the star');
  const slowness =
    Math.sqrt((1 - eccentricity) * (1 + eccentricity)) / (1 + eccentricity * Math.sin(argPeriastronStarRad));
  return 24 * (periodDays / Math.PI) * Math.asin(reach) * slowness;
}

/** Depth of a central transit over a uniform disc, parts per million of the star's light: k^2, at most all of it. */
export function transitDepthPpm(radiusRatio: number): number {
  requireNotNegative('radius ratio', radiusRatio);
  return 1e6 * Math.min(1, radiusRatio * radiusRatio);
}

/** Distance between the bodies at inferior conjunction in stellar radii: (a / R) (1 - e^2) / (1 + e sin omega). */
function distanceAtConjunctionStellarRadii(geometry: TransitGeometry): number {
  const { eccentricity, argPeriastronStarRad, semiMajorAxisAu, starRadiusSolar } = geometry;
  const scaledAxis = (semiMajorAxisAu * AU_IN_SOLAR_RADII) / starRadiusSolar;
  const squeeze = (1 - eccentricity) * (1 + eccentricity);
  return (scaledAxis * squeeze) / (1 + eccentricity * Math.sin(argPeriastronStarRad));
}

/** Star and orbit as the warmth estimates need them. */
export interface Irradiated {
  readonly effectiveTemperatureK: number;
  readonly starRadiusSolar: number;
  readonly semiMajorAxisAu: number;
  /** 0 <= e < 1 */
  readonly eccentricity: number;
}

/**
 * Equilibrium temperature, K, from the orbit-averaged flux, heat spread over the whole sphere, black in the infrared:
 * T_eff sqrt(R_star / 2a) (1 - A)^(1/4) (1 - e^2)^(-1/8).
 *
 * @param bondAlbedo - A, fraction of the light that is sent back, 0 <= A <= 1
 */
export function equilibriumTemperatureK(star: Irradiated, bondAlbedo: number): number {
  requireIrradiated(star);
  if (!(bondAlbedo >= 0 && bondAlbedo <= 1)) throw new ModelDomainError('Bond albedo', bondAlbedo, '[0, 1]');
  const scaledAxis = (star.semiMajorAxisAu * AU_IN_SOLAR_RADII) / star.starRadiusSolar;
  const average = ((1 - star.eccentricity) * (1 + star.eccentricity)) ** -0.125;
  return star.effectiveTemperatureK * Math.sqrt(0.5 / scaledAxis) * (1 - bondAlbedo) ** 0.25 * average;
}

/**
 * Orbit-averaged irradiation in units of what one nominal solar luminosity gives at 1 au:
 * (R_star / R_sun)^2 (T_eff / 5772 K)^4 (a / au)^-2 (1 - e^2)^(-1/2).
 */
export function irradiationEarth(star: Irradiated): number {
  requireIrradiated(star);
  const luminositySolar = star.starRadiusSolar ** 2 * (star.effectiveTemperatureK / TEFF_SUN_K) ** 4;
  const average = Math.sqrt((1 - star.eccentricity) * (1 + star.eccentricity));
  return luminositySolar / star.semiMajorAxisAu ** 2 / average;
}

/** Hill radius at periastron, au: a (1 - e) (m / 3M)^(1/3). */
export function hillRadiusAu(
  semiMajorAxisAu: number,
  eccentricity: number,
  companionMassSolar: number,
  starMassSolar: number,
): number {
  requirePositive('semi-major axis (au)', semiMajorAxisAu);
  requireEccentricity(eccentricity);
  requireNotNegative('companion mass (solar masses)', companionMassSolar);
  requirePositive('star mass (solar masses)', starMassSolar);
  return semiMajorAxisAu * (1 - eccentricity) * Math.cbrt(companionMassSolar / (3 * starMassSolar));
}

/** One of two neighbours. */
export interface Neighbour {
  readonly semiMajorAxisAu: number;
  readonly massSolar: number;
}

/**
 * Separation of two neighbours' orbits in mutual Hill radii:
 * |a2 - a1| / { [(m1 + m2) / 3M]^(1/3) (a1 + a2) / 2 }. Two circular orbits closer than 2 sqrt(3) are not safe from meeting.
 */
export function mutualHillSpacing(first: Neighbour, second: Neighbour, starMassSolar: number): number {
  requirePositive('semi-major axis (au)', first.semiMajorAxisAu);
  requirePositive('semi-major axis (au)', second.semiMajorAxisAu);
  requireNotNegative('companion mass (solar masses)', first.massSolar);
  requireNotNegative('companion mass (solar masses)', second.massSolar);
  requirePositive('sum of the companion masses (solar masses)', first.massSolar + second.massSolar);
  requirePositive('star mass (solar masses)', starMassSolar);
  const meanAxisAu = (first.semiMajorAxisAu + second.semiMajorAxisAu) / 2;
  const mutualRadiusAu = meanAxisAu * Math.cbrt((first.massSolar + second.massSolar) / (3 * starMassSolar));
  return Math.abs(second.semiMajorAxisAu - first.semiMajorAxisAu) / mutualRadiusAu;
}

/**
 * Semi-major axis of the star's orbit on the sky, microarcseconds: one au at one parsec is one arcsecond.
 *
 * @param starSemiMajorAxisAu - of the star about the barycentre; with a_star sin i the result is a minimum
 */
export function astrometricSignatureMicroarcsec(starSemiMajorAxisAu: number, distanceParsec: number): number {
  requireNotNegative("star's semi-major axis (au)", starSemiMajorAxisAu);
  requirePositive('distance (pc)', distanceParsec);
  return (1e6 * starSemiMajorAxisAu) / distanceParsec;
}

/**
 * The ratio of small whole numbers that two periods are close to, as `2:1` (longer first), or `null`.
 *
 * @param tolerance - largest |ratio / (p/q) - 1|, default 0.01
 * @param largest - largest p and q, default 5
 */
export function nearPeriodRatio(
  firstPeriodDays: number,
  secondPeriodDays: number,
  tolerance = 0.01,
  largest = 5,
): string | null {
  requirePositive('period (d)', firstPeriodDays);
  requirePositive('period (d)', secondPeriodDays);
  const ratio = Math.max(firstPeriodDays, secondPeriodDays) / Math.min(firstPeriodDays, secondPeriodDays);
  let best: string | null = null;
  let bestMiss = tolerance;
  // Denominators ascend and only a closer ratio replaces one found, so 2:1 is never reported as 4:2.
  for (let q = 1; q <= largest; q++) {
    for (let p = q; p <= largest; p++) {
      const miss = Math.abs((ratio * q) / p - 1);
      if (miss < bestMiss || (miss === bestMiss && best === null)) {
        bestMiss = miss;
        best = `${p}:${q}`;
      }
    }
  }
  return best;
}

function requireTransitGeometry(geometry: TransitGeometry): void {
  requirePositive('semi-major axis (au)', geometry.semiMajorAxisAu);
  requirePositive('star radius (solar radii)', geometry.starRadiusSolar);
  requireEccentricity(geometry.eccentricity);
  requireFinite('argument of periastron (rad)', geometry.argPeriastronStarRad);
  requireNotNegative('radius ratio', geometry.radiusRatio);
}

function requireIrradiated(star: Irradiated): void {
  requirePositive('effective temperature (K)', star.effectiveTemperatureK);
  requirePositive('star radius (solar radii)', star.starRadiusSolar);
  requirePositive('semi-major axis (au)', star.semiMajorAxisAu);
  requireEccentricity(star.eccentricity);
}
