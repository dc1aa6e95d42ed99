import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { spread } from '../../../src/dossier/charts/side-labels.js';
import { keepExtremes } from '../../../src/dossier/charts/thin.js';
import { randomSource } from '../../support/solved-fixture.js';

describe('keepExtremes', () => {
  it('keeps the highest and lowest sample of every column, and no more than two', () => {
    const random = randomSource(8);
    const n = 20_000;
    const positions = Float64Array.from({ length: n }, (_, i) => (310 * i) / n - 5);
    const values = Float64Array.from({ length: n }, () => random.gauss());
    const kept = keepExtremes(positions, values, 300);
    for (let column = 0; column < 300; column += 1) {
      const all = Array.from(positions.keys()).filter((i) => Math.floor(positions[i]!) === column);
      const own = kept.filter((i) => Math.floor(positions[i]!) === column);
      expect(own.length).toBeLessThanOrEqual(2);
      expect(Math.max(...own.map((i) => values[i]!))).toBe(Math.max(...all.map((i) => values[i]!)));
      expect(Math.min(...own.map((i) => values[i]!))).toBe(Math.min(...all.map((i) => values[i]!)));
    }
    expect(kept).toEqual([...kept].sort((one, other) => one - other));
    expect(kept.every((i) => positions[i]! >= 0 && positions[i]! <= 300)).toBe(true);
  });
  it('keeps everything where samples are sparse and leaves out what is not a number', () => {
    expect(keepExtremes(Float64Array.of(0.5, 1.5, 2.5), Float64Array.of(1, NaN, 3), 3)).toEqual([0, 2]);
  });
});

describe('spread', () => {
  it('keeps labels apart, in order, and inside', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 100, noNaN: true }), { maxLength: 6 }), (values) => {
        const wanted = [...values].sort((one, other) => one - other);
        const placed = spread(wanted, 9, 0, 100);
        placed.forEach((place, i) => {
          expect(place).toBeGreaterThanOrEqual(-1e-9);
          expect(place).toBeLessThanOrEqual(100 + 1e-9);
          if (i > 0) expect(place - placed[i - 1]!).toBeGreaterThanOrEqual(9 - 1e-9);
        });
      }),
      { seed: 2, numRuns: 500 },
    );
  });
  it('leaves labels that do not clash and moves two of one height equally far', () => {
    expect(spread([10, 40, 70], 9, 0, 100)).toEqual([10, 40, 70]);
    expect(spread([50, 50], 9, 0, 100)).toEqual([45.5, 54.5]);
  });
});
