/** What the draws alone can tell: which numbers cannot be read without each other, and which are not Gaussian. */
import type { PosteriorDraws } from '../solving/types.js';
import { correlationOf, shapeOf, type Shape } from './draws.js';
import { listed } from './titles.js';

export interface NamedColumn {
  readonly key: string;
  /** Ready-made Markdown, e.g. `period of b`. */
  readonly words: string;
  /** Its distribution has been told elsewhere, as a limit or as open. */
  readonly settled: boolean;
}

const STRONG_CORRELATION = 0.9;
const MOST_PAIRS = 6;
/** With some hundred effective draws the ratio of the two sides scatters by about 0.13; this is well beyond. */
const SKEWED_SIDES = 1.5;
/** The 95.4 % interval of a Gaussian is twice its 68.3 % interval; a fifth away from that is another shape. */
const TAIL_MARGIN = 0.2;

interface DrawnColumn extends NamedColumn {
  readonly values: Float64Array;
}

function drawn(draws: PosteriorDraws | null, named: readonly NamedColumn[]): DrawnColumn[] {
  return named.flatMap((column) => {
    const found = draws?.columns.find(({ key }) => key === column.key);
    return found === undefined ? [] : [{ ...column, values: found.values }];
  });
}

/** At most one sentence: the pairs with |correlation| > 0.9, strongest first. */
export function correlationSentences(draws: PosteriorDraws | null, named: readonly NamedColumn[]): string[] {
  const columns = drawn(draws, named);
  const pairs = columns
    .flatMap((one, index) =>
      columns.slice(index + 1).flatMap((other) => {
        const value = correlationOf(one.values, other.values);
        return value !== null && Math.abs(value) > STRONG_CORRELATION
          ? [{ words: `${one.words} with ${other.words}`, value }]
          : [];
      }),
    )
    .sort((one, other) => Math.abs(other.value) - Math.abs(one.value));
  if (pairs.length === 0) return [];
  const shown = pairs.slice(0, MOST_PAIRS).map(({ words, value }) => `${words} (${cutTo(value)})`);
  const more = pairs.length > MOST_PAIRS ? `, and ${pairs.length - MOST_PAIRS} more pairs` : '';
  return [
    `Strongly correlated, so that neither can be read without the other: ${shown.join(', ')}${more}. ` +
      'In brackets the correlation coefficient of the draws; posterior.csv has the draws themselves.',
  ];
}

/** Two decimals towards zero: 0.998 must not become 1. */
function cutTo(correlation: number): string {
  return (Math.trunc(100 * correlation) / 100).toFixed(2);
}

/** `longer on the upper side, 1.8 : 1`; `null` for a shape that is near enough to a Gaussian. */
function shapeWords({ sides, tails }: Shape): string | null {
  if (sides > SKEWED_SIDES) return `longer above than below, ${sides.toFixed(1)} : 1`;
  if (1 / sides > SKEWED_SIDES) return `longer below than above, ${(1 / sides).toFixed(1)} : 1`;
  if (tails > 1 + TAIL_MARGIN) return 'with longer tails than a Gaussian';
  return tails < 1 - TAIL_MARGIN ? 'with shorter tails than a Gaussian' : null;
}

/** At most one sentence: the quantities that one ± does not describe. */
export function shapeSentences(draws: PosteriorDraws | null, named: readonly NamedColumn[]): string[] {
  const odd = drawn(draws, named).flatMap(({ words, values, settled }) => {
    const shape = settled ? null : shapeOf(values);
    const found = shape === null ? null : shapeWords(shape);
    return found === null ? [] : [`${words} (${found})`];
  });
  if (odd.length === 0) return [];
  return [`Not Gaussian, so that an interval says more than one ±: ${listed(odd)}.`];
}
