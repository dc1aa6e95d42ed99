/**
 * Time scales of the dates in a table: reading the name in a header, how wrong a date may be, and the one place where
 * dates become BJD_TDB.
 */
import { TIME_SCALES, type BjdTdb, type TimeScale } from './types.js';

const LIGHT_TIME_OF_AU_S = 499.005; // au / c, IAU 2012 Resolution B2 and the SI speed of light
const SUN_TO_BARYCENTRE_S = 4; // bound of HJD against BJD given by Eastman et al. 2010 (cited from memory)
const TDB_MINUS_UTC_S = 69.184; // 37 leap seconds + 32.184 s, from 2017 on

/** A finite number of days, declared to be BJD in TDB. @throws RangeError if not finite (a defect of the caller) */
export function asBjdTdb(days: number): BjdTdb {
  if (!Number.isFinite(days)) throw new RangeError(`a date must be finite, got ${days}`);
  return days as BjdTdb;
}

/**
 * Dates as BJD_TDB, in a fresh array. So far every scale is taken as if it were BJD_TDB (`timeScaleError` says how wrong that may be,
 * and the table carries a notice); a conversion that knows target and site belongs here and nowhere else.
 */
export function toBjdTdb(_scale: TimeScale, julianDates: Float64Array): Float64Array {
  return Float64Array.from(julianDates);
}

/** How far a date in `scale`, taken as BJD_TDB, may be off, and a sentence that says why. */
export function timeScaleError(scale: TimeScale): {
  readonly maximumSeconds: number;
  readonly sentence: string;
} {
  const earth =
    'the light travel time across the Earth’s orbit, up to 8.3 min depending on target and season';
  const sun = 'the Sun’s motion about the barycentre, up to 4 s';
  const clock = 'UTC is up to 69 s behind TDB';
  switch (scale) {
    case 'BJD_TDB':
      return { maximumSeconds: 0, sentence: 'dates are BJD_TDB: exact' };
    case 'BJD_UTC':
      return { maximumSeconds: TDB_MINUS_UTC_S, sentence: `dates are BJD_UTC, taken as BJD_TDB: ${clock}` };
    case 'BJD':
      return {
        maximumSeconds: TDB_MINUS_UTC_S,
        sentence: `dates are BJD without TDB or UTC, taken as BJD_TDB: if they are UTC, ${clock}`,
      };
    case 'HJD_TT':
      return { maximumSeconds: SUN_TO_BARYCENTRE_S, sentence: `dates are HJD_TT, taken as BJD_TDB: ${sun}` };
    case 'HJD_UTC':
      return {
        maximumSeconds: SUN_TO_BARYCENTRE_S + TDB_MINUS_UTC_S,
        sentence: `dates are HJD_UTC, taken as BJD_TDB: ${clock}, and ${sun}`,
      };
    case 'HJD':
      return {
        maximumSeconds: SUN_TO_BARYCENTRE_S + TDB_MINUS_UTC_S,
        sentence: `dates are HJD without TT or UTC, taken as BJD_TDB: ${sun}; if they are UTC, ${clock}`,
      };
    case 'JD_TT':
      return { maximumSeconds: LIGHT_TIME_OF_AU_S, sentence: `dates are JD_TT, taken as BJD_TDB: ${earth}` };
    case 'JD_UTC':
      return {
        maximumSeconds: LIGHT_TIME_OF_AU_S + TDB_MINUS_UTC_S,
        sentence: `dates are JD_UTC, taken as BJD_TDB: ${earth}; ${clock}`,
      };
    case 'JD':
      return {
        maximumSeconds: LIGHT_TIME_OF_AU_S + TDB_MINUS_UTC_S,
        sentence: `dates are JD (not barycentric, as far as the table says), taken as BJD_TDB: ${earth}; if they are UTC, ${clock}`,
      };
    case 'unknown':
      return {
        maximumSeconds: LIGHT_TIME_OF_AU_S + TDB_MINUS_UTC_S,
        sentence: `the table does not name its time scale; dates are taken as BJD_TDB: if they are plain JD, ${earth}; if they are UTC, ${clock}`,
      };
  }
}

/** The scale of which a date may be furthest off. */
export function worstTimeScale(scales: readonly TimeScale[]): TimeScale {
  const order = TIME_SCALES as readonly TimeScale[];
  return scales.reduce<TimeScale>((worst, scale) => {
    const difference = timeScaleError(scale).maximumSeconds - timeScaleError(worst).maximumSeconds;
    return difference > 0 || (difference === 0 && order.indexOf(scale) > order.indexOf(worst))
      ? scale
      : worst;
  }, 'BJD_TDB');
}
