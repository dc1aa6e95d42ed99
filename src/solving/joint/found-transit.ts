/** A transiting companion as it is known before the joint fit. */
import type { JoinedDipData } from '../dips/dip-data.js';
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
  /** Tables that were searched, and what their points were made of. */
  readonly surveyed: readonly string[];
  readonly searched: JoinedDipData | null;
  readonly notices: readonly { readonly code: string; readonly message: string }[];
}

/**
 * Straight line through numbered mid-times by least squares; errors grow with the scatter where that exceeds them. Beside
 * transits, occultations tell the period alone: on an eccentric orbit they do not come half a period later.
 */
export function straightLine(times: NumberedTimes, shiftDays: number): LinearEphemeris {
  const { count, timesDays, sigmasDays, cycles, isOccultation } = times;
  const whole = Float64Array.from(cycles);
  const late = whole.map((cycle, i) => cycle + 0.5 * isOccultation[i]!);
  const rows = Array.from({ length: count }, (_, i) => i);
  const transits = rows.filter((i) => isOccultation[i] === 0);
  const occultations = rows.filter((i) => isOccultation[i] === 1);
  const apart = [transits, occultations].map((own) => moments(whole, timesDays, sigmasDays, own));
  const isApart = transits.length > 0 && occultations.length > 0 && apart[0]!.xx + apart[1]!.xx > 0;
  const groups = isApart ? apart : [moments(late, timesDays, sigmasDays, rows)];
  const xx = groups.reduce((sum, own) => sum + own.xx, 0);
  const periodDays = groups.reduce((sum, own) => sum + own.xy, 0) / xx;
  const chiSquare = groups.reduce(
    (sum, own) => sum + own.yy - periodDays * (2 * own.xy - periodDays * own.xx),
    0,
  );
  const inflation = Math.sqrt(Math.max(1, chiSquare / Math.max(1, count - 1 - groups.length)));
  const { meanX, meanY, weight } = groups[0]!;
  return {
    timeDays: meanY - periodDays * meanX + shiftDays,
    periodDays,
    middleCycle: Math.round(meanX),
    middleSigmaDays: inflation / Math.sqrt(weight),
    periodSigmaDays: inflation / Math.sqrt(xx),
  };
}

interface Moments {
  readonly weight: number;
  readonly meanX: number;
  readonly meanY: number;
  /** About the means. */
  readonly xx: number;
  readonly xy: number;
  readonly yy: number;
}

function moments(x: Float64Array, y: Float64Array, sigmas: Float64Array, rows: readonly number[]): Moments {
  const sum = (term: (i: number) => number): number =>
    rows.reduce((total, i) => total + term(i) / (sigmas[i]! * sigmas[i]!), 0);
  const weight = sum(() => 1);
  const meanX = sum((i) => x[i]!) / weight;
  const meanY = sum((i) => y[i]!) / weight;
  return {
    weight,
    meanX,
    meanY,
    xx: sum((i) => (x[i]! - meanX) ** 2),
    xy: sum((i) => (x[i]! - meanX) * (y[i]! - meanY)),
    yy: sum((i) => (y[i]! - meanY) ** 2),
  };
}
