import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import { solveKeplerArray } from '../../src/orbit/index.js';
import { expectUlps, expectWithin } from '../support/expect-within.js';
import { KEPLER_FILES, keplerGrid, keplerRows } from '../support/kepler-reference.js';

const SEED = 20261201;
/** Below and above the count from which the finer index is used. */
const COUNTS = [1, 60, 599, 600, 1500];

function solved(
  meanAnomaliesRad: readonly number[],
  eccentricity: number,
): { sinE: Float64Array; cosE: Float64Array } {
  const sinE = new Float64Array(meanAnomaliesRad.length);
  const cosE = new Float64Array(meanAnomaliesRad.length);
  solveKeplerArray(Float64Array.from(meanAnomaliesRad), eccentricity, sinE, cosE);
  return { sinE, cosE };
}

describe('solveKeplerArray', () => {
  for (const file of KEPLER_FILES) {
    it(`matches 80-digit sines and cosines to 6e-16, small E to 12 ulps (reference/kepler/${file}.json)`, () => {
      for (const row of keplerRows(file)) {
        for (const count of [1, 700]) {
          const { sinE, cosE } = solved(new Array<number>(count).fill(row.meanAnomalyRad), row.eccentricity);
          const bound = { abs: 6e-16, unit: '1', why: 'measured 3.9e-16; one unit of rounding is 1.1e-16' };
          expectWithin(sinE[count - 1]!, row.sinE, bound);
          expectWithin(cosE[count - 1]!, row.cosE, bound);
          if (row.cosE > 0.9) expectUlps(sinE[count - 1]!, row.sinE, 12);
        }
      }
    });
  }

  it('matches 50-digit values on a grid to the tolerance of each row, alone and among many (reference/kepler/grid.json)', () => {
    const { rows } = keplerGrid();
    for (const eccentricity of new Set(rows.map((row) => row.eccentricity))) {
      const same = rows.filter((row) => row.eccentricity === eccentricity);
      expect(same).toHaveLength(20);
      for (const repeats of [1, 40]) {
        const means = Array.from({ length: repeats }, () => same.map((row) => row.meanAnomalyRad)).flat();
        const { sinE, cosE } = solved(means, eccentricity);
        for (const [i, mean] of means.entries()) {
          const row = same[i % same.length]!;
          const why = `E is good to 8 roundings, stretched by dE/dM (e = ${eccentricity}, M = ${mean})`;
          const bound = { abs: row.toleranceRad, unit: '1', why };
          expectWithin(sinE[i]!, row.sinE, bound);
          expectWithin(cosE[i]!, row.cosE, bound);
          // The angle itself, from the turn of the reference: sines near 1 would hide an error in E.
          const off = Math.atan2(
            sinE[i]! * row.cosE - cosE[i]! * row.sinE,
            cosE[i]! * row.cosE + sinE[i]! * row.sinE,
          );
          expectWithin(off, 0, { ...bound, unit: 'rad' });
        }
      }
    }
  });

  it('satisfies the equation for scattered M and e, in few and in many points (property)', () => {
    const eccentricities = fc.oneof(
      fc.double({ min: 0, max: 1, maxExcluded: true, noNaN: true }),
      fc.double({ min: -13, max: 0, noNaN: true }).map((log) => 1 - 10 ** log),
      fc.constantFrom(0, 1e-300, 0.874999, 0.875, 0.875001, 0.999999, 1 - 2 ** -53),
    );
    const means = fc.oneof(
      fc.double({ min: -Math.PI, max: Math.PI, noNaN: true }),
      fc.double({ min: -20, max: 0, noNaN: true }).map((log) => 10 ** log),
    );
    fc.assert(
      fc.property(
        eccentricities,
        fc.constantFrom(...COUNTS),
        means,
        means,
        (eccentricity, count, from, to) => {
          const meanAnomaliesRad = Array.from({ length: count }, (_, i) => from + ((to - from) * i) / count);
          const { sinE, cosE } = solved(meanAnomaliesRad, eccentricity);
          for (let i = 0; i < count; i++) {
            const anomaly = Math.atan2(sinE[i]!, cosE[i]!);
            const residual = anomaly - eccentricity * sinE[i]! - meanAnomaliesRad[i]!;
            expectWithin(residual, 0, {
              abs: 1.5e-15,
              unit: 'rad',
              why: 'atan2 rounds by 4.4e-16 near pi, M likewise',
            });
            expectWithin(sinE[i]! ** 2 + cosE[i]! ** 2, 1, {
              abs: 1e-15,
              unit: '1',
              why: 'rounding of both',
            });
          }
        },
      ),
      { seed: SEED, numRuns: 300 },
    );
  });

  it('is odd in M and knows whole turns', () => {
    for (const eccentricity of [0, 0.2, 0.8, 0.93, 0.9999]) {
      for (const mean of [1e-12, 0.003, 0.4, 1.7, 3.1]) {
        const { sinE, cosE } = solved([mean, -mean], eccentricity);
        expect(sinE[1]).toBe(-sinE[0]!);
        expect(cosE[1]).toBe(cosE[0]);
      }
      // 2 pi k rounded to a double is not a whole number of turns; sin M of the true pi says by how much it misses.
      for (const turns of [0, 1, -3, 100_000, 1e9]) {
        const mean = turns * 2 * Math.PI;
        const { sinE, cosE } = solved([mean], eccentricity);
        const want = Math.sin(mean) / (1 - eccentricity);
        // E = M / (1 - e) up to a cubic term that is far below rounding but for large turns near e = 1.
        if (Math.abs(want) < 1e-6) expectWithin(sinE[0]!, want, { rel: 1e-9, unit: '1', why: 'cubic term' });
        expect(cosE[0]!).toBeLessThanOrEqual(1);
      }
    }
  });

  it('keeps tables of several eccentricities apart, and forgets none wrongly', () => {
    const means = [0.01, 0.5, 2, -1.2];
    const fresh = [0.1, 0.2, 0.3, 0.4, 0.5, 0.95].map((eccentricity) => solved(means, eccentricity));
    for (const [i, eccentricity] of [0.1, 0.2, 0.3, 0.4, 0.5, 0.95].entries()) {
      const again = solved(means, eccentricity);
      expect(again.sinE).toEqual(fresh[i]!.sinE);
      expect(again.cosE).toEqual(fresh[i]!.cosE);
      for (const [k, mean] of means.entries()) {
        const anomaly = Math.atan2(again.sinE[k]!, again.cosE[k]!);
        expectWithin(anomaly - eccentricity * Math.sin(anomaly), mean, {
          abs: 1e-15,
          unit: 'rad',
          why: 'rounding',
        });
      }
    }
  });

  it('writes only the points asked for, and may write over its input', () => {
    const means = Float64Array.of(0.1, 1, 2);
    const sinE = Float64Array.of(9, 9, 9);
    const cosE = Float64Array.of(9, 9, 9);
    solveKeplerArray(means, 0.4, sinE, cosE, 2);
    expect([sinE[2], cosE[2]]).toEqual([9, 9]);
    expect(means).toEqual(Float64Array.of(0.1, 1, 2));
    solveKeplerArray(means, 0.4, means, cosE, 2);
    expect(means.subarray(0, 2)).toEqual(sinE.subarray(0, 2));
    expect(means[2]).toBe(2);
    solveKeplerArray(new Float64Array(0), 0.4, new Float64Array(0), new Float64Array(0));
  });

  it('passes on what is not a number, point by point', () => {
    const { sinE, cosE } = solved([NaN, 1, Infinity, -Infinity, 2], 0.95);
    expect([...sinE].map(Number.isNaN)).toEqual([true, false, true, true, false]);
    expect([...cosE].map(Number.isNaN)).toEqual([true, false, true, true, false]);
  });

  it('says what is outside its domain', () => {
    for (const eccentricity of [-1e-9, 1, 2, NaN])
      expect(() => solved([1], eccentricity)).toThrow(ModelDomainError);
    expect(() => {
      solveKeplerArray(new Float64Array(3), 0.1, new Float64Array(2), new Float64Array(3));
    }).toThrow('3 points asked for, but the arrays hold 3, 2 and 3');
  });
});
