/**
 * How numbers are shown to people: the one place where anything is rounded.
 *
 * Rule: the smaller of the two uncertainties gets two significant digits and everything else ends at the same
 * decimal place. The place is fixed before rounding, so 0.996 is shown as 1.00 and not as 1.0: the value beside it
 * does not lose a digit because its uncertainty happened to round up.
 * Upper and lower errors that differ by less than a tenth of their mean are shown as one, that mean.
 */
import type { Quantity } from '../solving/types.js';
import { escapeMarkdown } from './escape.js';

export type NumberStyle = 'text' | 'markdown' | 'csv';

/** Quantiles of the draws of a quantity that cannot be negative, in its unit. */
export interface DrawnBound {
  /** Lower end of the central 68.3 %. */
  readonly lower: number;
  readonly median: number;
  /** 95 % of the draws are smaller. */
  readonly limit: number;
}

export interface QuantityChoices {
  /** The quantity cannot be negative; nearer to zero than two of its lower errors it is shown as an upper limit. */
  readonly zeroBounded?: boolean;
  /** What the draws say of a quantity that cannot be negative; without it the interval of the quantity decides. */
  readonly drawn?: DrawnBound | null;
  /** Append the unit (default true; never in `csv`). */
  readonly withUnit?: boolean;
}

export interface RoundedParts {
  readonly value: string;
  readonly plus: string;
  readonly minus: string;
}

/** Beyond this ratio of the two errors the smaller one no longer decides, or the digits would be noise. */
const LARGEST_ERROR_RATIO = 100;
const MOST_DECIMALS = 15;
/** Errors that are closer than this are one error: the difference is that of a finite number of draws. */
const SAME_ERROR_SHARE = 0.1;

/** Decimal exponent of a positive number, exact (`Math.log10` is not at powers of ten). */
function decimalExponent(positive: number): number {
  return Number(positive.toExponential().split('e')[1]);
}

/** Rounds to `decimals` places; a negative count rounds to tens, hundreds ... . Never writes "-0". */
export function fixedPlaces(value: number, decimals: number): string {
  let text: string;
  if (decimals >= 0) text = value.toFixed(Math.min(decimals, MOST_DECIMALS));
  else {
    const step = 10 ** -decimals;
    text = (Math.round(value / step) * step).toFixed(0);
  }
  return /^-[0.]*$/.test(text) ? text.slice(1) : text;
}

/**
 * Value and errors to the same decimal place.
 *
 * @param value - finite
 * @param plus - upper error, >= 0, in the unit of the value; at least one of the two errors is > 0
 * @param minus - lower error, >= 0
 */
export function roundedParts(value: number, plus: number, minus: number): RoundedParts {
  const larger = Math.max(plus, minus);
  const smaller = Math.min(plus, minus);
  const deciding = Math.max(smaller, larger / LARGEST_ERROR_RATIO);
  // Ten digits: an error of 0.01 that a subtraction left as 0.00999... must not get a third digit.
  const decimals = 1 - decimalExponent(Number(deciding.toPrecision(10)));
  return {
    value: fixedPlaces(value, decimals),
    plus: fixedPlaces(plus, decimals),
    minus: fixedPlaces(minus, decimals),
  };
}

/** Shortest text with at most `digits` significant digits, without exponent where a reader would not expect one. */
export function significant(value: number, digits: number): string {
  if (value === 0) return '0';
  if (!Number.isFinite(value)) return 'unknown';
  const exponent = decimalExponent(Math.abs(value));
  if (exponent < -4 || exponent > 9) return value.toExponential(digits - 1).replace('e+', 'e');
  const text = fixedPlaces(value, digits - 1 - exponent);
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text;
}

/** For machines: the shortest text that reads back as the same double; empty for an unknown. */
export function machineNumber(value: number | null): string {
  if (value === null || !Number.isFinite(value)) return '';
  return String(value);
}

/** For machines where conversions left rounding noise: at most `decimals` places, no trailing zeros. */
export function machineFixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return '';
  const text = fixedPlaces(value, decimals);
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text;
}

const SUPERSCRIPT = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** `e-12` for terminals, ` × 10⁻¹²` for the report. */
export function powerOfTen(exponent: number, style: 'text' | 'markdown'): string {
  if (style === 'text') return `e${exponent}`;
  const digits = Array.from(String(Math.abs(exponent)), (digit) => SUPERSCRIPT[Number(digit)]);
  return ` × 10${exponent < 0 ? '⁻' : ''}${digits.join('')}`;
}

