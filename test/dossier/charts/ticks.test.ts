import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { linearTicks, logTicks } from '../../../src/dossier/charts/ticks.js';

const readBack = (text: string): number => Number(text.replace('\u2212', '-'));

describe('linearTicks', () => {
  it('gives evenly spaced round values inside the interval whose texts say what they are', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e6, max: 1e6, noNaN: true }),
        fc.double({ min: -4, max: 6, noNaN: true }),
        (low, logSpan) => {
          const high = low + 10 ** logSpan;
          const { values, texts } = linearTicks(low, high, 6);
          expect(values.length).toBeGreaterThanOrEqual(3);
          expect(values.length).toBeLessThanOrEqual(11);
          const step = values[1]! - values[0]!;
          values.forEach((value, index) => {
            expect(value).toBeGreaterThanOrEqual(low - 1e-6 * step);
            expect(value).toBeLessThanOrEqual(high + 1e-6 * step);
            if (index > 0) expect(Math.abs(value - values[index - 1]! - step)).toBeLessThan(1e-3 * step);
            expect(Math.abs(readBack(texts[index]!) - value)).toBeLessThan(1e-3 * step);
          });
          const leading = step / 10 ** Math.floor(Math.log10(step * 1.0001));
          expect([1, 2, 5].some((digit) => Math.abs(leading - digit) < 1e-3)).toBe(true);
        },
      ),
      { seed: 11, numRuns: 300 },
    );
  });
  it('keeps the edges free when asked', () => {
    const { values } = linearTicks(0, 10, 10, [0.05, 0.15]);
    expect(values[0]).toBe(1);
    expect(values.at(-1)).toBe(8);
  });
  it('gives none for an empty or endless interval', () => {
    expect(linearTicks(1, 1, 5).values).toEqual([]);
    expect(linearTicks(0, Infinity, 5).values).toEqual([]);
  });
});

it('logTicks labels powers of ten and leaves no more than one decade without a label', () => {
  const { values, texts } = logTicks(0.5, 5000);
  expect(values[0]).toBe(0.5);
  expect(values.at(-1)).toBe(5000);
  for (const power of [1, 10, 100, 1000]) expect(texts[values.indexOf(power)]).toBe(String(power));
  texts.forEach((text, index) => {
    if (text !== '') expect(Number(text)).toBe(values[index]);
  });
});
