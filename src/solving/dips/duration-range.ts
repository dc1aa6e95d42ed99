/** How long a transit may last: central crossings of a circular orbit about stars of a range of densities. */
import { GRAVITATIONAL_CONSTANT, SECONDS_PER_DAY } from '../../orbit/constants.js';

/** g/cm3: from evolved stars to the smallest dwarfs. */
const LEAST_DENSITY_GCC = 0.05;
const LARGEST_DENSITY_GCC = 50;
/** Where the density is known: short for crossings off centre, long for slow (eccentric) ones. */
const SHORTENED = 0.4;
const LENGTHENED = 1.5;
/** No dip is taken to last longer than this share of the period. */
const LARGEST_SHARE = 0.15;

/** Durations searched at a period; they grow with its cube root. */
export interface DurationRange {
  /** Days, at a period of one day. */
  readonly shortestAtOneDay: number;
  readonly longestAtOneDay: number;
  /** No duration below this is searched, days: one spacing of the data. */
  readonly leastDays: number;
  /** One sentence. */
  readonly said: string;
}

/**
 * Duration of a central transit of a small body on a circular orbit, centre to limb to limb: T = P/pi (a/R)^-1 with
 * (a/R)^3 = G rho P^2/(3 pi) [SeagerMallenOrnelas2003].
 *
 * @param densityGcc - mean density of the star, g/cm3, > 0
 * @returns days
 */
export function centralDurationDays(periodDays: number, densityGcc: number): number {
  const seconds = periodDays * SECONDS_PER_DAY;
  const scaledAxis = Math.cbrt(
    (GRAVITATIONAL_CONSTANT * densityGcc * 1000 * seconds * seconds) / (3 * Math.PI),
  );
  return periodDays / (Math.PI * scaledAxis);
}

/**
 * @param starDensityGcc - g/cm3, `null` where it is not known
 * @param leastDays - usual spacing of the data, days
 */
export function durationRange(starDensityGcc: number | null, leastDays: number): DurationRange {
  if (starDensityGcc === null)
    return {
      shortestAtOneDay: centralDurationDays(1, LARGEST_DENSITY_GCC),
      longestAtOneDay: centralDurationDays(1, LEAST_DENSITY_GCC),
      leastDays,
      said: `durations of central transits of stars of ${LEAST_DENSITY_GCC} to ${LARGEST_DENSITY_GCC} g/cm3, at most ${LARGEST_SHARE} of the period`,
    };
  const central = centralDurationDays(1, starDensityGcc);
  return {
    shortestAtOneDay: SHORTENED * central,
    longestAtOneDay: LENGTHENED * central,
    leastDays,
    said: `durations of ${SHORTENED} to ${LENGTHENED} times a central transit of a star of ${Number(starDensityGcc.toPrecision(3))} g/cm3, at most ${LARGEST_SHARE} of the period`,
  };
}

export function shortestDurationDays(range: DurationRange, periodDays: number): number {
  const shortest = Math.max(range.shortestAtOneDay * Math.cbrt(periodDays), range.leastDays);
  return Math.min(shortest, 0.5 * LARGEST_SHARE * periodDays);
}

export function longestDurationDays(range: DurationRange, periodDays: number): number {
  const longest = Math.max(range.longestAtOneDay * Math.cbrt(periodDays), range.leastDays);
  return Math.min(longest, LARGEST_SHARE * periodDays);
}
