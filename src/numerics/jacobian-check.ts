/** Compares analytic derivatives with difference quotients, so that a wrong formula is found where it is. */
import type { LeastSquaresProblem } from './least-squares.js';

export interface JacobianCheck {
  /** |analytic - quotient| of the worst element, in units of the largest quotient of its column. */
  readonly worstRelativeError: number;
  readonly residualIndex: number;
  readonly parameterIndex: number;
  readonly analytic: number;
  readonly differenceQuotient: number;
}

/** Steps h, h/2, h/4 ... per column; the extrapolation is stopped long before rounding takes over. */
const HALVINGS = 8;

/**
 * Finds the element of the Jacobian that departs most from a difference quotient.
 *
 * @param problem - as for `minimiseLeastSquares`
 * @param parameters - a point in the domain; not modified
 * @param relativeStep - largest step per parameter, in units of the parameter's size (of 1 where that is 0); default 0.01.
 *   Steps that leave the domain are passed over.
 * @returns the worst element; below 1e-7 for a right Jacobian of a smooth model that is not close to rounding, and about as
 *   large as the mistake for a wrong one (NaN derivatives count as infinitely wrong)
 * @throws RangeError when the model cannot be evaluated at the point, or beside it with any of the steps
 *
 * Method: central differences extrapolated to step zero (Ridders 1982, Advances in Engineering Software 4, 75), the most
 * stable value per element.
 */
export function checkJacobian(
  problem: LeastSquaresProblem,
  parameters: Float64Array,
  relativeStep = 0.01,
): JacobianCheck {
  const { parameterCount: p, residualCount: n } = problem;
  const jacobian = new Float64Array(n * p);
  if (!problem.evaluate(parameters, new Float64Array(n), jacobian)) {
    throw new RangeError(
      'the model cannot be evaluated at the point where its derivatives are to be checked',
    );
  }
  let worst: JacobianCheck = {
    worstRelativeError: -1, residualIndex: -1, parameterIndex: -1, analytic: NaN, differenceQuotient: NaN,
  }; // prettier-ignore
  for (let j = 0; j < p; j++) {
    const quotients = differenceColumn(problem, parameters, j, relativeStep);
    const columnSize = quotients.reduce((largest, q) => Math.max(largest, Math.abs(q)), 0);
    for (let i = 0; i < n; i++) {
      const analytic = jacobian[i * p + j]!;
      const differenceQuotient = quotients[i]!;
      const difference = Math.abs(analytic - differenceQuotient);
      const error = Number.isNaN(difference) ? Infinity : difference === 0 ? 0 : difference / columnSize;
      if (error > worst.worstRelativeError) {
        worst = {
          worstRelativeError: error,
          residualIndex: i,
          parameterIndex: j,
          analytic,
          differenceQuotient,
        };
      }
    }
  }
  return worst;
}

/** Derivative of every residual by parameter j. */
function differenceColumn(
  problem: LeastSquaresProblem,
  parameters: Float64Array,
  j: number,
  relativeStep: number,
): Float64Array {
  const n = problem.residualCount;
  const size = Math.abs(parameters[j]!);
  const point = parameters.slice();
  const above = new Float64Array(n);
  const below = new Float64Array(n);
  const best = new Float64Array(n);
  const bestError = new Float64Array(n).fill(Infinity);
  // Row k of the triangle for one step; the row before is all that extrapolation needs.
  let previous: Float64Array[] = [];
  let step = relativeStep * (size > 0 ? size : 1);
  for (let halving = 0; halving < HALVINGS; halving++, step /= 2) {
    point[j] = parameters[j]! + step;
    const isAboveGood = problem.evaluate(point, above, null);
    const upper = point[j];
    point[j] = parameters[j]! - step;
    if (!isAboveGood || !problem.evaluate(point, below, null)) continue;
    const width = upper - point[j];
    const present = [above.map((value, i) => (value - below[i]!) / width)];
    if (previous.length === 0) best.set(present[0]!);
    let factor = 4;
    for (const [k, coarser] of previous.entries()) {
      const finer = present[k]!;
      const extrapolated = finer.map((value, i) => value + (value - coarser[i]!) / (factor - 1));
      for (let i = 0; i < n; i++) {
        const error = Math.max(
          Math.abs(extrapolated[i]! - finer[i]!),
          Math.abs(extrapolated[i]! - coarser[i]!),
        );
        if (error < bestError[i]!) {
          bestError[i] = error;
          best[i] = extrapolated[i]!;
        }
      }
      present.push(extrapolated);
      factor *= 4;
    }
    previous = present;
  }
  if (previous.length === 0) {
    throw new RangeError(
      `the model cannot be evaluated beside parameter ${j} = ${parameters[j]!}; try a smaller step`,
    );
  }
  return best;
}
