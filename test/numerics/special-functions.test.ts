import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  erf,
  erfc,
  fSurvival,
  logGamma,
  normalQuantile,
  regularisedBeta,
  regularisedGammaQ,
} from '../../src/numerics/special-functions.js';

interface ReferenceTable {
  readonly source: string;
  readonly functions: Readonly<Record<string, readonly (readonly number[])[]>>;
}
const table = JSON.parse(
  readFileSync(new URL('../reference/special/special.json', import.meta.url), 'utf8'),
) as ReferenceTable;

const functions: Readonly<Record<string, (...args: number[]) => number>> = {
  logGamma: (x) => logGamma(x),
  erf: (x) => erf(x),
  erfc: (x) => erfc(x),
  regularisedGammaQ: (a, x) => regularisedGammaQ(a, x),
  regularisedBeta: (x, a, b) => regularisedBeta(x, a, b),
  fSurvival: (f, d1, d2) => fSurvival(f, d1, d2),
  normalQuantile: (p) => normalQuantile(p),
};

/** Relative error allowed. */
const TOLERANCE = 1e-13;

describe(`special functions against ${table.source} (reference/special/special.json)`, () => {
  it('has values for every function', () => {
    expect(Object.keys(table.functions).sort()).toEqual(Object.keys(functions).sort());
  });

  it.each(Object.keys(functions))('%s has a relative error below 1e-13', (name) => {
    let worst = { args: [] as readonly number[], error: 0 };
    for (const row of table.functions[name]!) {
      const args = row.slice(0, -1);
      const expected = row.at(-1)!;
      const found = functions[name]!(...args);
      const error = found === expected ? 0 : Math.abs(found - expected) / Math.abs(expected);
      if (!(error <= worst.error)) worst = { args, error };
    }
    expect(worst.error, `worst at ${worst.args.join(', ')}`).toBeLessThan(TOLERANCE);
  });

  it('has the right limits and refuses what is outside the domain', () => {
    expect([erf(0), erf(Infinity), erf(-Infinity)]).toEqual([0, 1, -1]);
    expect([erfc(Infinity), erfc(-Infinity)]).toEqual([0, 2]);
    expect([logGamma(1), logGamma(2), logGamma(0)]).toEqual([0, 0, Infinity]);
    expect([regularisedGammaQ(2, 0), regularisedGammaQ(2, Infinity)]).toEqual([1, 0]);
    expect([regularisedBeta(0, 2, 3), regularisedBeta(1, 2, 3)]).toEqual([0, 1]);
    expect([fSurvival(0, 2, 3), fSurvival(Infinity, 2, 3)]).toEqual([1, 0]);
    expect([normalQuantile(0), normalQuantile(0.5), normalQuantile(1)]).toEqual([-Infinity, 0, Infinity]);
    const outside = [
      logGamma(-1), erf(NaN), erfc(NaN), regularisedGammaQ(0, 1), regularisedGammaQ(1, -1), regularisedBeta(1.1, 1, 1),
      regularisedBeta(0.5, -1, 1), fSurvival(-1, 1, 1), normalQuantile(-0.1), normalQuantile(1.1), normalQuantile(NaN),
    ]; // prettier-ignore
    expect(outside.every(Number.isNaN)).toBe(true);
  });

  it('holds the identities that tie the functions together', () => {
    for (let x = 0.05; x < 5; x += 0.173) {
      // erfc(x) = Q(1/2, x^2); I_x(a, b) + I_(1-x)(b, a) = 1; ln Gamma(x + 1) = ln x + ln Gamma(x): DLMF 7.11.2, 8.17.4, 5.5.1.
      expect(Math.abs(erfc(x) / regularisedGammaQ(0.5, x * x) - 1)).toBeLessThan(1e-13);
      expect(Math.abs(regularisedBeta(x / 5, x, 3) + regularisedBeta(1 - x / 5, 3, x) - 1)).toBeLessThan(
        1e-14,
      );
      expect(Math.abs(logGamma(x + 1) - Math.log(x) - logGamma(x))).toBeLessThan(
        2e-15 * (1 + Math.abs(Math.log(x))),
      );
      expect(Math.abs(normalQuantile(0.5 * erfc(x * Math.SQRT1_2)) / -x - 1)).toBeLessThan(1e-14);
    }
  });
});
