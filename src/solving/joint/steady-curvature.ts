/** Covariance at a maximum where coordinates are tied to each other far more closely than each is known. */
import { choleskyInPlace } from '../../numerics/linear-algebra.js';
import type { SmoothDensity } from '../../numerics/sampling/density.js';
import { curvatureOfDensity } from '../posterior/density-curvature.js';

/**
 * Each turn measures along the axes that the one before has found: a direction a hundred times longer than what single coordinates
 * allow is cut short by the first, and right from the second on.
 */
const TURNS = 3;

/**
 * Covariance by the curvature at a maximum.
 *
 * @returns (size x size), row-major, positive definite
 */
export function steadyCovariance(density: SmoothDensity, centre: Float64Array): Float64Array {
  const { size } = density;
  const factor = curvatureOfDensity(density, centre);
  const covariance = Float64Array.from(factor);
  if (!choleskyInPlace(factor, size)) return covariance;
  for (let turn = 1; turn < TURNS; turn++) {
    const own = curvatureOfDensity(along(density, centre, factor), new Float64Array(size));
    if (!choleskyInPlace(own, size)) break;
    multiply(factor, own, size);
  }
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let k = 0; k <= j; k++) sum += factor[i * size + k]! * factor[j * size + k]!;
      covariance[i * size + j] = sum;
      covariance[j * size + i] = sum;
    }
  return covariance;
}

/** The density in coordinates y with position = centre + factor y. */
function along(density: SmoothDensity, centre: Float64Array, factor: Float64Array): SmoothDensity {
  const { size } = density;
  const moved = new Float64Array(size);
  const inner = new Float64Array(size);
  return {
    size,
    evaluate(y, gradient) {
      for (let j = 0; j < size; j++) {
        let sum = centre[j]!;
        for (let k = 0; k <= j; k++) sum += factor[j * size + k]! * y[k]!;
        moved[j] = sum;
      }
      const value = density.evaluate(moved, inner);
      for (let k = 0; k < size; k++) {
        let sum = 0;
        for (let j = k; j < size; j++) sum += factor[j * size + k]! * inner[j]!;
        gradient[k] = sum;
      }
      return value;
    },
  };
}

/** Overwrites the first lower triangular matrix by its product with the second. */
function multiply(left: Float64Array, right: Float64Array, size: number): void {
  for (let i = 0; i < size; i++)
    for (let k = 0; k <= i; k++) {
      let sum = 0;
      for (let j = k; j <= i; j++) sum += left[i * size + j]! * right[j * size + k]!;
      // Entries to the right of k in this row are still needed, those to the left are not.
      left[i * size + k] = sum;
    }
}
