/**
 * The part of the model that is refitted linearly at each trial frequency: zero points, drift, and the partial
 * derivatives of the companions already found. Kept as an orthonormal basis under the weights.
 */
import { orthonormalise } from '../numerics/linear-algebra.js';

export interface LinearBackground {
  /** (n), days since the epoch. */
  readonly timesDays: Float64Array;
  /** (n), 1/(sigma^2 + jitter^2). */
  readonly weights: Float64Array;
  /** q columns of length n with sum_i w_i a_i b_i = 1 for a = b and 0 otherwise. */
  readonly basis: readonly Float64Array[];
  /** (n), the data with the background fitted away. */
  readonly residuals: Float64Array;
  /** sum w r^2 */
  readonly chiSquare: number;
}

/**
 * Fits the columns to the data and keeps what is left.
 *
 * @param data - (n), m/s
 * @param columns - columns of length n; linearly dependent ones are dropped
 */
export function makeBackground(
  timesDays: Float64Array,
  data: Float64Array,
  weights: Float64Array,
  columns: readonly Float64Array[],
): LinearBackground {
  const basis = orthonormalise([...columns], weights);
  const residuals = Float64Array.from(data);
  const n = data.length;
  // Twice: the second pass removes what rounding left in the first.
  for (let pass = 0; pass < 2; pass++) {
    for (const column of basis) {
      let projection = 0;
      for (let i = 0; i < n; i++) projection += weights[i]! * column[i]! * residuals[i]!;
      for (let i = 0; i < n; i++) residuals[i]! -= projection * column[i]!;
    }
  }
  let chiSquare = 0;
  for (let i = 0; i < n; i++) chiSquare += weights[i]! * residuals[i]! * residuals[i]!;
  return { timesDays, weights, basis, residuals, chiSquare };
}
