/** Multivariate Student distributions to draw from, and what importance sampling needs beside. */
import { choleskyInPlace } from '../linear-algebra.js';
import type { RandomStream } from '../random.js';

/** Degrees of freedom: tails heavy enough for what is sampled, yet with a variance. */
const FREEDOM = 5;

export class StudentDistribution {
  private readonly centre: Float64Array;
  private readonly factor: Float64Array;
  private readonly logNorm: number;
  private readonly scratch: Float64Array;

  /**
   * @param covariance - n·n, row-major: the scale matrix
   * @throws RangeError when it is not positive definite
   */
  constructor(centre: Float64Array, covariance: Float64Array) {
    const n = centre.length;
    this.centre = centre;
    this.factor = covariance.slice();
    this.scratch = new Float64Array(n);
    if (!choleskyInPlace(this.factor, n))
      throw new RangeError('the covariance of a distribution to draw from is not positive definite');
    let logNorm = 0;
    for (let i = 0; i < n; i++) logNorm -= Math.log(this.factor[i * n + i]!);
    this.logNorm = logNorm;
  }

  /** Squared distance from the centre in units of the covariance. */
  distance(x: Float64Array): number {
    const { centre, factor, scratch } = this;
    const n = centre.length;
    let sum = 0;
    for (let i = 0; i < n; i++) {
      let value = x[i]! - centre[i]!;
      for (let j = 0; j < i; j++) value -= factor[i * n + j]! * scratch[j]!;
      value /= factor[i * n + i]!;
      scratch[i] = value;
      sum += value * value;
    }
    return sum;
  }

  /** ln density, up to the constant that all distributions of one dimension share. */
  logDensity(x: Float64Array): number {
    return this.logNorm - 0.5 * (FREEDOM + this.centre.length) * Math.log1p(this.distance(x) / FREEDOM);
  }

  draw(random: RandomStream): Float64Array {
    const { centre, factor } = this;
    const n = centre.length;
    let chi = 0;
    for (let i = 0; i < FREEDOM; i++) chi += random.normal() ** 2;
    const stretch = Math.sqrt(FREEDOM / chi);
    const normal = Float64Array.from({ length: n }, () => random.normal() * stretch);
    return centre.map((value, i) => {
      let sum = value;
      for (let j = 0; j <= i; j++) sum += factor[i * n + j]! * normal[j]!;
      return sum;
    });
  }
}

/** ln(exp a + exp b). */
export function addLogs(a: number, b: number): number {
  const high = Math.max(a, b);
  return high === -Infinity ? high : high + Math.log1p(Math.exp(Math.min(a, b) - high));
}

/** Covariance of weighted points about their mean, n·n row-major; weights need not sum to 1. */
export function weightedCovariance(points: readonly Float64Array[], weights: Float64Array): Float64Array {
  const n = points[0]!.length;
  const total = weights.reduce((sum, w) => sum + w, 0);
  const centre = new Float64Array(n);
  points.forEach((point, i) => {
    for (let a = 0; a < n; a++) centre[a]! += (weights[i]! * point[a]!) / total;
  });
  const covariance = new Float64Array(n * n);
  points.forEach((point, i) => {
    const w = weights[i]! / total;
    if (w === 0) return;
    for (let a = 0; a < n; a++) {
      for (let b = 0; b < n; b++)
        covariance[a * n + b]! += w * (point[a]! - centre[a]!) * (point[b]! - centre[b]!);
    }
  });
  return covariance;
}
