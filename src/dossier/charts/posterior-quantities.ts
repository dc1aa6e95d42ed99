/** The quantities of a posterior that charts show: symbol, unit, draws, reported value, and the bounds that nature sets. */
import type { PosteriorColumn, Quantity, Solved } from '../../solving/types.js';
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

/** Symbol, its subscript, what follows it, and bounds of the quantities of one companion, by their key. */
const OF_COMPANION: Readonly<
  Record<
    string,
    {
      symbol: readonly TextRun[];
      sub?: string;
      tail?: readonly TextRun[];
      bounds: readonly [number, number];
    }
  >
> = {
  period: { symbol: [italic('P')], bounds: POSITIVE },
  semiAmplitude: { symbol: [italic('K')], bounds: POSITIVE },
  eccentricity: { symbol: [italic('e')], bounds: [0, 1] },
  argumentOfPeriastron: { symbol: [italic('ω')], bounds: NONE },
  timeOfPeriastron: { symbol: [italic('T')], sub: 'peri', bounds: NONE },
  timeOfInferiorConjunction: { symbol: [italic('T')], sub: 'conj', bounds: NONE },
  minimumMass: { symbol: [italic('m'), { text: ' sin ' }, italic('i')], bounds: POSITIVE },
  semiMajorAxis: { symbol: [italic('a')], bounds: POSITIVE },
  mass: { symbol: [italic('m')], bounds: POSITIVE },
  radiusRatio: { symbol: [italic('k')], bounds: POSITIVE },
  impactParameter: { symbol: [italic('b')], bounds: POSITIVE },
  scaledSemiMajorAxis: {
    symbol: [italic('a')],
    tail: [{ text: '/' }, italic('R'), below('★')],
    bounds: POSITIVE,
  },
  inclination: { symbol: [italic('i')], bounds: [0, 90] },
  radius: { symbol: [italic('r')], bounds: POSITIVE },
};

const UNITS: Readonly<Record<string, string>> = {
  deg: '°',
  M_jup: 'M_Jup',
  R_jup: 'R_Jup',
  'g/cm3': 'g/cm³',
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
    return [ofLight(solved, column) ?? ofVelocity(solved, column)];
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
  const known: (typeof OF_COMPANION)[string] = OF_COMPANION[key] ?? {
    symbol: [{ text: cleanLabel(key, 24) }],
    bounds: NONE,
  };
  const letter = withLetter && own !== undefined ? cleanLabel(own.letter, 8) : '';
  const sub = [letter, known.sub ?? ''].filter((part) => part !== '').join(', ');
  const quantities: Readonly<Record<string, { readonly value: number | null } | undefined>> = {
    ...own?.elements,
    ...own?.derived,
  };
  return {
    ...common(column),
    symbol: [...known.symbol, ...(sub === '' ? [] : [below(sub)]), ...(known.tail ?? [])],
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

/** Both coefficients of limb darkening of a band; those without draws are left out. */
export function limbDarkeningQuantities(solved: Solved, band: string): DrawnQuantity[] {
  const columns = solved.posterior?.columns ?? [];
  return ['u1', 'u2'].flatMap((key) => {
    const column = columns.find((one) => one.key === `photometry.bands.${band}.${key}`);
    const quantity = column === undefined ? null : ofLight(solved, column);
    return quantity === null ? [] : [quantity];
  });
}

/** A column of the light curves; `null` when it is not one of them. */
function ofLight({ record }: Solved, column: PosteriorColumn): DrawnQuantity | null {
  const { photometry } = record;
  if (photometry === undefined || !column.key.startsWith('photometry.')) return null;
  const quantity = (
    symbol: readonly TextRun[],
    reported: Quantity,
    bounds: readonly [number, number],
  ): DrawnQuantity => ({ ...common(column), symbol, reported: reported.value, bounds });
  for (const { name, u1, u2 } of photometry.bands) {
    const sub = below(cleanLabel(name, 10));
    const start = `photometry.bands.${name}`;
    if (column.key === `${start}.u1`) return quantity([italic('u'), { text: '1 ' }, sub], u1, NONE);
    if (column.key === `${start}.u2`) return quantity([italic('u'), { text: '2 ' }, sub], u2, NONE);
  }
  for (const { name, jitter, dilution } of photometry.lightCurves) {
    const start = `photometry.lightCurves.${name}`;
    const label = cleanLabel(name, 18);
    if (column.key === `${start}.jitter`) return quantity([{ text: `jitter ${label}` }], jitter, POSITIVE);
    if (column.key === `${start}.dilution`)
      return quantity([{ text: `foreign light ${label}` }], dilution, [0, 1]);
  }
  for (const { letter, path, jitter } of photometry.midTimes)
    if (column.key === `photometry.midTimes.${letter}.${path}.jitter`)
      return quantity([{ text: `jitter ${cleanLabel(path, 18)}` }], jitter, POSITIVE);
  return null;
}

function common(column: PosteriorColumn): Pick<DrawnQuantity, 'key' | 'unit' | 'values' | 'cycle'> {
  const { key, unit, values, cycle } = column;
  return { key, unit: UNITS[unit] ?? cleanLabel(unit, 16), values, cycle };
}
