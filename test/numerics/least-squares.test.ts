import { describe, expect, it } from 'vitest';
import { minimiseLeastSquares } from '../../src/numerics/least-squares.js';
import type { LeastSquaresProblem } from '../../src/numerics/least-squares.js';
import { RandomStream } from '../../src/numerics/random.js';
import { readSet } from '../reference/nist/read-set.js';

type Evaluate = LeastSquaresProblem['evaluate'];

function problem(parameterCount: number, residualCount: number, evaluate: Evaluate): LeastSquaresProblem {
  return { parameterCount, residualCount, evaluate };
}

/** Residuals A·p - y with given A (row-major) and y. */
function linear(a: Float64Array, y: Float64Array, p: number): LeastSquaresProblem {
  return problem(p, y.length, (parameters, residuals, jacobian) => {
    for (let i = 0; i < y.length; i++) {
      residuals[i] = -y[i]!;
      for (let j = 0; j < p; j++) residuals[i]! += a[i * p + j]! * parameters[j]!;
    }
    jacobian?.set(a);
    return true;
  });
}

const rosenbrock = problem(2, 2, (parameters, residuals, jacobian) => {
  const [x, y] = [parameters[0]!, parameters[1]!];
  residuals.set([10 * (y - x * x), 1 - x]);
  jacobian?.set([-20 * x, 10, -1, 0]);
  return true;
});

/** sqrt(p) - 2, defined for p >= 0 only: full steps from far away leave the domain. */
const rootOnly = problem(1, 1, (parameters, residuals, jacobian) => {
  if (!(parameters[0]! >= 0)) return false;
  residuals[0] = Math.sqrt(parameters[0]!) - 2;
  if (jacobian !== null) jacobian[0] = 0.5 / Math.sqrt(parameters[0]!);
  return true;
});

