/** Gaussian log-likelihood of velocities and its gradients by everything that predicts them, in one pass over the data. */
import { ORBIT_COORDINATES } from '../../signals/keplerian.js';
import type { DriftDegree, VelocityData } from '../../signals/velocity-term.js';

const LOG_TWO_PI = Math.log(2 * Math.PI);

export class VelocityLikelihood {
  readonly #data: VelocityData;
  readonly #width: number;
  readonly #drift: DriftDegree;
  /** (5 x companions), overwritten at each call. */
  readonly byCoordinate: Float64Array;
  /** Zero points, slope, curvature; overwritten at each call. */
  readonly byLinear: Float64Array;
  /** One per instrument; overwritten at each call. */
  readonly byJitter: Float64Array;

  constructor(data: VelocityData, companions: number, drift: DriftDegree) {
    this.#data = data;
    this.#width = ORBIT_COORDINATES * companions;
    this.#drift = drift;
    this.byCoordinate = new Float64Array(this.#width);
    this.byLinear = new Float64Array(data.instrumentCount + drift);
    this.byJitter = new Float64Array(data.instrumentCount);
  }

  /**
   * @param prediction - (n), m/s
   * @param partials - row-major (n, 5 x companions), derivatives of the prediction by the orbit coordinates
   * @param jittersMps - one per instrument
   * @returns -1/2 sum [r^2/(sigma^2 + s^2) + ln 2 pi (sigma^2 + s^2)]; the gradients are left in the public arrays
   */
  accumulate(prediction: Float64Array, partials: Float64Array, jittersMps: Float64Array): number {
    const { velocitiesMps, sigmasMps, instrumentOf, instrumentCount, timesDays } = this.#data;
    const n = velocitiesMps.length;
    const width = this.#width;
    const drift = this.#drift;
    const byCoordinate = this.byCoordinate.fill(0);
    const byLinear = this.byLinear.fill(0);
    const byJitter = this.byJitter.fill(0);
    let sum = 0;
    let bySlope = 0;
    let byCurvature = 0;
    for (let i = 0; i < n; i++) {
      const instrument = instrumentOf[i]!;
      const s = jittersMps[instrument]!;
      const variance = sigmasMps[i]! * sigmasMps[i]! + s * s;
      const inverse = 1 / variance;
      const residual = velocitiesMps[i]! - prediction[i]!;
      const pull = residual * inverse;
      sum += residual * pull + Math.log(variance);
      byJitter[instrument]! += s * (pull * pull - inverse);
      byLinear[instrument]! += pull;
      if (drift > 0) {
        const t = timesDays[i]!;
        bySlope += pull * t;
        byCurvature += 0.5 * pull * t * t;
      }
      const row = i * width;
      for (let d = 0; d < width; d++) byCoordinate[d]! += pull * partials[row + d]!;
    }
    if (drift > 0) byLinear[instrumentCount] = bySlope;
    if (drift > 1) byLinear[instrumentCount + 1] = byCurvature;
    return -0.5 * (sum + n * LOG_TWO_PI);
  }
}
