/**
 * Units at the file edge: the only place where a written unit becomes a factor. Inside, times are days, velocities m/s,
 * angles degrees, star mass and radius solar (nominal, IAU 2015 Resolution B3), temperatures kelvin.
 */
import { DAYS_PER_YEAR, MINUTES_PER_DAY, SECONDS_PER_DAY } from '../orbit/constants.js';

/** What a number in a case or on the command line stands for. */
export type QuantityKind =
  | 'star mass' | 'star radius' | 'temperature' | 'period' | 'date' | 'velocity' | 'angle' | 'height'
  | 'number' | 'velocity per year' | 'velocity per year squared' | 'duration' | 'relative flux' | 'density'; // prettier-ignore

interface UnitList {
  /** The unit used inside, and assumed when none is written. */
  readonly canonical: string;
  /** Spelling (see `unitKey`) to the factor that brings the number to the canonical unit. */
  readonly factors: Readonly<Record<string, number>>;
}

const HOURS_PER_DAY = 24;
const DEGREES_PER_RADIAN = 180 / Math.PI;
/** sigma_F = 0.921 F sigma_m: the derivative of F = 10^(-0.4 m). */
export const FLUX_PER_MAGNITUDE: number = 0.4 * Math.LN10;

const UNITS: Readonly<Record<QuantityKind, UnitList>> = {
  'star mass': { canonical: 'M_sun', factors: { msun: 1, 'm☉': 1, 'm⊙': 1, solarmass: 1, solarmasses: 1 } },
  'star radius': {
    canonical: 'R_sun',
    factors: { rsun: 1, 'r☉': 1, 'r⊙': 1, solarradius: 1, solarradii: 1 },
  },
  temperature: { canonical: 'K', factors: { k: 1, kelvin: 1 } },
  period: {
    canonical: 'd',
    factors: {
      d: 1, day: 1, days: 1, h: 1 / HOURS_PER_DAY, hr: 1 / HOURS_PER_DAY, hours: 1 / HOURS_PER_DAY,
      min: 1 / MINUTES_PER_DAY, yr: DAYS_PER_YEAR, year: DAYS_PER_YEAR, years: DAYS_PER_YEAR,
    }, // prettier-ignore
  },
  date: { canonical: 'd', factors: { d: 1, day: 1, days: 1, bjd: 1, bjdtdb: 1 } },
  velocity: { canonical: 'm/s', factors: { 'm/s': 1, 'km/s': 1000, 'cm/s': 0.01 } },
  angle: {
    canonical: 'deg',
    factors: {
      deg: 1,
      degree: 1,
      degrees: 1,
      '°': 1,
      rad: DEGREES_PER_RADIAN,
      radian: DEGREES_PER_RADIAN,
      radians: DEGREES_PER_RADIAN,
    },
  },
  duration: {
    canonical: 'd',
    factors: {
      d: 1, day: 1, days: 1, h: 1 / HOURS_PER_DAY, hr: 1 / HOURS_PER_DAY, hour: 1 / HOURS_PER_DAY, hours: 1 / HOURS_PER_DAY,
      min: 1 / MINUTES_PER_DAY, minute: 1 / MINUTES_PER_DAY, minutes: 1 / MINUTES_PER_DAY,
      s: 1 / SECONDS_PER_DAY, sec: 1 / SECONDS_PER_DAY, second: 1 / SECONDS_PER_DAY, seconds: 1 / SECONDS_PER_DAY,
    }, // prettier-ignore
  },
  'relative flux': {
    canonical: '',
    factors: {
      ppm: 1e-6, ppt: 1e-3, '%': 1e-2, percent: 1e-2, mag: FLUX_PER_MAGNITUDE, mmag: 0.001 * FLUX_PER_MAGNITUDE,
    }, // prettier-ignore
  },
  height: { canonical: 'm', factors: { m: 1, km: 1000 } },
  number: { canonical: '', factors: {} },
  density: {
    canonical: 'g/cm3',
    factors: { 'g/cm3': 1, 'gcm-3': 1, 'g/cc': 1, 'kg/m3': 0.001, 'kgm-3': 0.001 },
  },
  'velocity per year': {
    canonical: 'm/s/yr',
    factors: {
      'm/s/yr': 1,
      'm/s/year': 1,
      'm/s/d': DAYS_PER_YEAR,
      'm/s/day': DAYS_PER_YEAR,
      'km/s/yr': 1000,
    },
  },
  'velocity per year squared': {
    canonical: 'm/s/yr^2',
    factors: {
      'm/s/yr2': 1,
      'm/s/year2': 1,
      'm/s/d2': DAYS_PER_YEAR ** 2,
      'm/s/day2': DAYS_PER_YEAR ** 2,
      'km/s/yr2': 1000,
    },
  },
};

