/**
 * Likelihood of the mid-times of one companion with an own straight line (epoch and period) integrated out: the line is
 * linear, so this is exact for Gaussian errors and a flat prior of the line.
 */

/** Sums that a straight line of a weighted table needs. */
interface Normal {
  readonly s0: number;
  readonly s1: number;
  readonly s2: number;
  readonly determinant: number;
}

export class LineLikelihood {
  readonly count: number;
  /** Cycle minus the weighted mean cycle, in units of the largest such distance. */
  readonly places: Float64Array;
  readonly meanCycle: number;
  readonly cycleScale: number;
  /** Residuals after the last `evaluate`, line removed; weights 1/(sigma^2 + jitter^2). */
  readonly reduced: Float64Array;
  readonly weights: Float64Array;
  /** 1/sigma^2. */
  readonly baseWeights: Float64Array;
  /** Line of the last `evaluate`: value at place 0 and slope by place, with the inverse of its normal matrix (00, 01, 11). */
  readonly line: Float64Array = new Float64Array(2);
  readonly lineCovariance: Float64Array = new Float64Array(3);
  /** Derivative of ln L by the jitter, after `evaluate`. */
  jitterSlope = 0;
  /** Weighted sum of squares after `evaluate`. */
  chiSquare = 0;
  private readonly sigmas: Float64Array;

  constructor(cycles: ArrayLike<number>, sigmasDays: ArrayLike<number>) {
    this.count = cycles.length;
    this.sigmas = Float64Array.from(sigmasDays);
    let sum = 0;
    let total = 0;
    for (let i = 0; i < this.count; i++) {
      const weight = this.sigmas[i]! ** -2;
      sum += weight * cycles[i]!;
      total += weight;
    }
    this.meanCycle = sum / total;
    this.places = Float64Array.from(cycles, (cycle) => cycle - this.meanCycle);
    this.cycleScale = this.places.reduce((most, place) => Math.max(most, Math.abs(place)), 0) || 1;
    for (let i = 0; i < this.count; i++) this.places[i]! /= this.cycleScale;
    this.reduced = new Float64Array(this.count);
    this.weights = new Float64Array(this.count);
    this.setWeights(0);
    this.baseWeights = this.weights.slice();
  }

  /**
   * @param residualsDays - observed minus model; at least three rows
   * @returns ln L, up to a constant that depends on the number of rows only
   */
  evaluate(residualsDays: Float64Array, jitterDays: number): number {
    const { count, places, reduced, weights, line, lineCovariance } = this;
    this.setWeights(jitterDays);
    const normal = this.normal();
    let b0 = 0;
    let b1 = 0;
    for (let i = 0; i < count; i++) {
      const w = weights[i]! * residualsDays[i]!;
      b0 += w;
      b1 += w * places[i]!;
    }
    const { s0, s1, s2, determinant } = normal;
    line[0] = (s2 * b0 - s1 * b1) / determinant;
    line[1] = (s0 * b1 - s1 * b0) / determinant;
    lineCovariance[0] = s2 / determinant;
    lineCovariance[1] = -s1 / determinant;
    lineCovariance[2] = s0 / determinant;
    let chiSquare = 0;
    let logWeights = 0;
    let slope = 0;
    for (let i = 0; i < count; i++) {
      const w = weights[i]!;
      const place = places[i]!;
      const r = residualsDays[i]! - line[0] - line[1] * place;
      reduced[i] = r;
      chiSquare += w * r * r;
      logWeights += Math.log(w);
      const leverage = lineCovariance[0] + place * (2 * lineCovariance[1] + place * lineCovariance[2]);
      slope += w * w * (r * r + leverage) - w;
    }
    this.chiSquare = chiSquare;
    this.jitterSlope = jitterDays * slope;
    return 0.5 * (logWeights - chiSquare - Math.log(determinant));
  }

  /** Removes the weighted straight line of the last `evaluate`'s weights from `values`, in place. */
  removeLine(values: Float64Array): void {
    const { count, places, weights } = this;
    const { s0, s1, s2, determinant } = this.normal();
    let b0 = 0;
    let b1 = 0;
    for (let i = 0; i < count; i++) {
      const w = weights[i]! * values[i]!;
      b0 += w;
      b1 += w * places[i]!;
    }
    const level = (s2 * b0 - s1 * b1) / determinant;
    const slope = (s0 * b1 - s1 * b0) / determinant;
    for (let i = 0; i < count; i++) values[i]! -= level + slope * places[i]!;
  }

  /**
   * Weighted straight line through any values of the rows, with the errors as given.
   *
   * @param out - at `at` the slope by cycle, behind it the value at `referenceCycle`; overwritten
   */
  lineThrough(values: Float64Array, referenceCycle: number, out: Float64Array, at: number): void {
    const { places, baseWeights, cycleScale, meanCycle } = this;
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let b0 = 0;
    let b1 = 0;
    for (let i = 0; i < values.length; i++) {
      const place = places[i]!;
      const weight = baseWeights[i]!;
      const w = weight * values[i]!;
      s0 += weight;
      s1 += weight * place;
      s2 += weight * place * place;
      b0 += w;
      b1 += w * place;
    }
    const determinant = s0 * s2 - s1 * s1;
    const slope = (s0 * b1 - s1 * b0) / determinant / cycleScale;
    out[at] = slope;
    out[at + 1] = (s2 * b0 - s1 * b1) / determinant + slope * (referenceCycle - meanCycle);
  }

  private setWeights(jitterDays: number): void {
    for (let i = 0; i < this.count; i++) {
      this.weights[i] = 1 / (this.sigmas[i]! * this.sigmas[i]! + jitterDays * jitterDays);
    }
  }

  private normal(): Normal {
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    for (let i = 0; i < this.count; i++) {
      const w = this.weights[i]!;
      const p = this.places[i]!;
      s0 += w;
      s1 += w * p;
      s2 += w * p * p;
    }
    return { s0, s1, s2, determinant: s0 * s2 - s1 * s1 };
  }
}
