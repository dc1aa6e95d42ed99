import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import {
  fixedPlaces,
  formatProbability,
  formatQuantity,
  machineFixed,
  machineNumber,
  roundedParts,
  significant,
} from '../../src/dossier/numbers.js';
import type { Quantity } from '../../src/solving/types.js';

const SEED = 20260101;

function q(value: number, lower: number, upper: number, unit = ''): Quantity {
  return { value, sigma: (upper - lower) / 2, lower, upper, unit };
}

describe('roundedParts: two digits of the smaller error, everything to the same decimal place', () => {
  // Worked by hand from the rule in the heading; the last two show a carry, which must not cost the value a digit.
  it.each([
    [3.14159265, 0.0123, 0.0456, '3.142', '0.012', '0.046'],
    [0.000123456, 1.2e-6, 1.2e-6, '0.0001235', '0.0000012', '0.0000012'],
    [2454876.344123, 0.0112, 0.0098, '2454876.3441', '0.0112', '0.0098'],
    [12345.678, 123.4, 99.7, '12346', '123', '100'],
    [99.96, 0.996, 0.996, '99.96', '1.00', '1.00'],
  ])('%d +%d -%d', (value, plus, minus, wantValue, wantPlus, wantMinus) => {
    expect(roundedParts(value, plus, minus)).toEqual({ value: wantValue, plus: wantPlus, minus: wantMinus });
  });

  it('rounds to tens and hundreds when the error is that large (12 345 with error 1 234)', () => {
    expect(roundedParts(12345, 1234, 1234)).toEqual({ value: '12300', plus: '1200', minus: '1200' });
  });

  it('does not take the rounding noise of a subtraction for a smaller error (0.12 - 0.11 in doubles)', () => {
    expect(roundedParts(0.11, 0.12 - 0.11, 0.11 - 0.1)).toEqual({
      value: '0.110',
      plus: '0.010',
      minus: '0.010',
    });
  });

  it('never writes minus zero', () => {
    expect(roundedParts(-0.0001, 0.12, 0.12).value).toBe('0.00');
  });

  it('stays within half a unit of the last place, and no error loses more than that either', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e7, max: 1e7, noNaN: true }),
        fc.double({ min: 1e-6, max: 1e4, noNaN: true }),
        fc.double({ min: 0.02, max: 50, noNaN: true }),
        (value, plus, ratio) => {
          const minus = plus * ratio;
          const parts = roundedParts(value, plus, minus);
          const smaller = Math.min(plus, minus);
          // Two digits of the smaller error: a unit of the last place is at most a tenth of it.
          const half = smaller / 20;
          expect(Math.abs(Number(parts.value) - value)).toBeLessThanOrEqual(half * (1 + 1e-6));
          expect(Math.abs(Number(parts.plus) - plus)).toBeLessThanOrEqual(half * (1 + 1e-6));
          expect(Math.abs(Number(parts.minus) - minus)).toBeLessThanOrEqual(half * (1 + 1e-6));
          const places = (text: string): number => text.split('.')[1]?.length ?? 0;
          expect(places(parts.value)).toBe(places(parts.plus));
          expect(places(parts.value)).toBe(places(parts.minus));
        },
      ),
      { seed: SEED, numRuns: 500 },
    );
  });
});