/** Spellings that mean the same give the same key: `km s^-1`, `km.s-1`, `kms`, `KM/S` all give `km/s`. */
function unitKey(text: string): string {
  const compact = text
    .trim()
    .toLowerCase()
    .replace(/[−–]/g, '-')
    .replace(/²/g, '2')
    .replace(/[\s_.·*^{}$]/g, '');
  const perSecond =
    /^(k|c)?m(?:\/s(?:ec)?|s-1|sec-1|ps|s|\/second|persecond|etrespersecond|eterspersecond)$/.exec(compact);
  return perSecond === null ? compact : `${perSecond[1] ?? ''}m/s`;
}

/** Factor from the written unit to the canonical one; `null` when the unit does not belong to this kind of quantity. */
export function unitFactor(kind: QuantityKind, unit: string): number | null {
  if (unit.trim() === '') return 1;
  const { factors } = UNITS[kind];
  const key = unitKey(unit);
  return Object.hasOwn(factors, key) ? factors[key]! : null;
}

/** Unit assumed when none is written; empty for a pure number. */
export function canonicalUnit(kind: QuantityKind): string {
  return UNITS[kind].canonical;
}

/** The allowed units in words, for messages. */
export function allowedUnits(kind: QuantityKind): string {
  const shown: Readonly<Partial<Record<QuantityKind, string>>> = {
    period: 'd, h, min, yr', date: 'd (a full Julian date, BJD_TDB)', velocity: 'm/s, km/s', angle: 'deg, rad', height: 'm, km',
    duration: 'd, h, min, s', 'relative flux': 'none (a fraction), ppm, ppt, %, mmag', density: 'g/cm3, kg/m3', number: 'no unit', 'velocity per year': 'm/s/yr, m/s/d', 'velocity per year squared': 'm/s/yr^2, m/s/d^2',
  }; // prettier-ignore
  return shown[kind] ?? UNITS[kind].canonical;
}

/** The unit of a velocity column; `null` for any other text. */
export function velocityUnit(text: string): 'm/s' | 'km/s' | null {
  const key = unitKey(text.replace(/^[[(]|[\])]$/g, ''));
  return key === 'm/s' || key === 'km/s' ? key : null;
}

/** m/s per unit of a velocity column. */
export function metresPerSecond(unit: 'm/s' | 'km/s'): number {
  return unit === 'km/s' ? 1000 : 1;
}

const IN_A_SENTENCE =
  /(\d\s*)?\b(km|m)(?:\s*\/\s*s(?:ec(?:ond)?)?\b|[\s.]*s(?:ec)?\s*\^?\{?[-−]1\}?|\s*\.?s\b(?![-−^\w])|(?:etres|eters)\s+per\s+second\b)|\b(kilomet(?:re|er)s)\s+per\s+second\b/gi;

/**
 * The velocity units that a sentence names, without those that follow a number (`systemic velocity 46 km/s removed`
 * says nothing of the column).
 */
export function velocityUnitsIn(sentence: string): readonly ('m/s' | 'km/s')[] {
  const found = new Set<'m/s' | 'km/s'>();
  for (const match of sentence.matchAll(IN_A_SENTENCE)) {
    if (match[1] !== undefined) continue;
    found.add(match[3] !== undefined || match[2]?.toLowerCase() === 'km' ? 'km/s' : 'm/s');
  }
  return [...found];
}
