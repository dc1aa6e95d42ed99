/** What labels of light curves and of mid-times say: the words of the trade, and the units in brackets behind them. */
import { errorRank, qualityRank, readLabel } from './labels.js';
import { plainWord } from './suggest.js';
import { readTimeLabel } from './time-label.js';
import type { ErrorUnit, FluxUnit } from './types.js';

export interface SplitLabel {
  /** Lower case, letters and digits only, without the unit. */
  readonly word: string;
  /** As written in the last brackets; empty where there are none. */
  readonly unit: string;
}

const IN_BRACKETS = /^(.*?)\s*[[({]([^[\](){}]*)[\])}]\s*$/s;

/** `Flux err (e-/s)` gives `fluxerr` and `e-/s`. */
export function splitLabel(label: string): SplitLabel {
  const text = label.slice(0, 200).trim();
  const match = IN_BRACKETS.exec(text);
  return match === null || match[1] === ''
    ? { word: plainWord(text), unit: '' }
    : { word: plainWord(match[1]!), unit: match[2]!.trim() };
}

const FLUX_WORDS = [
  'flux', 'relflux', 'relativeflux', 'normflux', 'normalisedflux', 'normalizedflux', 'fluxrel', 'fluxnorm', 'fluxratio',
  'fluxes', 'rawflux', 'fluxraw', 'counts', 'intensity', 'brightness',
]; // prettier-ignore
const MAGNITUDE =
  /^(d|delta|diff|differential|rel|relative|inst|app)?[ubvrigzyjhkct]?(band)?(mag|magnitude)s?[ubvrigzyjhkc]?$/;
const DIFFERENTIAL = /^(dm|deltam|dmag|deltamag)$/;
/** `magerr` beside a magnitude called `V`, `merr`, `e_flux`. */
const GENERAL_ERROR =
  /^(e|err|error|sigma|sig|unc)(mag|flux|m|f)$|^(mag|flux|m|f)(e|err|error|sigma|sig|unc|uncertainty)$/;
const EXPOSURE_WORDS = [
  'exposure',
  'exptime',
  'exp',
  'exposuretime',
  'texp',
  'integrationtime',
  'inttime',
  'tint',
];
const BAND_WORDS = ['band', 'filter', 'passband', 'bandpass', 'filt'];
const CYCLE_WORDS = [
  'cycle', 'epoch', 'cyclenumber', 'epochnumber', 'transitnumber', 'cyclecount', 'e', 'n', 'number', 'nr', 'no', 'orbit', 'orbitnumber', 'transit', 'transitepoch', 'cycles', 'tnum',
]; // prettier-ignore
const MID_TIME_WORDS = [
  'midtime', 'midtransit', 'midtransittime', 'transitmidtime', 'tmid', 'midpoint', 'transittime', 'transitcentertime', 'transitcentretime', 'transitcenter', 'transitcentre',
  'centraltime', 'tc', 'tcentral', 'tcen', 'tcent', 'ttransit', 't0', 'tobs', 'minimum', 'mintime', 'timeofminimum', 'tmin', 'conjunction', 'timeofconjunction',
  'timeofinferiorconjunction', 'eclipsetime', 'timeofmidtransit', 'midoccultation', 'occultationtime', 'tocc', 'tecl',
]; // prettier-ignore
const SOURCE_WORDS = [
  'source', 'reference', 'ref', 'observer', 'author', 'observatory', 'instrument', 'telescope', 'site', 'facility', 'bibcode', 'paper', 'obs',
]; // prettier-ignore
const KIND_WORDS = ['kind', 'type', 'event', 'eventtype'];

function rank(words: readonly string[], word: string): number | null {
  const place = words.indexOf(word);
  return place < 0 ? null : place;
}

/** Rank of a label among the names of a flux (0 is best; any other word that ends in `flux` comes last), `null` when it is none. */
export function fluxRank(label: string): number | null {
  const { word } = splitLabel(label);
  const isOther =
    /flux$/.test(word) &&
    !/^(bkg|background|sky|model|err|sig|unc)/.test(word) &&
    errorRank(word, 'flux') !== 0;
  return rank(FLUX_WORDS, word) ?? (isOther ? FLUX_WORDS.length : null);
}

/** Flags of survey light curves have many names; what is called a flag or a quality is obeyed. */
export function photometricQualityRank(label: string): number | null {
  const { word } = splitLabel(label);
  return qualityRank(word) ?? (/quality|flag/.test(word) ? 10 : null);
}

