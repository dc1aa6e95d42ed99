/** An axis of a small panel: few ticks, and a title that takes up what all tick labels share. */
import { fixedText } from './labels.js';
import type { TextRun } from './text-runs.js';
import { linearTicks } from './ticks.js';

export interface ValueAxis {
  readonly low: number;
  readonly high: number;
  readonly ticks: readonly { readonly value: number; readonly text: string }[];
  /** Symbol, what is subtracted, power of ten, unit: `P − 41.6 (d)`. */
  readonly title: readonly TextRun[];
}

/**
 * @param symbol - of the quantity
 * @param unit - empty for a pure number; an underscore stands before a subscript
 * @param low - lower end, finite
 * @param high - upper end, above `low`
 * @param wanted - about how many ticks
 * @param longest - most characters of a tick label; beyond, what labels share goes into the title
 */
export function valueAxis(
  symbol: readonly TextRun[],
  unit: string,
  low: number,
  high: number,
  wanted: number,
  longest: number,
): ValueAxis {
  const lengthOf = (values: readonly string[]): number =>
    values.reduce((length, text) => Math.max(length, text.replace('\u2212', '').length), 0);
  const plain = linearTicks(low, high, wanted);
  if (lengthOf(plain.texts) <= longest) {
    const ticks = plain.values.map((value, index) => ({ value, text: plain.texts[index]! }));
    return { low, high, ticks, title: [...symbol, ...unitRuns(unit, 0)] };
  }
  const span = high - low;
  const spanPower = Math.floor(Math.log10(span));
  // A span far from 1 is counted in thousands or thousandths (of thousands ...), which leaves it at most three digits.
  const power = spanPower < -1 || spanPower > 4 ? 3 * Math.floor(spanPower / 3) : 0;
  const middle = (low + high) / 2;
  const offsetPower = Math.max(power === 0 ? spanPower : Math.floor(Math.log10(span / 5)), -12);
  const large = Math.abs(middle) > 5 * span;
  const offsetText = large ? fixedText(roundTo(middle, offsetPower), Math.max(0, -offsetPower)) : '';
  const offset = large ? Number(offsetText.replace('\u2212', '-')) : 0;
  const unitStep = 10 ** power;
  const inner = linearTicks((low - offset) / unitStep, (high - offset) / unitStep, wanted);
  const sign: TextRun[] =
    offset === 0 ? [] : [{ text: offset > 0 ? ` \u2212 ${offsetText}` : ` + ${offsetText.slice(1)}` }];
  return {
    low,
    high,
    ticks: inner.values.map((value, index) => ({
      value: offset + value * unitStep,
      text: inner.texts[index]!,
    })),
    title: [...symbol, ...sign, ...unitRuns(unit, power)],
  };
}

function roundTo(value: number, power: number): number {
  const step = 10 ** power;
  return Math.round(value / step) * step;
}

/** Unit in brackets, with its power of ten; nothing for a pure number without one. */
function unitRuns(unit: string, power: number): TextRun[] {
  const runs = unitText(unit);
  if (power === 0) return unit === '' ? [] : [{ text: ' (' }, ...runs, { text: ')' }];
  const exponent: TextRun = { text: fixedText(power, 0), place: 'above' };
  return [
    { text: ' (10' },
    exponent,
    { text: unit === '' ? ')' : ' ' },
    ...runs,
    ...(unit === '' ? [] : [{ text: ')' }]),
  ];
}

/** A unit with its subscript set below: `M_Jup`. */
export function unitText(unit: string): TextRun[] {
  const [main, sub] = unit.split('_');
  if (main === undefined || main === '') return [];
  return sub === undefined
    ? [{ text: main }]
    : [
        { text: main, italic: true },
        { text: sub, place: 'below' },
      ];
}
