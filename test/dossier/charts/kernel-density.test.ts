import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { densityCurve } from '../../../src/dossier/charts/kernel-density.js';
import type { DrawnQuantity } from '../../../src/dossier/charts/posterior-quantities.js';
import { gaussianWeights, smoothLines } from '../../../src/dossier/charts/smoothing.js';
import { spreadOf } from '../../../src/dossier/charts/spread-of-draws.js';
import { randomSource } from '../../support/solved-fixture.js';

const N = 20_000;
const random = randomSource(3);
const gaussians = Float64Array.from({ length: N }, () => random.gauss());

function curveOf(
  values: Float64Array,
  changes: Partial<DrawnQuantity> = {},
): ReturnType<typeof densityCurve> {
  const bounds = [-Infinity, Infinity] as const;
  const quantity: DrawnQuantity = {
    key: 'x', symbol: [], unit: '', values, reported: null, bounds, cycle: 0, ...changes,
  }; // prettier-ignore
  return densityCurve(values, spreadOf(quantity, values));
}

function integral({ x, density }: ReturnType<typeof densityCurve>): number {
  return density.reduce((sum, value) => sum + value, 0) * (x[1]! - x[0]!);
}

const normal = (x: number): number => Math.exp(-x * x / 2) / Math.sqrt(2 * Math.PI); // prettier-ignore

describe('densityCurve', () => {
  it.each([
    ['a Gaussian', gaussians, {}],
    ['an epoch of seven digits', gaussians.map((value) => 2_460_412.8 + 1e-3 * value), {}],
    ['an eccentricity at its bound', gaussians.map((value) => Math.abs(0.04 * value)), { bounds: [0, 1] }],
    [
      'a whole cycle',
      gaussians.map((value) => ((70 * value + 900) % 360) - 180),
      { cycle: 360, reported: 0 },
    ],
    ['a skewed quantity', gaussians.map((value) => Math.exp(value / 2)), {}],
  ] as const)('of %s integrates to 1', (_, values, changes) => {
    // 0.2 % of the draws may lie outside the interval that is shown.
    expect(Math.abs(integral(curveOf(values, changes)) - 1)).toBeLessThan(0.0025);
  });

  it('is the Gaussian density within 4 % of its height', () => {
    const { x, density } = curveOf(gaussians);
    x.forEach((at, i) => {
      expect(Math.abs(density[i]! - normal(at))).toBeLessThan(0.04 * normal(0));
    });
  });

  it('does not leak out at a bound: a half Gaussian has its full height at 0', () => {
    const { x, density } = curveOf(gaussians.map(Math.abs), { bounds: [0, Infinity] });
    expect(x[0]!).toBeGreaterThan(0);
    expect(x[0]!).toBeLessThan(0.02);
    // 2 normal(0); without reflection it would be half of that.
    expect(Math.abs(density[0]! / (2 * normal(0)) - 1)).toBeLessThan(0.05);
  });

  it('joins the two ends of a cycle', () => {
    const values = gaussians.map((value) => 180 + 100 * value - 360 * Math.round((180 + 100 * value) / 360));
    const { density } = curveOf(values, { cycle: 360, reported: 0 });
    expect(Math.abs(density[0]! / density.at(-1)! - 1)).toBeLessThan(0.02);
    expect(density[0]!).toBeGreaterThan(1.2 * density[density.length >> 1]!);
  });
});

describe('smoothLines', () => {
  it('turns a spike into the Gaussian', () => {
    const line = new Float64Array(101);
    line[50] = 1;
    smoothLines(line, 1, 101, 1, 0, gaussianWeights(6), false);
    line.forEach((value, i) => {
      // The kernel ends at 3.5 sigma, so the rest is taller by the mass beyond, 5e-4.
      if (Math.abs(i - 50) <= 21) expect(Math.abs(value * 6 - normal((i - 50) / 6))).toBeLessThan(3e-4);
    });
  });

  it('keeps the sum of every line, along rows and columns, reflected or periodic', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0, max: 5, noNaN: true }), { minLength: 12, maxLength: 12 }),
        fc.double({ min: 0, max: 9, noNaN: true }),
        fc.boolean(),
        (values, sigma, periodic) => {
          const rows = Float64Array.from(values);
          smoothLines(rows, 3, 4, 1, 4, gaussianWeights(sigma), periodic);
          const columns = Float64Array.from(values);
          smoothLines(columns, 4, 3, 4, 1, gaussianWeights(sigma), periodic);
          const sum = (grid: ArrayLike<number>, indices: number[]): number =>
            indices.reduce((total, index) => total + grid[index]!, 0);
          for (const row of [0, 1, 2]) {
            const indices = [0, 1, 2, 3].map((k) => 4 * row + k);
            expect(Math.abs(sum(rows, indices) - sum(values, indices))).toBeLessThan(1e-9);
          }
          for (const column of [0, 1, 2, 3]) {
            const indices = [0, 4, 8].map((k) => k + column);
            expect(Math.abs(sum(columns, indices) - sum(values, indices))).toBeLessThan(1e-9);
          }
        },
      ),
      { seed: 4, numRuns: 100 },
    );
  });
});
