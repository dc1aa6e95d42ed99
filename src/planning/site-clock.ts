/** The clock on the observatory's wall (UT) and the barycentric time in the tables, to the seconds that planning needs. */
import { AU_M, SECONDS_PER_DAY, SPEED_OF_LIGHT_MPS } from '../orbit/constants.js';
import { separationDeg, sunPosition } from './sky.js';
import type { SkyDirection } from './sky.js';

/** TDB - UTC since the leap second of 2017 (37 s + 32.184 s); 5 s less in 2000. */
const TDB_MINUS_UTC_SECONDS = 69.184;
const LIGHT_TIME_PER_AU_SECONDS = AU_M / SPEED_OF_LIGHT_MPS;

/**
 * What to add to a Julian date in UTC to get BJD_TDB for a target: the light's way across the Earth's orbit (up to
 * 8.3 min) and the difference of the clocks. Good to 10 s after 2000, since
 * the Sun stands in for the barycentre (4 s); worst 5.8 s against astropy on test/planning/reference.
 *
 * @param target - of date or J2000: the difference does not matter here
 * @returns days
 */
export function barycentricMinusUtcDays(julianDateUt: number, target: SkyDirection): number {
  const sun = sunPosition(julianDateUt);
  const towardsTarget = -sun.distanceAu * Math.cos((separationDeg(sun, target) * Math.PI) / 180);
  return (TDB_MINUS_UTC_SECONDS + towardsTarget * LIGHT_TIME_PER_AU_SECONDS) / SECONDS_PER_DAY;
}
