import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { UsageError } from '../../src/errors.js';
import { didYouMean, editDistance, nearest } from '../../src/observations/suggest.js';
import { parseMeasured, parseRange, readChoice } from '../../src/observations/quantity.js';

describe('quantities', () => {
  it.each([
    ['0.94 +- 0.03', 'star mass', 0.94, 0.03],
    ['0.94 ± 0.03 M_sun', 'star mass', 0.94, 0.03],
    ['0.94 M_sun +- 0.03 M_sun', 'star mass', 0.94, 0.03],
    ['0.94+-0.03', 'star mass', 0.94, 0.03],
    ['0.94 +/- 0.03', 'star mass', 0.94, 0.03],
    ['5480 K', 'temperature', 5480, 0],
    ['1.5 +- 0.5 km/s', 'velocity', 1500, 500],
    ['1.5 km/s +- 20 m/s', 'velocity', 1500, 20],
    ['−2.5e1 m/s', 'velocity', -25, 0],
    ['2 yr', 'period', 730.5, 0],
    ['12 h', 'period', 0.5, 0],
    ['.5', 'number', 0.5, 0],
  ] as const)('reads %s', (text, kind, value, sigma) => {
    expect(parseMeasured(text, kind)).toEqual({ value, sigma });
  });

  it.each([
    ['4.1 .. 4.4 d', 4.1, 4.4],
    ['4.1..4.4', 4.1, 4.4],
    ['1..2', 1, 2],
    ['12 h .. 2 d', 0.5, 2],
    ['1 … 2 yr', 365.25, 730.5],
  ])('reads the range %s', (text, low, high) => {
    expect(parseRange(text, 'period')).toEqual({ low, high });
  });

  it('tells a fixed number, a prior and a range apart', () => {
    expect(readChoice(0.3, 'number')).toEqual({ ok: true, value: { kind: 'fixed', value: 0.3 } });
    expect(readChoice('0.3 +- 0.1', 'number')).toEqual({
      ok: true,
      value: { kind: 'prior', value: 0.3, sigma: 0.1 },
    });
    expect(readChoice('0.3 +- 0', 'number')).toEqual({ ok: true, value: { kind: 'fixed', value: 0.3 } });
    expect(readChoice('0.1 .. 0.3', 'number')).toEqual({
      ok: true,
      value: { kind: 'range', low: 0.1, high: 0.3 },
    });
  });

  it.each([
    ['', /missing/],
    ['heavy', /"heavy" where a number/],
    ['0,94', /decimal comma/],
    ['0.94 K', /unit "K", which does not fit a star mass/],
    ['0.94 +- -0.03', /must be >= 0/],
    ['0.94 +- 0.03 +- 0.1', /value \+- sigma/],
    ['0.9 .. 1', /one value is needed/],
    ['1e999', /too large/],
    ['0x10', /unit "x10"/],
    ['NaN', /where a number/],
  ])('refuses %j in words', (text, message) => {
    expect(() => parseMeasured(text, 'star mass')).toThrow(UsageError);
    expect(() => parseMeasured(text, 'star mass')).toThrow(message);
  });

  it('refuses ranges that run backwards or are empty', () => {
    expect(() => parseRange('4.4 .. 4.1', 'period')).toThrow(/smaller/);
    expect(() => parseRange('4 .. 4', 'period')).toThrow(/smaller/);
    expect(() => parseRange('4', 'period')).toThrow(/low \.\. high/);
  });

  it('gives back any finite number that was written, with its uncertainty (property)', () => {
    const finite = fc.double({ noNaN: true, noDefaultInfinity: true });
    fc.assert(
      fc.property(
        finite,
        fc.double({ min: 1e-300, noNaN: true, noDefaultInfinity: true }),
        (value, sigma) => {
          expect(parseMeasured(`${value} +- ${sigma} m/s`, 'velocity')).toEqual({
            value: value === 0 ? Number(String(value)) : value,
            sigma,
          });
        },
      ),
      { seed: 20868, numRuns: 300 },
    );
  });
});

describe('did you mean', () => {
  it('counts edits as a dictionary of known pairs says', () => {
    expect(editDistance('kitten', 'sitting')).toBe(3); // the textbook pair of Levenshtein distance
    expect(editDistance('', 'abc')).toBe(3);
    expect(editDistance('tabels', 'tables')).toBe(1); // one swap of neighbours
  });

  it('is symmetric, zero only for equal words, and bounded by the longer word (property)', () => {
    const word = fc.string({ maxLength: 12 });
    fc.assert(
      fc.property(word, word, (a, b) => {
        const distance = editDistance(a, b);
        expect(distance).toBe(editDistance(b, a));
        expect(distance === 0).toBe(a === b);
        expect(distance).toBeLessThanOrEqual(Math.max(a.length, b.length));
        expect(distance).toBeGreaterThanOrEqual(Math.abs(a.length - b.length));
      }),
      { seed: 41, numRuns: 300 },
    );
  });

  it('suggests the nearest word, or lists what is allowed', () => {
    expect(nearest('exentricity', ['period', 'eccentricity'])).toBe('eccentricity');
    expect(nearest('ecc', ['period', 'eccentricity'])).toBe('eccentricity');
    expect(nearest('x', ['a', 'b'])).toBeNull();
    expect(didYouMean('colour', ['period', 'drift'])).toBe('allowed here: period, drift');
    expect(editDistance('a'.repeat(1e5), 'b')).toBe(Infinity);
  });
});
