import { describe, expect, it } from 'vitest';

import { correlationOf, drawnBoundOf, shapeOf } from '../../src/dossier/draws.js';
import { formatQuantity, isUpperLimit } from '../../src/dossier/numbers.js';
import type { Quantity } from '../../src/solving/types.js';
import { drawsOf, gaussians, uniformGrid } from '../support/posterior-fixture.js';

const E = 'companions.b.elements.eccentricity';

describe('drawnBoundOf', () => {
  it('gives the quantiles of an even grid, where they are the probabilities themselves', () => {
    // Central 68.2689 % (erf(1/sqrt 2)) begins at 0.158655; the grid has 1001 points.
    const bound = drawnBoundOf(drawsOf({ [E]: uniformGrid(1000) }, 1), E)!;
    expect(bound.limit).toBeCloseTo(0.95, 12);
    expect(bound.median).toBeCloseTo(0.5, 12);
    expect(bound.lower).toBeCloseTo(0.158655, 6);
  });

  it('knows nothing of a quantity without draws', () => {
    expect(drawnBoundOf(null, E)).toBeNull();
    expect(drawnBoundOf(drawsOf({ other: [1, 2] }), E)).toBeNull();
  });
});

describe('a limit from draws', () => {
  const small: Quantity = { value: 0.03, sigma: 0.02, lower: 0.01, upper: 0.0584, unit: '' };

  it('takes the place of the 84 % one', () => {
    // The 95 % point of an even grid from 0 to 0.08 is 0.076.
    const drawn = drawnBoundOf(drawsOf({ [E]: uniformGrid(1000, 0.08) }, 1), E);
    expect(formatQuantity(small, 'text', { zeroBounded: true, drawn })).toBe('< 0.076 (95 %)');
    expect(formatQuantity(small, 'markdown', { zeroBounded: true, drawn })).toBe('&lt; 0.076 (95 %)');
    expect(formatQuantity(small, 'text', { zeroBounded: true })).toBe('< 0.058 (84 %)');
  });

  it('is decided by the draws, not by where the likelihood is largest', () => {
    // A half-Gaussian has no lower bound, although 0.51 lies far above 0.26 (the edge of the likelihood in a jitter).
    const jitter: Quantity = { value: 0.51, sigma: 0.7, lower: 0.26, upper: 1.72, unit: 'm/s' };
    const half = drawsOf({ j: gaussians(4000, 3).map(Math.abs) }, 4);
    expect(isUpperLimit(jitter)).toBe(false);
    expect(isUpperLimit(jitter, drawnBoundOf(half, 'j'))).toBe(true);
    // Five standard deviations from zero, 2.5 from it, and 1.5: the first two are values.
    for (const [away, limited] of [[5, false], [2.5, false], [1.5, true]] as const) {
      const values = gaussians(4000, 4).map((x) => x + away).filter((x) => x > 0);
      const even = values.subarray(0, values.length - (values.length % 2));
      expect(isUpperLimit(jitter, drawnBoundOf(drawsOf({ j: even }), 'j')), `${away} sigma`).toBe(limited);
    }
  }); // prettier-ignore
});

describe('shapeOf', () => {
  it('is 1 and 1 for a Gaussian (20 000 draws: about 0.02 of scatter)', () => {
    const { sides, tails } = shapeOf(gaussians(20_000, 5))!;
    expect(Math.abs(sides - 1)).toBeLessThan(0.08);
    expect(Math.abs(tails - 1)).toBeLessThan(0.05);
  });

  it('gives the ratios of the exponential distribution, whose quantiles are -ln(1 - p)', () => {
    const n = 100_000;
    const values = Float64Array.from({ length: n }, (_, i) => -Math.log(1 - (i + 0.5) / n));
    const at = (p: number): number => -Math.log(1 - p);
    const [one, two] = [0.6826894921, 0.9544997361]; // erf(1/sqrt 2), erf(2/sqrt 2)
    const upper = at((1 + one) / 2) - at(0.5);
    const lower = at(0.5) - at((1 - one) / 2);
    const wide = at((1 + two) / 2) - at((1 - two) / 2);
    const shape = shapeOf(values)!;
    expect(shape.sides).toBeCloseTo(upper / lower, 3);
    expect(shape.tails).toBeCloseTo(wide / (2 * (upper + lower)), 3);
  });

  it('has no ratio where nothing varies', () => {
    expect(shapeOf(new Float64Array(10).fill(3))).toBeNull();
    expect(shapeOf(new Float64Array(0))).toBeNull();
  });
});

describe('correlationOf', () => {
  it('agrees with values worked by hand: (1,2,3,4) with (1,3,2,4) gives 4/5', () => {
    expect(correlationOf(Float64Array.of(1, 2, 3, 4), Float64Array.of(1, 3, 2, 4))).toBeCloseTo(0.8, 14);
    expect(correlationOf(Float64Array.of(1, 2, 3), Float64Array.of(6, 4, 2))).toBeCloseTo(-1, 14);
  });

  it('keeps its digits on top of a Julian date', () => {
    const one = gaussians(2000, 6).map((x) => 1e-3 * x);
    const other = one.map((x, i) => x + 1e-3 * Math.sin(i));
    const shifted = correlationOf(one.map((x) => 2460000 + x), other)!; // prettier-ignore
    // Doubles near 2.46e6 are 4.7e-10 apart: 5e-7 of the scatter.
    expect(Math.abs(shifted - correlationOf(one, other)!)).toBeLessThan(1e-5);
  });

  it('is unknown where one of the two does not vary', () => {
    expect(correlationOf(Float64Array.of(1, 1), Float64Array.of(1, 2))).toBeNull();
  });
});
