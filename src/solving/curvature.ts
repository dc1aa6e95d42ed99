/** Uncertainty from the curvature of the log-density at its maximum, and draws from the Gaussian that it defines. */
import { choleskyInPlace, invertSymmetricPositive } from '../numerics/linear-algebra.js';
import type { RandomStream } from '../numerics/random.js';
import type { VelocityProblem } from './problem.js';
import type { ModelPoint } from './model-structure.js';

export interface Curvature {
  /** Covariance of (parameters, free jitters), row-major; null when the data do not determine every parameter. */
  readonly covariance: Float64Array | null;
  readonly size: number;
  /** Which matrix was inverted. */
  readonly source: 'observed information' | 'expected information' | 'none';
}

/**
 * Inverse of the negative Hessian of the log-density (by central differences of the analytic gradient). Where the
 * Hessian is not positive definite the expected information J^T J takes its place.
 */
export function curvatureAt(problem: VelocityProblem, point: ModelPoint): Curvature {
  const size = problem.freeCount;
  const expected = expectedInformation(problem, point);
  const observed = observedInformation(problem, point, expected);
  const fromObserved = observed === null ? null : invertSymmetricPositive(observed, size);
  if (fromObserved !== null && isPlausible(fromObserved, size)) {
    return { covariance: fromObserved, size, source: 'observed information' };
  }
  const fromExpected = invertSymmetricPositive(expected, size);
  if (fromExpected !== null && isPlausible(fromExpected, size)) {
    return { covariance: fromExpected, size, source: 'expected information' };
  }
  return { covariance: null, size, source: 'none' };
}

function isPlausible(covariance: Float64Array, size: number): boolean {
  for (let j = 0; j < size; j++) {
    const variance = covariance[j * size + j]!;
    if (!(variance > 0) || !Number.isFinite(variance)) return false;
  }
  return true;
}

/** J^T J of the weighted residuals (priors included), and the expected information of the jitters. Row-major (freeCount^2). */
export function expectedInformation(problem: VelocityProblem, point: ModelPoint): Float64Array {
  const p = problem.parameterCount;
  const size = problem.freeCount;
  const residuals = new Float64Array(problem.residualCount);
  const jacobian = new Float64Array(problem.residualCount * p);
  problem.setJitters(point.jittersMps);
  problem.evaluate(point.parameters, residuals, jacobian);
  const information = new Float64Array(size * size);
  for (let i = 0; i < problem.residualCount; i++) {
    for (let a = 0; a < p; a++) {
      const left = jacobian[i * p + a]!;
      if (left === 0) continue;
      for (let b = 0; b < p; b++) information[a * size + b]! += left * jacobian[i * p + b]!;
    }
  }
  const { sigmasMps, instrumentOf } = problem.data;
  problem.freeJitters.forEach((instrument, index) => {
    const s = point.jittersMps[instrument]!;
    let sum = 0;
    let weight = 0;
    let count = 0;
    for (let i = 0; i < sigmasMps.length; i++) {
      if (instrumentOf[i] !== instrument) continue;
      const variance = sigmasMps[i]! ** 2 + s * s;
      sum += (2 * s * s) / (variance * variance);
      weight += 1 / variance;
      count++;
    }
    // At s = 0 the information on s vanishes; the width at which ln L = -(n/4)(s^2/v)^2 has dropped by 1/2 stands in.
    const at = p + index;
    const prior = problem.structure.jitters[instrument]!.prior;
    information[at * size + at] =
      Math.max(sum, weight / Math.sqrt(2 * count)) + (prior === null ? 0 : prior.sigma ** -2);
  });
  return information;
}

function observedInformation(
  problem: VelocityProblem,
  point: ModelPoint,
  expected: Float64Array,
): Float64Array | null {
  const p = problem.parameterCount;
  const size = problem.freeCount;
  const freeJitters = problem.freeJitters;
  const information = new Float64Array(size * size);
  const forward = new Float64Array(size);
  const backward = new Float64Array(size);
  for (let j = 0; j < size; j++) {
    const scale = 1 / Math.sqrt(expected[j * size + j]!);
    if (!Number.isFinite(scale)) return null;
    const step = 1e-3 * scale;
    const moved = (sign: number): ModelPoint => {
      const parameters = Float64Array.from(point.parameters);
      const jittersMps = Float64Array.from(point.jittersMps);
      if (j < p) parameters[j]! += sign * step;
      else jittersMps[freeJitters[j - p]!]! += sign * step;
      return { parameters, jittersMps };
    };
    if (!problem.logDensityGradient(moved(1), forward)) return null;
    if (!problem.logDensityGradient(moved(-1), backward)) return null;
    for (let k = 0; k < size; k++) information[j * size + k] = (backward[k]! - forward[k]!) / (2 * step);
  }
  for (let j = 0; j < size; j++) {
    for (let k = 0; k < j; k++) {
      const mean = 0.5 * (information[j * size + k]! + information[k * size + j]!);
      information[j * size + k] = mean;
      information[k * size + j] = mean;
    }
  }
  return information;
}

/**
 * Points drawn from the Gaussian around a point. Draws outside the model's domain are replaced by new ones.
 *
 * @returns up to `count` points; fewer only if the domain keeps refusing them
 */
export function gaussianDraws(
  problem: VelocityProblem,
  point: ModelPoint,
  covariance: Float64Array,
  count: number,
  random: RandomStream,
): ModelPoint[] {
  const p = problem.parameterCount;
  const size = problem.freeCount;
  const freeJitters = problem.freeJitters;
  const factor = Float64Array.from(covariance);
  if (!choleskyInPlace(factor, size)) return [];
  const draws: ModelPoint[] = [];
  const shift = new Float64Array(size);
  const normals = new Float64Array(size);
  for (let attempt = 0; attempt < 2 * count && draws.length < count; attempt++) {
    for (let j = 0; j < size; j++) normals[j] = random.normal();
    for (let j = 0; j < size; j++) {
      let sum = 0;
      for (let k = 0; k <= j; k++) sum += factor[j * size + k]! * normals[k]!;
      shift[j] = sum;
    }
    // Each draw comes with its mirror image, so that linear quantities have symmetric intervals exactly.
    for (const sign of [1, -1]) {
      const parameters = Float64Array.from(point.parameters, (value, j) => value + sign * shift[j]!);
      const jittersMps = Float64Array.from(point.jittersMps);
      freeJitters.forEach((instrument, index) => {
        const { highMps } = problem.structure.jitters[instrument]!;
        jittersMps[instrument] = Math.min(
          highMps,
          Math.abs(jittersMps[instrument]! + sign * shift[p + index]!),
        );
      });
      if (draws.length < count && isInDomain(problem, parameters)) draws.push({ parameters, jittersMps });
    }
  }
  return draws;
}

function isInDomain(problem: VelocityProblem, parameters: Float64Array): boolean {
  const coordinates = problem.coordinatesAt(parameters);
  for (let c = 0; c < problem.structure.companions.length; c++) {
    const k = coordinates[5 * c + 2]!;
    const h = coordinates[5 * c + 3]!;
    if (!(Math.hypot(k, h) < 0.9999) || !Number.isFinite(coordinates[5 * c]!)) return false;
  }
  return true;
}
