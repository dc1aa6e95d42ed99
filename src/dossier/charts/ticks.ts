/** Places and texts of ticks: our own, because the drawing library's number format follows the machine's locale. */
import { fixedText } from './labels.js';

export interface Ticks {
  readonly values: readonly number[];
  readonly texts: readonly string[];
}

/**
 * Round values inside an interval.
 *
 * @param low - lower end, finite
 * @param high - upper end, above `low`
 * @param target - about how many are wanted, at least 1
 * @param edge - fractions of the interval at its lower and upper end in which no tick is put (keeps the labels of
 *   stacked panels apart)
 * @returns ascending multiples of 1, 2 or 5 times a power of ten, with texts of one number of decimals
 */
export function linearTicks(
  low: number,
  high: number,
  target: number,
  edge: readonly [number, number] = [0, 0],
): Ticks {
  const span = high - low;
  if (!(span > 0) || !Number.isFinite(span)) return { values: [], texts: [] };
  const rough = span / Math.max(1, target);
  const power = Math.floor(Math.log10(rough));
  // The round step whose ratio to the wanted one is nearest to 1.
  const ratio = rough / 10 ** power;
  const factor = ratio < Math.SQRT2 ? 1 : ratio < Math.sqrt(10) ? 2 : ratio < Math.sqrt(50) ? 5 : 10;
  const step = factor * 10 ** power;
  const decimals = Math.max(0, -Math.floor(Math.log10(step * 1.000001)));
  const from = low + edge[0] * span;
  const to = high - edge[1] * span;
  const values: number[] = [];
  for (let index = Math.ceil(from / step - 1e-9); index * step <= to + 1e-9 * step; index += 1) {
    values.push(Number((index * step).toFixed(Math.min(decimals, 20))));
  }
  return { values, texts: values.map((value) => fixedText(value, Math.min(decimals, 12))) };
}

/**
 * Ticks of a logarithmic axis: every 1, 2, ... 9 times a power of ten; texts only where there is room.
 *
 * @param low - lower end, above 0
 * @param high - upper end, above `low`
 * @returns ascending values; the text is empty where a tick goes unlabelled
 */
export function logTicks(low: number, high: number): Ticks {
  const decades = Math.log10(high / low);
  const labelled =
    decades > 4 ? [1] : decades > 2.2 ? [1, 3] : decades > 1 ? [1, 2, 5] : [1, 2, 3, 4, 5, 6, 7, 8];
  const values: number[] = [];
  const texts: string[] = [];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power += 1) {
    for (let digit = 1; digit <= 9; digit += 1) {
      const value = Number(`${digit}e${power}`);
      if (value < low * (1 - 1e-9) || value > high * (1 + 1e-9)) continue;
      values.push(value);
      texts.push(labelled.includes(digit) ? fixedText(value, Math.max(0, -power)) : '');
    }
  }
  return { values, texts };
}
