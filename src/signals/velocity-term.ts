/**
 * The velocity term: predicts the velocities of all instruments, with partial derivatives, from orbit coordinates
 * and its own linear parameters (a zero point per instrument, slope, curvature).
 */
import { KeplerianKernel, ORBIT_COORDINATES } from './keplerian.js';

/** Data of the term on the solver's time axis. Arrays of one length; read, never modified. */
export interface VelocityData {
  /** days since the epoch */
  readonly timesDays: Float64Array;
  readonly velocitiesMps: Float64Array;
  readonly sigmasMps: Float64Array;
  readonly instrumentOf: Uint16Array;
  readonly instrumentCount: number;
}

export type DriftDegree = 0 | 1 | 2;

/** Zero points, then slope (m/s/d) and curvature (m/s/d^2) as far as the drift degree goes. */
export function linearParameterCount(data: VelocityData, drift: DriftDegree): number {
  return data.instrumentCount + drift;
}

export class VelocityTerm {
  readonly data: VelocityData;
  readonly #kernel: KeplerianKernel;

  constructor(data: VelocityData) {
    this.data = data;
    this.#kernel = new KeplerianKernel(data.timesDays);
  }

  /**
   * @param coordinates - (5 x companions), see keplerian.ts
   * @param linear - zero points and drift, as `linearParameterCount` orders them
   * @param prediction - (n), m/s, overwritten
   * @param partials - row-major (n, 5 x companions), overwritten, or null; the linear parameters' partials are
   *   constant and come from `linearColumn`
   * @returns false outside the domain
   */
  predict(
    coordinates: Float64Array,
    companions: number,
    linear: Float64Array,
    drift: DriftDegree,
    prediction: Float64Array,
    partials: Float64Array | null,
  ): boolean {
    const { timesDays, instrumentOf, instrumentCount } = this.data;
    const n = timesDays.length;
    const slope = drift > 0 ? linear[instrumentCount]! : 0;
    const halfCurvature = drift > 1 ? 0.5 * linear[instrumentCount + 1]! : 0;
    for (let i = 0; i < n; i++) {
      const t = timesDays[i]!;
      prediction[i] = linear[instrumentOf[i]!]! + t * (slope + halfCurvature * t);
    }
    const stride = companions * ORBIT_COORDINATES;
    for (let c = 0; c < companions; c++) {
      const at = c * ORBIT_COORDINATES;
      if (!this.#kernel.add(coordinates, at, prediction, partials, stride, at)) return false;
    }
    return true;
  }

  /** Partial derivative of the prediction by one linear parameter: (n). */
  linearColumn(index: number): Float64Array {
    const { timesDays, instrumentOf, instrumentCount } = this.data;
    if (index < instrumentCount)
      return Float64Array.from(instrumentOf, (instrument) => (instrument === index ? 1 : 0));
    return index === instrumentCount
      ? Float64Array.from(timesDays)
      : Float64Array.from(timesDays, (t) => 0.5 * t * t);
  }
}
