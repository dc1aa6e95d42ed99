/** Bayes factors in words: ln B with its error, odds, and what they are worth. */
import type { MarginalComparison } from '../solving/types.js';
import { fixedPlaces, powerOfTen, significant, typographicMinus, type NumberStyle } from './numbers.js';

type TextStyle = Exclude<NumberStyle, 'csv'>;

/** More decimals of ln B would outrun any prior. */
const MOST_DECIMALS = 2;
/** Odds are written out below this and as a power of ten above. */
const LARGEST_PLAIN_ODDS = 10_000;
/** An error of ln B beyond which only the power of ten of the odds is left. */
const LARGEST_ERROR_WITH_DIGITS = 0.5;

/** `12.3 ± 0.1`: the error has one digit and is never shown as zero. */
export function logBayesFactor(comparison: MarginalComparison, style: TextStyle): string {
  const { logBayesFactor: value, standardError } = comparison;
  const exponent = standardError > 0 ? Number(standardError.toExponential(0).split('e')[1]) : -MOST_DECIMALS;
  const decimals = Math.min(MOST_DECIMALS, Math.max(0, -exponent));
  const error = fixedPlaces(Math.max(standardError, 10 ** -decimals), decimals);
  const text = `${fixedPlaces(value, decimals)} ± ${error}`;
  return style === 'markdown' ? typographicMinus(text) : text;
}

/** `2 × 10⁵ : 1` (or `2e5 : 1`); the larger side is always the first, so say for which side they are. */
export function oddsOf(
  { logBayesFactor: value, standardError }: MarginalComparison,
  style: TextStyle,
): string {
  const size = Math.abs(value);
  if (size < Math.log(LARGEST_PLAIN_ODDS)) return `${significant(Math.exp(size), 2)} : 1`;
  const decimalLog = size / Math.LN10;
  if (standardError > LARGEST_ERROR_WITH_DIGITS)
    return `about ${style === 'text' ? '1' : ''}${powerOfTen(Math.round(decimalLog), style).replace(' × ', '')} : 1`;
  // 9.6 × 10⁴ rounds to 1 × 10⁵: the mantissa is rounded before the exponent is taken.
  const whole = Math.floor(decimalLog);
  const mantissa = Math.round(10 ** (decimalLog - whole));
  const [digit, exponent] = mantissa === 10 ? [1, whole + 1] : [mantissa, whole];
  return `${digit}${powerOfTen(exponent, style)} : 1`;
}

/** What the scale of Kass & Raftery 1995 (JASA 90, 773, section 3.2) calls a Bayes factor; its steps are 2 ln B = 2, 6, 10. */
export function strengthOf(value: number): string {
  const size = Math.abs(value);
  if (size < 1) return 'undecided';
  if (size < 3) return 'positive';
  return size < 5 ? 'strong' : 'very strong';
}

export const SCALE_SENTENCE: string =
  'ln B is the logarithm of the ratio of two marginal likelihoods; the odds are those for two models that were equally probable before. On the scale of ' +
  'Kass & Raftery 1995, ln B from 1 to 3 is positive evidence, from 3 to 5 strong, above 5 very strong, and below 1 it decides nothing. It depends on the priors listed below.';
