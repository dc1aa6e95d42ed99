/** Numbers that tell an observer whether the program has understood a light curve, or a table of mid-times. */
import { SECONDS_PER_DAY } from '../orbit/constants.js';
import { usualSpacing } from './exposure.js';
import { pointToPoint } from './flux-scale.js';
import type { LightCurveTable, MidTimeTable } from './photometry-types.js';
import { timeScaleError } from './time-scale.js';
import type { TimeScale } from './types.js';
import { median } from './validate.js';

/** A longer pause between rows is shown as a gap. */
const GAP_DAYS = 0.5;
/** ... provided that it is so many times the usual step. */
const GAP_STEPS = 10;

interface PhotometrySummary {
  readonly path: string;
  readonly rows: number;
  readonly used: number;
  readonly timeScale: TimeScale;
  /** How far the dates may be off, taken as BJD_TDB. */
  readonly timeErrorSeconds: number;
  readonly firstBjdTdb: number;
  readonly lastBjdTdb: number;
  readonly spanDays: number;
}

export interface LightCurveSummary extends PhotometrySummary {
  /** Median time from one row to the next; `null` with one row. */
  readonly medianCadenceDays: number | null;
  /** Pauses of half a day or more (and ten usual steps), in order of time. */
  readonly gaps: readonly { readonly fromBjdTdb: number; readonly toBjdTdb: number; readonly days: number }[];
  readonly medianErrorPpm: number;
  /** Robust scatter from one row to the next; `null` below three rows. */
  readonly pointToPointPpm: number | null;
  /** Robust scatter about the median, slow changes and dips included. */
  readonly scatterPpm: number;
  /** How far the flux goes below and above its median. */
  readonly deepestPpm: number;
  readonly highestPpm: number;
  /** The 1 % and the 99 % point of the flux, from its median. */
  readonly onePercentPpm: number;
  readonly ninetyNinePercentPpm: number;
}

export interface MidTimeSummary extends PhotometrySummary {
  readonly transits: number;
  readonly occultations: number;
  readonly medianErrorSeconds: number;
  readonly smallestErrorSeconds: number;
  readonly largestErrorSeconds: number;
  /** Smallest and largest cycle; `null` without a column of cycles. */
  readonly cycles: { readonly first: number; readonly last: number } | null;
  /** Different sources; empty names do not count. */
  readonly sources: number;
}

const PPM = 1e6;

function common(table: LightCurveTable | MidTimeTable, times: Float64Array): PhotometrySummary {
  const [first, last] = [times[0]!, times.at(-1)!];
  return {
    path: table.path,
    rows: table.rows,
    used: table.used,
    timeScale: table.timeScale,
    timeErrorSeconds: timeScaleError(table.timeScale).maximumSeconds,
    firstBjdTdb: first,
    lastBjdTdb: last,
    spanDays: last - first,
  };
}

export function describeLightCurve(table: LightCurveTable): LightCurveSummary {
  const { timesBjdTdb: times, flux, sigmas } = table;
  const step = usualSpacing(times);
  const sorted = Float64Array.from(flux).sort();
  const middle = median(sorted);
  const at = (share: number): number => PPM * (sorted[Math.round(share * (sorted.length - 1))]! - middle);
  const scatter = pointToPoint(flux);
  return {
    ...common(table, times),
    medianCadenceDays: times.length < 2 ? null : step,
    gaps: gapsOf(times, Math.max(GAP_DAYS, GAP_STEPS * step)),
    medianErrorPpm: PPM * median(sigmas),
    pointToPointPpm: Number.isNaN(scatter) ? null : PPM * scatter,
    scatterPpm: PPM * 1.4826 * median(flux.map((value) => Math.abs(value - middle))), // from median deviation to sigma
    deepestPpm: at(0),
    highestPpm: at(1),
    onePercentPpm: at(0.01),
    ninetyNinePercentPpm: at(0.99),
  };
}

function gapsOf(times: Float64Array, shortest: number): LightCurveSummary['gaps'] {
  const gaps: { fromBjdTdb: number; toBjdTdb: number; days: number }[] = [];
  for (let row = 1; row < times.length; row++) {
    const days = times[row]! - times[row - 1]!;
    if (days >= shortest) gaps.push({ fromBjdTdb: times[row - 1]!, toBjdTdb: times[row]!, days });
  }
  return gaps;
}

export function describeMidTimes(table: MidTimeTable): MidTimeSummary {
  const errors = table.sigmasDays.map((days) => days * SECONDS_PER_DAY).sort();
  const occultations = table.isOccultation.reduce((sum, flag) => sum + flag, 0);
  const cycles = table.cycles === null ? null : Int32Array.from(table.cycles).sort();
  return {
    ...common(table, Float64Array.from(table.timesBjdTdb).sort()),
    transits: table.used - occultations,
    occultations,
    medianErrorSeconds: median(errors),
    smallestErrorSeconds: errors[0]!,
    largestErrorSeconds: errors.at(-1)!,
    cycles: cycles === null ? null : { first: cycles[0]!, last: cycles.at(-1)! },
    sources: new Set(table.sources.filter((source) => source !== '')).size,
  };
}
