import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DampedOscillatorProcess } from '../../../src/numerics/gaussian-process/damped-oscillator-process.js';
import { TERM_SIZE } from '../../../src/numerics/gaussian-process/oscillator-terms.js';
import { RandomStream } from '../../../src/numerics/random.js';
import { expectWithin } from '../../support/expect-within.js';
import { DenseProcess, oscillationAt, slopeOf } from './dense.js';
import { randomCase, SEEDS, termsOf } from './random-process.js';

const DENSE = { rel: 1e-11, unit: '1', why: 'both sides round; worst seen 5e-14' };

describe('a process of damped oscillators', () => {
  it('has the determinant, the solutions and the likelihood of the dense matrix', () => {
    for (const seed of SEEDS) {
      const { residuals, dense, process } = randomCase(seed);
      expectWithin(process.logDeterminant, dense.logDeterminant(), {
        abs: 1e-11 * dense.n,
        unit: '1',
        why: 'a sum of n logarithms',
      });
      expectWithin(process.logLikelihood(residuals), dense.logLikelihood(residuals), DENSE);
      const solved = new Float64Array(dense.n);
      process.solve(residuals, solved);
      const wanted = dense.solve(residuals);
      const size = Math.max(...wanted.map(Math.abs));
      wanted.forEach((value, i) => {
        expectWithin(solved[i]!, value, {
          abs: 1e-10 * size,
          unit: '1',
          why: 'of the largest; worst seen 1e-13',
        });
      });
      process.solve(residuals, residuals);
      expect(residuals).toEqual(solved);
    }
  });

  it('has -N^-1 r as slope by the residuals and (α² - diag N^-1)/2 as slope by the diagonal', () => {
    for (const seed of SEEDS) {
      const { residuals, dense, process } = randomCase(seed);
      expectWithin(process.differentiate(residuals), dense.logLikelihood(residuals), DENSE);
      const alpha = dense.solve(residuals);
      const inverse = dense.inverseDiagonal();
      const size = Math.max(...inverse, ...alpha.map((value) => value * value));
      for (let i = 0; i < dense.n; i++) {
        const bound = { abs: 1e-10 * size, unit: '1', why: 'of the largest; worst seen 2e-13' };
        expectWithin(process.byResidual[i]!, -alpha[i]!, bound);
        expectWithin(process.byDiagonal[i]!, 0.5 * (alpha[i]! ** 2 - inverse[i]!), bound);
      }
    }
  });

  it('has slopes by its terms that are those of the dense likelihood', () => {
    for (const seed of SEEDS.slice(0, 15)) {
      const { times, diagonal, residuals, oscillations, process } = randomCase(seed);
      process.differentiate(residuals);
      // From (a, s = bd, c, w = c² + d²) to (a, b, c, d).
      oscillations.forEach((oscillation, k) => {
        const [byA, byS, byC, byW] = process.byTerm.subarray(
          k * TERM_SIZE,
          (k + 1) * TERM_SIZE,
        ) as unknown as [number, number, number, number];
        const { b, c, d } = oscillation;
        const slopes = { a: byA, b: d * byS, c: byC + 2 * c * byW, d: b * byS + 2 * d * byW };
        for (const key of ['a', 'b', 'c', 'd'] as const) {
          const x = oscillation[key];
          // Phases d·lag must stay put over the memory 1/c.
          const step = 0.02 * (key === 'd' ? Math.min(c, d) : Math.max(Math.abs(x), 1e-3));
          const at = (value: number): number =>
            new DenseProcess(times, diagonal, (lag) =>
              oscillations.reduce(
                (sum, other, l) => sum + oscillationAt(l === k ? { ...other, [key]: value } : other, lag),
                0,
              ),
            ).logLikelihood(residuals);
          const wanted = slopeOf(at, x, step);
          const size = Math.abs(wanted) + 1e-2 / step;
          expectWithin(slopes[key], wanted, {
            abs: 1e-7 * size,
            unit: '1',
            why: 'what the differences can give',
          });
        }
      });
    }
  });

  it('takes an exponential without white noise for the autoregressive series that it is', () => {
    const random = RandomStream.fromSeed(11);
    const n = 20_000;
    const times = Float64Array.from({ length: n }, (_, i) => 0.1 * i + 0.05 * random.uniform());
    const residuals = Float64Array.from({ length: n }, () => random.normal());
    const process = new DampedOscillatorProcess(times, 1);
    expect(process.factor(termsOf([{ a: 4, b: 0, c: 0.7, d: 0 }]), new Float64Array(n))).toBe(true);
    // x_i given x_(i-1) is normal around φ·x_(i-1) with variance 4(1 - φ²), φ = exp(-0.7 gap).
    let wanted = -0.5 * (residuals[0]! ** 2 / 4 + Math.log(2 * Math.PI * 4));
    for (let i = 1; i < n; i++) {
      const phi = Math.exp(-0.7 * (times[i]! - times[i - 1]!));
      const variance = 4 * (1 - phi * phi);
      wanted -=
        0.5 * ((residuals[i]! - phi * residuals[i - 1]!) ** 2 / variance + Math.log(2 * Math.PI * variance));
    }
    expectWithin(process.logLikelihood(residuals), wanted, {
      rel: 1e-11,
      unit: '1',
      why: '20 000 terms; worst seen 6e-15',
    });
  });

  it('falls apart into independent parts over a gap that nothing survives', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1e6 }),
        fc.double({ min: 1e4, max: 1e12, noNaN: true }),
        (seed, gap) => {
          const random = RandomStream.fromSeed(seed);
          const one = Float64Array.from({ length: 12 }, (_, i) => 0.5 * i);
          const both = Float64Array.from([...one, ...one.map((t) => t + gap)]);
          const diagonal = Float64Array.from({ length: 24 }, () => 0.1 + random.uniform());
          const residuals = Float64Array.from({ length: 24 }, () => random.normal());
          const terms = termsOf([{ a: 1, b: 0.1, c: 0.1, d: 1 }]);
          const likelihood = (times: Float64Array, from: number, to: number): number => {
            const process = new DampedOscillatorProcess(times, 1);
            expect(process.factor(terms, diagonal.subarray(from, to))).toBe(true);
            return process.differentiate(residuals.subarray(from, to));
          };
          const second = both.slice(12);
          const parts = likelihood(one, 0, 12) + likelihood(second, 12, 24);
          expectWithin(likelihood(both, 0, 24), parts, {
            abs: 1e-11,
            unit: '1',
            why: 'sums of 24 terms of order 1',
          });
        },
      ),
      { seed: 5, numRuns: 50 },
    );
  });

  it('does not change when all terms are split in two halves', () => {
    const { times, diagonal, residuals, oscillations, process } = randomCase(9);
    const halves = oscillations.flatMap((o) => [1, 2].map(() => ({ ...o, a: o.a / 2, b: o.b / 2 })));
    const split = new DampedOscillatorProcess(times, halves.length);
    expect(split.factor(termsOf(halves), diagonal)).toBe(true);
    expectWithin(split.differentiate(residuals), process.differentiate(residuals), DENSE);
    oscillations.forEach((_, k) => {
      expectWithin(split.byTerm[2 * k * TERM_SIZE]!, process.byTerm[k * TERM_SIZE]!, {
        rel: 1e-9,
        unit: '1',
        why: 'same slope by a',
      });
    });
  });

  it('says no to terms that do not decay and to a matrix that is not positive', () => {
    const process = new DampedOscillatorProcess(Float64Array.of(0, 1, 1, 2), 1);
    const white = new Float64Array(4).fill(0.1);
    expect(process.factor(termsOf([{ a: 1, b: 0, c: 0.1, d: 1 }]), white)).toBe(true);
    for (const bad of [
      { a: -1, b: 0, c: 0.1, d: 1 },
      { a: 1, b: 0, c: 0, d: 1 },
      { a: 0.2, b: 9, c: 0.1, d: 3 },
      { a: NaN, b: 0, c: 0.1, d: 1 },
      { a: 1, b: 0, c: Infinity, d: 1 },
    ])
      expect(process.factor(termsOf([bad]), white)).toBe(false);
    expect(process.logDeterminant).toBeNaN();
    // Two points at one time, without white noise: singular.
    expect(process.factor(termsOf([{ a: 1, b: 0, c: 0.1, d: 1 }]), new Float64Array(4))).toBe(false);
    expect(process.factor(termsOf([{ a: 1, b: 0, c: 0.1, d: 1 }]), new Float64Array(4).fill(NaN))).toBe(
      false,
    );
    expect(process.factor(termsOf([{ a: 0, b: 0, c: 0.1, d: 1 }]), white)).toBe(true); // white noise alone
    expectWithin(process.logDeterminant, 4 * Math.log(0.1), {
      abs: 1e-14,
      unit: '1',
      why: 'four equal variances',
    });
  });

  it('refuses times that are not ascending or not finite, and nothing at all', () => {
    expect(() => new DampedOscillatorProcess(Float64Array.of(0, 2, 1), 1)).toThrow(/1 follows 2/);
    expect(() => new DampedOscillatorProcess(Float64Array.of(0, NaN), 1)).toThrow(RangeError);
    expect(() => new DampedOscillatorProcess(new Float64Array(0), 1)).toThrow(RangeError);
    expect(() => new DampedOscillatorProcess(Float64Array.of(0), 0)).toThrow(RangeError);
  });
});
