/**
 * The numbers of nature and of convention. Masses enter as GM products, which are known (or defined) far better than
 * G and the masses themselves; G is only for densities.
 */

/** Nominal solar mass parameter, m3 s-2. IAU 2015 Resolution B3, exact by definition. */
export const GM_SUN_M3_S2 = 1.3271244e20;
/** Nominal jovian mass parameter, m3 s-2. IAU 2015 Resolution B3, exact by definition. */
export const GM_JUPITER_M3_S2 = 1.2668653e17;
/** Nominal terrestrial mass parameter, m3 s-2. IAU 2015 Resolution B3, exact by definition. */
export const GM_EARTH_M3_S2 = 3.986004e14;

/** Nominal solar radius, m. IAU 2015 Resolution B3. */
export const R_SUN_M = 6.957e8;
/** Nominal equatorial radius of Jupiter, m. IAU 2015 Resolution B3. */
export const R_JUPITER_M = 7.1492e7;
/** Nominal equatorial radius of the Earth, m. IAU 2015 Resolution B3. */
export const R_EARTH_M = 6.3781e6;

/** Nominal solar luminosity, W. IAU 2015 Resolution B3. */
export const L_SUN_W = 3.828e26;
/** Nominal effective temperature of the Sun, K. IAU 2015 Resolution B3. */
export const TEFF_SUN_K = 5772;

/** Astronomical unit, m. IAU 2012 Resolution B2, exact by definition. */
export const AU_M = 149_597_870_700;
/** Speed of light, m/s. SI, exact by definition. */
export const SPEED_OF_LIGHT_MPS = 299_792_458;
/** Newtonian constant, m3 kg-1 s-2. CODATA 2018, standard uncertainty 0.00015e-11: never use it where GM will do. */
export const GRAVITATIONAL_CONSTANT = 6.6743e-11;

/** By definition. */
export const SECONDS_PER_DAY = 86_400;
export const MINUTES_PER_DAY = 1440;
/** Julian year, by definition. */
export const DAYS_PER_YEAR = 365.25;
export const TWO_PI: number = 2 * Math.PI;
/** Radians per degree. */
export const RAD_PER_DEG: number = Math.PI / 180;

/** Ratios of nominal mass parameters and radii (dimensionless). */
export const SOLAR_MASS_IN_JUPITER: number = GM_SUN_M3_S2 / GM_JUPITER_M3_S2;
export const SOLAR_MASS_IN_EARTH: number = GM_SUN_M3_S2 / GM_EARTH_M3_S2;
export const JUPITER_MASS_IN_EARTH: number = GM_JUPITER_M3_S2 / GM_EARTH_M3_S2;
export const SOLAR_RADIUS_IN_JUPITER: number = R_SUN_M / R_JUPITER_M;
export const AU_IN_SOLAR_RADII: number = AU_M / R_SUN_M;
