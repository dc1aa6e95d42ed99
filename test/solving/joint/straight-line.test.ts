import { describe, expect, it } from 'vitest';
import { straightLine } from '../../../src/solving/joint/found-transit.js';
import { numberCycles } from '../../../src/solving/timing/cycles.js';
import { mergeMidTimes } from '../../../src/solving/timing/timing-data.js';
import { expectWithin } from '../../support/expect-within.js';
import { denseFit } from '../helpers.js';
import { seeded } from './recipes.js';
import { midTimeTable, START_BJD } from './simulate.js';

const PERIOD = 3.31;
const LAG = 0.63;

/** Transits, and occultations at another phase than the middle between them. */
function timed(transits: readonly number[], occultations: readonly number[], sigma: number) {
  const random = seeded(3);
  const at = (turns: number): number => START_BJD + 0.4 + PERIOD * turns + sigma * random.normal();
  const rows = [...transits.map((cycle) => [cycle, 0] as const), ...occultations.map((cycle) => [cycle, 1] as const)];
  const table = midTimeTable(rows.map(([cycle, behind]) => at(cycle + behind * LAG)), 5e-4, {
    isOccultation: Uint8Array.from(rows, ([, behind]) => behind),
    cycles: Int32Array.from(rows, ([cycle]) => cycle),
  });
  const { times } = numberCycles(mergeMidTimes([table]).times, { periodDays: PERIOD, renumber: false });
  return { times, line: straightLine(times, times.originBjdTdb - START_BJD) };
} // prettier-ignore

describe('the straight line through mid-times', () => {
  it('without noise is the ephemeris of the transits, whatever the phase of occultations', () => {
    for (const occultations of [[], [3], [1, 4, 9, 22]]) {
      const { line } = timed([0, 2, 5, 11, 30], occultations, 0);
      expectWithin(line.periodDays, PERIOD, { abs: 1e-9, unit: 'd', why: 'dates in double precision' });
      expectWithin(line.timeDays + PERIOD * Math.round((0.4 - line.timeDays) / PERIOD), 0.4, {
        abs: 1e-8,
        unit: 'd',
        why: 'dates in double precision',
      });
    }
  });

  it('is that of least squares with a phase of its own for occultations, errors included', () => {
    const { times, line } = timed([0, 2, 5, 11, 30, 31], [1, 4, 9, 22], 5e-4);
    const ones = new Array<number>(times.count).fill(1);
    const behind = Array.from(times.isOccultation);
    const cycles = Array.from(times.cycles);
    const weights = ones.map(() => 1 / 5e-4 ** 2);
    const { solution, chiSquare } = denseFit([ones, cycles, behind], times.timesDays, weights);
    expectWithin(line.periodDays, solution[1]!, { abs: 1e-10, unit: 'd', why: 'rounding of two ways' });
    // sigma(P) = 5e-4/root of the squares about the means of each kind, inflated by root(chi2/(n - 3)) where that exceeds 1.
    const about = (own: readonly number[]): number => {
      const mean = own.reduce((sum, value) => sum + value, 0) / own.length;
      return own.reduce((sum, value) => sum + (value - mean) ** 2, 0);
    };
    const xx = about(cycles.filter((_, i) => behind[i] === 0)) + about(cycles.filter((_, i) => behind[i] === 1));
    const inflation = Math.sqrt(Math.max(1, chiSquare / (times.count - 3)));
    expectWithin(line.periodSigmaDays, (inflation * 5e-4) / Math.sqrt(xx), { rel: 1e-6, unit: 'd', why: 'rounding' });
    expectWithin(line.middleSigmaDays, (inflation * 5e-4) / Math.sqrt(6), { rel: 1e-6, unit: 'd', why: 'six transits' });
  }); // prettier-ignore

  it('takes occultations that stand alone for half a period late', () => {
    const { line } = timed([], [0, 3, 8], 0);
    expectWithin(line.periodDays, PERIOD, { abs: 1e-9, unit: 'd', why: 'dates in double precision' });
    const off = (line.timeDays - 0.4 - (LAG - 0.5) * PERIOD) / PERIOD;
    expect(Math.abs(off - Math.round(off))).toBeLessThan(1e-8);
  });
});
