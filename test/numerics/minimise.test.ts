import { describe, expect, it } from 'vitest';
import { minimiseScalar, minimiseSmooth, nelderMead } from '../../src/numerics/minimise.js';
import type { ValueAndGradient } from '../../src/numerics/minimise.js';
import { RandomStream } from '../../src/numerics/random.js';

/** Sum of 100 (x_{j+1} - x_j^2)^2 + (1 - x_j)^2 (Rosenbrock 1960, chained): minimum 0 at all ones. */
const rosenbrock: ValueAndGradient = (x, gradient) => {
  gradient.fill(0);
  let value = 0;
  for (let j = 0; j + 1 < x.length; j++) {
    const valley = x[j + 1]! - x[j]! ** 2;
    const floor = 1 - x[j]!;
    value += 100 * valley ** 2 + floor ** 2;
    gradient[j]! += -400 * valley * x[j]! - 2 * floor;
    gradient[j + 1]! += 200 * valley;
  }
  return value;
};

const distanceFromOnes = (x: Float64Array): number => Math.hypot(...x.map((value) => value - 1));

describe('minimiseScalar', () => {
  it('finds known minima', () => {
    // cos at pi; x^x at 1/e; x^4 at 0, where parabolas mislead; both one-sided slopes.
    expect(Math.abs(minimiseScalar(Math.cos, 1, 6).position - Math.PI)).toBeLessThan(1e-7);
    expect(Math.abs(minimiseScalar((x) => x ** x, 0, 2).position - Math.exp(-1))).toBeLessThan(1e-7);
    expect(Math.abs(minimiseScalar((x) => x ** 4, -1, 2, 1e-6).position)).toBeLessThan(1e-3);
    expect(minimiseScalar((x) => x, 2, 5).position).toBeLessThan(2 + 1e-6);
    expect(minimiseScalar((x) => -x, 2, 5).position).toBeGreaterThan(5 - 1e-6);
    expect(Math.abs(minimiseScalar((x) => Math.abs(x - 0.3), 0, 1).position - 0.3)).toBeLessThan(1e-7);
  });

  it('returns the value at the position, inside the bounds', () => {
    const found = minimiseScalar((x) => Math.sin(5 * x) + 0.1 * x * x, -3, 4);
    expect(found.value).toBe(Math.sin(5 * found.position) + 0.1 * found.position ** 2);
    expect(found.position >= -3 && found.position <= 4).toBe(true);
  });

  it('refuses bounds out of order', () => {
    for (const [a, b] of [
      [1, 1],
      [2, 1],
      [NaN, 1],
      [0, Infinity],
    ] as const) {
      // prettier-ignore
      expect(() => minimiseScalar(Math.cos, a, b)).toThrow(RangeError);
    }
  });
});

describe('nelderMead', () => {
  it.each([1, 2, 4])('finds the minimum of a shifted bowl in %i dimensions', (p) => {
    const f = (x: Float64Array): number =>
      x.reduce((sum, value, j) => sum + (j + 1) * (value - j - 0.5) ** 2, 3);
    const found = nelderMead(f, new Float64Array(p), new Float64Array(p).fill(0.7));
    expect(found.status).toBe('converged');
    expect(Math.abs(found.value - 3)).toBeLessThan(1e-8);
  });

  it('gets along the valley of Rosenbrock', () => {
    const scratch = new Float64Array(2);
    const found = nelderMead(
      (x) => rosenbrock(x, scratch),
      Float64Array.of(-1.2, 1),
      Float64Array.of(0.5, 0.5),
      {
        valueTolerance: 1e-14,
      },
    );
    expect(distanceFromOnes(found.parameters)).toBeLessThan(1e-5);
  });

  it('improves on a point that only claims to be an optimum, and takes NaN for a wall', () => {
    const f = (x: Float64Array): number => (x[0]! < 0 ? NaN : (x[0]! - 0.1) ** 2 + (x[1]! + 2) ** 2);
    const found = nelderMead(f, Float64Array.of(1, 1), Float64Array.of(-0.9, 0.1));
    expect(found.value).toBeLessThan(1e-8);
  });

  it('keeps to its limit and leaves the start alone', () => {
    const start = Float64Array.of(5, 5);
    const scratch = new Float64Array(2);
    let calls = 0;
    const found = nelderMead((x) => (calls++, rosenbrock(x, scratch)), start, Float64Array.of(1, 1), {
      maxEvaluations: 30,
    });
    expect(found.status).toBe('evaluation-limit');
    expect(calls).toBe(found.evaluations);
    expect(calls).toBeLessThan(30 + 5);
    expect(start).toEqual(Float64Array.of(5, 5));
  });
});

describe('minimiseSmooth', () => {
  it.each([2, 10, 30])('finds the minimum of the chained Rosenbrock function of %i variables', (p) => {
    // Only the first start of more than three variables is used: from elsewhere a second, local minimum may be met.
    const start = new Float64Array(p).fill(0);
    const found = minimiseSmooth(rosenbrock, start, { maxIterations: 1000 });
    expect(found.status).toBe('converged');
    expect(distanceFromOnes(found.parameters)).toBeLessThan(1e-4);
    expect(found.gradientNorm).toBeLessThan(1e-3);
  });

  it('solves badly scaled quadratics when told the scale, 20 random ones', () => {
    const random = RandomStream.fromSeed(10);
    for (let round = 0; round < 20; round++) {
      const p = 1 + random.integerBelow(12);
      const scale = Float64Array.from({ length: p }, () => 10 ** random.uniformBetween(-6, 6));
      const centre = scale.map((s) => s * random.normal());
      const stretch = Float64Array.from({ length: p }, () => random.uniformBetween(0.2, 5));
      const bowl: ValueAndGradient = (x, gradient) => {
        let value = 0;
        for (let j = 0; j < p; j++) {
          const u = (x[j]! - centre[j]!) / scale[j]!;
          value += 0.5 * stretch[j]! * u * u;
          gradient[j] = (stretch[j]! * u) / scale[j]!;
        }
        return value;
      };
      const found = minimiseSmooth(bowl, new Float64Array(p), { scale });
      expect(found.status).toBe('converged');
      expect(found.value).toBeLessThan(1e-10);
    }
  });

  it('turns round at the edge of the domain: -ln x + x has its minimum at 1', () => {
    const barrier: ValueAndGradient = (x, gradient) => {
      gradient[0] = 1 - 1 / x[0]!;
      return x[0]! > 0 ? x[0]! - Math.log(x[0]!) : Infinity;
    };
    for (const start of [1e-3, 0.5, 300]) {
      const found = minimiseSmooth(barrier, Float64Array.of(start));
      expect(Math.abs(found.parameters[0]! - 1)).toBeLessThan(1e-5);
    }
  });

  it('never returns a point worse than the start, and says when it could not begin or go on', () => {
    const misled: ValueAndGradient = (x, gradient) => {
      gradient[0] = -2 * x[0]!; // the sign is wrong
      return x[0]! ** 2;
    };
    const found = minimiseSmooth(misled, Float64Array.of(1));
    expect(found.status).toBe('no-descent');
    expect(found.value).toBe(1);
    expect(minimiseSmooth(() => NaN, Float64Array.of(1)).status).toBe('non-finite-start');
    expect(minimiseSmooth(rosenbrock, Float64Array.of(-1.2, 1), { maxIterations: 3 }).status).toBe(
      'iteration-limit',
    );
  });
});
