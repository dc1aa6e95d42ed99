/** The mean longitude at conjunction, regular at e = 0. */

/** Below this eccentricity the first order of the series is exact to rounding. */
const SERIES_BELOW = 1e-8;

/**
 * Mean longitude M + omega at which the companion stands in front of the star (inferior) or behind it (superior), with its
 * partial derivatives by k = e cos omega and h = e sin omega (omega of the star's orbit).
 *
 * @param side - +1 inferior conjunction (true anomaly 90 deg - omega), -1 superior (-90 deg - omega)
 * @param out - (3), overwritten: mean longitude (rad), d/dk, d/dh
 * @returns false for e >= 1
 *
 * At e = 0 the longitude is side * 90 deg, with derivatives (-2 side, 0). [own derivation; tested against difference quotients]
 */
export function conjunctionLongitude(k: number, h: number, side: 1 | -1, out: Float64Array): boolean {
  const e2 = k * k + h * h;
  if (!(e2 < 1)) return false;
  const e = Math.sqrt(e2);
  if (e < SERIES_BELOW) {
    out[0] = side * (Math.PI / 2 - 2 * k);
    out[1] = -2 * side;
    out[2] = 0;
    return true;
  }
  const cosOmega = k / e;
  const sinOmega = h / e;
  const eta2 = (1 - e) * (1 + e);
  const eta = Math.sqrt(eta2);
  // True anomaly nu = side 90 deg - omega: cos nu = side sin omega, sin nu = side cos omega.
  const cosNu = side * sinOmega;
  const sinNu = side * cosOmega;
  const omega = Math.atan2(h, k);
  const onePlus = 1 + e * cosNu;
  const anomaly = Math.atan2(eta * sinNu, e + cosNu);
  const longitude = anomaly - (e * eta * sinNu) / onePlus + omega;
  // On the revolution of the conjunction itself.
  out[0] = longitude - 2 * Math.PI * Math.round((longitude - (side * Math.PI) / 2) / (2 * Math.PI));
  const byEccentricity = (-eta * sinNu * (2 + e * cosNu)) / (onePlus * onePlus);
  // (1 - dM/dnu)/e with the cancellation at small e written out, as dM/dnu = eta^3/(1 + e cos nu)^2.
  const eta3 = eta2 * eta;
  const drop = (e * (3 - e2 * (3 - e2))) / (1 + eta3); // (1 - eta^3)/e
  const turn = (2 * cosNu + e * cosNu * cosNu + drop) / (onePlus * onePlus);
  out[1] = byEccentricity * cosOmega - turn * sinOmega;
  out[2] = byEccentricity * sinOmega + turn * cosOmega;
  return true;
}
