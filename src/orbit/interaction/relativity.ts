/** What general relativity adds to an orbit. */
import { GM_SUN_M3_S2, SECONDS_PER_DAY, SPEED_OF_LIGHT_MPS, TWO_PI } from '../constants.js';
import { requireEccentricity, requirePositive } from '../domain.js';

/**
 * Rate at which periastron advances by general relativity: 3 G M n / (c^2 a (1 - e^2)).
 *
 * @param totalMassSolar - star and companion together
 * @returns radians a day
 * @throws ModelDomainError for a period or mass <= 0 or an e outside [0, 1)
 */
export function relativisticPrecessionRadPerDay(
  periodDays: number,
  eccentricity: number,
  totalMassSolar: number,
): number {
  requirePositive('period (d)', periodDays);
  requireEccentricity(eccentricity);
  requirePositive('total mass (solar)', totalMassSolar);
  const gm = GM_SUN_M3_S2 * totalMassSolar;
  const meanMotion = TWO_PI / (periodDays * SECONDS_PER_DAY);
  const axisM = Math.cbrt(gm / meanMotion ** 2);
  const perSecond =
    (3 * gm * meanMotion) / (SPEED_OF_LIGHT_MPS ** 2 * axisM * (1 - eccentricity) * (1 + eccentricity));
  return perSecond * SECONDS_PER_DAY;
}
