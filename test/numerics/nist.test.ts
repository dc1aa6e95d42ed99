/** The 27 nonlinear sets of NIST's Statistical Reference Datasets (reference/nist/*.dat, see its README.md), two starts each. */
import { describe, expect, it } from 'vitest';
import { checkJacobian } from '../../src/numerics/jacobian-check.js';
import { readAllSets } from '../reference/nist/read-set.js';
import { scoreSet } from '../reference/nist/score.js';

const sets = readAllSets();

/**
 * Sets whose certified sum of squares cannot be had in double precision: residuals of 1e-13 beside responses near 1
 * (data with 14 digits) are rounding for the most part.
 */
const SUM_OF_SQUARES_IS_ROUNDING = new Set(['Lanczos1']);

describe('certified least-squares problems of NIST', () => {
  it('are all here', () => {
    expect(sets.length).toBe(27);
  });

  describe.each(sets.map((set) => [set.name, set] as const))('%s', (name, set) => {
    it('has right derivatives at the certified solution', () => {
      // Measured below 2e-8 on all sets; a forgotten term or sign gives 1e-2 and more.
      expect(checkJacobian(set.problem, set.parameters, 1e-3).worstRelativeError).toBeLessThan(1e-6);
    });

    it.each([0, 1] as const)('is solved from start %i', (start) => {
      const score = scoreSet(set, start);
      expect(score.outcome.status).toBe('converged');
      // 4 digits is the usual pass mark; the worst of all 54 runs has 7.1 (ENSO).
      expect(score.parameterDigits).toBeGreaterThan(6);
      if (SUM_OF_SQUARES_IS_ROUNDING.has(name)) {
        expect(score.outcome.chiSquare).toBeLessThan(1e-24);
        return;
      }
      expect(score.sumOfSquaresDigits).toBeGreaterThan(9);
      expect(score.deviationDigits).toBeGreaterThan(6);
    });
  });
});
