import { describe, it } from 'vitest';
import { LineLikelihood } from '../../../src/solving/timing/line-likelihood.js';
import { expectWithin } from '../../support/expect-within.js';

const CYCLES = [-3, -1, 0, 2, 5, 6];
const SIGMAS = [0.8, 1.1, 0.6, 1, 0.9, 1.3];
const VALUES = Float64Array.of(1.1, -0.4, 0.7, 0.2, -1.3, 0.5);

/** The same by brute force: the likelihood summed over a fine grid of levels and slopes. */
function integrated(jitter: number): number {
  let sum = 0;
  const step = 0.01;
  for (let level = -6; level <= 6; level += step) {
    for (let slope = -2; slope <= 2; slope += step) {
      let log = 0;
      CYCLES.forEach((cycle, i) => {
        const variance = SIGMAS[i]! ** 2 + jitter ** 2;
        log -= 0.5 * ((VALUES[i]! - level - slope * cycle) ** 2 / variance + Math.log(variance));
      });
      sum += Math.exp(log) * step * step;
    }
  }
  return Math.log(sum);
}

describe('LineLikelihood', () => {
  const likelihood = new LineLikelihood(CYCLES, SIGMAS);

  it('is the likelihood integrated over all straight lines (brute force on a grid)', () => {
    const offset = integrated(0) - likelihood.evaluate(VALUES, 0);
    for (const jitter of [0.3, 1, 2]) {
      expectWithin(integrated(jitter) - likelihood.evaluate(VALUES, jitter), offset, {
        abs: 2e-5,
        unit: '1',
        why: 'grid of 0.01, cut off at 6',
      });
    }
  });

  it('has the slope by jitter that a difference quotient has', () => {
    const quotient =
      (likelihood.evaluate(VALUES, 0.7 + 1e-5) - likelihood.evaluate(VALUES, 0.7 - 1e-5)) / 2e-5;
    likelihood.evaluate(VALUES, 0.7);
    expectWithin(likelihood.jitterSlope, quotient, { rel: 1e-8, unit: '1', why: 'truncation 1e-10' });
  });

  it('does not care for lines that are added', () => {
    const before = likelihood.evaluate(VALUES, 0.5);
    const tilted = VALUES.map((value, i) => value + 4 - 0.3 * CYCLES[i]!);
    expectWithin(likelihood.evaluate(tilted, 0.5), before, { abs: 1e-12, unit: '1', why: 'rounding' });
  });
});
