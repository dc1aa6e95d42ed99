import { describe, expect, it } from 'vitest';
import { checkJacobian } from '../../src/numerics/jacobian-check.js';
import { minimiseLeastSquares } from '../../src/numerics/least-squares.js';
import type { LeastSquaresProblem } from '../../src/numerics/least-squares.js';
import { readAllSets, readSet } from '../reference/nist/read-set.js';

/** The same problem with one element of its Jacobian changed by `change`. */
function poisoned(
  problem: LeastSquaresProblem,
  residualIndex: number,
  parameterIndex: number,
  change: (value: number) => number,
): LeastSquaresProblem {
  return {
    ...problem,
    evaluate(parameters, residuals, jacobian): boolean {
      const isInside = problem.evaluate(parameters, residuals, jacobian);
      const at = residualIndex * problem.parameterCount + parameterIndex;
      if (jacobian !== null) jacobian[at] = change(jacobian[at]!);
      return isInside;
    },
  };
}

describe('checkJacobian', () => {
  it('finds one element that is 1 % wrong, and says which, in every column of every certified set', () => {
    for (const set of readAllSets()) {
      const { parameterCount: p, residualCount: n } = set.problem;
      const jacobian = new Float64Array(n * p);
      set.problem.evaluate(set.parameters, new Float64Array(n), jacobian);
      for (let j = 0; j < p; j++) {
        // The largest element of the column, so that 1 % of it is 1 % of the column's size.
        let i = 0;
        for (let k = 1; k < n; k++)
          if (Math.abs(jacobian[k * p + j]!) > Math.abs(jacobian[i * p + j]!)) i = k;
        const check = checkJacobian(
          poisoned(set.problem, i, j, (value) => 1.01 * value),
          set.parameters,
          1e-3,
        );
        expect(check).toMatchObject({ residualIndex: i, parameterIndex: j });
        expect(Math.abs(check.worstRelativeError - 0.01)).toBeLessThan(1e-5);
      }
    }
  });

  it('catches a sign error and a derivative that is not a number', () => {
    const { problem, parameters } = readSet('Misra1a');
    expect(
      checkJacobian(
        poisoned(problem, 3, 1, (value) => -value),
        parameters,
      ).worstRelativeError,
    ).toBeGreaterThan(0.1);
    expect(
      checkJacobian(
        poisoned(problem, 3, 1, () => NaN),
        parameters,
      ),
    ).toMatchObject({
      worstRelativeError: Infinity,
      residualIndex: 3,
      parameterIndex: 1,
    });
  });

  it('stays inside a domain that ends close by, and says when the point itself is outside', () => {
    const root: LeastSquaresProblem = {
      parameterCount: 1,
      residualCount: 1,
      evaluate(parameters, residuals, jacobian): boolean {
        if (!(parameters[0]! >= 0)) return false;
        residuals[0] = Math.sqrt(parameters[0]!);
        if (jacobian !== null) jacobian[0] = 0.5 / Math.sqrt(parameters[0]!);
        return true;
      },
    };
    expect(checkJacobian(root, Float64Array.of(0.01), 2).worstRelativeError).toBeLessThan(1e-6);
    expect(() => checkJacobian(root, Float64Array.of(-1))).toThrow(/at the point/);
    expect(() => checkJacobian(root, Float64Array.of(0))).toThrow(/beside parameter 0/);
  });

  it('explains fits that a wrong derivative misleads: such a fit is not called converged', () => {
    const { problem, starts } = readSet('Misra1a');
    const wrong: LeastSquaresProblem = {
      ...problem,
      evaluate(parameters, residuals, jacobian): boolean {
        const isInside = problem.evaluate(parameters, residuals, jacobian);
        if (jacobian !== null) for (let at = 1; at < jacobian.length; at += 2) jacobian[at]! *= -1;
        return isInside;
      },
    };
    expect(minimiseLeastSquares(wrong, starts[1]).status).not.toBe('converged');
  });
});
