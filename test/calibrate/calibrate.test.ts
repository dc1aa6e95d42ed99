import { beforeAll, describe, expect, it } from 'vitest';
import type { DrawnSet } from './draw-enough.js';
import { judgeSet, type SetResult } from './judge-set.js';
import { PROBLEMS } from './problems.js';
import { quantitiesOf } from './quantities.js';
import { sampleSet } from './sample-set.js';
import { calibrationFaults, coverage, scatterOverBound, uniformityProbability } from './statistics.js';

const SETS = 60;
const SEED = 4_000_000;
const circular = PROBLEMS[0]!;
const { names } = quantitiesOf(circular);

/**
 * The short form of `npm run calibrate`. Truths from the prior, data from the truths: the truth's rank among the draws is
 * then uniform, whatever the model [Talts et al. 2018, arXiv:1804.06788].
 */
describe(`calibration on ${SETS} simulated sets with a circular orbit`, () => {
  let sampled: DrawnSet[] = [];
  let honest: SetResult[] = [];
  beforeAll(() => {
    sampled = Array.from({ length: SETS }, (_, index) => sampleSet(circular, index, SEED));
    honest = sampled.map((set) => judgeSet(set));
  });

  it('holds the truth as often as the intervals say, at uniform ranks', () => {
    expect(calibrationFaults(honest, names)).toEqual([]);
  });

  it('negative control: intervals shrunk by 20 % do not pass', () => {
    const shrunk = sampled.map((set) => judgeSet(set, 0.8));
    expect(calibrationFaults(shrunk, names)).not.toEqual([]);
  });

  it('negative control: intervals widened by 40 % do not pass', () => {
    const widened = sampled.map((set) => judgeSet(set, 1.4));
    expect(calibrationFaults(widened, names)).not.toEqual([]);
  });

  it('scatters by the Cramer-Rao bound of the closed form (rms of 60: 3 standard errors of 9 %)', () => {
    names.slice(0, 4).forEach((_, quantity) => {
      const scatter = scatterOverBound(honest, quantity);
      expect(scatter).toBeGreaterThan(1 - 3 * 0.091);
      expect(scatter).toBeLessThan(1.03 + 3 * 0.091);
    });
  });
});

describe('the statistics of calibration', () => {
  it('chi-square of known counts (scipy 1.10.1: chisquare([8, 12, 15, 5]).statistic = 5.8, pvalue = 0.12175662)', () => {
    expect(uniformityProbability([8, 12, 15, 5])).toBeCloseTo(0.12175662, 7);
  });

  it('coverage counts the levels inside the central interval', () => {
    const at = (level: number): SetResult => ({
      problem: 'x',
      index: 0,
      ranks: [0],
      levels: [level],
      standardised: [],
      smallestEss: 0,
      divergences: 0,
      draws: 0,
    });
    const results = [0.1, 0.159, 0.3, 0.5, 0.84, 0.9].map(at);
    // Central 68.3 %: levels between 0.1585 and 0.8415.
    expect(coverage(results, 0, 0.683)).toBe(4 / 6);
  });
});
