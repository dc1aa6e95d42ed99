/** A bell-shaped distribution that can be drawn from and whose density is known: what evidences are measured against. */
import { choleskyInPlace } from '../linear-algebra.js';
import type { RandomStream } from '../random.js';
import { logGamma } from '../special-functions.js';

/** Multivariate normal, or Student t with a whole number of degrees of freedom. */
export class Proposal {
  readonly size: number;
  private readonly centre: Float64Array;
  /** Lower factor of the covariance (of the scale matrix for Student t), size·size. */
  private readonly factor: Float64Array;
  private readonly degreesOfFreedom: number;
  private readonly logPeak: number;
  private readonly normals: Float64Array;

  /**
   * @param covariance - size·size, row-major, positive definite; the scale matrix when degrees of freedom are given
   * @param degreesOfFreedom - whole number >= 1, or Infinity for the normal distribution
   * @throws RangeError when the matrix is not positive definite
   */
  constructor(centre: Float64Array, covariance: Float64Array, degreesOfFreedom: number = Infinity) {
    const n = centre.length;
    this.size = n;
    this.centre = centre.slice();
    this.factor = covariance.slice();
    this.degreesOfFreedom = degreesOfFreedom;
    this.normals = new Float64Array(n);
    if (covariance.length !== n * n || !choleskyInPlace(this.factor, n))
      throw new RangeError(`the covariance of a proposal must be ${n} x ${n} and positive definite`);
    let logDeterminant = 0;
    for (let i = 0; i < n; i++) logDeterminant += Math.log(this.factor[i * n + i]!);
    const nu = degreesOfFreedom;
    this.logPeak =
      nu === Infinity
        ? -0.5 * n * Math.log(2 * Math.PI) - logDeterminant
        : logGamma((nu + n) / 2) - logGamma(nu / 2) - 0.5 * n * Math.log(nu * Math.PI) - logDeterminant;
  }

  /** Writes a draw to `position` and returns ln density there. */
  draw(random: RandomStream, position: Float64Array): number {
    const { size, centre, factor, normals, degreesOfFreedom: nu } = this;
    let square = 0;
    for (let i = 0; i < size; i++) {
      const z = random.normal();
      normals[i] = z;
      square += z * z;
    }
    let stretch = 1;
    if (nu !== Infinity) {
      let chiSquare = 0;
      for (let k = 0; k < nu; k++) chiSquare += random.normal() ** 2;
      stretch = Math.sqrt(nu / chiSquare);
    }
    for (let i = 0; i < size; i++) {
      let sum = 0;
      for (let j = 0; j <= i; j++) sum += factor[i * size + j]! * normals[j]!;
      position[i] = centre[i]! + stretch * sum;
    }
    return this.logDensityAt(square * stretch * stretch);
  }

  /** ln density at a position; read only. */
  logDensity(position: Float64Array): number {
    const { size, centre, factor, normals } = this;
    let square = 0;
    for (let i = 0; i < size; i++) {
      let sum = position[i]! - centre[i]!;
      for (let j = 0; j < i; j++) sum -= factor[i * size + j]! * normals[j]!;
      const z = sum / factor[i * size + i]!;
      normals[i] = z;
      square += z * z;
    }
    return this.logDensityAt(square);
  }

  private logDensityAt(square: number): number {
    const nu = this.degreesOfFreedom;
    return this.logPeak - (nu === Infinity ? 0.5 * square : 0.5 * (nu + this.size) * Math.log1p(square / nu));
  }
}
