import { describe, expect, it } from 'vitest';
import { InputDataError } from '../../../src/errors.js';
import { RandomStream } from '../../../src/numerics/random.js';
import { numberCycles, type NumberingChoices } from '../../../src/solving/timing/cycles.js';
import { mergeMidTimes, sharedEventNotices } from '../../../src/solving/timing/timing-data.js';
import { tableOf, type Row } from './support.js';

const NO_HELP: NumberingChoices = { periodDays: null, renumber: false };
const T0 = 2458000.123;

function simulated(
  period: number,
  cycles: readonly number[],
  sigma: number,
  seed: number,
  deviation: (cycle: number) => number = () => 0,
): Row[] {
  const random = RandomStream.fromSeed(seed);
  return cycles.map((cycle) => ({
    cycle,
    time: T0 + period * cycle + deviation(cycle) + sigma * random.normal(),
    sigma,
  }));
}

function issuesOf(work: () => unknown): InputDataError['issues'] {
  try {
    work();
  } catch (error) {
    if (error instanceof InputDataError) return error.issues;
    throw error;
  }
  return [];
}

/** Recovered cycles minus the truth; all equal where every cycle is right. */
function offsets(rows: readonly Row[], choices: NumberingChoices = NO_HELP): Set<number> {
  const { times } = mergeMidTimes([tableOf(rows, { withoutCycles: true })]);
  const numbered = numberCycles(times, choices).times;
  const sorted = [...rows].sort((a, b) => a.time - b.time);
  return new Set(sorted.map((row, index) => numbered.cycles[index]! - row.cycle!));
}

describe('cycles from the times', () => {
  it('are right for random sets of very different spacing (60 seeded sets)', () => {
    const random = RandomStream.fromSeed(77);
    for (let set = 0; set < 60; set++) {
      const period = Math.exp(random.uniformBetween(Math.log(0.4), Math.log(40)));
      const count = 8 + random.integerBelow(30);
      const range = 40 + random.integerBelow(3000);
      const sigma = period * random.uniformBetween(1e-5, 1e-3);
      const cycles = new Set([0, 1]);
      while (cycles.size < count) cycles.add(random.integerBelow(range));
      expect(offsets(simulated(period, [...cycles], sigma, set)).size, `set ${set}, period ${period}`).toBe(
        1,
      );
    }
  });

  it('survive a period that shrinks by minutes, and swings of 2 % of the period', () => {
    const random = RandomStream.fromSeed(31);
    const cycles = [0, 1, 3, ...Array.from({ length: 37 }, (_, k) => 40 * k + 10 + random.integerBelow(30))];
    expect(offsets(simulated(1.09, cycles, 3e-4, 1, (cycle) => -5e-10 * (cycle - 700) ** 2)).size).toBe(1);
    const swing = (cycle: number): number => 0.2 * Math.sin(cycle / 60);
    expect(offsets(simulated(10, cycles, 1e-3, 2, swing)).size).toBe(1);
  });

  it('give an occultation the cycle of the transit before it, at any eccentricity', () => {
    const transits = simulated(5, [0, 1, 2, 10, 33, 60], 1e-3, 3);
    const early = [4, 20].map((cycle) => ({ cycle, time: T0 + 5 * (cycle + 0.5) - 1.2, sigma: 1e-3, isOccultation: true }));
    const late = [7, 41].map((cycle) => ({ cycle, time: T0 + 5 * (cycle + 0.5) + 1.2, sigma: 1e-3, isOccultation: true }));
    expect(offsets([...transits, ...early]).size).toBe(1);
    expect(offsets([...transits, ...late]).size).toBe(1);
  }); // prettier-ignore

  it('are refused, with the periods, where several count the times', () => {
    const rows = simulated(3.3, [0, 1, 400], 0.01, 4);
    const { times } = mergeMidTimes([tableOf(rows, { withoutCycles: true })]);
    const [issue] = issuesOf(() => numberCycles(times, NO_HELP));
    expect(issue?.code).toBe('cycles-undecided');
    expect(issue?.message).toMatch(/\d+\.\d{6} d \(scatter .*\), \d+\.\d{6} d/);
    expect(issue?.hint).toContain('--period');
  });

  it('are counted with a stated period where the spacings leave them open', () => {
    const rows = simulated(3.3, [2, 9, 15, 28], 0.001, 5);
    expect(offsets(rows, { periodDays: 3.3, renumber: false }).size).toBe(1);
  });

  it('are refused for times without a common period', () => {
    const random = RandomStream.fromSeed(8);
    const rows = Array.from({ length: 12 }, (_, k) => ({
      time: T0 + 10 * k + random.uniformBetween(-3, 3),
      sigma: 1e-4,
    }));
    const { times } = mergeMidTimes([tableOf(rows)]);
    const [issue] = issuesOf(() => numberCycles(times, { periodDays: 10, renumber: false }));
    expect(issue?.code).toBe('no-period-counts');
  });

  it('need three transits or a period', () => {
    const { times } = mergeMidTimes([tableOf(simulated(3, [0, 5], 0.001, 6), { withoutCycles: true })]);
    expect(issuesOf(() => numberCycles(times, NO_HELP))[0]?.code).toBe('too-few-to-count');
  });
});

