/** The priors of the posterior, stated in the trade's elements. */
import type { Case } from '../../observations/types.js';
import { upperMedian } from '../../numerics/summary.js';
import type { VelocityData } from '../../signals/velocity-term.js';

/** Scales and bounds of the default priors. All are proper. */
export interface PriorScales {
  /** Period: log-uniform between these, days. */
  readonly shortestPeriodDays: number;
  readonly longestPeriodDays: number;
  /** Semi-amplitude: density proportional to 1/(K + scale) up to the largest, m/s. */
  readonly amplitudeScaleMps: number;
  readonly largestAmplitudeMps: number;
  /** Jitter: density proportional to 1/sqrt(s^2 + scale^2) up to the largest, m/s. */
  readonly jitterScaleMps: number;
  readonly largestJitterMps: number;
  /** Zero points: uniform within this of the mean velocity of the instrument, m/s. */
  readonly zeroPointHalfWidthMps: number;
  /** Slope and curvature: uniform within these of zero, m/s/d and m/s/d^2. */
  readonly slopeHalfWidthMpsPerDay: number;
  readonly curvatureHalfWidthMpsPerDay2: number;
  /** Star's radius over the semi-major axis at a period of one day, for orbits about this star: e < 1 - this P^(-2/3). */
  readonly starRadiusAtOneDay: number;
}

/** A period may run beyond the search range by this factor in the posterior: partial orbits have long tails. */
export const POSTERIOR_PERIOD_REACH = 20;

/** Default priors for some data. Widths follow from the errors and the range of the velocities, which only sets their order. */
export function priorScales(
  data: VelocityData,
  spanDays: number,
  range: { readonly shortestPeriodDays: number; readonly longestPeriodDays: number },
  starRadiusAtOneDay: number,
): PriorScales {
  const sigma = upperMedian(data.sigmasMps) ?? 1;
  let widest = sigma;
  for (let instrument = 0; instrument < data.instrumentCount; instrument++) {
    const own = data.velocitiesMps.filter((_, i) => data.instrumentOf[i] === instrument);
    if (own.length > 1) widest = Math.max(widest, Math.max(...own) - Math.min(...own));
  }
  const reach = 10 * widest + 100 * sigma;
  return {
    shortestPeriodDays: 0.9 * range.shortestPeriodDays,
    longestPeriodDays: POSTERIOR_PERIOD_REACH * range.longestPeriodDays,
    amplitudeScaleMps: 0.1 * sigma,
    largestAmplitudeMps: 100 * reach,
    jitterScaleMps: 0.3 * sigma,
    largestJitterMps: reach,
    zeroPointHalfWidthMps: 100 * reach,
    slopeHalfWidthMpsPerDay: reach / spanDays,
    curvatureHalfWidthMpsPerDay2: reach / spanDays ** 2,
    starRadiusAtOneDay,
  };
}

/** Three digits, never with an exponent. */
function short(value: number): string {
  return value < 100 ? value.toPrecision(3) : value.toFixed(0);
}

/** The priors in sentences, for the report. */
export function priorSentences(scales: PriorScales, theCase: Case): string[] {
  const period = `period log-uniform between ${short(scales.shortestPeriodDays)} d and ${short(scales.longestPeriodDays)} d`;
  const listed =
    typeof theCase.companions === 'object' &&
    theCase.companions.some(({ elements }) => Object.keys(elements).length > 0);
  return [
    `Priors: ${period}; eccentricity uniform up to an orbit that would touch the star; argument of periastron and phase uniform; semi-amplitude with density 1/(K + ${scales.amplitudeScaleMps.toPrecision(2)} m/s); jitter with density 1/√(s² + (${scales.jitterScaleMps.toPrecision(2)} m/s)²); zero points and drift uniform over wide ranges${listed ? '; what the case states of a companion takes the place of these' : ''}.`,
  ];
}
