/** Covariance of a smooth density around a point from the curvature of its logarithm, made positive definite. */
import { symmetricEigen } from '../../numerics/linear-algebra.js';
import type { SmoothDensity } from '../../numerics/sampling/density.js';

/** Widest direction allowed, relative to the scale by which the curvature was measured. */
const LARGEST_VARIANCE = 1e4;

/**
 * Inverse of the negative Hessian (central differences of the gradient) with flat or convex directions limited.
 *
 * @returns (size x size), row-major, positive definite
 */
export function curvatureOfDensity(density: SmoothDensity, position: Float64Array): Float64Array {
  const { size } = density;
  const scales = stepScales(density, position);
  // Hessian in units of the scales.
  const hessian = new Float64Array(size * size);
  const above = new Float64Array(size);
  const below = new Float64Array(size);
  const moved = Float64Array.from(position);
  for (let j = 0; j < size; j++) {
    const step = 0.02 * scales[j]!;
    moved[j] = position[j]! + step;
    const high = density.evaluate(moved, above);
    moved[j] = position[j]! - step;
    const low = density.evaluate(moved, below);
    moved[j] = position[j]!;
    for (let k = 0; k < size; k++) {
      const slope = Number.isFinite(high + low)
        ? (below[k]! - above[k]!) / (2 * step)
        : j === k
          ? scales[j]! ** -2
          : 0;
      hessian[j * size + k] = slope * scales[j]! * scales[k]!;
    }
  }
  for (let j = 0; j < size; j++) {
    for (let k = 0; k < j; k++) {
      const mean = 0.5 * (hessian[j * size + k]! + hessian[k * size + j]!);
      hessian[j * size + k] = mean;
      hessian[k * size + j] = mean;
    }
  }
  const { values, vectors } = symmetricEigen(hessian, size);
  const covariance = new Float64Array(size * size);
  for (let m = 0; m < size; m++) {
    const value = values[m]!;
    const variance = value > 1 / LARGEST_VARIANCE ? 1 / value : value > -1e-3 ? 100 : 1;
    for (let j = 0; j < size; j++) {
      for (let k = 0; k < size; k++) {
        covariance[j * size + k]! +=
          vectors[j * size + m]! * variance * vectors[k * size + m]! * scales[j]! * scales[k]!;
      }
    }
  }
  return covariance;
}

/** Per coordinate the distance over which ln density changes by about a half. */
function stepScales(density: SmoothDensity, position: Float64Array): Float64Array {
  const { size } = density;
  const gradient = new Float64Array(size);
  const centre = density.evaluate(position, gradient);
  const moved = Float64Array.from(position);
  return Float64Array.from({ length: size }, (_, j) => {
    let step = Math.max(1e-6, 1e-3 * Math.abs(position[j]!));
    for (let turn = 0; turn < 60; turn++) {
      moved[j] = position[j]! + step;
      const high = density.evaluate(moved, gradient);
      moved[j] = position[j]! - step;
      const low = density.evaluate(moved, gradient);
      const drop = centre - 0.5 * (high + low);
      if (!Number.isFinite(drop) || drop > 1) step *= 0.5;
      else if (drop < 0.1 && step < 1e6) step *= 1.7;
      else break;
    }
    moved[j] = position[j]!;
    return step;
  });
}
