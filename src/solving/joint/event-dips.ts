/** Dips of light curves at expected times. */
import type { LightCurveTable } from '../../observations/photometry-types.js';
import { daysOf, eventsWithin } from './curve-windows.js';
import { findKnownDip, type DipRun, type KnownDip } from './known-dip.js';

/** Half width of the run that is looked at around an expected transit, in periods and in days. */
const RUN_IN_PERIODS = 0.2;
const RUN_DAYS = 0.4;
const LONGEST_IN_PERIODS = 0.25;
/** Events that are looked at; more do not help to find the duration. */
const MOST_RUNS = 40;
/** A dip is believed above this gain in chi-square. */
const LEAST_GAIN = 30;
/** A transit takes at most this share of a night. */
const LONGEST_OF_NIGHT = 0.8;

/** Label of the regressor that is the airmass, or `null`. */
export function airmassLabel({ regressors }: LightCurveTable): string | null {
  return [...regressors.keys()].find((label) => /air\s*-?mass/i.test(label)) ?? null;
}

function runOf(
  table: LightCurveTable,
  times: Float64Array,
  from: number,
  to: number,
  midTimeDays: number,
): DipRun {
  const label = airmassLabel(table);
  const airmass = label === null ? null : table.regressors.get(label)!;
  return {
    timesDays: times.subarray(from, to),
    flux: table.flux.subarray(from, to),
    sigmas: table.sigmas.subarray(from, to),
    airmass: airmass === null ? null : airmass.subarray(from, to),
    midTimeDays,
  };
}

/** The dip that an ephemeris predicts, in all light curves together; `null` where none is seen. */
export function dipOfEphemeris(
  tables: readonly LightCurveTable[],
  epochBjdTdb: number,
  known: {
    readonly periodDays: number;
    readonly midTimeDays: number;
    readonly midTimeSigmaDays: number;
    readonly periodSigmaDays: number;
  },
): KnownDip | null {
  const half = Math.min(RUN_IN_PERIODS * known.periodDays, RUN_DAYS);
  const runs: DipRun[] = [];
  let farthest = 0;
  for (const table of tables) {
    const times = daysOf(table, epochBjdTdb);
    const events = eventsWithin(
      [{ ...known, letter: '', durationDays: 0, depth: 0, occultationLagDays: null }],
      times[0]! - half,
      times.at(-1)! + half,
    );
    for (const { midTimeDays, cycle } of events) {
      const from = times.findIndex((time) => time >= midTimeDays - half);
      if (from < 0) continue;
      let to = from;
      while (to < times.length && times[to]! <= midTimeDays + half) to++;
      if (to - from < 8) continue;
      farthest = Math.max(farthest, Math.abs(cycle));
      runs.push(runOf(table, times, from, to, midTimeDays));
    }
  }
  const uncertain = 3 * (known.midTimeSigmaDays + farthest * known.periodSigmaDays);
  const chosen =
    runs.length <= MOST_RUNS ? runs : runs.filter((_, i) => i % Math.ceil(runs.length / MOST_RUNS) === 0);
  const dip = findKnownDip(
    chosen,
    Math.min(half, Math.max(0.02, uncertain)),
    Math.min(1.6 * half, LONGEST_IN_PERIODS * known.periodDays),
  );
  return dip !== null && dip.gain > LEAST_GAIN ? dip : null;
}

/** The strongest dip of one night, wherever it lies. */
export function dipOfNight(table: LightCurveTable, epochBjdTdb: number): KnownDip | null {
  const times = daysOf(table, epochBjdTdb);
  const span = times.at(-1)! - times[0]!;
  const middle = 0.5 * (times.at(-1)! + times[0]!);
  return findKnownDip([runOf(table, times, 0, times.length, middle)], 0.5 * span, LONGEST_OF_NIGHT * span);
}
