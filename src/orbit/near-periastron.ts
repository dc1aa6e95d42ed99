/**
 * Kepler's equation close to periastron of a nearly parabolic orbit, where E - e sin E is a difference of nearly equal
 * numbers. Written as (1 - e) E + e (E - sin E) = M, both terms positive, nothing cancels and E keeps its digits.
 */

/** Below this eccentric anomaly, radians, `arcMinusSine` sums its series; above, plain subtraction is as good. */
const SERIES_LIMIT_RAD = 0.75;

/** Largest eccentric anomaly, radians, for which the formulas of this file were made and tested. */
export const NEAR_PERIASTRON_RAD = 0.6;

/**
 * E - sin E without loss of digits for small E.
 *
 * @param eccentricAnomalyRad - radians, >= 0
 * Accuracy: relative 5e-16 below 0.75 rad, where 10 terms leave 1e-18; above, 2e-16 / (E - sin E).
 */
export function arcMinusSine(eccentricAnomalyRad: number): number {
  if (eccentricAnomalyRad >= SERIES_LIMIT_RAD) return eccentricAnomalyRad - Math.sin(eccentricAnomalyRad);
  const w = eccentricAnomalyRad * eccentricAnomalyRad;
  // E^3/6 (1 - w/20 (1 - w/42 (1 - w/72 (1 - w/110 (1 - w/156 (1 - w/210 (1 - w/272)))))))
  let sum = 1 - w * (1 / 272);
  sum = 1 - w * (1 / 210) * sum;
  sum = 1 - w * (1 / 156) * sum;
  sum = 1 - w * (1 / 110) * sum;
  sum = 1 - w * (1 / 72) * sum;
  sum = 1 - w * (1 / 42) * sum;
  sum = 1 - w * (1 / 20) * sum;
  return eccentricAnomalyRad * w * (1 / 6) * sum;
}

/**
 * Start for small E: the root of the cubic (1 - e) E + e E^3 / 6 = M, in closed form.
 *
 * @param meanAnomalyRad - radians, 0 <= M <= pi
 * @param eccentricity - 0 < e < 1
 * @returns radians; too small by a fraction of about E^2 / 60, so 0.5 % at E = 0.5
 */
export function cubicStart(meanAnomalyRad: number, eccentricity: number): number {
  const a = (2 * (1 - eccentricity)) / eccentricity;
  const b = (3 * meanAnomalyRad) / eccentricity;
  if (b === 0) return 0;
  const z = Math.cbrt(b + Math.sqrt(b * b + a * a * a));
  const u = a / z;
  // The textbook z - a/z loses all digits for tiny M; this form has positive terms only.
  return (2 * b) / (z * z + a + u * u);
}

/**
 * Sine and cosine of E near periastron, without a trigonometric function. Three corrections of the cubic start: a series
 * of third order, Newton, and the small rotation that Newton's step is.
 *
 * @param meanAnomalyRad - signed, radians; |E| must not exceed `NEAR_PERIASTRON_RAD`
 * @param eccentricity - 0 < e < 1
 * @param sinE, cosE - receive the results at `index`
 *
 * Accuracy: sin E to 2 ulps, cos E to 1 (161 values with 80 digits in test/reference/kepler, e up to 1 - 2^-53, M from 1e-300).
 */
export function solveNearPeriastron(
  meanAnomalyRad: number,
  eccentricity: number,
  sinE: Float64Array,
  cosE: Float64Array,
  index: number,
): void {
  const mean = Math.abs(meanAnomalyRad);
  const complement = 1 - eccentricity;
  let anomaly = cubicStart(mean, eccentricity);

  let lag = arcMinusSine(anomaly);
  let dip = versine(anomaly);
  let slope = complement + eccentricity * dip;
  const step = (complement * anomaly + eccentricity * lag - mean) / slope;
  const a2 = (0.5 * eccentricity * (anomaly - lag)) / slope;
  const a3 = (eccentricity * (1 - dip)) / (6 * slope);
  anomaly -= step * (1 + step * (a2 + step * (2 * a2 * a2 - a3)));

  lag = arcMinusSine(anomaly);
  dip = versine(anomaly);
  slope = complement + eccentricity * dip;
  const last = (complement * anomaly + eccentricity * lag - mean) / slope;
  const sine = anomaly - (lag + (1 - dip) * last);
  cosE[index] = 1 - (dip - (anomaly - lag) * last);
  sinE[index] = meanAnomalyRad < 0 ? -sine : sine;
}

/** 1 - cos E without loss of digits, by its series; 0 <= E <= `NEAR_PERIASTRON_RAD`. */
function versine(eccentricAnomalyRad: number): number {
  const w = eccentricAnomalyRad * eccentricAnomalyRad;
  let sum = 1 - w * (1 / 240);
  sum = 1 - w * (1 / 182) * sum;
  sum = 1 - w * (1 / 132) * sum;
  sum = 1 - w * (1 / 90) * sum;
  sum = 1 - w * (1 / 56) * sum;
  sum = 1 - w * (1 / 30) * sum;
  sum = 1 - w * (1 / 12) * sum;
  return 0.5 * w * sum;
}
