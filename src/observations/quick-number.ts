/** Numbers of the common forms straight from a long text, without cutting it up. */

/** Powers of ten that doubles hold exactly. */
const EXACT_POWERS: Float64Array = Float64Array.from({ length: 23 }, (_, power) => Number(`1e${power}`));
const MOST_DIGITS = 15; // any number of 15 digits is an exact double

/**
 * The number written in `text[start, end)`, correctly rounded; NaN for anything that is not a plain decimal number of at
 * most 15 digits with an exponent from -22 to 22 (the caller then looks closer, see `readCell`).
 *
 * Digits and power of ten are exact doubles in that range, so that the one multiplication or division rounds correctly.
 */
export function quickNumber(text: string, start: number, end: number): number {
  let at = start;
  let negative = false;
  const first = text.charCodeAt(at);
  if (first === 45 || first === 43) {
    negative = first === 45;
    at++;
  }
  let digits = 0;
  let significant = 0;
  let seen = 0;
  let power = 0;
  let behindPoint = false;
  for (; at < end; at++) {
    const code = text.charCodeAt(at);
    if (code >= 48 && code <= 57) {
      seen++;
      if (code !== 48 || significant > 0) significant++;
      digits = digits * 10 + (code - 48);
      if (behindPoint) power--;
    } else if (code === 46 && !behindPoint) behindPoint = true;
    else break;
  }
  if (seen === 0 || significant > MOST_DIGITS) return NaN;
  if (at < end) {
    const code = text.charCodeAt(at) | 32; // lower case
    if (code !== 101 && code !== 100) return NaN; // e, or d as Fortran writes it
    const written = quickExponent(text, at + 1, end);
    if (written !== written) return NaN;
    power += written;
  }
  if (power < -22 || power > 22) return digits === 0 ? (negative ? -0 : 0) : NaN;
  const size = power < 0 ? digits / EXACT_POWERS[-power]! : digits * EXACT_POWERS[power]!;
  return negative ? -size : size;
}

function quickExponent(text: string, start: number, end: number): number {
  let at = start;
  const sign = text.charCodeAt(at);
  if (sign === 45 || sign === 43) at++;
  if (at >= end || end - at > 3) return NaN;
  let value = 0;
  for (; at < end; at++) {
    const code = text.charCodeAt(at);
    if (code < 48 || code > 57) return NaN;
    value = value * 10 + (code - 48);
  }
  return sign === 45 ? -value : value;
}
