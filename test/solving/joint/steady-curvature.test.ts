import { describe, expect, it } from 'vitest';
import type { SmoothDensity } from '../../../src/numerics/sampling/density.js';
import { steadyCovariance } from '../../../src/solving/joint/steady-curvature.js';
import { curvatureOfDensity } from '../../../src/solving/posterior/density-curvature.js';
import { expectWithin } from '../../support/expect-within.js';

/** Gaussian of two coordinates whose sum is known `ratio` times better than their difference, and a third of its own. */
function tied(ratio: number): SmoothDensity {
  return {
    size: 3,
    evaluate([a, b, c], gradient) {
      const sum = (a! + b!) / Math.SQRT2;
      const difference = (a! - b!) / Math.SQRT2;
      const [p, q, r] = [ratio * ratio * sum, difference, (c! - 1) / 0.04];
      gradient[0] = -(p + q) / Math.SQRT2;
      gradient[1] = -(p - q) / Math.SQRT2;
      gradient[2] = -r;
      return -0.5 * (p * sum + q * difference + r * (c! - 1));
    },
  };
}

describe('the covariance of coordinates that are closely tied', () => {
  const centre = Float64Array.of(0, 0, 1);
  const bound = { rel: 1e-3, unit: '1', why: 'difference quotients of a quadratic function' };

  for (const ratio of [1, 30, 300, 3000])
    it(`is exact for a Gaussian ${ratio} times as long as wide`, () => {
      const got = steadyCovariance(tied(ratio), centre);
      const variance = 0.5 * (1 + ratio ** -2);
      expectWithin(got[0]!, variance, bound);
      expectWithin(got[4]!, variance, bound);
      expectWithin(got[8]!, 0.04, bound);
      const correlation = got[1]! / variance;
      expectWithin(correlation, (ratio ** -2 - 1) / (1 + ratio ** -2), { abs: 1e-3, unit: '1', why: 'the same' });
    }); // prettier-ignore

  it('is what one measurement along single coordinates misses', () => {
    expect(curvatureOfDensity(tied(300), centre)[0]!).toBeLessThan(0.3 * 0.5);
  });
});
