/**
 * The Keplerian velocity and its partial derivatives in coordinates that stay regular at e = 0.
 *
 * The coordinates are ln P, the mean longitude at the epoch lambda0 = M(epoch) + omega, k = e cos omega, h = e sin omega
 * and K. The elements P, e, omega, T_peri, K are smooth functions of them away from e = 0, and the velocity is smooth
 * at e = 0 as well, where omega and T_peri are not defined. [own derivation; tested against difference quotients]
 */
import { TWO_PI } from '../orbit/constants.js';
import { solveKeplerArray } from '../orbit/kepler-array.js';

/** Number of coordinates of one companion: ln P, lambda0, k, h, K. */
export const ORBIT_COORDINATES = 5;

/** Largest eccentricity that the velocity term evaluates; beyond it a step is refused. */
export const MAXIMUM_ECCENTRICITY = 0.9999;

/** Work arrays of one set of times, made once and reused at every evaluation. */
export class KeplerianKernel {
  readonly #times: Float64Array;
  readonly #meanAnomalies: Float64Array;
  readonly #sinE: Float64Array;
  readonly #cosE: Float64Array;

  /** @param timesDays - (n), days since the epoch */
  constructor(timesDays: Float64Array) {
    this.#times = timesDays;
    this.#meanAnomalies = new Float64Array(timesDays.length);
    this.#sinE = new Float64Array(timesDays.length);
    this.#cosE = new Float64Array(timesDays.length);
  }

  /**
   * Adds one companion's velocity to `sumMps` and, when `partials` is given, writes its five partial derivatives.
   *
   * @param coordinates - ln P (P in days), lambda0 (rad), k, h, K (m/s), read from `offset` on
   * @param sumMps - (n), the Keplerian is added
   * @param partials - row-major (n, stride), or null; columns `column` ... `column + 4` are written
   * @returns false outside the domain (e >= MAXIMUM_ECCENTRICITY or not finite), with `sumMps` untouched
   */
  add(
    coordinates: Float64Array,
    offset: number,
    sumMps: Float64Array,
    partials: Float64Array | null,
    stride: number,
    column: number,
  ): boolean {
    const rate = TWO_PI * Math.exp(-coordinates[offset]!);
    const longitude = coordinates[offset + 1]!;
    const k = coordinates[offset + 2]!;
    const h = coordinates[offset + 3]!;
    const amplitude = coordinates[offset + 4]!;
    const e = Math.hypot(k, h);
    if (!(e < MAXIMUM_ECCENTRICITY) || !Number.isFinite(rate + longitude + amplitude)) return false;
    const cosOmega = e > 0 ? k / e : 1;
    const sinOmega = e > 0 ? h / e : 0;
    const omega = e > 0 ? Math.atan2(h, k) : 0;
    const n = this.#times.length;
    const times = this.#times;
    const meanAnomalies = this.#meanAnomalies;
    const sinE = this.#sinE;
    const cosE = this.#cosE;
    const phase = longitude - omega;
    for (let i = 0; i < n; i++) meanAnomalies[i] = phase + rate * times[i]!;
    solveKeplerArray(meanAnomalies, e, sinE, cosE, n);
    const eta2 = (1 - e) * (1 + e);
    const eta = Math.sqrt(eta2);
    const inverseEta3 = 1 / (eta2 * eta);
    // (1 - d nu/d M)/e = (dConstant - 2 cos nu - e cos^2 nu) / eta^3, written without the cancellation at small e.
    const dConstant = (e * (-3 + e * e * (3 - e * e))) / (eta2 * eta + 1);
    for (let i = 0; i < n; i++) {
      const inverse = 1 / (1 - e * cosE[i]!);
      const cosNu = (cosE[i]! - e) * inverse;
      const sinNu = eta * sinE[i]! * inverse;
      const cosSum = cosNu * cosOmega - sinNu * sinOmega;
      const shape = cosSum + k;
      sumMps[i]! += amplitude * shape;
      if (partials === null) continue;
      const sinSum = sinNu * cosOmega + cosNu * sinOmega;
      const onePlus = 1 + e * cosNu;
      const dLongitude = -amplitude * sinSum * onePlus * onePlus * inverseEta3;
      const dEccentricity = amplitude * (cosOmega - (sinSum * sinNu * (2 + e * cosNu)) / eta2);
      const dTurn = amplitude * (sinSum * (dConstant - cosNu * (2 + e * cosNu)) * inverseEta3 + sinOmega);
      const at = i * stride + column;
      partials[at] = -dLongitude * rate * times[i]!;
      partials[at + 1] = dLongitude;
      partials[at + 2] = dEccentricity * cosOmega + dTurn * sinOmega;
      partials[at + 3] = dEccentricity * sinOmega - dTurn * cosOmega;
      partials[at + 4] = shape;
    }
    return true;
  }
}
