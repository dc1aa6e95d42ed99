/** Orbit and companion from what is measured directly. */
import { ModelDomainError } from '../errors.js';
import { SECONDS_PER_DAY, TWO_PI } from './constants.js';
import { requireEccentricity, requireNotNegative, requirePositive } from './domain.js';

/** A transit as four numbers. */
export interface MeasuredShape {
  /** Loss of light without limb darkening, 0 < depth < 1: the radius ratio squared. */
  readonly depth: number;
  readonly periodDays: number;
  /** First to last contact. */
  readonly totalDays: number;
  /** Second to third contact; 0 where the transit is just grazing. */
  readonly fullDays: number;
}

/** What follows from it for a circular orbit. */
export interface ShapeSolution {
  readonly radiusRatio: number;
  readonly impactParameter: number;
  readonly scaledSemiMajorAxis: number;
  readonly inclinationRad: number;
}

/**
 * Inversion of a transit's shape for a circular orbit [SeagerMallenOrnelas2003]:
 * b^2 = [(1 - k)^2 - s (1 + k)^2] / (1 - s), s = sin^2(pi T23/P) / sin^2(pi T14/P); (a/R)^2 = [(1 + k)^2 - b^2] / sin^2(pi T14/P) + b^2.
 *
 * @throws ModelDomainError for durations that no circular orbit has: T23 >= T14, T14 >= P/2, or a full phase longer than at b = 0
 */
export function solveTransitShape(shape: MeasuredShape): ShapeSolution {
  const { depth, periodDays, totalDays, fullDays } = shape;
  requirePositive('period (d)', periodDays);
  if (!(depth > 0 && depth < 1)) throw new ModelDomainError('depth', depth, '(0, 1)');
  if (!(totalDays > 0 && totalDays < periodDays / 2))
    throw new ModelDomainError('total duration (d)', totalDays, `(0, ${periodDays / 2}), half a period`);
  if (!(fullDays >= 0 && fullDays < totalDays))
    throw new ModelDomainError('full duration (d)', fullDays, `[0, ${totalDays}), the total duration`);
  const k = Math.sqrt(depth);
  const total2 = Math.sin((Math.PI * totalDays) / periodDays) ** 2;
  const full2 = Math.sin((Math.PI * fullDays) / periodDays) ** 2;
  const b2 = ((1 - k) ** 2 * total2 - (1 + k) ** 2 * full2) / (total2 - full2);
  if (!(b2 >= -1e-9)) {
    const longest = (periodDays / Math.PI) * Math.asin(((1 - k) / (1 + k)) * Math.sqrt(total2));
    throw new ModelDomainError(
      'full duration (d)',
      fullDays,
      `[0, ${longest}]: longer than a central transit of this depth and total duration allows`,
    );
  }
  const impactParameter = Math.sqrt(Math.max(b2, 0));
  const scaledSemiMajorAxis = Math.sqrt(
    ((1 + k) ** 2 - impactParameter * impactParameter) / total2 + impactParameter * impactParameter,
  );
  return {
    radiusRatio: k,
    impactParameter,
    scaledSemiMajorAxis,
    inclinationRad: Math.acos(impactParameter / scaledSemiMajorAxis),
  };
}

/**
 * Surface gravity of the companion from observables alone, m/s^2 [Southworth2007]:
 * (2 pi / P) sqrt(1 - e^2) K / [(R_companion / a)^2 sin i], independent of the star's mass and radius.
 *
 * @param seen.companionRadiusOverAxis - R_companion / a = k / (a/R_star)
 */
export function surfaceGravityMps2(seen: {
  readonly periodDays: number;
  readonly eccentricity: number;
  readonly semiAmplitudeMps: number;
  readonly companionRadiusOverAxis: number;
  readonly sinInclination: number;
}): number {
  requirePositive('period (d)', seen.periodDays);
  requireEccentricity(seen.eccentricity);
  requireNotNegative('semi-amplitude (m/s)', seen.semiAmplitudeMps);
  requirePositive('companion radius / a', seen.companionRadiusOverAxis);
  if (!(seen.sinInclination > 0 && seen.sinInclination <= 1))
    throw new ModelDomainError('sine of the inclination', seen.sinInclination, '(0, 1]');
  const squeeze = Math.sqrt((1 - seen.eccentricity) * (1 + seen.eccentricity));
  const ratePerSecond = TWO_PI / (seen.periodDays * SECONDS_PER_DAY);
  return (
    (ratePerSecond * squeeze * seen.semiAmplitudeMps) /
    (seen.companionRadiusOverAxis ** 2 * seen.sinInclination)
  );
}
