/** What a column label says: its name without the unit, and the unit. */
import { plainWord } from './suggest.js';
import { velocityUnit } from './units.js';

export interface ReadLabel {
  /** Lower case, letters and digits only, without the unit: `e_RV [m/s]` gives `erv`. */
  readonly word: string;
  readonly unit: 'm/s' | 'km/s' | null;
  /** A unit in brackets that looks like a speed but is not one that is read, e.g. `cm/s`; otherwise `null`. */
  readonly strangeUnit: string | null;
}

const IN_BRACKETS = /[[({]([^\])}]*)[\])}]\s*$/;
const AT_THE_END = /^(.*?\S)[\s_.,-]+((?:k|c|m)?m[\s_/]*(?:s|ps|s-1|sec|s\^-1))$/i;

export function readLabel(label: string): ReadLabel {
  const text = label.slice(0, 200).trim();
  const bracketed = IN_BRACKETS.exec(text);
  if (bracketed !== null) {
    const unit = velocityUnit(bracketed[1]!);
    const strange = unit === null && /(\/\s*s|s\s*\^?\s*[-−]\s*1)/.test(bracketed[1]!);
    const name = unit !== null || strange ? text.slice(0, bracketed.index) : text;
    // `RV (km/s)` but also `rv(bary)`: what is in brackets and is no unit does not change the name.
    return {
      word: plainWord(name === text ? text.slice(0, bracketed.index) || text : name),
      unit,
      strangeUnit: strange ? bracketed[1]! : null,
    };
  }
  const suffixed = AT_THE_END.exec(text);
  const unit = suffixed === null ? null : velocityUnit(suffixed[2]!);
  if (suffixed !== null && unit !== null) return { word: plainWord(suffixed[1]!), unit, strangeUnit: null };
  return { word: plainWord(text), unit: null, strangeUnit: null };
}

/** Velocity names of the trade, best first. */
const VELOCITY_WORDS = ['rv', 'vrad', 'radialvelocity', 'radialvel', 'velocity', 'vel', 'vr', 'rvel', 'rvs'];
const ERROR_WORDS = ['err', 'error', 'sigma', 'sig', 'unc', 'uncertainty', 'e', 'srv', 'std', 'sd'];
const INSTRUMENT_WORDS = [
  'instrument',
  'inst',
  'instr',
  'ins',
  'spectrograph',
  'telescope',
  'tel',
  'dataset',
  'set',
];
const QUALITY_WORDS = ['flag', 'flags', 'quality', 'qual', 'q', 'use'];

/** Rank of a word among the velocity names (0 is best), `null` when it is none. */
export function velocityRank(word: string): number | null {
  return rank(VELOCITY_WORDS, word);
}

/**
 * Rank among the names of a velocity's error, given the name of the velocity column: names that contain it come first
 * (`e_RV`, `RV_err`, `sigma_rv`), then the general ones (`err`, `sigma`).
 */
export function errorRank(word: string, velocityWord: string): number | null {
  const names = velocityWord === '' ? VELOCITY_WORDS : [velocityWord, ...VELOCITY_WORDS];
  for (const [place, name] of names.entries()) {
    for (const mark of ['e', 'err', 'error', 'sigma', 'sig', 'unc', 'uncertainty', 's', 'd', 'std']) {
      if (word === mark + name || word === name + mark || word === `${mark}of${name}`) return place;
    }
  }
  const general = rank(ERROR_WORDS, word);
  return general === null ? null : names.length + general;
}

export function instrumentRank(word: string): number | null {
  return rank(INSTRUMENT_WORDS, word);
}

export function qualityRank(word: string): number | null {
  return rank(QUALITY_WORDS, word);
}

function rank(words: readonly string[], word: string): number | null {
  const place = words.indexOf(word);
  return place < 0 ? null : place;
}
