/** What the keys of a solution are called in front of people, and in which order they are shown. */
import type { TransitDerivedKey, TransitElementKey } from '../solving/transit-types.js';
import type { CompanionRecord, DerivedKey, ElementKey, Quantity } from '../solving/types.js';

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

export const TRANSIT_ELEMENT_TITLES: Readonly<Record<TransitElementKey, Title>> = {
  radiusRatio: { words: "radius in units of the star's" },
  impactParameter: { words: 'impact parameter of the transit (stellar radii)', zeroBounded: true },
  scaledSemiMajorAxis: { words: 'semi-major axis in stellar radii' },
  inclination: { words: 'inclination' },
};

export const TRANSIT_DERIVED_TITLES: Readonly<Record<TransitDerivedKey, Title>> = {
  radius: { words: 'radius' },
  midTransitDepth: { words: 'loss of light in mid-transit' },
  totalDuration: { words: 'duration, first to last contact' },
  fullDuration: { words: 'duration, second to third contact' },
  meanDensity: { words: 'mean density' },
  surfaceGravity: { words: 'surface gravity' },
  timeOfOccultation: { words: 'time of occultation' },
  scaleHeight: { words: 'scale height of an atmosphere (molecular weight 2.3)' },
  rossiterMcLaughlin: { words: 'velocity anomaly in transit, per km/s of projected stellar rotation' },
};

export const ELEMENT_ORDER = Object.keys(ELEMENT_TITLES) as readonly ElementKey[];
export const DERIVED_ORDER = Object.keys(DERIVED_TITLES) as readonly DerivedKey[];

const TRANSIT_ELEMENT_ORDER = Object.keys(TRANSIT_ELEMENT_TITLES) as readonly TransitElementKey[];
const TRANSIT_DERIVED_ORDER = Object.keys(TRANSIT_DERIVED_TITLES) as readonly TransitDerivedKey[];

/** Guesses for a companion of which no transit is known; idle where a light curve shows one. */
const ONLY_WITHOUT_TRANSIT: readonly DerivedKey[] = ['transitProbability', 'transitDuration', 'transitDepth'];

/** A light curve shows its transits. */
export function isTransiting({ elements }: CompanionRecord): boolean {
  return elements.radiusRatio !== undefined;
}

/** A quantity of a companion with its key and what it is called. */
export interface TitledQuantity {
  readonly key: string;
  readonly title: Title;
  readonly quantity: Quantity;
}

/** All elements of a companion, those of its transits last. */
export function titledElements({ elements }: CompanionRecord): TitledQuantity[] {
  return [
    ...ELEMENT_ORDER.map((key) => ({ key, title: ELEMENT_TITLES[key], quantity: elements[key] })),
    ...TRANSIT_ELEMENT_ORDER.flatMap((key) => {
      const quantity = elements[key];
      return quantity === undefined ? [] : [{ key, title: TRANSIT_ELEMENT_TITLES[key], quantity }];
    }),
  ];
}

/** All derived quantities of a companion, those of its transits last. */
export function titledDerived({ derived }: CompanionRecord): TitledQuantity[] {
  return [
    ...DERIVED_ORDER.map((key) => ({ key, title: DERIVED_TITLES[key], quantity: derived[key] })),
    ...TRANSIT_DERIVED_ORDER.flatMap((key) => {
      const quantity = derived[key];
      return quantity === undefined ? [] : [{ key, title: TRANSIT_DERIVED_TITLES[key], quantity }];
    }),
  ];
}

/** The derived quantities that say something to a reader: guesses about transits are left out where these are seen. */
export function readableDerived(companion: CompanionRecord): TitledQuantity[] {
  const idle: readonly string[] = isTransiting(companion) ? ONLY_WITHOUT_TRANSIT : [];
  return titledDerived(companion).filter(({ key }) => !idle.includes(key));
}

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
