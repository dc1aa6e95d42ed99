import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import {
  eccentricFromTrueAnomaly,
  meanFromEccentricAnomaly,
  meanFromTrueAnomaly,
  RAD_PER_DEG,
  solveKepler,
  trueAnomaly,
  trueFromEccentricAnomaly,
} from '../../src/orbit/index.js';
import { expectUlps, expectWithin } from '../support/expect-within.js';
import { KEPLER_FILES, keplerGrid, keplerRows } from '../support/kepler-reference.js';

const SEED = 20261201;

describe('solveKepler', () => {
  for (const file of KEPLER_FILES) {
    it(`matches 80-digit values to 3 ulps, true anomaly to 4 (reference/kepler/${file}.json)`, () => {
      for (const row of keplerRows(file)) {
        expectUlps(solveKepler(row.meanAnomalyRad, row.eccentricity), row.eccentricAnomalyRad, 3);
        expectUlps(trueAnomaly(row.meanAnomalyRad, row.eccentricity), row.trueAnomalyRad, 4);
      }
    });
  }

  it('matches 50-digit values on a grid to the tolerance of each row, true anomaly to four times that (reference/kepler/grid.json)', () => {
    const { rows } = keplerGrid();
    expect(rows).toHaveLength(260);
    for (const row of rows) {
      const { eccentricity, meanAnomalyRad, toleranceRad } = row;
      const why = `8 roundings, stretched by dE/dM (e = ${eccentricity}, M = ${meanAnomalyRad})`;
      const bound = { abs: toleranceRad, unit: 'rad', why };
      expectWithin(solveKepler(meanAnomalyRad, eccentricity), row.eccentricAnomalyRad, bound);
      const wider = { abs: 4 * toleranceRad, unit: 'rad', why };
      expectWithin(trueAnomaly(meanAnomalyRad, eccentricity), row.trueAnomalyRad, wider);
    }
  });

  it('gives the worked values of Meeus, Astronomical Algorithms, 2nd ed. 1998, ch. 30 (digits remembered, confirmed with mpmath)', () => {
    const { printed } = keplerGrid();
    expect(printed).toHaveLength(15);
    for (const { eccentricity, meanAnomalyDeg, eccentricAnomalyDeg, printedDeg } of printed) {
      const gotDeg = solveKepler(meanAnomalyDeg * RAD_PER_DEG, eccentricity) / RAD_PER_DEG;
      expectWithin(gotDeg, eccentricAnomalyDeg, {
        abs: 1e-12,
        unit: 'deg',
        why: 'M in radians is rounded, and dE/dM reaches 25 here; measured 1.4e-14',
      });
      expectWithin(gotDeg, printedDeg, {
        abs: 1e-6,
        unit: 'deg',
        why: 'printed to six decimals, some cut, some rounded',
      });
    }
  });

  it('returns M itself for a circle and at the apsides', () => {
    for (const mean of [0, -2, 1e-12, 12345.678, 1e15]) expect(solveKepler(mean, 0)).toBe(mean);
    for (const eccentricity of [1e-300, 0.3, 0.999999, 1 - 2 ** -53]) {
      expect(solveKepler(0, eccentricity)).toBe(0);
      expectUlps(solveKepler(Math.PI, eccentricity), Math.PI, 1);
      expectUlps(solveKepler(-Math.PI, eccentricity), -Math.PI, 1);
      expectUlps(trueAnomaly(Math.PI, eccentricity), Math.PI, 1);
    }
  });

  it('satisfies the equation, is odd, keeps the revolution (property)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 1, maxExcluded: true, noNaN: true }),
        fc.double({ min: -40, max: 40, noNaN: true }),
        (eccentricity, mean) => {
          const anomaly = solveKepler(mean, eccentricity);
          expectWithin(anomaly - eccentricity * Math.sin(anomaly), mean, {
            abs: 1.5e-14,
            unit: 'rad',
            why: 'E itself is rounded by up to 3.6e-15 at 40 rad, sin(E) likewise',
          });
          expect(Math.abs(anomaly - mean)).toBeLessThanOrEqual(eccentricity + 1e-14);
          expect(solveKepler(-mean, eccentricity) + anomaly).toBe(0);
        },
      ),
      { seed: SEED, numRuns: 2000 },
    );
  });

  it('keeps the digits of tiny M for e just below 1, where E - e sin E as written would lose them (property)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -15, max: -1, noNaN: true }),
        fc.double({ min: -100, max: -1, noNaN: true }),
        (logGap, logMean) => {
          const eccentricity = 1 - 10 ** logGap;
          const mean = 10 ** logMean;
          const anomaly = solveKepler(mean, eccentricity);
          // E - sin E summed from its definition, smallest term first.
          let lag = 0;
          for (let n = 29; n >= 3; n -= 2) lag = (1 / factorial(n)) * anomaly ** n - lag;
          expectWithin((1 - eccentricity) * anomaly + eccentricity * lag, mean, {
            rel: 4e-15,
            unit: 'rad',
            why: 'E is good to 2 ulps, which M sees threefold, and the powers here round',
          });
        },
      ),
      { seed: SEED, numRuns: 2000 },
    );
  });

  it('says what is outside its domain', () => {
    for (const eccentricity of [-0.1, 1, 1.03, NaN, Infinity]) {
      expect(() => solveKepler(1, eccentricity)).toThrow(ModelDomainError);
      expect(() => trueAnomaly(1, eccentricity)).toThrow(ModelDomainError);
    }
    for (const mean of [NaN, Infinity, -Infinity])
      expect(() => solveKepler(mean, 0.3)).toThrow(ModelDomainError);
  });
});

describe('anomalies', () => {
  it('turn into one another (reference/kepler, all files)', () => {
    for (const file of KEPLER_FILES) {
      for (const row of keplerRows(file)) {
        const { eccentricity, eccentricAnomalyRad, trueAnomalyRad, meanAnomalyRad } = row;
        // The input is a rounded anomaly; what the outputs see of that rounding is its slope.
        const stretch = Math.sqrt((1 + eccentricity) / (1 - eccentricity));
        const rounding = 2.3e-16 * Math.max(1, Math.abs(eccentricAnomalyRad));
        const why = 'rounding of the input, stretched';
        const bound = { abs: 4 * rounding * stretch, unit: 'rad', why };
        if (eccentricity > 0.999999999) continue; // the stretch would make the bound meaningless; covered by solveKepler
        expectWithin(trueFromEccentricAnomaly(eccentricAnomalyRad, eccentricity), trueAnomalyRad, bound);
        expectWithin(meanFromEccentricAnomaly(eccentricAnomalyRad, eccentricity), meanAnomalyRad, { abs: 4 * rounding, unit: 'rad', why }); // prettier-ignore
        expectWithin(eccentricFromTrueAnomaly(trueAnomalyRad, eccentricity), eccentricAnomalyRad, bound);
        expectWithin(meanFromTrueAnomaly(trueAnomalyRad, eccentricity), meanAnomalyRad, { abs: 8 * rounding * stretch, unit: 'rad', why }); // prettier-ignore
      }
    }
  });
});

function factorial(n: number): number {
  return n <= 1 ? 1 : n * factorial(n - 1);
}