describe('minimiseLeastSquares', () => {
  it('leaves residuals of a linear problem perpendicular to every column (normal equations), 20 random problems', () => {
    const random = RandomStream.fromSeed(20);
    for (let round = 0; round < 20; round++) {
      const p = 1 + random.integerBelow(8);
      const n = p + random.integerBelow(30);
      const a = Float64Array.from({ length: n * p }, () => random.normal());
      const y = Float64Array.from({ length: n }, () => 10 + random.normal());
      const outcome = minimiseLeastSquares(linear(a, y, p), new Float64Array(p));
      expect(outcome.status).toBe('converged');
      const residuals = new Float64Array(n);
      linear(a, y, p).evaluate(outcome.parameters, residuals, null);
      for (let j = 0; j < p; j++) {
        let product = 0;
        for (let i = 0; i < n; i++) product += a[i * p + j]! * residuals[i]!;
        // Products of size 10·sqrt(n); nearly square systems lose some digits.
        expect(Math.abs(product)).toBeLessThan(1e-9);
      }
      const sum = residuals.reduce((total, r) => total + r * r, 0);
      expect(Math.abs(outcome.chiSquare - sum)).toBeLessThan(1e-12 * (1 + sum));
    }
  });

  it('finds the floor of the curved valley of Rosenbrock 1960 at (1, 1)', () => {
    const outcome = minimiseLeastSquares(rosenbrock, Float64Array.of(-1.2, 1));
    expect(outcome.status).toBe('converged');
    expect(Math.hypot(outcome.parameters[0]! - 1, outcome.parameters[1]! - 1)).toBeLessThan(1e-9);
  });

  it('does not care in which units parameters are measured (factors 1e-12 .. 1e12)', () => {
    const { problem: plain, starts } = readSet('Thurber');
    const p = plain.parameterCount;
    const factors = Float64Array.from({ length: p }, (_, j) => 10 ** (4 * j - 12));
    const rescaled = problem(p, plain.residualCount, (parameters, residuals, jacobian) => {
      const isInside = plain.evaluate(parameters.map((value, j) => value * factors[j]!), residuals, jacobian); // prettier-ignore
      if (jacobian !== null) for (let at = 0; at < jacobian.length; at++) jacobian[at]! *= factors[at % p]!;
      return isInside;
    });
    const reference = minimiseLeastSquares(plain, starts[1]);
    const outcome = minimiseLeastSquares(rescaled, starts[1].map((value, j) => value / factors[j]!)); // prettier-ignore
    expect(outcome.status).toBe('converged');
    for (let j = 0; j < p; j++) {
      expect(Math.abs((outcome.parameters[j]! * factors[j]!) / reference.parameters[j]! - 1)).toBeLessThan(
        1e-7,
      );
    }
  });

  it('does not care about the size of the residuals (all errors 1e-8 or 1e8 times as large)', () => {
    const { problem: plain, starts, parameters } = readSet('Misra1a');
    for (const factor of [1e-8, 1e8]) {
      const scaled: LeastSquaresProblem = {
        ...plain,
        evaluate(at, residuals, jacobian) {
          const isInside = plain.evaluate(at, residuals, jacobian);
          for (let i = 0; i < residuals.length; i++) residuals[i]! *= factor;
          if (jacobian !== null) for (let i = 0; i < jacobian.length; i++) jacobian[i]! *= factor;
          return isInside;
        },
      };
      const outcome = minimiseLeastSquares(scaled, starts[1]);
      expect(outcome.status).toBe('converged');
      // Certified values of NIST StRD, 11 digits.
      for (let j = 0; j < 2; j++)
        expect(Math.abs(outcome.parameters[j]! / parameters[j]! - 1)).toBeLessThan(1e-9);
    }
  });

  it('never reports a point worse than the start, whatever the limit of steps', () => {
    const { problem: plain, starts } = readSet('MGH09');
    const residuals = new Float64Array(plain.residualCount);
    plain.evaluate(starts[0], residuals, null);
    let last = residuals.reduce((sum, r) => sum + r * r, 0);
    for (let maxIterations = 0; maxIterations < 60; maxIterations += 3) {
      const outcome = minimiseLeastSquares(plain, starts[0], { maxIterations });
      expect(outcome.iterations).toBeLessThanOrEqual(maxIterations);
      expect(outcome.status).toBe('iteration-limit');
      expect(outcome.chiSquare).toBeLessThanOrEqual(last);
      last = outcome.chiSquare;
    }
  });

  it('steps back from the edge of the domain', () => {
    const outcome = minimiseLeastSquares(rootOnly, Float64Array.of(900));
    expect(outcome.status).toBe('converged');
    expect(Math.abs(outcome.parameters[0]! - 4)).toBeLessThan(1e-9);
  });

  it('says so when the start is outside the domain or not finite', () => {
    for (const start of [-1, NaN]) {
      expect(minimiseLeastSquares(rootOnly, Float64Array.of(start))).toMatchObject({
        status: 'failed',
        reason: 'non-finite-model',
      });
    }
    // At 0 the value is finite, the derivative is not.
    expect(minimiseLeastSquares(rootOnly, Float64Array.of(0))).toMatchObject({ reason: 'non-finite-model' });
  });

  it('says so when the data do not determine a parameter', () => {
    const doubled = Float64Array.from({ length: 30 }, (_, at) => [1, 2, Math.floor(at / 3)][at % 3]!);
    const empty = Float64Array.from({ length: 30 }, (_, at) => [1, 0, Math.floor(at / 3)][at % 3]!);
    const y = Float64Array.from({ length: 10 }, (_, i) => i * i);
    for (const a of [doubled, empty]) {
      const outcome = minimiseLeastSquares(linear(a, y, 3), new Float64Array(3));
      expect(outcome).toMatchObject({ status: 'failed', reason: 'singular-curvature' });
      // The best straight line through i^2, i = 0 .. 9, leaves a sum of squares of exactly 528.
      expect(Math.abs(outcome.chiSquare - 528)).toBeLessThan(1e-6);
    }
    const fewerThanParameters = linear(Float64Array.of(1, 2), Float64Array.of(3), 2);
    expect(minimiseLeastSquares(fewerThanParameters, new Float64Array(2)).status).toBe('failed');
  });

  it('stops at once on a perfect fit, and handles a single residual', () => {
    const exact = linear(Float64Array.of(2), Float64Array.of(6), 1);
    expect(minimiseLeastSquares(exact, Float64Array.of(3))).toMatchObject({
      status: 'converged',
      reason: 'gradient',
      iterations: 0,
      chiSquare: 0,
    });
    expect(Math.abs(minimiseLeastSquares(exact, Float64Array.of(-50)).parameters[0]! - 3)).toBeLessThan(
      1e-12,
    );
  });

  it('ends well on noise-free data, even when a parameter is zero and whether or not the start is the truth', () => {
    // 7 sin(0.9 t + 0.4) + 0 + 0·t
    const wave = problem(5, 40, (parameters, residuals, jacobian) => {
      const [amplitude, rate, phase] = [parameters[0]!, parameters[1]!, parameters[2]!];
      for (let i = 0; i < 40; i++) {
        const t = 0.37 * i;
        const [s, c] = [Math.sin(rate * t + phase), Math.cos(rate * t + phase)];
        residuals[i] = 7 * Math.sin(0.9 * t + 0.4) - amplitude * s - parameters[3]! - parameters[4]! * t;
        jacobian?.set([-s, -amplitude * c * t, -amplitude * c, -1, -t], 5 * i);
      }
      return true;
    });
    const truth = [7, 0.9, 0.4, 0, 0];
    for (const start of [truth, [5, 0.88, 0.3, 1, -0.1], [7, 0.9, 0.4, 1e-14, -1e-15]]) {
      const outcome = minimiseLeastSquares(wave, Float64Array.from(start));
      expect(outcome.status).toBe('converged');
      truth.forEach((value, j) => {
        expect(Math.abs(outcome.parameters[j]! - value)).toBeLessThan(1e-12);
      });
    }
  });

  it('is deterministic, and leaves the start alone', () => {
    const { problem: plain, starts } = readSet('Gauss3');
    const start = starts[0].slice();
    const first = minimiseLeastSquares(plain, start);
    expect(start).toEqual(starts[0]);
    expect(minimiseLeastSquares(plain, start)).toEqual(first);
  });
});
