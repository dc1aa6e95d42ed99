/** The cycle of every mid-time: as written, once checked; else from the spacings of the times. */
import type { MidTimes, TimingNotice } from './timing-data.js';
import {
  alignedWithWritten,
  checkWritten,
  cycleAt,
  groupsOf,
  robustPeriod,
  wholeIssue,
  type Numbering,
} from './written-cycles.js';
import {
  countCycles, DISMISSED_BELOW, smallestSpacingDays, type CountableTimes, type CountedPeriod,
} from './cycle-scan.js'; // prettier-ignore

export interface NumberingChoices {
  /** About the period, days; `null` leaves it to the times. */
  readonly periodDays: number | null;
  /** Number the cycles afresh even where they are written. */
  readonly renumber: boolean;
}

/** A stated period is taken as right to this share. */
const STATED_PERIOD_TOLERANCE = 0.02;
/** The smallest spacing may fall short of the period by so much (times that vary). */
const SPACING_SLACK = 0.1;
const SHORTEST_PERIOD_DAYS = 0.02;
/** A second period whose S falls short by less than this leaves the cycles open. */
const UNDECIDED_BELOW = 3;

/** @throws InputDataError naming every wrong cycle; or, where none are written, when no period (or more than one) counts the times */
export function numberCycles(times: MidTimes, choices: NumberingChoices): Numbering {
  const written = times.written.filter((cycle) => cycle !== null).length;
  if (written === times.count && !choices.renumber) return checkWritten(times);
  const recovered = recover(times, choices);
  if (choices.renumber || written === 0) return recovered;
  return alignedWithWritten(times, recovered);
}

/** The rows that are counted first: transits, unless there are fewer than three of them and more occultations. */
function countableRows(times: MidTimes): number[] {
  const of = (kind: number): number[] =>
    Array.from({ length: times.count }, (_, row) => row).filter((row) => times.isOccultation[row] === kind);
  const transits = of(0);
  const occultations = of(1);
  return transits.length >= 3 || transits.length >= occultations.length ? transits : occultations;
}

function recover(times: MidTimes, choices: NumberingChoices): Numbering {
  const rows = countableRows(times);
  const countable: CountableTimes = {
    timesDays: Float64Array.from(rows, (row) => times.timesDays[row]!),
    sigmasDays: Float64Array.from(rows, (row) => times.sigmasDays[row]!),
  };
  const spacing = smallestSpacingDays(countable);
  const stated = choices.periodDays ?? writtenPeriod(times);
  if (!Number.isFinite(spacing) || (rows.length < 3 && stated === null))
    throw wholeIssue(
      times,
      'too-few-to-count',
      'the times are too few to count cycles: at least three different transits are needed',
      'add a column of cycles, or state the period: --period of timing, period: of the companion in a case',
    );
  const found = countCycles(
    countable,
    stated === null
      ? { longestDays: spacing * (1 + SPACING_SLACK), shortestDays: SHORTEST_PERIOD_DAYS }
      : {
          longestDays: stated * (1 + STATED_PERIOD_TOLERANCE),
          shortestDays: stated * (1 - STATED_PERIOD_TOLERANCE),
        },
  );
  const [best, second] = found;
  if (best === undefined)
    throw wholeIssue(
      times,
      'no-period-counts',
      stated === null
        ? `no period from ${SHORTEST_PERIOD_DAYS} d to ${(spacing * (1 + SPACING_SLACK)).toFixed(4)} d (the smallest spacing and a tenth) brings all times to one phase`
        : `no period within 2 % of ${stated} d brings all times to one phase`,
      'do the times belong to one companion? Add a column of cycles, or state the period: --period of timing, period: of the companion in a case',
    );
  if (second !== undefined && best.score - second.score < UNDECIDED_BELOW)
    throw wholeIssue(
      times,
      'cycles-undecided',
      `more than one period counts these times: ${listed(found)}`,
      'state the right one (--period of timing, period: of the companion in a case), or add a column of cycles',
    );
  return numbered(times, best, found, stated);
}

/** The period of the written cycles, where some tables have them and others not. */
function writtenPeriod(times: MidTimes): number | null {
  const [main] = groupsOf(times);
  return main === undefined || main.length < 3 ? null : robustPeriod(times, main);
}

function listed(found: readonly CountedPeriod[]): string {
  return found
    .slice(0, 8)
    .map(
      ({ periodDays, phaseScatter }) =>
        `${periodDays.toFixed(6)} d (scatter ${(100 * phaseScatter).toPrecision(2)} % of a cycle)`,
    )
    .join(', ')
    .concat(found.length > 8 ? ` and ${found.length - 8} more` : '');
}

function numbered(
  times: MidTimes,
  best: CountedPeriod,
  found: readonly CountedPeriod[],
  stated: number | null,
): Numbering {
  const { timeDays, periodDays } = best;
  const isOccultationZero = times.isOccultation[countableRows(times)[0]!] === 1;
  // Counted occultations lie half a cycle after their transits.
  const zero = isOccultationZero ? timeDays - 0.5 * periodDays : timeDays;
  const counted = new Map(countableRows(times).map((row, index) => [row, best.cycles[index]!]));
  const cycles = Int32Array.from(
    { length: times.count },
    (_, row) => counted.get(row) ?? cycleAt(times, row, zero, periodDays),
  );
  const rivals = found.slice(1).map((rival) => ({
    periodDays: rival.periodDays,
    deltaScore: rival.score - best.score,
    phaseScatter: rival.phaseScatter,
  }));
  const notices: TimingNotice[] =
    rivals.length === 0
      ? []
      : [
          {
            code: 'other-periods-count',
            message: `the cycles rest on the period ${periodDays.toFixed(6)} d; the times can also be counted with ${listed(found.slice(1))}, less likely by e^${(-rivals[0]!.deltaScore).toFixed(1)} or more`,
          },
        ];
  const basis = stated === null ? 'from the spacings of the times' : 'from the stated period';
  return {
    times: { ...times, cycles },
    near: { timeDays: zero, periodDays, cycle: 0 },
    how: 'recovered',
    statement:
      `Cycles were counted ${basis}, from 0 at the first ${isOccultationZero ? 'occultation' : 'transit'}: the longest period that brings all times to one phase is ${periodDays.toFixed(6)} d ` +
      `(scatter ${(100 * best.phaseScatter).toPrecision(2)} % of a cycle). Its half, third and so on fit equally by construction; ` +
      (rivals.length === 0
        ? `no other comes within ${DISMISSED_BELOW} in ln of the density.`
        : 'others come near.'),
    rivals,
    notices,
  };
}
