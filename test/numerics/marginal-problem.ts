/** Random problems with a linear part, and the same numbers from dense matrices, straight from the definitions. */
import { expect } from 'vitest';
import {
  choleskyInPlace,
  choleskySolveInPlace,
  invertSymmetricPositive,
} from '../../src/numerics/linear-algebra.js';
import type { LinearNuisance } from '../../src/numerics/marginal-linear.js';
import { RandomStream } from '../../src/numerics/random.js';

export interface Problem {
  readonly times: Float64Array;
  readonly data: Float64Array;
  readonly model: Float64Array;
  readonly variances: Float64Array;
  readonly nuisance: LinearNuisance;
}

/** Polynomials and a random column, dips in the model, data from the model itself. */
export function randomProblem(seed: number, rows: number, columns: number): Problem {
  const random = RandomStream.fromSeed(seed);
  const times = Float64Array.from({ length: rows }, (_, i) => i + random.uniform());
  const design = Float64Array.from({ length: rows * columns }, (_, at) => {
    const j = at % columns;
    return j === 3 ? random.normal() : (times[Math.floor(at / columns)]! / rows - 0.5) ** j;
  });
  const priorMean = Float64Array.from({ length: columns }, () => random.normal());
  const priorSigma = Float64Array.from({ length: columns }, () => Math.exp(random.normal() + 1));
  const model = Float64Array.from({ length: rows }, (_, i) => (i % 4 === 0 ? 1 : 1 - 0.3 * random.uniform()));
  const variances = Float64Array.from({ length: rows }, () => Math.exp(random.normal() - 3));
  const coefficients = priorMean.map((mean, j) => mean + priorSigma[j]! * random.normal());
  const data = model.map((factor, i) => {
    let sum = Math.sqrt(variances[i]!) * random.normal();
    for (let j = 0; j < columns; j++) sum += factor * design[i * columns + j]! * coefficients[j]!;
    return sum;
  });
  return { times, data, model, variances, nuisance: { rows, columns, design, priorMean, priorSigma } };
}

/** ln N(data; D·c0, N + D·Λ·D^T), and the mean and covariance of the coefficients, straight from the definitions. */
export function dense(
  { times, data, nuisance }: Problem,
  model: Float64Array,
  variances: Float64Array,
  covariance: (lag: number) => number = () => 0,
): { value: number; coefficients: Float64Array; coefficientCovariance: Float64Array } {
  const { rows: n, columns: m, design, priorMean, priorSigma } = nuisance;
  const noise = Float64Array.from({ length: n * n }, (_, at) => {
    const [i, k] = [Math.floor(at / n), at % n];
    return covariance(Math.abs(times[i]! - times[k]!)) + (i === k ? variances[i]! : 0);
  });
  const d = design.map((element, at) => element * model[Math.floor(at / m)]!);
  const residuals = data.map((value, i) => {
    for (let j = 0; j < m; j++) value -= d[i * m + j]! * priorMean[j]!;
    return value;
  });
  const total = noise.map((value, at) => {
    const [i, k] = [Math.floor(at / n), at % n];
    for (let j = 0; j < m; j++) value += d[i * m + j]! * d[k * m + j]! * priorSigma[j]! ** 2;
    return value;
  });
  expect(choleskyInPlace(total, n)).toBe(true);
  const alpha = residuals.slice();
  choleskySolveInPlace(total, n, alpha);
  let value = -0.5 * n * Math.log(2 * Math.PI);
  for (let i = 0; i < n; i++) value -= 0.5 * alpha[i]! * residuals[i]! + Math.log(total[i * n + i]!);
  const coefficients = priorMean.map((mean, j) => {
    for (let i = 0; i < n; i++) mean += priorSigma[j]! ** 2 * d[i * m + j]! * alpha[i]!;
    return mean;
  });
  const factor = noise.slice();
  expect(choleskyInPlace(factor, n)).toBe(true);
  const normal = new Float64Array(m * m);
  for (let j = 0; j < m; j++) {
    const column = Float64Array.from({ length: n }, (_, i) => d[i * m + j]!);
    choleskySolveInPlace(factor, n, column);
    for (let k = 0; k < m; k++) for (let i = 0; i < n; i++) normal[j * m + k]! += column[i]! * d[i * m + k]!;
    normal[j * m + j]! += priorSigma[j]! ** -2;
  }
  return { value, coefficients, coefficientCovariance: invertSymmetricPositive(normal, m)! };
}

export const LN_L = { abs: 1e-10, unit: '1', why: 'rounding of the dense side; worst seen 7e-12' };
export const SLOPE = 'what the differences of the dense likelihood give';
export const SIZES = [1, 2, 3, 4, 5, 8, 30, 59].flatMap((rows, r) =>
  [1, 2, 3, 5].map((columns, c) => [rows, columns, 10 * r + c + 1] as const),
);

export function replaced(array: Float64Array, at: number, value: number): Float64Array {
  const copy = array.slice();
  copy[at] = value;
  return copy;
}
