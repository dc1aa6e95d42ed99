/**
 * Sampling coordinates of one companion: unbounded and smooth, with the prior's density carried along. They map to the
 * orbit coordinates of the velocity term (ln P, mean longitude, e cos omega, e sin omega, K).
 */
import type { RelativeElements } from '../parametrisations/parametrisation.js';
import type { PriorScales } from './priors.js';

export interface CompanionMap {
  readonly size: number;
  /**
   * @param position - sampling vector, this companion's part starting at `offset`
   * @param coordinates - (5), overwritten
   * @param jacobian - row-major (5, size), overwritten
   * @param priorGradient - (size), overwritten: gradient of the returned ln prior density
   * @returns ln prior density in the sampling coordinates, up to the constant that `logNormalisation` holds; -Infinity outside
   */
  toCoordinates(
    position: Float64Array,
    offset: number,
    coordinates: Float64Array,
    jacobian: Float64Array,
    priorGradient: Float64Array,
  ): number;
  /** ln of the integral of the unnormalised prior; subtracted where evidences are compared. */
  readonly logNormalisation: number;
  fromElements(elements: RelativeElements, position: Float64Array, offset: number): void;
}

/** ln of the prior's integral over ln P, and over the mean longitude. */
function logPeriodRange(scales: PriorScales): number {
  return Math.log(Math.log(scales.longestPeriodDays / scales.shortestPeriodDays));
}

function logAmplitudeRange(scales: PriorScales): number {
  return Math.log(Math.log1p(scales.largestAmplitudeMps / scales.amplitudeScaleMps));
}

/**
 * ln of the integral over ln P of the eccentricities that do not touch the star, 1 - r P^(-2/3) where that is positive:
 * what takes the place of the range of ln P when e is uniform up to that limit.
 */
function logAllowedRange(scales: PriorScales): number {
  const high = Math.log(scales.longestPeriodDays);
  // Below this period even a circular orbit lies inside the star.
  const low = Math.max(Math.log(scales.shortestPeriodDays), 1.5 * Math.log(scales.starRadiusAtOneDay));
  const lost = 1.5 * scales.starRadiusAtOneDay * (Math.exp((-2 / 3) * low) - Math.exp((-2 / 3) * high));
  return Math.log(high - low - lost);
}

/** Largest eccentricity at a period: the periastron stays outside the star. */
function eccentricityLimit(logPeriod: number, scales: PriorScales): number {
  return 1 - scales.starRadiusAtOneDay * Math.exp((-2 / 3) * logPeriod);
}

/**
 * An eccentric orbit as ln P, mean longitude, (x, y), ln K. The pair (x, y) covers the unit disc of
 * (sqrt(e) cos omega, sqrt(e) sin omega) through r = s/sqrt(1 + s^2); uniform on the disc is uniform in e and omega.
 */
export function eccentricMap(scales: PriorScales): CompanionMap {
  const low = Math.log(scales.shortestPeriodDays);
  const high = Math.log(scales.longestPeriodDays);
  const logLargest = Math.log(scales.largestAmplitudeMps);
  return {
    size: 5,
    // Disc of area pi, longitude over 2 pi.
    logNormalisation:
      logAllowedRange(scales) + Math.log(2 * Math.PI) + Math.log(Math.PI) + logAmplitudeRange(scales),
    toCoordinates(position, offset, coordinates, jacobian, priorGradient): number {
      const logPeriod = position[offset]!;
      const x = position[offset + 2]!;
      const y = position[offset + 3]!;
      const logAmplitude = position[offset + 4]!;
      if (!(logPeriod > low && logPeriod < high) || !(logAmplitude < logLargest)) return -Infinity;
      const s2 = x * x + y * y;
      const s = Math.sqrt(s2);
      const q = 1 / (1 + s2);
      const e = s2 * q;
      if (!(e < eccentricityLimit(logPeriod, scales))) return -Infinity;
      const amplitude = Math.exp(logAmplitude);
      coordinates[0] = logPeriod;
      coordinates[1] = position[offset + 1]!;
      coordinates[2] = x * s * q;
      coordinates[3] = y * s * q;
      coordinates[4] = amplitude;
      jacobian.fill(0);
      jacobian[0] = 1;
      jacobian[6] = 1;
      const unit = s > 0 ? 1 / s : 0;
      const common = (unit - 2 * s * q) * q;
      jacobian[12] = s * q + x * x * common;
      jacobian[13] = x * y * common;
      jacobian[17] = x * y * common;
      jacobian[18] = s * q + y * y * common;
      jacobian[24] = amplitude;
      // Area of the disc per area of the plane: (1 + s^2)^-2.
      priorGradient[0] = 0;
      priorGradient[1] = 0;
      priorGradient[2] = -4 * x * q;
      priorGradient[3] = -4 * y * q;
      priorGradient[4] = scales.amplitudeScaleMps / (amplitude + scales.amplitudeScaleMps);
      return 2 * Math.log(q) + logAmplitude - Math.log(amplitude + scales.amplitudeScaleMps);
    },
    fromElements(elements, position, offset): void {
      const e = Math.min(Math.max(elements.eccentricity, 1e-6), 0.999);
      const omega = elements.argPeriastronStarRad;
      const s = Math.sqrt(e / (1 - e));
      position[offset] = Math.log(elements.periodDays);
      position[offset + 1] = omega - (2 * Math.PI * elements.timePeriastronDays) / elements.periodDays;
      position[offset + 2] = s * Math.cos(omega);
      position[offset + 3] = s * Math.sin(omega);
      position[offset + 4] = Math.log(elements.semiAmplitudeMps);
    },
  };
}

/** A circular orbit as ln P, mean longitude, ln K. */
export function circularMap(scales: PriorScales): CompanionMap {
  const low = Math.log(scales.shortestPeriodDays);
  const high = Math.log(scales.longestPeriodDays);
  const logLargest = Math.log(scales.largestAmplitudeMps);
  return {
    size: 3,
    logNormalisation: logPeriodRange(scales) + Math.log(2 * Math.PI) + logAmplitudeRange(scales),
    toCoordinates(position, offset, coordinates, jacobian, priorGradient): number {
      const logPeriod = position[offset]!;
      const logAmplitude = position[offset + 2]!;
      if (!(logPeriod > low && logPeriod < high) || !(logAmplitude < logLargest)) return -Infinity;
      const amplitude = Math.exp(logAmplitude);
      coordinates[0] = logPeriod;
      coordinates[1] = position[offset + 1]!;
      coordinates[2] = 0;
      coordinates[3] = 0;
      coordinates[4] = amplitude;
      jacobian.fill(0);
      jacobian[0] = 1;
      jacobian[4] = 1;
      jacobian[14] = amplitude;
      priorGradient[0] = 0;
      priorGradient[1] = 0;
      priorGradient[2] = scales.amplitudeScaleMps / (amplitude + scales.amplitudeScaleMps);
      return logAmplitude - Math.log(amplitude + scales.amplitudeScaleMps);
    },
    fromElements(elements, position, offset): void {
      position[offset] = Math.log(elements.periodDays);
      position[offset + 1] =
        elements.argPeriastronStarRad - (2 * Math.PI * elements.timePeriastronDays) / elements.periodDays;
      position[offset + 2] = Math.log(elements.semiAmplitudeMps);
    },
  };
}
