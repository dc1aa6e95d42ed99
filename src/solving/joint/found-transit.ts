/** A transiting companion as it is known before the joint fit. */
import type { DipCandidate, DipSearch } from '../dips/types.js';
import type { NumberedTimes } from '../timing/timing-data.js';
import type { Ephemeris } from './curve-windows.js';

export interface FoundTransit {
  readonly ephemeris: Ephemeris;
  /** How the ephemeris is known. */
  readonly how: 'search' | 'mid-times' | 'case' | 'velocities' | 'one event';
  readonly periodSigmaDays: number | null;
  readonly midTimeSigmaDays: number;
  /** Where the period is unknown, every shorter one is excluded by the data. */
  readonly shortestPeriodDays: number;
  readonly candidate: DipCandidate | null;
  /** A light curve shows it; else only mid-times or the case speak of it. */
  readonly isSeen: boolean;
}

/** Mid-times of one companion with their cycles. */
export interface NumberedSet {
  readonly letter: string;
  readonly times: NumberedTimes;
  /** Period and time of cycle 0 of a straight line, on the solver's axis. */
  readonly line: LinearEphemeris;
}

/** T(E) = time + period E. Days since the solver's epoch. */
export interface LinearEphemeris {
  readonly timeDays: number;
  readonly periodDays: number;
  /** Cycle near the weighted middle, where time and period are independent, and errors there. */
  readonly middleCycle: number;
  readonly middleSigmaDays: number;
  readonly periodSigmaDays: number;
}

export interface TransitSearch {
  readonly transits: readonly FoundTransit[];
  readonly sets: readonly NumberedSet[];
  /** `null` where no light curve is long enough to be searched. */
  readonly dips: DipSearch | null;
  /** Tables that were searched, and per point of the search the table it is from. */
  readonly surveyed: readonly string[];
  readonly tableOf: Uint16Array;
  readonly notices: readonly { readonly code: string; readonly message: string }[];
}

/** Straight line through numbered mid-times by least squares; errors grow with the scatter where that exceeds them. */
export function straightLine(times: NumberedTimes, shiftDays: number): LinearEphemeris {
  const { count, timesDays, sigmasDays, cycles, isOccultation } = times;
  let [w, wx, wy] = [0, 0, 0];
  const x = (i: number): number => cycles[i]! + 0.5 * isOccultation[i]!;
  for (let i = 0; i < count; i++) {
    const weight = sigmasDays[i]! ** -2;
    w += weight;
    wx += weight * x(i);
    wy += weight * timesDays[i]!;
  }
  const meanX = wx / w;
  const meanY = wy / w;
  let [xx, xy] = [0, 0];
  for (let i = 0; i < count; i++) {
    const weight = sigmasDays[i]! ** -2;
    xx += weight * (x(i) - meanX) ** 2;
    xy += weight * (x(i) - meanX) * (timesDays[i]! - meanY);
  }
  const periodDays = xy / xx;
  let chiSquare = 0;
  for (let i = 0; i < count; i++)
    chiSquare += ((timesDays[i]! - meanY - periodDays * (x(i) - meanX)) / sigmasDays[i]!) ** 2;
  const inflation = Math.sqrt(Math.max(1, chiSquare / Math.max(1, count - 2)));
  return {
    timeDays: meanY - periodDays * meanX + shiftDays,
    periodDays,
    middleCycle: Math.round(meanX),
    middleSigmaDays: inflation / Math.sqrt(w),
    periodSigmaDays: inflation / Math.sqrt(xx),
  };
}
