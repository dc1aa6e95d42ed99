/** The maximum of a smooth ln density: quasi-Newton steps in coordinates of unit curvature, measured anew until nothing is gained. */
import { choleskyInPlace } from '../../numerics/linear-algebra.js';
import { minimiseSmooth } from '../../numerics/minimise.js';
import type { SmoothDensity } from '../../numerics/sampling/density.js';
import { curvatureOfDensity } from '../posterior/density-curvature.js';

export interface Maximum {
  readonly position: Float64Array;
  readonly value: number;
  /** Largest slope, per uncertainty along the principal axes of the curvature. */
  readonly steepest: number;
}

export interface Effort {
  /** Times that the curvature is measured. */
  readonly rounds: number;
  readonly iterations: number;
}

export const BRIEF: Effort = { rounds: 1, iterations: 25 };
export const FULL: Effort = { rounds: 6, iterations: 80 };

/** A round that gains less than this ends the search. */
const LEAST_GAIN = 1e-6;

export function maximise(density: SmoothDensity, start: Float64Array, effort: Effort): Maximum {
  const { size } = density;
  let position = Float64Array.from(start);
  let value = density.evaluate(position, new Float64Array(size));
  let steepest = Infinity;
  if (!Number.isFinite(value)) return { position, value: -Infinity, steepest };
  const inner = new Float64Array(size);
  const moved = new Float64Array(size);
  for (let round = 0; round < effort.rounds; round++) {
    const factor = curvatureOfDensity(density, position);
    if (!choleskyInPlace(factor, size)) break;
    const centre = position;
    const place = (y: Float64Array): void => {
      for (let j = 0; j < size; j++) {
        let sum = centre[j]!;
        for (let k = 0; k <= j; k++) sum += factor[j * size + k]! * y[k]!;
        moved[j] = sum;
      }
    };
    const target = (y: Float64Array, gradient: Float64Array): number => {
      place(y);
      const height = density.evaluate(moved, inner);
      if (!Number.isFinite(height)) return Infinity;
      for (let k = 0; k < size; k++) {
        let sum = 0;
        for (let j = k; j < size; j++) sum += factor[j * size + k]! * inner[j]!;
        gradient[k] = -sum;
      }
      return -height;
    };
    const minimum = minimiseSmooth(target, new Float64Array(size), { maxIterations: effort.iterations });
    const gained = -minimum.value - value;
    place(minimum.parameters);
    if (gained >= 0) {
      position = Float64Array.from(moved);
      value = -minimum.value;
    }
    steepest = minimum.gradientNorm;
    if (gained < LEAST_GAIN) break;
  }
  return { position, value, steepest };
}
