/** The quantities of a posterior that charts show: symbol, unit, draws, reported value, and the bounds that nature sets. */
import type { PosteriorColumn, Solved } from '../../solving/types.js';
import { cleanLabel } from './labels.js';
import type { TextRun } from './text-runs.js';

export interface DrawnQuantity {
  readonly key: string;
  readonly symbol: readonly TextRun[];
  /** As written on paper: `d`, `°`, `m/s`, an underscore before a subscript; empty for a pure number. */
  readonly unit: string;
  /** (n) draws, chain after chain. */
  readonly values: Float64Array;
  /** The value of the solution; `null` when it is not known. */
  readonly reported: number | null;
  /** No value lies below or above; infinite where there is no such bound. */
  readonly bounds: readonly [number, number];
  /** 360 for angles, else 0. */
  readonly cycle: number;
}

const italic = (text: string): TextRun => ({ text, italic: true });
const below = (text: string): TextRun => ({ text, place: 'below' });

const NONE = [-Infinity, Infinity] as const;
const POSITIVE = [0, Infinity] as const;

/** Symbol, its subscript, and bounds of the quantities of one companion, by their key. */
const OF_COMPANION: Readonly<
  Record<string, { symbol: readonly TextRun[]; sub?: string; bounds: readonly [number, number] }>
> = {
  period: { symbol: [italic('P')], bounds: POSITIVE },
  semiAmplitude: { symbol: [italic('K')], bounds: POSITIVE },
  eccentricity: { symbol: [italic('e')], bounds: [0, 1] },
  argumentOfPeriastron: { symbol: [italic('ω')], bounds: NONE },
  timeOfPeriastron: { symbol: [italic('T')], sub: 'peri', bounds: NONE },
  timeOfInferiorConjunction: { symbol: [italic('T')], sub: 'conj', bounds: NONE },
  minimumMass: { symbol: [italic('m'), { text: ' sin ' }, italic('i')], bounds: POSITIVE },
  semiMajorAxis: { symbol: [italic('a')], bounds: POSITIVE },
};

const UNITS: Readonly<Record<string, string>> = {
  deg: '°',
  M_jup: 'M_Jup',
  'm/s/yr^2': 'm/s/yr²',
};

/** The columns with these keys (last part of the path) of one companion, in this order; those without draws are left out. */
export function companionQuantities(
  solved: Solved,
  companion: number,
  keys: readonly string[],
  withLetter: boolean,
): DrawnQuantity[] {
  const columns = solved.posterior?.columns ?? [];
  const letter = solved.record.companions[companion]?.letter;
  return keys.flatMap((key) => {
    const column = columns.find(
      (one) =>
        one.key === `companions.${letter}.elements.${key}` ||
        one.key === `companions.${letter}.derived.${key}`,
    );
    return column === undefined ? [] : [ofCompanion(solved, column, companion, key, withLetter)];
  });
}

/** All columns but those that follow from others, in the order of the posterior. */
export function fittedQuantities(solved: Solved): DrawnQuantity[] {
  return (solved.posterior?.columns ?? []).flatMap((column) => {
    const parts = column.key.split('.');
    if (parts[2] === 'derived') return [];
    if (parts[0] === 'companions') {
      const companion = solved.record.companions.findIndex(({ letter }) => letter === parts[1]);
      return [ofCompanion(solved, column, companion, parts.at(-1)!, true)];
    }
    return [ofVelocity(solved, column)];
  });
}

function ofCompanion(
  { record }: Solved,
  column: PosteriorColumn,
  companion: number,
  key: string,
  withLetter: boolean,
): DrawnQuantity {
  const own = record.companions[companion];
  const known = OF_COMPANION[key] ?? { symbol: [{ text: cleanLabel(key, 24) }], bounds: NONE };
  const letter = withLetter && own !== undefined ? cleanLabel(own.letter, 8) : '';
  const sub = [letter, known.sub ?? ''].filter((part) => part !== '').join(', ');
  const quantities: Readonly<Record<string, { readonly value: number | null } | undefined>> = {
    ...own?.elements,
    ...own?.derived,
  };
  return {
    ...common(column),
    symbol: sub === '' ? known.symbol : [...known.symbol, below(sub)],
    reported: quantities[key]?.value ?? null,
    bounds: known.bounds,
  };
}

function ofVelocity({ record }: Solved, column: PosteriorColumn): DrawnQuantity {
  const { instruments, slope, curvature } = record.velocity;
  const drift = { 'velocity.slope': slope, 'velocity.curvature': curvature }[column.key];
  if (drift !== undefined) {
    const text = column.key.slice('velocity.'.length);
    return { ...common(column), symbol: [{ text }], reported: drift.value, bounds: NONE };
  }
  // Names of instruments may hold dots, so the key is compared and not taken apart.
  for (const one of instruments) {
    const start = `velocity.instruments.${one.name}`;
    const name = cleanLabel(one.name, 18);
    if (column.key === `${start}.zeroPoint`)
      return {
        ...common(column),
        symbol: [{ text: `zero point ${name}` }],
        reported: one.zeroPoint.value,
        bounds: NONE,
      };
    if (column.key === `${start}.jitter`)
      return {
        ...common(column),
        symbol: [{ text: `jitter ${name}` }],
        reported: one.jitter.value,
        bounds: POSITIVE,
      };
  }
  return {
    ...common(column),
    symbol: [{ text: cleanLabel(column.key, 30) }],
    reported: null,
    bounds: NONE,
  };
}

function common(column: PosteriorColumn): Pick<DrawnQuantity, 'key' | 'unit' | 'values' | 'cycle'> {
  const { key, unit, values, cycle } = column;
  return { key, unit: UNITS[unit] ?? cleanLabel(unit, 16), values, cycle };
}