describe('cycles as written', () => {
  const rows = simulated(2.2, [-30, -28, -11, 0, 4, 19, 40, 77, 93, 120], 5e-4, 9);

  it('are kept where they are right', () => {
    const { times } = mergeMidTimes([tableOf(rows)]);
    const numbering = numberCycles(times, NO_HELP);
    expect(numbering.how).toBe('as written');
    expect(Array.from(numbering.times.cycles)).toEqual(rows.map(({ cycle }) => cycle));
  });

  it('that are wrong are all named, with line and right cycle', () => {
    const wrong = rows.map((row, index) =>
      index === 2 ? { ...row, cycle: -10 } : index === 7 ? { ...row, cycle: 67 } : row,
    );
    const { times } = mergeMidTimes([tableOf(wrong, { path: 'wrong.csv' })]);
    const issues = issuesOf(() => numberCycles(times, NO_HELP));
    expect(issues.map(({ file, line }) => [file, line])).toEqual([
      ['wrong.csv', 4],
      ['wrong.csv', 9],
    ]);
    expect(issues[0]!.message).toMatch(/cycle -10 .* it is cycle -11/);
    expect(issues[1]!.message).toMatch(/cycle 67 .* it is cycle 77/);
    expect(numberCycles(times, { periodDays: null, renumber: true }).how).toBe('recovered');
  });

  it('that count from another zero in a second table are moved and said', () => {
    const second = rows.slice(5).map((row) => ({ ...row, cycle: row.cycle! + 1000, time: row.time + 2.2 }));
    const { times } = mergeMidTimes([tableOf(rows), tableOf(second, { path: 'second.csv' })]);
    const numbering = numberCycles(times, NO_HELP);
    expect(numbering.notices[0]?.code).toBe('cycle-zero-differs');
    expect(numbering.notices[0]?.message).toContain('-999');
    expect(Math.max(...numbering.times.cycles)).toBe(121);
  });

  it('are extended to a table that has none', () => {
    const second = rows.slice(3).map((row) => ({ time: row.time + 4.4, sigma: row.sigma }));
    const { times } = mergeMidTimes([tableOf(rows), tableOf(second, { path: 'second.csv' })]);
    const { cycles } = numberCycles(times, NO_HELP).times;
    for (let row = 0; row < times.count; row++)
      if (times.written[row] !== null) expect(cycles[row]).toBe(times.written[row]);
    expect(Math.max(...cycles)).toBe(122);
  });
});

describe('repeated rows', () => {
  it('that are identical are used once; other times of the same transit are kept, and both are said', () => {
    const rows = simulated(2.2, [0, 1, 2, 5, 9], 5e-4, 10);
    const again = [rows[1]!, { ...rows[3]!, time: rows[3]!.time + 3e-4 }];
    const { times, notices } = mergeMidTimes([tableOf(rows), tableOf(again, { path: 'again.csv' })]);
    expect(times.count).toBe(6);
    expect(notices[0]?.message).toContain('"again.csv" line 2');
    const shared = sharedEventNotices(numberCycles(times, NO_HELP).times);
    expect(shared).toHaveLength(1);
    expect(shared[0]!.message).toMatch(/cycle 5 .*line 5.*"again.csv" line 3/);
  });
});
