/** What a solution predicts for the mid-times when its companions pull at each other. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import { ModelDomainError } from '../../errors.js';
import { conjunctionTimes } from '../../orbit/interaction/conjunctions.js';

export interface PredictedCompanion {
  readonly letter: string;
  readonly periodDays: number;
  /** An inferior conjunction: cycle 0. Days on the axis of `epochDays`. */
  readonly conjunctionDays: number;
  readonly eccentricity: number;
  readonly argPeriastronStarRad: number;
  /** Companion over star. */
  readonly massRatio: number;
  /** 90 deg is edge-on. */
  readonly inclinationRad: number;
  readonly cycles: ArrayLike<number>;
}

export interface PredictedVariation {
  readonly letter: string;
  /** In the order of `cycles`. */
  readonly timesDays: Float64Array;
  /** Against the straight line of least squares through the predicted times. */
  readonly oMinusCMinutes: Float64Array;
  /** Half of the full swing of `oMinusCMinutes`. */
  readonly amplitudeMinutes: number;
}

export interface VariationComparison {
  /** Observed O - C against the straight line through the observed times, and the same of the prediction at those cycles. */
  readonly observedMinutes: Float64Array;
  readonly predictedMinutes: Float64Array;
  /** Of observed minus predicted, a common straight line removed; and of observed against its line. */
  readonly chiSquare: number;
  readonly chiSquareLine: number;
}

/**
 * Mid-transit times of companions that interact, from elements that hold at an epoch.
 *
 * @param starMassSolar - its value hardly matters: times depend on periods and mass ratios
 * @throws ModelDomainError for elements outside their ranges, no cycles, or a cycle that is not a whole number
 * @throws ConvergenceError when companions meet so closely that they cannot be followed
 *
 * Accuracy: that of `conjunctionTimes`, 1e-9 d over 2500 d.
 */
export function predictMidTimes(
  companions: readonly PredictedCompanion[],
  epochDays: number,
  starMassSolar: number,
): PredictedVariation[] {
  let from = epochDays;
  let to = epochDays;
  for (const { cycles, conjunctionDays, periodDays } of companions) {
    if (cycles.length === 0) throw new ModelDomainError('number of cycles', 0, 'the whole numbers from 1 on');
    for (let i = 0; i < cycles.length; i++) {
      if (!Number.isInteger(cycles[i]!)) throw new ModelDomainError('cycle', cycles[i]!, 'the whole numbers');
      const time = conjunctionDays + cycles[i]! * periodDays;
      // Half a period for the variation, and one transit beyond the epoch to count from.
      from = Math.min(from, time - 0.5 * periodDays, epochDays - periodDays);
      to = Math.max(to, time + 0.5 * periodDays, epochDays + periodDays);
    }
  }
  // Osculating periods depart from mean ones: some per cent more than the range asks for.
  const slack = 0.03 * (to - from);
  const found = conjunctionTimes(
    {
      starMassSolar,
      epochDays,
      companions: companions.map((companion) => ({
        massRatio: companion.massRatio,
        periodDays: companion.periodDays,
        conjunctionDays: companion.conjunctionDays,
        eCosOmega: companion.eccentricity * Math.cos(companion.argPeriastronStarRad),
        eSinOmega: companion.eccentricity * Math.sin(companion.argPeriastronStarRad),
        inclinationRad: companion.inclinationRad,
        nodeRad: 0,
      })),
    },
    from - slack,
    to + slack,
  );
  return companions.map((companion, index) => {
    const { transits } = found[index]!;
    // Cycles are counted from the transit nearest to the epoch, where the elements are true.
    const nearEpoch = Math.round((epochDays - companion.conjunctionDays) / companion.periodDays);
    const expected = companion.conjunctionDays + nearEpoch * companion.periodDays;
    const first = nearEpoch - nearestIndex(transits, expected);
    const timesDays = Float64Array.from(companion.cycles, (cycle) => transits[cycle - first] ?? NaN);
    const oMinusCMinutes = withoutLine(companion.cycles, timesDays, null).map((r) => r * MINUTES_PER_DAY);
    const swing = Math.max(...oMinusCMinutes) - Math.min(...oMinusCMinutes);
    return { letter: companion.letter, timesDays, oMinusCMinutes, amplitudeMinutes: 0.5 * swing };
  });
}

/** @param predictedDays - at the same cycles as the observed times */
export function compareVariation(
  cycles: ArrayLike<number>,
  observedDays: ArrayLike<number>,
  sigmasDays: ArrayLike<number>,
  predictedDays: ArrayLike<number>,
): VariationComparison {
  const observed = withoutLine(cycles, Float64Array.from(observedDays), sigmasDays);
  const predicted = withoutLine(cycles, Float64Array.from(predictedDays), sigmasDays);
  let chiSquare = 0;
  let chiSquareLine = 0;
  for (let i = 0; i < observed.length; i++) {
    chiSquare += ((observed[i]! - predicted[i]!) / sigmasDays[i]!) ** 2;
    chiSquareLine += (observed[i]! / sigmasDays[i]!) ** 2;
  }
  const minutes = (value: number): number => value * MINUTES_PER_DAY;
  return {
    observedMinutes: observed.map(minutes),
    predictedMinutes: predicted.map(minutes),
    chiSquare,
    chiSquareLine,
  };
}

function nearestIndex(ascending: Float64Array, time: number): number {
  let best = 0;
  for (let i = 1; i < ascending.length; i++) {
    if (Math.abs(ascending[i]! - time) < Math.abs(ascending[best]! - time)) best = i;
  }
  return best;
}

/** Residuals of the weighted straight line in the cycle; equal weights where no errors are given. */
function withoutLine(
  cycles: ArrayLike<number>,
  times: Float64Array,
  sigmas: ArrayLike<number> | null,
): Float64Array {
  const origin = times[0]!;
  let s0 = 0;
  let s1 = 0;
  let s2 = 0;
  let b0 = 0;
  let b1 = 0;
  for (let i = 0; i < times.length; i++) {
    const weight = sigmas === null ? 1 : sigmas[i]! ** -2;
    const place = cycles[i]! - cycles[0]!;
    const value = times[i]! - origin;
    s0 += weight;
    s1 += weight * place;
    s2 += weight * place * place;
    b0 += weight * value;
    b1 += weight * value * place;
  }
  const determinant = s0 * s2 - s1 * s1;
  // One cycle alone fixes a level and no slope.
  const slope = determinant > 0 ? (s0 * b1 - s1 * b0) / determinant : 0;
  const level = (b0 - slope * s1) / s0;
  return times.map((time, i) => time - origin - level - slope * (cycles[i]! - cycles[0]!));
}
