/** The quantities of mid-times in words, in the order in which they are shown. */
import type { TimingModelName } from '../../solving/timing/model-forms.js';
import type { TimingSystemRecord } from '../../solving/timing/system-types.js';
import type { TimingModelRecord, TimingParameterKey } from '../../solving/timing/types.js';
import type { Quantity } from '../../solving/types.js';
import { formatQuantity, significant } from '../numbers.js';
import { listed } from '../titles.js';

export const TIMING_TITLES: readonly (readonly [key: TimingParameterKey, words: string])[] = [
  ['time', 'mid-transit at the reference cycle'],
  ['timeAtZero', 'mid-transit at cycle 0'],
  ['period', 'period'],
  ['periodChangePerCycle', 'change of the period per cycle'],
  ['periodChange', 'change of the period'],
  ['changeTimescale', 'time scale P/|dP/dt|'],
  ['tidalQuality', "tidal quality factor Q'"],
  ['mimickingAcceleration', 'acceleration that would mimic it'],
  ['properMotionChange', 'part due to proper motion'],
  ['modulationPeriod', 'period of the modulation'],
  ['modulationAmplitude', 'amplitude of the modulation'],
  ['modulationPeak', 'latest transit of a modulation'],
  ['reflexOrbit', 'as light time: a sin i'],
  ['outerMassFunction', 'as light time: mass function'],
  ['reflexSemiAmplitude', 'as light time: semi-amplitude'],
  ['eccentricity', 'eccentricity'],
  ['argumentOfPeriastron', 'argument of periastron'],
  ['apsidalRate', 'apsidal rate'],
  ['apsidalPeriod', 'apsidal period'],
  ['anomalisticPeriod', 'anomalistic period'],
  ['occultationShift', 'shift of the occultations'],
  ['eccentricityCosine', 'e cos ω'],
];

/** What a model says of the clock. */
export const MODEL_WORDS: Readonly<Record<TimingModelName, string>> = {
  linear: 'the period is constant',
  quadratic: 'the period changes at a constant rate',
  sinusoidal: 'the times swing about an even clock',
  precessing: 'the line of apsides turns',
};

/** What mid-times of several companions say, on a line. */
export function systemWords({ companions, interaction }: TimingSystemRecord): string {
  const letters = listed(companions.map(({ letter }) => letter));
  if (interaction === null) return `ephemerides of ${letters}`;
  if (!interaction.usable) return `ephemerides of ${letters}; their orbits could not be fitted together`;
  return interaction.needed
    ? `${letters} pull at each other`
    : `the mid-times of ${letters} do not show a pull at each other`;
}

/** The quantities that a model has, with their words. */
export function timingQuantities(
  model: TimingModelRecord,
): (readonly [key: TimingParameterKey, words: string, quantity: Quantity])[] {
  return TIMING_TITLES.flatMap(([key, words]) => {
    const quantity = model.parameters[key];
    return quantity === undefined ? [] : [[key, words, quantity] as const];
  });
}

/** Quantities that cannot be negative, so that near zero they are upper limits. */
function isZeroBounded(key: TimingParameterKey): boolean {
  return key === 'eccentricity' || key === 'modulationAmplitude' || key === 'reflexOrbit';
}

/** As `formatQuantity`; a number without an uncertainty of its own gets three digits. */
export function timingText(key: TimingParameterKey, quantity: Quantity, style: 'text' | 'markdown'): string {
  const { value, sigma, unit } = quantity;
  if (value !== null && sigma === null) return `${significant(value, 3)}${unit === '' ? '' : ` ${unit}`}`;
  return formatQuantity(quantity, style, { zeroBounded: isZeroBounded(key) });
}
