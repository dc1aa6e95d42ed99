/**
 * Mid-time variations of two companions near a first-order resonance j:(j-1), to lowest order in masses, eccentricities
 * and the distance from the resonance [Lithwick2012].
 *
 * The longitude of conjunctions is lambda_j = j lambda' - (j-1) lambda with mean longitudes counted from the direction to
 * the observer (lambda = 2 pi (t - T0)/P). Mid-times of either companion vary by Re V sin lambda_j + Im V cos lambda_j.
 */
import { ModelDomainError } from '../../errors.js';
import { requireNotNegative, requirePositive } from '../domain.js';
import { laplaceCoefficient } from './laplace.js';

export interface ComplexNumber {
  readonly re: number;
  readonly im: number;
}

export interface ResonanceCoefficients {
  /** Of the inner and of the outer eccentricity in the resonant part of the disturbing function, at exact resonance. */
  readonly f: number;
  readonly g: number;
}

const LOWEST_ORDER = 2;
const HIGHEST_ORDER = 10;

/**
 * f and g of the resonance j:(j-1).
 *
 * @param j - 2 .. 10
 * @throws ModelDomainError outside
 */
export function resonanceCoefficients(j: number): ResonanceCoefficients {
  if (!Number.isInteger(j) || j < LOWEST_ORDER || j > HIGHEST_ORDER)
    throw new ModelDomainError(
      'resonance index j',
      j,
      `the whole numbers ${LOWEST_ORDER} .. ${HIGHEST_ORDER}`,
    );
  const alpha = ((j - 1) / j) ** (2 / 3);
  const own = laplaceCoefficient(0.5, j, alpha);
  const lower = laplaceCoefficient(0.5, j - 1, alpha);
  return {
    f: -(j * own.value + 0.5 * alpha * own.slope),
    // The last term is the indirect one: the star's own motion.
    g: (j - 0.5) * lower.value + 0.5 * alpha * lower.slope - (j === 2 ? 2 * alpha : 0),
  };
}

/** Delta = (P'/P)(j-1)/j - 1: distance from the resonance j:(j-1), negative inside of it. */
export function resonanceDistance(innerPeriodDays: number, outerPeriodDays: number, j: number): number {
  return (outerPeriodDays / innerPeriodDays) * ((j - 1) / j) - 1;
}

/** Period of the slow variation, 1/|j/P' - (j-1)/P|, days. */
export function superPeriodDays(innerPeriodDays: number, outerPeriodDays: number, j: number): number {
  return 1 / Math.abs(j / outerPeriodDays - (j - 1) / innerPeriodDays);
}

/** The j of the first-order resonance that a period ratio is nearest to, or `null` beyond |Delta| = `farthest`. */
export function nearestResonance(
  innerPeriodDays: number,
  outerPeriodDays: number,
  farthest: number,
): number | null {
  let best: number | null = null;
  let least = farthest;
  for (let j = LOWEST_ORDER; j <= HIGHEST_ORDER; j++) {
    const distance = Math.abs(resonanceDistance(innerPeriodDays, outerPeriodDays, j));
    if (distance <= least) [least, best] = [distance, j];
  }
  return best;
}

export interface NearResonantPair {
  /** Mean periods, inner < outer. */
  readonly innerPeriodDays: number;
  readonly outerPeriodDays: number;
  /** Companion over star. */
  readonly innerMassRatio: number;
  readonly outerMassRatio: number;
  /** 2 .. 10 for the resonance j:(j-1). */
  readonly j: number;
  /** f z + g z', z = e exp(i longitude of periastron), longitudes counted from the direction to the observer. */
  readonly freeEccentricity: ComplexNumber;
}

export interface NearResonantVariation {
  readonly delta: number;
  readonly superPeriodDays: number;
  /** Amplitudes V and V'. */
  readonly innerDays: ComplexNumber;
  readonly outerDays: ComplexNumber;
}

/**
 * @throws ModelDomainError for periods that are not positive or in exact resonance, masses below zero, j outside 2 .. 10
 *
 * Accuracy: relative errors of order Delta; 7 and 15 % at Delta = 0.02, 2 and 5 % at 0.005 for circular starts.
 */
export function nearResonantVariation(pair: NearResonantPair): NearResonantVariation {
  const { innerPeriodDays, outerPeriodDays, innerMassRatio, outerMassRatio, j, freeEccentricity } = pair;
  requirePositive('period of the inner companion (d)', innerPeriodDays);
  requirePositive('period of the outer companion (d)', outerPeriodDays);
  requireNotNegative('mass ratio of the inner companion', innerMassRatio);
  requireNotNegative('mass ratio of the outer companion', outerMassRatio);
  const { f, g } = resonanceCoefficients(j);
  const delta = resonanceDistance(innerPeriodDays, outerPeriodDays, j);
  if (delta === 0) throw new ModelDomainError('distance from the resonance', delta, 'numbers other than 0');
  const inner = (innerPeriodDays * outerMassRatio) / (Math.PI * Math.cbrt(j * j * (j - 1)) * delta);
  const outer = (outerPeriodDays * innerMassRatio) / (Math.PI * j * delta);
  const re = (1.5 * freeEccentricity.re) / delta;
  const im = (-1.5 * freeEccentricity.im) / delta; // conjugate
  return {
    delta,
    superPeriodDays: superPeriodDays(innerPeriodDays, outerPeriodDays, j),
    innerDays: { re: inner * (-f - re), im: inner * -im },
    outerDays: { re: outer * (-g + re), im: outer * im },
  };
}