/** The minus sign of print in front of numbers, in place of the hyphen. */
export function typographicMinus(text: string): string {
  return text.replace(/(^|[\s(])-(?=\d)/g, '$1−');
}

/** A probability: percent while that is readable, powers of ten below. Zero means "too small for a double". */
export function formatProbability(probability: number, style: 'text' | 'markdown'): string {
  if (!Number.isFinite(probability)) return 'unknown';
  if (probability <= 0) return style === 'markdown' ? '&lt; 10⁻³⁰⁰' : '< 1e-300';
  if (probability >= 1e-4) return `${significant(100 * probability, 2)} %`;
  const [mantissa, exponent] = probability.toExponential(0).split('e') as [string, string];
  return mantissa + powerOfTen(Number(exponent), style);
}

/** Upper and lower error of a quantity, or `null` when there is no interval around the value. */
function intervalErrors(quantity: Quantity): { plus: number; minus: number } | null {
  const { value, sigma, lower, upper } = quantity;
  if (value === null) return null;
  if (lower !== null && upper !== null && lower <= value && value <= upper && upper > lower)
    return { plus: upper - value, minus: value - lower };
  if (sigma !== null && sigma > 0) return { plus: sigma, minus: sigma };
  return null;
}

/** The errors to show: one, their mean, when the two differ by less than a tenth of it. */
function errorsOf(quantity: Quantity): { plus: number; minus: number } | null {
  const errors = intervalErrors(quantity);
  if (errors === null) return null;
  const mean = (errors.plus + errors.minus) / 2;
  return Math.abs(errors.plus - errors.minus) < SAME_ERROR_SHARE * mean
    ? { plus: mean, minus: mean }
    : errors;
}

/**
 * True when the data only bound the quantity from above (see `QuantityChoices.zeroBounded`). With draws their median stands
 * for the value: the value itself is where the likelihood is largest, which for a jitter is often at the very edge.
 */
export function isUpperLimit(quantity: Quantity, drawn: DrawnBound | null = null): boolean {
  const { value, sigma, lower, upper } = quantity;
  if (value === null || upper === null || upper <= 0 || quantity.fixed === true) return false;
  if (drawn !== null) return value <= 0 || drawn.median < 2 * (drawn.median - drawn.lower);
  const below = lower !== null ? value - lower : (sigma ?? 0);
  return value <= 0 || (below > 0 && value < 2 * below) || (lower !== null && lower > value);
}

function reason(why: string, style: 'text' | 'markdown'): string {
  return style === 'markdown' ? escapeMarkdown(why) : why;
}

function unequal(value: string, plus: string, minus: string, style: 'text' | 'markdown'): string {
  return style === 'markdown' ? `${value} (+${plus}, -${minus})` : `${value} +${plus} -${minus}`;
}

/** The likeliest value lies where few draws are: no `±` about it would be true. */
export function isOutsideItsInterval({ value, lower, upper }: Quantity): boolean {
  return (
    value !== null && lower !== null && upper !== null && upper > lower && (value < lower || value > upper)
  );
}

/** `2990 .. 6740`: the interval alone, two significant digits of its width. */
function intervalText(lower: number, upper: number, style: 'text' | 'markdown'): string {
  const exponent = decimalExponent(Math.max(Math.abs(lower), Math.abs(upper)));
  const scale = exponent < -5 ? 10 ** -exponent : 1;
  const half = ((upper - lower) / 2) * scale;
  const decimals = 1 - decimalExponent(Number(half.toPrecision(10)));
  const body = `${fixedPlaces(lower * scale, decimals)} .. ${fixedPlaces(upper * scale, decimals)}`;
  const scaled = scale === 1 ? body : `(${body})${powerOfTen(exponent, style)}`;
  return style === 'markdown' ? typographicMinus(scaled) : scaled;
}

/**
 * A quantity as people read it: `41.632 ± 0.014 d`, `0.35 +0.02 -0.03`, `< 0.06 (84 %)`, `0 (fixed)`, `unknown (why)`.
 * The `csv` style is the bare value at full precision (empty when unknown).
 *
 * `±` stands for the mean of the upper and the lower error when they differ by less than 10 % of it, which is about what a
 * finite number of draws leaves between the two sides of a symmetric distribution; the record keeps both ends as they are.
 *
 * Where the value lies outside its interval (the likelihood is largest where few draws are) the interval alone is given, `2990 .. 6740 d`.
 *
 * An upper limit is the value below which 95 % of the draws lie, where there are draws; else the upper end of the central
 * 68.3 % interval, hence a one-sided 84 % limit.
 */
export function formatQuantity(
  quantity: Quantity,
  style: NumberStyle,
  choices: QuantityChoices = {},
): string {
  const { value, unit } = quantity;
  if (style === 'csv') return machineNumber(value);
  if (value === null) {
    if (quantity.why === undefined) return 'unknown';
    return `unknown (${reason(quantity.why, style)})`;
  }
  const tail = choices.withUnit === false || unit === '' ? '' : ` ${unit}`;
  if (quantity.fixed === true) return `${significant(value, 10)}${tail} (fixed)`;
  const drawn = choices.drawn ?? null;
  if (choices.zeroBounded === true && isUpperLimit(quantity, drawn)) {
    const limit = drawn?.limit ?? quantity.upper ?? value;
    return `${style === 'markdown' ? '&lt;' : '<'} ${significant(limit, 2)}${tail} (${drawn === null ? 84 : 95} %)`;
  }
  if (isOutsideItsInterval(quantity)) return intervalText(quantity.lower!, quantity.upper!, style) + tail;
  const errors = errorsOf(quantity);
  if (errors === null) {
    const bare = significant(value, 6) + tail;
    return quantity.why === undefined ? bare : `${bare} (${reason(quantity.why, style)})`;
  }
  const exponent = value === 0 ? 0 : decimalExponent(Math.abs(value));
  const scale = exponent < -5 ? 10 ** -exponent : 1;
  const {
    value: shown,
    plus,
    minus,
  } = roundedParts(value * scale, errors.plus * scale, errors.minus * scale);
  const body = plus === minus ? `${shown} ± ${plus}` : unequal(shown, plus, minus, style);
  const scaled = scale === 1 ? body : `(${body})${powerOfTen(exponent, style)}`;
  return (style === 'markdown' ? typographicMinus(scaled) : scaled) + tail;
}