describe('formatQuantity', () => {
  it('joins equal errors, keeps unequal ones apart, and adds the unit', () => {
    expect(formatQuantity(q(41.6321, 41.618, 41.6462, 'd'), 'text')).toBe('41.632 ± 0.014 d');
    expect(formatQuantity(q(0.352, 0.3402, 0.3661), 'text')).toBe('0.352 +0.014 -0.012');
    expect(formatQuantity(q(0.352, 0.3402, 0.3661), 'markdown')).toBe('0.352 (+0.014, −0.012)');
    expect(formatQuantity(q(41.6321, 41.618, 41.6462, 'd'), 'text', { withUnit: false })).toBe(
      '41.632 ± 0.014',
    );
  });

  it('shows one error, the mean, when the two are within a tenth of each other', () => {
    expect(formatQuantity(q(10, 9.005, 11.005), 'text')).toBe('10.0 ± 1.0');
    expect(formatQuantity(q(-4.3, -4.69, -3.89), 'text')).toBe('-4.30 ± 0.40');
    expect(formatQuantity(q(-4.3, -4.69, -3.86), 'text')).toBe('-4.30 +0.44 -0.39'); // 12 % apart
    // Errors 0.0100 and 0.0102: 2 % of their mean, 0.0101.
    expect(formatQuantity(q(0.25, 0.2398, 0.26), 'markdown')).toBe('0.250 ± 0.010');
    // Errors 21 and 19 are exactly a tenth of 20 apart, which is no longer less.
    expect(formatQuantity(q(300, 281, 321), 'text')).toBe('300 +21 -19');
    // The mean counts, not the smaller error: 21 and 19.05 are 9.7 % of 20.025 apart, but 10.2 % of 19.05.
    expect(formatQuantity(q(300, 280.95, 321), 'text')).toBe('300 ± 20');
  });

  it('marks fixed values and explains unknown ones', () => {
    const base = { sigma: null, lower: null, upper: null };
    expect(formatQuantity({ ...base, value: 90, unit: 'deg', fixed: true }, 'text')).toBe('90 deg (fixed)');
    expect(formatQuantity({ ...base, value: null, unit: 'K', why: 'no radius' }, 'text')).toBe(
      'unknown (no radius)',
    );
    expect(formatQuantity({ ...base, value: null, unit: 'K', why: '<b>' }, 'markdown')).toBe(
      'unknown (&lt;b&gt;)',
    );
    expect(formatQuantity({ ...base, value: 2.5, unit: 'K' }, 'text')).toBe('2.5 K');
    expect(formatQuantity({ ...base, value: 2.5, unit: 'K', why: 'too few draws' }, 'text')).toBe(
      '2.5 K (too few draws)',
    );
  });

  it('shows an upper limit for what cannot be negative and is nearer to zero than two of its errors', () => {
    const small = q(0.03, 0.01, 0.0584);
    expect(formatQuantity(small, 'text', { zeroBounded: true })).toBe('< 0.058 (84 %)');
    expect(formatQuantity(small, 'text')).toBe('0.030 +0.028 -0.020');
    expect(formatQuantity(q(0.05, 0.028, 0.072), 'text', { zeroBounded: true })).toBe('0.050 ± 0.022');
    expect(formatQuantity(q(0, 0.004, 0.02), 'text', { zeroBounded: true })).toBe('< 0.02 (84 %)');
  });

  it('writes the full double for csv, and nothing for an unknown', () => {
    expect(formatQuantity(q(0.1 + 0.2, 0, 1, 'd'), 'csv')).toBe('0.30000000000000004');
    expect(formatQuantity({ value: null, sigma: null, lower: null, upper: null, unit: 'd' }, 'csv')).toBe('');
  });
});

describe('plain numbers', () => {
  it('keeps the asked number of significant digits without trailing zeros', () => {
    expect(significant(41.6321, 3)).toBe('41.6');
    expect(significant(41.0, 3)).toBe('41');
    expect(significant(1234567, 3)).toBe('1230000');
    expect(significant(0.00012345, 2)).toBe('0.00012');
    expect(significant(1.2345e-7, 3)).toBe('1.23e-7');
    expect(significant(0, 3)).toBe('0');
  });

  it('removes the rounding noise of a change of units but no digit that was measured', () => {
    // 46.3092 km/s in m/s as the processor multiplies it (IEEE 754): 46309.200000000004
    expect(machineFixed(46.3092 * 1000, 6)).toBe('46309.2');
    expect(machineFixed(-0.0000001, 6)).toBe('0');
    expect(machineNumber(Number.NaN)).toBe('');
  });

  it('reads back as the same double', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        expect(Number(machineNumber(value)) === value).toBe(true);
      }),
      { seed: SEED, numRuns: 300 },
    );
  });

  it('rounds to tens, hundreds with negative places', () => {
    expect(fixedPlaces(12345, -2)).toBe('12300');
    expect(fixedPlaces(-4, -1)).toBe('0');
  });

  it('writes probabilities in percent while that is readable, in powers of ten below', () => {
    expect(formatProbability(0.0123, 'text')).toBe('1.2 %');
    expect(formatProbability(3.2e-21, 'text')).toBe('3e-21');
    expect(formatProbability(3.2e-21, 'markdown')).toBe('3 × 10⁻²¹');
    expect(formatProbability(0, 'text')).toBe('< 1e-300');
    expect(formatProbability(1, 'text')).toBe('100 %');
  });

  it('gives the interval alone where the value lies outside it', () => {
    const outside = { value: 8254, sigma: 1800, lower: 2993, upper: 6736, unit: 'd' };
    expect(formatQuantity(outside, 'text')).toBe('3000 .. 6700 d');
    expect(formatQuantity({ ...outside, value: 5000 }, 'text')).toContain('5000 +');
  });
});
