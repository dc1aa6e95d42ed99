/**
 * The models of mid-times. Each is linear in all its coefficients but at most one, the frequency f (per cycle): a row of
 * coefficients' partial derivatives for any cycle says everything. With N = cycle - reference, x = N for a transit and
 * N + 1/2 for an occultation, h = half the range of the cycles (which makes every coefficient a displacement in days):
 *
 *   linear      T + P x                              [+ shift of occultations]
 *   quadratic   linear + (1/2) (dP/dE) x^2
 *   sinusoidal  linear + a cos(2 pi f x) + b sin(2 pi f x), alike for transits and occultations
 *   precessing  transits T + P N - (e Pa/pi) cos w, occultations T + P N + Pa/2 + (e Pa/pi) cos w + light time,
 *               w = w0 + 2 pi f N, Pa = P/(1 - f) [GimenezBastero1995], first order in e
 */
import { TWO_PI } from '../../orbit/constants.js';
import type { NumberedTimes } from './timing-data.js';

export const MODEL_NAMES = ['linear', 'quadratic', 'sinusoidal', 'precessing'] as const;
export type TimingModelName = (typeof MODEL_NAMES)[number];

/** The set on the solver's axis. */
export interface TimingProblem {
  readonly times: NumberedTimes;
  /** Cycle that time and period are referred to. */
  readonly referenceCycle: number;
  /** Half the range of the cycles, at least 1. */
  readonly halfRange: number;
  /** An ephemeris near the solution: days since the origin at the reference cycle, days. */
  readonly nearTimeDays: number;
  readonly nearPeriodDays: number;
  /** Observed minus the near ephemeris, days. */
  readonly yDays: Float64Array;
  /** Both transits and occultations are there, so that occultations have a shift of their own. */
  readonly hasBoth: boolean;
  /** Light time across the orbit; 0 where it is not known. Only the precessing model asks for it: elsewhere the shift holds it. */
  readonly lightTimeDays: number;
}

export interface ModelForm {
  readonly name: TimingModelName;
  /** Linear coefficients: time and period come first, then the model's own, then the shift of occultations. */
  readonly size: number;
  readonly hasFrequency: boolean;
  /**
   * @param offset - cycle minus reference cycle
   * @param frequency - per cycle; not looked at without one
   * @param out - overwritten, length `size`: partial derivatives by the coefficients
   * @returns days to add to the near ephemeris in any case
   */
  row(offset: number, isOccultation: boolean, frequency: number, out: Float64Array): number;
  /** Whether the model still means something with these coefficients. */
  isSound(beta: Float64Array): boolean;
}

/** The form to first order in e is good to 1 % of its own amplitude up to here. */
export const LARGEST_PRECESSING_ECCENTRICITY = 0.2;
/** A deviation beyond this share of the period would make the count of the cycles itself doubtful. */
export const LARGEST_DEVIATION_IN_PERIODS = 0.25;

function soundSinusoid(problem: TimingProblem): (beta: Float64Array) => boolean {
  const most = LARGEST_DEVIATION_IN_PERIODS * problem.nearPeriodDays;
  return (beta) => Math.hypot(beta[2]!, beta[3]!) <= most;
}

function soundPrecession(problem: TimingProblem): (beta: Float64Array) => boolean {
  const most = (LARGEST_PRECESSING_ECCENTRICITY * problem.nearPeriodDays) / Math.PI;
  return (beta) => Math.hypot(beta[2]!, beta[3]!) <= most;
}

export function timingProblem(
  times: NumberedTimes,
  near: { readonly timeDays: number; readonly periodDays: number; readonly cycle: number },
  referenceCycle: number,
  lightTimeDays = 0,
): TimingProblem {
  const { cycles, timesDays, isOccultation, count } = times;
  let low = Infinity;
  let high = -Infinity;
  let occultations = 0;
  for (let row = 0; row < count; row++) {
    low = Math.min(low, cycles[row]!);
    high = Math.max(high, cycles[row]!);
    occultations += isOccultation[row]!;
  }
  const nearTimeDays = near.timeDays + near.periodDays * (referenceCycle - near.cycle);
  return {
    times,
    referenceCycle,
    halfRange: Math.max(1, (high - low) / 2),
    nearTimeDays,
    nearPeriodDays: near.periodDays,
    yDays: timesDays.map(
      (time, row) =>
        time - nearTimeDays - near.periodDays * (cycles[row]! - referenceCycle + 0.5 * isOccultation[row]!),
    ),
    hasBoth: occultations > 0 && occultations < count,
    lightTimeDays,
  };
}

export function modelForm(name: TimingModelName, problem: TimingProblem): ModelForm {
  const h = problem.halfRange;
  const shift = problem.hasBoth ? 1 : 0;
  switch (name) {
    case 'linear':
      return {
        name,
        size: 2 + shift,
        hasFrequency: false,
        isSound: () => true,
        row(offset, isOccultation, _frequency, out): number {
          out[0] = 1;
          out[1] = (offset + (isOccultation ? 0.5 : 0)) / h;
          if (shift === 1) out[2] = isOccultation ? 1 : 0;
          return 0;
        },
      };
    case 'quadratic':
      return {
        name,
        size: 3 + shift,
        hasFrequency: false,
        isSound: () => true,
        row(offset, isOccultation, _frequency, out): number {
          const z = (offset + (isOccultation ? 0.5 : 0)) / h;
          out[0] = 1;
          out[1] = z;
          out[2] = z * z;
          if (shift === 1) out[3] = isOccultation ? 1 : 0;
          return 0;
        },
      };
    case 'sinusoidal':
      return {
        name,
        size: 4 + shift,
        hasFrequency: true,
        isSound: soundSinusoid(problem),
        row(offset, isOccultation, frequency, out): number {
          const x = offset + (isOccultation ? 0.5 : 0);
          out[0] = 1;
          out[1] = x / h;
          out[2] = Math.cos(TWO_PI * frequency * x);
          out[3] = Math.sin(TWO_PI * frequency * x);
          if (shift === 1) out[4] = isOccultation ? 1 : 0;
          return 0;
        },
      };
    case 'precessing':
      return {
        name,
        size: 4,
        hasFrequency: true,
        isSound: soundPrecession(problem),
        row(offset, isOccultation, frequency, out): number {
          const half = 0.5 / (1 - frequency); // Pa/2 in units of P
          const sign = isOccultation ? -1 : 1;
          out[0] = 1;
          out[1] = (offset + (isOccultation ? half : 0)) / h;
          out[2] = sign * Math.cos(TWO_PI * frequency * offset);
          out[3] = sign * Math.sin(TWO_PI * frequency * offset);
          return isOccultation ? problem.nearPeriodDays * (half - 0.5) + problem.lightTimeDays : 0;
        },
      };
  }
}
