import { describe, expect, it } from 'vitest';
import { aliasKind, aliasesOf } from '../../src/solving/aliases.js';
import search from '../reference/search/search.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

const RESOLUTION = 1 / 3000;

describe('aliases', () => {
  it('lie where search.json has them (|f + n f_s|, mpmath), under the same name', () => {
    for (const { periodDays, frequencies } of search.aliases) {
      const found = aliasesOf(1 / periodDays, RESOLUTION);
      for (const [kind, wanted] of Object.entries(frequencies)) {
        for (const frequency of wanted) {
          const isDistinct =
            frequency > 0.5 * RESOLUTION && Math.abs(frequency - 1 / periodDays) > 0.75 * RESOLUTION;
          const nearest = [...found].sort(
            (a, b) => Math.abs(a.frequencyPerDay - frequency) - Math.abs(b.frequencyPerDay - frequency),
          )[0]!;
          if (!isDistinct) continue;
          if (nearest.kind === kind) {
            expectWithin(nearest.frequencyPerDay, frequency, {
              abs: 1e-14,
              unit: '1/d',
              why: 'one addition',
            });
          } else {
            // Two aliases that the data cannot resolve are one, under the first name.
            expect(Math.abs(nearest.frequencyPerDay - frequency)).toBeLessThan(0.5 * RESOLUTION);
          }
        }
      }
    }
  });

  it('55 Cnc e: the sidereal-day alias of 0.7365474 d is the 2.817 d published before (Fischer et al. 2008: 2.81705 d, digits remembered; Dawson & Fabrycky 2010 for the true period)', () => {
    const alias = aliasesOf(1 / 0.7365474, RESOLUTION).find(({ kind }) => kind === 'sidereal-day alias')!;
    expectWithin(1 / alias.frequencyPerDay, 2.81705, {
      abs: 0.0006,
      unit: 'd',
      why: 'published uncertainty of the aliased period',
    });
    expect(aliasKind(1 / 2.81705, 1 / 0.7365474, RESOLUTION)).toBe('sidereal-day alias');
    expect(aliasKind(1 / 0.7365474, 1 / 2.81705, RESOLUTION)).toBe('sidereal-day alias');
  });

  it('HD 156668 b: a day alias of 1.2699 d (Dawson & Fabrycky 2010) is the 4.6455 d published before (Howard et al. 2011, digits remembered)', () => {
    const periods = aliasesOf(1 / 1.2699, RESOLUTION).map(({ frequencyPerDay }) => 1 / frequencyPerDay);
    const nearest = Math.min(...periods.map((period) => Math.abs(period - 4.6455)));
    expect(nearest).toBeLessThan(0.0011);
    expect(aliasKind(1 / 4.6455, 1 / 1.2699, RESOLUTION)).toBe('sidereal-day alias');
  });

  it('half and double period are named; a frequency between the aliases is nothing', () => {
    expect(aliasKind(1 / 20, 1 / 40, RESOLUTION)).toBe('half period');
    expect(aliasKind(1 / 80, 1 / 40, RESOLUTION)).toBe('double period');
    expect(aliasKind(0.613, 1 / 40, RESOLUTION)).toBeNull();
    expect(aliasKind(1 / 40, 1 / 40, RESOLUTION)).toBeNull();
  });

  it('every one is positive, apart from the signal and from the others by what the data resolve', () => {
    for (const resolution of [1 / 30, 1 / 400, 1 / 20000]) {
      for (const period of [0.55, 0.997, 1, 1.0027, 2, 29.5, 182.6, 365.2422, 4000]) {
        const found = aliasesOf(1 / period, resolution).map(({ frequencyPerDay }) => frequencyPerDay);
        found.forEach((frequency, i) => {
          expect(frequency).toBeGreaterThanOrEqual(0.5 * resolution);
          expect(Math.abs(frequency - 1 / period)).toBeGreaterThanOrEqual(0.75 * resolution);
          found.slice(0, i).forEach((other) => {
            expect(Math.abs(frequency - other)).toBeGreaterThanOrEqual(0.5 * resolution);
          });
        });
      }
    }
  });
});
