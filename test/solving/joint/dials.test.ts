import { describe, expect, it } from 'vitest';
import type { Dial, PriorUse } from '../../../src/solving/joint/block.js';
import {
  gaussianDial,
  logarithmicDial,
  mirroredDial,
  positiveGaussianDial,
  rangeDial,
  scatterDial,
  statedDial,
  uniformDial,
} from '../../../src/solving/joint/dials.js';
import { expectWithin } from '../../support/expect-within.js';
import { integral } from './midpoint-rule.js';

interface Kind {
  readonly name: string;
  readonly dial: (use: PriorUse) => Dial;
  /** Values within reach, and where u runs for the integral of the prior. */
  readonly values: readonly number[];
  readonly from: number;
  readonly to: number;
  /** Prior probability up to a value, where it has a closed form. */
  readonly share: (value: number) => number;
}

/** Normal distribution from -8 sigma by Simpson's rule. */
function normalShare(x: number): number {
  const n = 2000;
  const step = (x + 8) / n;
  let sum = 0;
  for (let i = 0; i <= n; i++)
    sum += (i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2) * Math.exp(-0.5 * (-8 + i * step) ** 2);
  return (sum * step) / 3 / Math.sqrt(2 * Math.PI);
}

const KINDS: readonly Kind[] = [
  {
    name: 'uniform',
    dial: () => uniformDial(-2, 5),
    values: [-1.9, 0, 3.3],
    from: -2,
    to: 5,
    share: (value) => (value + 2) / 7,
  },
  {
    name: 'Gaussian',
    dial: () => gaussianDial(3, 0.4),
    values: [2, 3, 3.7],
    from: -1,
    to: 7,
    share: (value) => normalShare((value - 3) / 0.4),
  },
  {
    name: 'log-uniform',
    dial: (use) => logarithmicDial(1e-3, 2, 0, use),
    values: [2e-3, 0.1, 1.9],
    from: Math.log(1e-3),
    to: Math.log(2),
    share: (value) => Math.log(value / 1e-3) / Math.log(2000),
  },
  {
    name: 'density 1/(value + scale)',
    dial: (use) => logarithmicDial(1e-4, 50, 0.7, use),
    values: [1e-3, 0.7, 20],
    from: -40,
    to: Math.log(50),
    share: (value) => Math.log1p(value / 0.7) / Math.log1p(50 / 0.7),
  },
  {
    name: 'Gaussian of a positive number',
    dial: (use) => positiveGaussianDial(2, 0.2, use),
    values: [1.5, 2, 2.6],
    from: -5,
    to: 2,
    share: (value) => normalShare((value - 2) / 0.2),
  },
  {
    name: 'range',
    dial: (use) => rangeDial(4, 9, use),
    values: [4.2, 6, 8.8],
    from: -20,
    to: 20,
    share: (value) => (value - 4) / 5,
  },
  {
    name: 'extra scatter',
    dial: () => scatterDial(0.3, 60),
    values: [0.2, 1, 40],
    from: 0,
    to: Math.asinh(200),
    share: (value) => Math.asinh(value / 0.3) / Math.asinh(200),
  },
  {
    name: 'impact parameter',
    dial: (use) => mirroredDial(1, use),
    values: [0.02, 0.5, 0.98],
    from: 0,
    to: 9e3,
    share: (value) => value,
  },
];

describe('a dial', () => {
  for (const { name, dial, values, from, to, share } of KINDS) {
    it(`${name}: comes back to the value it was set to`, () => {
      for (const use of ['all', 'stated'] as const)
        for (const value of values) {
          const own = dial(use);
          expectWithin(own.value(own.position(value)), value, {
            rel: 1e-13,
            unit: '1',
            why: 'rounding of exp, ln and roots',
          });
        }
    });

    it(`${name}: has the slopes of difference quotients, of value and of prior`, () => {
      for (const use of ['all', 'stated'] as const) {
        const own = dial(use);
        for (const value of values) {
          const u = own.position(value);
          const step = 1e-5;
          const bound = { rel: 1e-7, unit: '1', why: 'central difference of step 1e-5' };
          expectWithin(own.slope(u), (own.value(u + step) - own.value(u - step)) / (2 * step), bound);
          const byPrior = (own.logPrior(u + step) - own.logPrior(u - step)) / (2 * step);
          expectWithin(own.logPriorSlope(u), byPrior, { abs: 1e-6 * (1 + Math.abs(byPrior)), unit: '1', why: 'the same' }); // prettier-ignore
        }
      }
    });

    it(`${name}: its prior integrates to its normalisation, and up to each value to the stated distribution`, () => {
      const own = dial('all');
      const density = (u: number): number => Math.exp(own.logPrior(u));
      const whole = Math.exp(own.logNormalisation);
      const bound = { abs: 2e-5, unit: '1', why: 'midpoint rule with 200 000 points; ends cut at 1e-9' };
      expectWithin(integral(density, from, to) / whole, 1, bound);
      for (const value of values)
        expectWithin(integral(density, from, own.position(value)) / whole, share(value), bound);
    });
  }

  it('is not to be had for a number that is fixed', () => {
    expect(statedDial({ kind: 'fixed', value: 3 }, true, 'all')).toBeNull();
  });

  it('starts clear of the ends of a range, where its map is flat', () => {
    const own = rangeDial(0, 1, 'all');
    for (const value of [-3, 0, 1e-9, 1, 7]) {
      const inside = own.value(own.position(value));
      expect(inside).toBeGreaterThan(0.01);
      expect(inside).toBeLessThan(0.99);
    }
  });

  it('ends at its walls', () => {
    expect(uniformDial(0, 1).logPrior(1.0001)).toBe(-Infinity);
    expect(logarithmicDial(1, 10, 0, 'stated').logPrior(Math.log(0.99))).toBe(-Infinity);
    expect(logarithmicDial(1, 10, 2, 'stated').logPrior(Math.log(10.1))).toBe(-Infinity);
    expect(scatterDial(1, 5).logPrior(Math.asinh(5.01))).toBe(-Infinity);
    expect(rangeDial(0, 1, 'all').logPrior(25)).toBe(-Infinity);
  });

  it('mirrored: says the same on either side of 0', () => {
    for (const own of [scatterDial(0.3, 60), mirroredDial(1, 'all')])
      for (const u of [0.1, 1, 4]) {
        expect(Math.abs(own.value(-u))).toBe(Math.abs(own.value(u)));
        expect(own.logPrior(-u)).toBe(own.logPrior(u));
      }
  });
});
