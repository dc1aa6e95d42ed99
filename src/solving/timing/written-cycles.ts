/** Cycles as the tables have them: checked against the times, every wrong one named. */
import { InputDataError, type InputIssue } from '../../errors.js';
import { median } from '../../numerics/summary.js';
import { placesOf, type MidTimes, type NumberedTimes, type TimingNotice } from './timing-data.js';

export interface Numbering {
  readonly times: NumberedTimes;
  /** An ephemeris near the solution. */
  readonly near: { readonly timeDays: number; readonly periodDays: number; readonly cycle: number };
  readonly how: 'as written' | 'recovered';
  /** One sentence. */
  readonly statement: string;
  /** Other periods that count these times nearly as well, best first. */
  readonly rivals: readonly {
    readonly periodDays: number;
    readonly deltaScore: number;
    readonly phaseScatter: number;
  }[];
  readonly notices: readonly TimingNotice[];
}

const MOST_PAIRS = 400_000;

function issueAt(times: MidTimes, row: number, code: string, message: string, hint: string): InputIssue {
  const { path, line } = times.origins[row]!;
  return { code, file: path, line, column: null, field: 'cycle', message, hint };
}

/** A problem of the whole set. */
export function wholeIssue(times: MidTimes, code: string, message: string, hint: string): InputDataError {
  const file = times.origins[0]?.path ?? '';
  return new InputDataError([{ code, file, line: null, column: null, field: null, message, hint }]);
}

/** Rows of one table and one kind count from one zero. */
export function groupsOf(times: MidTimes): number[][] {
  const groups = new Map<number, number[]>();
  for (let row = 0; row < times.count; row++) {
    if (times.written[row] === null) continue;
    const key = 2 * times.tableOf[row]! + times.isOccultation[row]!;
    groups.set(key, [...(groups.get(key) ?? []), row]);
  }
  return [...groups.values()].sort((a, b) => b.length - a.length);
}

/** Median of the periods of all pairs of rows (of pairs at even lags where there are many): a few wrong cycles do no harm. */
export function robustPeriod(times: MidTimes, rows: readonly number[]): number | null {
  const n = rows.length;
  const lags = Math.min(n - 1, Math.max(1, Math.floor(MOST_PAIRS / n)));
  const periods: number[] = [];
  for (let k = 0; k < lags; k++) {
    const lag = 1 + Math.floor((k * (n - 1)) / lags);
    for (let i = lag; i < n; i++) {
      const [one, other] = [rows[i]!, rows[i - lag]!];
      const cycles = times.written[one]! - times.written[other]!;
      if (cycles !== 0) periods.push((times.timesDays[one]! - times.timesDays[other]!) / cycles);
    }
  }
  if (periods.length === 0) return null;
  const middle = median(periods);
  return middle > 0 ? middle : null;
}

/** Cycles that a linear ephemeris gives; an occultation has that of the transit before it. */
export function cycleAt(times: MidTimes, row: number, timeDays: number, periodDays: number): number {
  const phase = (times.timesDays[row]! - timeDays) / periodDays - 0.5 * times.isOccultation[row]!;
  return Math.round(phase);
}

/** @throws InputDataError naming every wrong cycle with the right one */
export function checkWritten(times: MidTimes): Numbering {
  const groups = groupsOf(times);
  const [main = []] = groups;
  const periodDays = robustPeriod(times, main);
  if (periodDays === null)
    throw wholeIssue(
      times,
      'cycles-without-period',
      'the cycles as written give no period: they are all the same, or run against the times',
      'correct the cycles, or add --renumber to count them from the times',
    );
  const zeroOf = (rows: readonly number[]): number =>
    median(
      rows.map(
        (row) => times.timesDays[row]! - periodDays * (times.written[row]! + 0.5 * times.isOccultation[row]!),
      ),
    );
  const timeDays = zeroOf(main);
  const cycles = new Int32Array(times.count);
  const issues: InputIssue[] = [];
  const notices: TimingNotice[] = [];
  for (const rows of groups) {
    const shift = rows === main ? 0 : Math.round((zeroOf(rows) - timeDays) / periodDays);
    if (shift !== 0)
      notices.push({
        code: 'cycle-zero-differs',
        message: `${placesOf(times, rows, 3)} count${rows.length === 1 ? 's' : ''} ${times.isOccultation[rows[0]!] === 1 ? 'occultations' : 'transits'} from another zero than the other rows: ${shift} is added to ${rows.length === 1 ? 'its cycle' : `their ${rows.length} cycles`}`,
      });
    const zero = zeroOf(rows);
    for (const row of rows) {
      const given = times.written[row]!;
      cycles[row] = given + shift;
      const right = cycleAt(times, row, zero, periodDays);
      if (right !== given)
        issues.push(
          issueAt(
            times,
            row,
            'wrong-cycle',
            `cycle ${given} does not fit its time ${(times.originBjdTdb + times.timesDays[row]!).toFixed(5)}: by the other rows (period ${periodDays.toFixed(6)} d) it is cycle ${right}`,
            'correct the cycle, or add --renumber to count all of them from the times',
          ),
        );
    }
  }
  if (issues.length > 0) throw new InputDataError(issues);
  return {
    times: { ...times, cycles },
    near: { timeDays, periodDays, cycle: 0 },
    how: 'as written',
    statement: 'Cycles are those of the tables; each fits its time.',
    rivals: [],
    notices,
  };
}

/** Recovered cycles moved to the zero of those that some tables have; rows that disagree are problems. */
export function alignedWithWritten(times: MidTimes, recovered: Numbering): Numbering {
  const groups = groupsOf(times);
  const [main = []] = groups;
  const shiftOf = (rows: readonly number[]): number =>
    Math.round(median(rows.map((row) => times.written[row]! - recovered.times.cycles[row]!)));
  const shift = shiftOf(main);
  const issues: InputIssue[] = [];
  const notices: TimingNotice[] = [...recovered.notices];
  for (const rows of groups) {
    const own = shiftOf(rows);
    if (own !== shift)
      notices.push({
        code: 'cycle-zero-differs',
        message: `${placesOf(times, rows, 3)} count from another zero than the other rows: ${shift - own} is added to their ${rows.length} cycles`,
      });
    for (const row of rows) {
      const right = recovered.times.cycles[row]! + own;
      if (right !== times.written[row])
        issues.push(
          issueAt(
            times,
            row,
            'wrong-cycle',
            `cycle ${times.written[row]!} does not fit its time: by the other rows it is cycle ${right}`,
            'correct the cycle, or add --renumber to count all of them from the times',
          ),
        );
    }
  }
  if (issues.length > 0) throw new InputDataError(issues);
  const cycles = recovered.times.cycles.map((cycle) => cycle + shift);
  return {
    ...recovered,
    times: { ...recovered.times, cycles },
    near: { ...recovered.near, cycle: recovered.near.cycle + shift },
    statement: `Some rows have no cycle; all were counted from the times and moved to the zero of those that are written. ${recovered.statement}`,
    notices,
  };
}
