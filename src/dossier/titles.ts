/** What the keys of a solution are called in front of people, and in which order they are shown. */
import type { DerivedKey, ElementKey } from '../solving/types.js';

export interface Title {
  readonly words: string;
  /** Cannot be negative and may well be zero: shown as an upper limit when the data say no more. */
  readonly zeroBounded?: true;
}

export const ELEMENT_TITLES: Readonly<Record<ElementKey, Title>> = {
  period: { words: 'period' },
  semiAmplitude: { words: 'semi-amplitude' },
  eccentricity: { words: 'eccentricity', zeroBounded: true },
  argumentOfPeriastron: { words: "argument of periastron (star's orbit)" },
  timeOfPeriastron: { words: 'time of periastron passage' },
  timeOfInferiorConjunction: { words: 'time of inferior conjunction' },
};

export const DERIVED_TITLES: Readonly<Record<DerivedKey, Title>> = {
  minimumMass: { words: 'minimum mass (m sin i)' },
  mass: { words: 'mass' },
  semiMajorAxis: { words: 'semi-major axis (relative orbit)' },
  massFunction: { words: 'mass function' },
  starOrbitSemiMajorAxis: { words: "semi-major axis of the star's orbit times sin i" },
  periastronDistance: { words: 'distance at periastron' },
  apastronDistance: { words: 'distance at apastron' },
  periastronSpeed: { words: 'speed at periastron (relative orbit)' },
  apastronSpeed: { words: 'speed at apastron (relative orbit)' },
  nextInferiorConjunction: { words: 'first inferior conjunction after the data' },
  nextPeriastron: { words: 'first periastron passage after the data' },
  transitProbability: { words: 'probability that it transits' },
  transitDuration: { words: 'duration of a central transit, if it transits' },
  transitDepth: { words: 'depth of a transit by a body of 1 R_jup' },
  astrometricSignature: { words: 'astrometric signature at 10 pc, at least' },
  equilibriumTemperature: { words: 'equilibrium temperature (zero albedo, even redistribution)' },
  irradiation: { words: "irradiation in units of the Earth's" },
  hillRadius: { words: 'Hill radius' },
};

export const ELEMENT_ORDER = Object.keys(ELEMENT_TITLES) as readonly ElementKey[];
export const DERIVED_ORDER = Object.keys(DERIVED_TITLES) as readonly DerivedKey[];

const COUNT_WORDS = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine'];

/** `one companion`, `two companions`, `12 velocities`: counts as a sentence would have them. */
export function counted(count: number, singular: string, plural = `${singular}s`): string {
  return `${COUNT_WORDS[count] ?? String(count)} ${count === 1 ? singular : plural}`;
}

/** `a`, `a and b`, `a, b and c`. */
export function listed(items: readonly string[]): string {
  if (items.length <= 1) return items.join('');
  return `${items.slice(0, -1).join(', ')} and ${items[items.length - 1]!}`;
}

export function capitalised(sentence: string): string {
  return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}
