/**
 * The problem: which parameters are free, and how they predict the data. Yields weighted residuals with Jacobian for
 * least squares, and log-likelihood, log-density and gradient for everything else, from the same code.
 */
import type { LeastSquaresProblem } from '../numerics/least-squares.js';
import { ORBIT_COORDINATES } from '../signals/keplerian.js';
import { VelocityTerm, linearParameterCount, type VelocityData } from '../signals/velocity-term.js';
import type { ModelPoint, ModelStructure } from './model-structure.js';

const LOG_TWO_PI = Math.log(2 * Math.PI);

export class VelocityProblem implements LeastSquaresProblem {
  readonly data: VelocityData;
  readonly structure: ModelStructure;
  readonly parameterCount: number;
  readonly residualCount: number;
  /** Free parameters of the whole model, jitters included. */
  readonly freeCount: number;
  /** Offset of each companion's part in the parameter vector. */
  readonly companionOffsets: readonly number[];
  /** Column of each linear parameter in the parameter vector, -1 when fixed. */
  readonly linearColumns: readonly number[];
  readonly #term: VelocityTerm;
  readonly #linearFixed: Float64Array;
  readonly #linearPartials: readonly Float64Array[];
  readonly #zeroPointPriors: readonly {
    readonly column: number;
    readonly centre: number;
    readonly sigma: number;
  }[];
  readonly #coordinates: Float64Array;
  readonly #linear: Float64Array;
  readonly #prediction: Float64Array;
  readonly #partials: Float64Array;
  readonly #maps: readonly Float64Array[];
  readonly #inverseSigmas: Float64Array;

  constructor(term: VelocityTerm, structure: ModelStructure) {
    this.#term = term;
    this.data = term.data;
    this.structure = structure;
    const n = this.data.timesDays.length;
    const offsets: number[] = [];
    let at = 0;
    for (const companion of structure.companions) {
      offsets.push(at);
      at += companion.size;
    }
    this.companionOffsets = offsets;
    const linearCount = linearParameterCount(this.data, structure.drift);
    this.#linear = new Float64Array(linearCount);
    this.#linearFixed = new Float64Array(linearCount);
    const columns: number[] = [];
    const priors: { column: number; centre: number; sigma: number }[] = [];
    for (let l = 0; l < linearCount; l++) {
      const choice = l < this.data.instrumentCount ? (structure.zeroPoints[l] ?? null) : null;
      if (choice?.kind === 'fixed') {
        columns.push(-1);
        this.#linearFixed[l] = choice.value;
      } else {
        if (choice?.kind === 'prior') priors.push({ column: at, centre: choice.value, sigma: choice.sigma });
        columns.push(at++);
      }
    }
    this.linearColumns = columns;
    this.#zeroPointPriors = priors;
    this.#linearPartials = columns.map((_, l) => term.linearColumn(l));
    this.parameterCount = at;
    const priorRows = structure.companions.reduce(
      (sum, companion) => sum + companion.priorCount,
      priors.length,
    );
    this.residualCount = n + priorRows;
    this.freeCount = at + structure.jitters.filter((jitter) => jitter.highMps > jitter.lowMps).length;
    this.#coordinates = new Float64Array(ORBIT_COORDINATES * Math.max(1, structure.companions.length));
    this.#prediction = new Float64Array(n);
    this.#partials = new Float64Array(n * ORBIT_COORDINATES * structure.companions.length);
    this.#maps = structure.companions.map(
      (companion) => new Float64Array(ORBIT_COORDINATES * companion.size),
    );
    this.#inverseSigmas = new Float64Array(n);
    this.setJitters(new Float64Array(this.data.instrumentCount));
  }

  /** Sets the jitters that weight the residuals from now on. */
  setJitters(jittersMps: Float64Array): void {
    const { sigmasMps, instrumentOf } = this.data;
    for (let i = 0; i < sigmasMps.length; i++) {
      this.#inverseSigmas[i] = 1 / Math.hypot(sigmasMps[i]!, jittersMps[instrumentOf[i]!]!);
    }
  }

  /** Orbit coordinates (5 per companion) at a parameter vector; the caller must not keep the array. */
  coordinatesAt(parameters: Float64Array): Float64Array {
    this.#fillCoordinates(parameters, false);
    return this.#coordinates;
  }

  /** Zero points and drift (with fixed ones in place) at a parameter vector. */
  linearAt(parameters: Float64Array): Float64Array {
    return Float64Array.from(this.linearColumns, (column, l) =>
      column >= 0 ? parameters[column]! : this.#linearFixed[l]!,
    );
  }

  /** Prediction, m/s; false outside the domain. The array belongs to the problem and is overwritten by the next call. */
  predictionAt(parameters: Float64Array): Float64Array | null {
    return this.#predict(parameters, false) ? this.#prediction : null;
  }

  #fillCoordinates(parameters: Float64Array, withMaps: boolean): boolean {
    const { companions } = this.structure;
    for (let c = 0; c < companions.length; c++) {
      const part = this.#coordinates.subarray(c * ORBIT_COORDINATES, (c + 1) * ORBIT_COORDINATES);
      const map = withMaps ? this.#maps[c]! : null;
      if (!companions[c]!.toCoordinates(parameters, this.companionOffsets[c]!, part, map)) return false;
    }
    return true;
  }

  #predict(parameters: Float64Array, withPartials: boolean): boolean {
    if (!this.#fillCoordinates(parameters, withPartials)) return false;
    for (let l = 0; l < this.#linear.length; l++) {
      const column = this.linearColumns[l]!;
      this.#linear[l] = column >= 0 ? parameters[column]! : this.#linearFixed[l]!;
    }
    const partials = withPartials ? this.#partials : null;
    const { companions, drift } = this.structure;
    return this.#term.predict(
      this.#coordinates,
      companions.length,
      this.#linear,
      drift,
      this.#prediction,
      partials,
    );
  }

  /** Weighted residuals (observed - model)/sigma and their Jacobian, prior rows last. See `LeastSquaresProblem`. */
  evaluate(parameters: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): boolean {
    if (!this.#predict(parameters, jacobian !== null)) return false;
    const { velocitiesMps } = this.data;
    const n = velocitiesMps.length;
    for (let i = 0; i < n; i++)
      residuals[i] = (velocitiesMps[i]! - this.#prediction[i]!) * this.#inverseSigmas[i]!;
    if (jacobian !== null) this.#fillJacobian(jacobian);
    this.#fillPriors(parameters, residuals, jacobian);
    return true;
  }

  #fillJacobian(jacobian: Float64Array): void {
    const n = this.data.velocitiesMps.length;
    const p = this.parameterCount;
    const { companions } = this.structure;
    const stride = companions.length * ORBIT_COORDINATES;
    jacobian.fill(0);
    for (let c = 0; c < companions.length; c++) {
      const size = companions[c]!.size;
      const map = this.#maps[c]!;
      const offset = this.companionOffsets[c]!;
      const { coordinateOf } = companions[c]!;
      if (coordinateOf !== null) {
        for (let j = 0; j < size; j++) {
          const column = c * ORBIT_COORDINATES + coordinateOf[j]!;
          for (let i = 0; i < n; i++)
            jacobian[i * p + offset + j] = -this.#inverseSigmas[i]! * this.#partials[i * stride + column]!;
        }
        continue;
      }
      for (let i = 0; i < n; i++) {
        const from = i * stride + c * ORBIT_COORDINATES;
        const scale = -this.#inverseSigmas[i]!;
        for (let j = 0; j < size; j++) {
          let sum = 0;
          for (let d = 0; d < ORBIT_COORDINATES; d++) sum += this.#partials[from + d]! * map[d * size + j]!;
          jacobian[i * p + offset + j] = scale * sum;
        }
      }
    }
    for (let l = 0; l < this.linearColumns.length; l++) {
      const column = this.linearColumns[l]!;
      if (column < 0) continue;
      const partial = this.#linearPartials[l]!;
      for (let i = 0; i < n; i++) jacobian[i * p + column] = -this.#inverseSigmas[i]! * partial[i]!;
    }
  }

  #fillPriors(parameters: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): void {
    const p = this.parameterCount;
    let row = this.data.velocitiesMps.length;
    for (const prior of this.#zeroPointPriors) {
      residuals[row] = (parameters[prior.column]! - prior.centre) / prior.sigma;
      if (jacobian !== null) jacobian[row * p + prior.column] = 1 / prior.sigma;
      row++;
    }
    this.structure.companions.forEach((companion, c) => {
      if (companion.priorCount === 0) return;
      const rows = new Float64Array(companion.priorCount);
      const local = jacobian === null ? null : new Float64Array(companion.priorCount * companion.size);
      const offset = this.companionOffsets[c]!;
      companion.priors(parameters, offset, rows, local);
      for (let r = 0; r < companion.priorCount; r++, row++) {
        residuals[row] = rows[r]!;
        if (jacobian === null || local === null) continue;
        for (let j = 0; j < companion.size; j++)
          jacobian[row * p + offset + j] = local[r * companion.size + j]!;
      }
    });
  }

  /**
   * Full Gaussian log-likelihood of the data, with its ln(2 pi) terms: -1/2 sum [r^2/(sigma^2 + s^2) + ln 2 pi (sigma^2 + s^2)].
   *
   * @returns -Infinity outside the domain
   */
  logLikelihood(point: ModelPoint): number {
    if (!this.#predict(point.parameters, false)) return -Infinity;
    const { velocitiesMps, sigmasMps, instrumentOf } = this.data;
    let sum = 0;
    for (let i = 0; i < velocitiesMps.length; i++) {
      const r = velocitiesMps[i]! - this.#prediction[i]!;
      const s = point.jittersMps[instrumentOf[i]!]!;
      const variance = sigmasMps[i]! * sigmasMps[i]! + s * s;
      sum += (r * r) / variance + Math.log(variance) + LOG_TWO_PI;
    }
    return -0.5 * sum;
  }

  /** Instruments whose jitter is free: their places in a vector (parameters, jitters). */
  get freeJitters(): number[] {
    return this.structure.jitters.flatMap((jitter, instrument) =>
      jitter.highMps > jitter.lowMps ? [instrument] : [],
    );
  }

  /**
   * Gradient of `logDensity` by the parameters, then by the free jitters (`freeJitters`), analytic.
   *
   * The density depends on a jitter through its square, so it is defined for negative values too (mirror image).
   *
   * @param gradient - (freeCount), overwritten
   * @returns false outside the domain
   */
  logDensityGradient(point: ModelPoint, gradient: Float64Array): boolean {
    const p = this.parameterCount;
    const { sigmasMps, instrumentOf } = this.data;
    const n = sigmasMps.length;
    const residuals = new Float64Array(this.residualCount);
    const jacobian = new Float64Array(this.residualCount * p);
    this.setJitters(point.jittersMps);
    if (!this.evaluate(point.parameters, residuals, jacobian)) return false;
    gradient.fill(0);
    for (let i = 0; i < this.residualCount; i++) {
      const r = residuals[i]!;
      for (let j = 0; j < p; j++) gradient[j]! -= jacobian[i * p + j]! * r;
    }
    this.freeJitters.forEach((instrument, index) => {
      const s = point.jittersMps[instrument]!;
      let sum = 0;
      for (let i = 0; i < n; i++) {
        if (instrumentOf[i] !== instrument) continue;
        const variance = sigmasMps[i]! * sigmasMps[i]! + s * s;
        sum += (residuals[i]! * residuals[i]! - 1) / variance;
      }
      const prior = this.structure.jitters[instrument]!.prior;
      gradient[p + index] = s * sum - (prior === null ? 0 : (s - prior.centre) / prior.sigma ** 2);
    });
    return true;
  }

  /** Log-likelihood plus the user's Gaussian priors (without their constants). Its maximum is what is reported. */
  logDensity(point: ModelPoint): number {
    const priorRows = this.residualCount - this.data.velocitiesMps.length;
    let penalty = 0;
    if (priorRows > 0) {
      const residuals = new Float64Array(this.residualCount);
      this.#fillPriors(point.parameters, residuals, null);
      for (let i = this.data.velocitiesMps.length; i < residuals.length; i++) penalty += residuals[i]! ** 2;
    }
    this.structure.jitters.forEach((jitter, instrument) => {
      if (jitter.prior !== null)
        penalty += ((point.jittersMps[instrument]! - jitter.prior.centre) / jitter.prior.sigma) ** 2;
    });
    return this.logLikelihood(point) - 0.5 * penalty;
  }
}
