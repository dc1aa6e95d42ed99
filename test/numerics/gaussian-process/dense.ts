/** The same processes by dense matrices, written from the definition of the covariance: slow and plain. */
import { choleskyInPlace, choleskySolveInPlace } from '../../../src/numerics/linear-algebra.js';

export interface Oscillation {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly d: number;
}

/** exp(-cτ)·(a·cos dτ + b·sin dτ). */
export function oscillationAt({ a, b, c, d }: Oscillation, lag: number): number {
  return Math.exp(-c * lag) * (a * Math.cos(d * lag) + b * Math.sin(d * lag));
}

export class DenseProcess {
  readonly n: number;
  readonly matrix: Float64Array;
  readonly factor: Float64Array;
  readonly isPositive: boolean;

  constructor(times: Float64Array, diagonal: Float64Array, covariance: (lag: number) => number) {
    this.n = times.length;
    this.matrix = Float64Array.from({ length: this.n * this.n }, (_, at) => {
      const [i, j] = [Math.floor(at / this.n), at % this.n];
      return covariance(Math.abs(times[i]! - times[j]!)) + (i === j ? diagonal[i]! : 0);
    });
    this.factor = this.matrix.slice();
    this.isPositive = choleskyInPlace(this.factor, this.n);
  }

  logDeterminant(): number {
    let sum = 0;
    for (let i = 0; i < this.n; i++) sum += 2 * Math.log(this.factor[i * this.n + i]!);
    return sum;
  }

  solve(vector: Float64Array): Float64Array {
    const out = vector.slice();
    choleskySolveInPlace(this.factor, this.n, out);
    return out;
  }

  logLikelihood(residuals: Float64Array): number {
    const solved = this.solve(residuals);
    const chiSquare = solved.reduce((sum, value, i) => sum + value * residuals[i]!, 0);
    return -0.5 * (chiSquare + this.logDeterminant() + this.n * Math.log(2 * Math.PI));
  }

  inverseDiagonal(): Float64Array {
    return Float64Array.from({ length: this.n }, (_, i) => {
      const unit = new Float64Array(this.n);
      unit[i] = 1;
      return this.solve(unit)[i]!;
    });
  }
}

/** f'(x) from central differences at four step sizes, each half the one before, extrapolated to zero (Richardson). */
export function slopeOf(f: (x: number) => number, x: number, step: number): number {
  const rows = [0, 1, 2, 3].map((k) => {
    const h = step / 2 ** k;
    return (f(x + h) - f(x - h)) / (2 * h);
  });
  for (let order = 1; order < 4; order++)
    for (let k = 3; k >= order; k--) rows[k] = rows[k]! + (rows[k]! - rows[k - 1]!) / (4 ** order - 1);
  return rows[3]!;
}