export function magnitudeRank(label: string): number | null {
  const { word, unit } = splitLabel(label);
  if (MAGNITUDE.test(word)) return 0;
  return DIFFERENTIAL.test(word) ||
    (isMagnitude(unit) && errorRank(word, '') === null && !/err|sig|unc/.test(word))
    ? 1
    : null;
}

/** Rank among the names of the error of the column `ofLabel`: those that contain its name come first, then general ones. */
export function photometricErrorRank(label: string, ofLabel: string): number | null {
  const { word } = splitLabel(label);
  return errorRank(word, splitLabel(ofLabel).word) ?? (GENERAL_ERROR.test(word) ? 100 : null);
}

export function exposureRank(label: string): number | null {
  return rank(EXPOSURE_WORDS, splitLabel(label).word);
}

export function bandRank(label: string): number | null {
  return rank(BAND_WORDS, splitLabel(label).word);
}

export function cycleRank(label: string): number | null {
  return rank(CYCLE_WORDS, splitLabel(label).word);
}

export function sourceRank(label: string): number | null {
  return rank(SOURCE_WORDS, splitLabel(label).word);
}

export function kindRank(label: string): number | null {
  return rank(KIND_WORDS, splitLabel(label).word);
}

/** Whether a label names the middle of an event: `Tmid (BJD_TDB)`, `t_0`, `mid-transit time`. */
export function namesMidTime(label: string): boolean {
  const word = readLabel(label).word;
  const plain = plainWord(label.replace(/[[({].*$/s, ''));
  const bare = plain.replace(/(in)?(bjd|hjd|jd)?(tdb|utc|tt)?$/, '');
  return [word, plain, bare].some((candidate) => MID_TIME_WORDS.includes(candidate));
}

/** Time columns of a table of mid-times, best first. A column of cycles called `epoch` is left to `cycleRank`. */
export function midTimeRank(label: string): number | null {
  if (namesMidTime(label)) return 0;
  const time = readTimeLabel(label);
  if (time === null) return null;
  return time.scale === 'unknown' ? 2 : 1;
}

/** `err_min` without the unit behind it. */
export function withoutTimeUnit(label: string): string {
  return label.trim().replace(/[_\s](d|days?|h|hours?|min|minutes?|s|sec|seconds?)$/i, '');
}

/** Whether the label names the error of a time: `err_t0`, `sigma_T`, `BJD_err`. */
export function namesTimeError(label: string, timeLabel: string): boolean {
  const { word } = splitLabel(withoutTimeUnit(label));
  const own = errorRank(word, plainWord(timeLabel.replace(/[[({].*$/s, '')));
  return (
    own === 0 ||
    /^(e|err|error|sigma|sig|unc|s)(t|t0|tc|tmid|time|bjd|bjdtdb|hjd|jd|midtime)$/.test(word) ||
    /^(t|t0|tc|tmid|time|bjd|bjdtdb|hjd|jd|midtime)(err|error|sigma|sig|unc|uncertainty)$/.test(word)
  );
}

function isMagnitude(unit: string): boolean {
  return /^m?mags?$/i.test(unit);
}

const UNIT_WORDS: Readonly<Record<string, ErrorUnit>> = {
  '%': 'percent', percent: 'percent', ppm: 'ppm', mag: 'mag', mags: 'mag', magnitude: 'mag', mmag: 'mmag',
  relative: 'relative', rel: 'relative', normalised: 'relative', normalized: 'relative', fraction: 'relative', fractional: 'relative', '1': 'relative',
  d: 'd', day: 'd', days: 'd', h: 'h', hr: 'h', hour: 'h', hours: 'h', min: 'min', minute: 'min', minutes: 'min', m: 'min',
  s: 's', sec: 's', second: 's', seconds: 's', counts: 'counts', count: 'counts', cts: 'counts', adu: 'counts', dn: 'counts',
}; // prettier-ignore

/** The unit that a bracket, a unit row or a description gives; `null` when it is none that is known. */
export function unitWord(text: string): ErrorUnit | null {
  const key = text
    .toLowerCase()
    .replace(/^[[({]|[\])}]$/g, '')
    .trim();
  return Object.hasOwn(UNIT_WORDS, key) ? UNIT_WORDS[key]! : null;
}

/** What the unit of a flux column says: a linear unit that is not known by name (`e-/s`, `W m-2`) counts as counts. */
export function fluxUnitOf(text: string): FluxUnit | 'mmag' | null {
  if (text.trim() === '' || /^[-.]+$/.test(text.trim())) return null;
  switch (unitWord(text)) {
    case 'mag':
      return 'mag';
    case 'mmag':
      return 'mmag';
    case 'ppm':
      return 'ppm';
    case 'relative':
      return 'relative';
    default:
      return 'counts';
  }
}
