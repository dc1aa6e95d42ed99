import * as fc from 'fast-check';
import {
  medianAbsoluteDeviation as referenceDeviation,
  quantile as referenceQuantile,
} from 'simple-statistics';
import { describe, expect, it } from 'vitest';
import {
  mean,
  median,
  medianAbsoluteDeviation,
  quantile,
  quantileSorted,
  rootMeanSquare,
  standardDeviation,
  weightedMean,
} from '../../src/numerics/summary.js';

const seeded = { seed: 20261201, numRuns: 200 };
const numbers = fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 40 });

describe('quantile and its relatives', () => {
  it('equal those of simple-statistics (type 7), 200 random samples', () => {
    fc.assert(
      fc.property(numbers, fc.double({ min: 0, max: 1, noNaN: true }), (values, probability) => {
        const expected = referenceQuantile(values, probability);
        expect(Math.abs(quantile(Float64Array.from(values), probability) - expected)).toBeLessThan(1e-8);
        expect(Math.abs(medianAbsoluteDeviation(values) - referenceDeviation(values))).toBeLessThan(1e-8);
      }),
      seeded,
    );
  });

  it('match hand values: numpy.quantile([7, 1, 3, 10], [0, 0.25, 0.5, 0.9, 1]) = 1, 2.5, 5, 9.1, 10', () => {
    const values = Float64Array.of(7, 1, 3, 10);
    const found = [0, 0.25, 0.5, 0.9, 1].map((p) => quantile(values, p));
    [1, 2.5, 5, 9.1, 10].forEach((expected, k) => {
      expect(Math.abs(found[k]! - expected)).toBeLessThan(1e-14);
    });
    expect(values).toEqual(Float64Array.of(7, 1, 3, 10));
    expect(median(values)).toBe(5);
    // |7-5|, |1-5|, |3-5|, |10-5| = 2, 4, 2, 5.
    expect(medianAbsoluteDeviation(values)).toBe(3);
    expect(quantileSorted([4], 0.3)).toBe(4);
  });
});

describe('means', () => {
  it('match hand values', () => {
    expect(weightedMean([1, 5], [3, 1])).toBe(2);
    expect(mean([1, 2, 6])).toBe(3);
    // Departures -3, -1, 4: squares sum to 26, halved by n - 1 = 2.
    expect(standardDeviation([2, 4, 9])).toBe(Math.sqrt(13));
    expect(rootMeanSquare([3, -4])).toBe(Math.sqrt(12.5));
  });

  it('keep the digits of Julian dates: the mean of 2459000.5 + k·1e-6 d to 1e-9 d', () => {
    const epochs = Float64Array.from({ length: 1001 }, (_, k) => 2459000.5 + k * 1e-6);
    const weights = epochs.map((_, k) => 1 + (k % 2));
    expect(Math.abs(mean(epochs) - 2459000.5 - 500e-6)).toBeLessThan(1e-9);
    expect(Math.abs(weightedMean(epochs, weights) - 2459000.5 - 500e-6)).toBeLessThan(1e-9);
    expect(Math.abs(standardDeviation(epochs) - 1e-6 * Math.sqrt((1001 * 1002) / 12))).toBeLessThan(1e-9);
  });
});

it('says what is wrong with unusable input', () => {
  for (const summary of [median, mean, rootMeanSquare, medianAbsoluteDeviation])
    expect(() => summary([])).toThrow(/no values/);
  expect(() => standardDeviation([1])).toThrow(/two values/);
  expect(() => quantile([1], 1.5)).toThrow(/1.5/);
  expect(() => quantile([1], NaN)).toThrow(RangeError);
  expect(() => weightedMean([1, 2], [1])).toThrow(/2 values but 1 weights/);
  expect(() => weightedMean([], [])).toThrow(/no values/);
  expect(() => weightedMean([1], [0])).toThrow(/sum to 0/);
});
