/** Understands how a header, a comment or a case names its dates: `BJD_TDB - 2457000`, `HJD (2450000+)`, `MJD`, `t`. */
import type { TimeScale } from './types.js';

export interface TimeLabel {
  /** `unknown` for a bare `time`, `date` or `t`. */
  readonly scale: TimeScale;
  /** Days to add to get full Julian dates; `null` when the label does not say. */
  readonly offsetDays: number | null;
}

const MJD_OFFSET_DAYS = 2400000.5;

/** Names of the trade: which Julian date, and the days that the name itself leaves out. */
const BASES: Readonly<
  Record<
    string,
    { readonly base: 'BJD' | 'HJD' | 'JD'; readonly offsetDays: number | null; readonly standard: string }
  >
> = {
  bjd: { base: 'BJD', offsetDays: null, standard: '' },
  jdb: { base: 'BJD', offsetDays: null, standard: '' },
  hjd: { base: 'HJD', offsetDays: null, standard: '' },
  jd: { base: 'JD', offsetDays: null, standard: '' },
  mjd: { base: 'JD', offsetDays: MJD_OFFSET_DAYS, standard: '' },
  bmjd: { base: 'BJD', offsetDays: MJD_OFFSET_DAYS, standard: '' },
  mbjd: { base: 'BJD', offsetDays: MJD_OFFSET_DAYS, standard: '' },
  hmjd: { base: 'HJD', offsetDays: MJD_OFFSET_DAYS, standard: '' },
  mhjd: { base: 'HJD', offsetDays: MJD_OFFSET_DAYS, standard: '' },
  rjd: { base: 'JD', offsetDays: 2400000, standard: '' },
  btjd: { base: 'BJD', offsetDays: 2457000, standard: 'TDB' },
  bkjd: { base: 'BJD', offsetDays: 2454833, standard: 'TDB' },
};

const STANDARDS: Readonly<Record<string, 'TDB' | 'TT' | 'UTC'>> = { tdb: 'TDB', tt: 'TT', utc: 'UTC' };
const BARE = new Set(['time', 'times', 'date', 'dates', 't', 'epoch', 'obstime', 'obsdate']);
const FILLERS = new Set([
  'd',
  'day',
  'days',
  'mid',
  'obs',
  'of',
  'observation',
  'in',
  'at',
  'the',
  'exposure',
  'julian',
  'barycentric',
  'heliocentric',
  'modified',
]);

/** Splits `BJD_TDB-2450000` into words and the signed number. */
function dissect(label: string): { words: string[]; offset: number | null } {
  const plain = label
    .toLowerCase()
    .replace(/[−–]/g, '-')
    .replace(/barycentric julian (date|day)s?/g, 'bjd')
    .replace(/heliocentric julian (date|day)s?/g, 'hjd')
    .replace(/modified julian (date|day)s?/g, 'mjd')
    .replace(/julian (date|day)s?/g, 'jd');
  const number = /(?:([-+])\s*(\d[\d,_]*(?:\.\d+)?))|(?:(\d[\d,_]*(?:\.\d+)?)\s*\+)/.exec(plain);
  const written = number?.[2] ?? number?.[3];
  const offset = written === undefined ? null : Number(written.replace(/[,_]/g, ''));
  const rest = number === null ? plain : plain.replace(number[0], ' ');
  return { words: rest.split(/[^a-z0-9]+/).filter((word) => word !== ''), offset };
}

/** `bjdtdb` is `bjd` and `tdb`. */
function unglue(word: string): string[] {
  const glued = /^(bjd|hjd|jd|mjd|bmjd|hmjd)(tdb|tt|utc)$/.exec(word);
  return glued === null ? [word] : [glued[1]!, glued[2]!];
}

/**
 * Reads the name of a time column or a declared time scale.
 *
 * @returns `null` when the text names anything but a time (`BJD err` is not a time, `RV` neither)
 */
export function readTimeLabel(label: string): TimeLabel | null {
  if (label.length > 200) return null;
  const { words, offset } = dissect(label);
  let base: (typeof BASES)[string] | null = null;
  let standard = '';
  let bare = false;
  for (const word of words.flatMap(unglue)) {
    if (Object.hasOwn(BASES, word)) base ??= BASES[word]!;
    else if (Object.hasOwn(STANDARDS, word)) standard = STANDARDS[word]!;
    else if (BARE.has(word)) bare = true;
    else if (!FILLERS.has(word)) return null;
  }
  if (base === null) return bare ? { scale: 'unknown', offsetDays: offset } : null;
  return {
    scale: scaleOf(base.base, standard === '' ? base.standard : standard),
    offsetDays: offset ?? base.offsetDays,
  };
}

function scaleOf(base: 'BJD' | 'HJD' | 'JD', standard: string): TimeScale {
  if (base === 'BJD') return standard === 'UTC' ? 'BJD_UTC' : standard === '' ? 'BJD' : 'BJD_TDB'; // TT and TDB differ by < 2 ms
  if (base === 'HJD') return standard === 'UTC' ? 'HJD_UTC' : standard === '' ? 'HJD' : 'HJD_TT';
  return standard === 'UTC' ? 'JD_UTC' : standard === '' ? 'JD' : 'JD_TT';
}

const MENTION =
  /\b(?:(?:barycentric |heliocentric |modified )?julian (?:date|day)s?|b?m?jdb?|hm?jd|mhjd|rjd|btjd|bkjd|[bh]?jd_?(?:tdb|tt|utc))(?:[\s_]*[([]?\s*(?:tdb|tt|utc)\b[)\]]?)?(?:\s*[-−–]\s*2[\d,]{5,}(?:\.\d+)?)?/gi;

/** The time scales that a sentence names: `time is BJD_TDB - 2454833, exposure 58.85 s`. */
export function timeLabelsIn(sentence: string): readonly TimeLabel[] {
  const found: TimeLabel[] = [];
  for (const match of sentence.slice(0, 2000).matchAll(MENTION)) {
    const label = readTimeLabel(match[0].replace(/,$/, ''));
    if (label !== null) found.push(label);
  }
  return found;
}
