/** What the data determine, how well, and what they leave open; every sentence follows from an interval or from the draws. */
import type { CompanionRecord, InstrumentRecord, Quantity, Solved } from '../../solving/types.js';
import { drawnBoundOf, keyOf } from '../draws.js';
import { correlationSentences, shapeSentences, type NamedColumn } from '../draw-sentences.js';
import { escapeMarkdown } from '../escape.js';
import { formatQuantity, isUpperLimit, significant, typographicMinus } from '../numbers.js';
import { hasVelocities, observedSpan } from '../observed.js';
import { modeText, shownModes } from '../posterior-words.js';
import { DERIVED_TITLES, isTransiting, listed, titledElements } from '../titles.js';
import { verdictOf } from '../verdict.js';
import type { ReportSection } from './section.js';

/** An argument of periastron whose central 68.3 % spans more than a third of the circle points nowhere. */
const WIDEST_ANGLE_DEG = 120;
/** Relative errors up to which a quantity counts as well, and as fairly, determined. */
const WELL = 0.1;
const FAIRLY = 0.3;

/** Half the width of the 68.3 % interval; `null` for a fixed or unknown quantity. */
function halfWidth({ sigma, lower, upper, fixed, value }: Quantity): number | null {
  if (fixed === true || value === null) return null;
  if (lower !== null && upper !== null && upper > lower) return (upper - lower) / 2;
  return sigma !== null && sigma > 0 ? sigma : null;
}

/** `1 part in 4200` while that is readable, else percent. */
export function relativeWidth(share: number): string {
  return share < 0.001 ? `1 part in ${significant(1 / share, 2)}` : `${significant(100 * share, 2)} %`;
}

function argumentIsOpen({ elements: { argumentOfPeriastron: angle } }: CompanionRecord): boolean {
  const half = halfWidth(angle);
  return half !== null && 2 * half > WIDEST_ANGLE_DEG;
}

function eccentricityIsOpen({ letter, elements }: CompanionRecord, { posterior }: Solved): boolean {
  return isUpperLimit(elements.eccentricity, drawnBoundOf(posterior, keyOf.element(letter, 'eccentricity')));
}

function jitterIsOpen({ name, jitter }: InstrumentRecord, { posterior }: Solved): boolean {
  return isUpperLimit(jitter, drawnBoundOf(posterior, keyOf.jitter(name)));
}

/** Sizes by their relative errors, in three classes. */
function sizesItem(companion: CompanionRecord, solved: Solved): string[] {
  const { letter, elements, derived } = companion;
  const sizes: (readonly [string, Quantity])[] = [
    ['period', elements.period],
    ['semi-amplitude', elements.semiAmplitude],
    ...(elements.radiusRatio === undefined ? [] : [['radius ratio', elements.radiusRatio] as const]),
    ...(elements.scaledSemiMajorAxis === undefined
      ? []
      : [['semi-major axis in stellar radii', elements.scaledSemiMajorAxis] as const]),
    ...(eccentricityIsOpen(companion, solved) ? [] : [['eccentricity', elements.eccentricity] as const]),
    ...(isTransiting(companion)
      ? ([
          ['mass', derived.mass],
          ['radius', derived.radius ?? derived.mass],
        ] as const)
      : [[DERIVED_TITLES.minimumMass.words, derived.minimumMass] as const]),
    ['semi-major axis', derived.semiMajorAxis],
  ];
  const classes: readonly (readonly [string, (share: number) => boolean])[] = [
    ['well determined', (share) => share <= WELL],
    ['fairly determined', (share) => share > WELL && share <= FAIRLY],
    ['poorly determined', (share) => share > FAIRLY],
  ];
  const widths = sizes.flatMap(([name, quantity]) => {
    const half = halfWidth(quantity);
    const { value } = quantity;
    return half === null || value === null || value === 0 ? [] : [{ name, share: half / Math.abs(value) }];
  });
  const parts = classes.flatMap(([words, fits]) => {
    const members = widths.filter(({ share }) => fits(share));
    return members.length === 0
      ? []
      : [`${words}: ${members.map(({ name, share }) => `${name} (${relativeWidth(share)})`).join(', ')}`];
  });
  return parts.length === 0 ? [] : [`Companion ${letter}, ${parts.join('; ')}.`];
}

function eccentricityItem(companion: CompanionRecord, solved: Solved): string[] {
  if (!eccentricityIsOpen(companion, solved)) return [];
  const { letter, elements } = companion;
  const drawn = drawnBoundOf(solved.posterior, keyOf.element(letter, 'eccentricity'));
  const shown = formatQuantity(elements.eccentricity, 'markdown', { zeroBounded: true, drawn });
  return [`The eccentricity of ${letter} is compatible with zero: ${shown}.`];
}

function impactIsOpen(
  { letter, elements: { impactParameter } }: CompanionRecord,
  { posterior }: Solved,
): boolean {
  return (
    impactParameter !== undefined &&
    isUpperLimit(impactParameter, drawnBoundOf(posterior, keyOf.element(letter, 'impactParameter')))
  );
}

/** A transit that may be central bounds the inclination on one side only. */
function impactItem(companion: CompanionRecord, solved: Solved): string[] {
  const { letter, elements } = companion;
  if (elements.impactParameter === undefined || !impactIsOpen(companion, solved)) return [];
  const drawn = drawnBoundOf(solved.posterior, keyOf.element(letter, 'impactParameter'));
  const shown = formatQuantity(elements.impactParameter, 'markdown', { zeroBounded: true, drawn });
  return [`The impact parameter of ${letter} is compatible with a central transit: ${shown}.`];
}

/** The angle and what hangs on it; times are compared with the period. */
function orientationItem(companion: CompanionRecord): string[] {
  const { letter, elements } = companion;
  const period = elements.period.value;
  const conjunction = halfWidth(elements.timeOfInferiorConjunction);
  const angle = halfWidth(elements.argumentOfPeriastron);
  const items: string[] = [];
  if (angle !== null)
    items.push(
      argumentIsOpen(companion)
        ? `The argument of periastron of ${letter} is undetermined: its interval spans ${significant(2 * angle, 3)}° of 360°; the time of periastron passage is as open.`
        : `The argument of periastron of ${letter} is known to ± ${significant(angle, 2)}°.`,
    );
  if (conjunction !== null && period !== null && period > 0)
    items.push(
      `The time of inferior conjunction of ${letter} is known to ± ${significant(conjunction, 2)} d, ${relativeWidth(conjunction / period)} of the period.`,
    );
  return items;
}

function longPeriodItem({ letter, elements: { period } }: CompanionRecord, solved: Solved): string[] {
  const { first, last } = observedSpan(solved);
  const span = last - first;
  const { value, lower, upper } = period;
  if (value === null || span <= 0 || (upper ?? value) <= span) return [];
  const surely = (lower ?? value) > span;
  return [
    `The period of ${letter} ${surely ? 'is' : 'may be'} longer than the ${significant(span, 5)} d of the data: no whole revolution ` +
      `${surely ? 'was' : 'need have been'} seen, and period, eccentricity and mass depend on each other.`,
  ];
}

function driftItems({ record: { velocity } }: Solved): string[] {
  const parts: readonly (readonly [string, Quantity])[] = [
    ['slope', velocity.slope],
    ['curvature', velocity.curvature],
  ];
  return parts.flatMap(([name, quantity]) => {
    const half = halfWidth(quantity);
    if (half === null || quantity.value === null) return [];
    const share = half / Math.abs(quantity.value);
    return share > 0.5
      ? [`The ${name} of the drift is compatible with zero.`]
      : [`The ${name} of the drift is known to ${relativeWidth(share)}.`];
  });
}

function jitterItems(solved: Solved): string[] {
  const open = solved.record.velocity.instruments.filter((instrument) => jitterIsOpen(instrument, solved));
  if (open.length === 0) return [];
  const limits = open.map(({ name, jitter }) => {
    const drawn = drawnBoundOf(solved.posterior, keyOf.jitter(name));
    return `${escapeMarkdown(name)} (${formatQuantity(jitter, 'markdown', { zeroBounded: true, drawn })})`;
  });
  return [`Compatible with zero: the jitter of ${listed(limits)}.`];
}

function modeItems({ record: { posterior } }: Solved): string[] {
  const shown = shownModes(posterior);
  if (shown.length === 0) return [];
  const faint = (posterior?.modes.length ?? 0) - shown.length;
  return [
    `**The posterior has ${shown.length} modes**: ${shown.map((mode) => modeText(mode, 'markdown')).join(', ')}; the percentages are their shares of the probability ` +
      `among the modes that were sampled${faint > 0 ? ` (${faint} more below 1 %)` : ''}. All numbers here are those of the first mode alone; modes are never averaged.`,
  ];
}

/** Columns that may be spoken of; `settled` are those whose shape is already told as a limit or as open. */
function namedColumns(solved: Solved): NamedColumn[] {
  const { record } = solved;
  const companions = record.companions.flatMap((companion) =>
    titledElements(companion).map(({ key, title }): NamedColumn => {
      const limit =
        (key === 'eccentricity' && eccentricityIsOpen(companion, solved)) ||
        (key === 'impactParameter' && impactIsOpen(companion, solved));
      const open =
        argumentIsOpen(companion) && (key === 'argumentOfPeriastron' || key === 'timeOfPeriastron');
      return {
        key: keyOf.element(companion.letter, key),
        words: `${title.words.replace(/ \(.*\)$/, '')} of ${companion.letter}`,
        settled: limit || open,
      };
    }),
  );
  const instruments = record.velocity.instruments.flatMap((instrument): NamedColumn[] => {
    const { name } = instrument;
    return [
      { key: keyOf.zeroPoint(name), words: `zero point of ${escapeMarkdown(name)}`, settled: false },
      {
        key: keyOf.jitter(name),
        words: `jitter of ${escapeMarkdown(name)}`,
        settled: jitterIsOpen(instrument, solved),
      },
    ];
  });
  return [
    ...companions,
    ...instruments,
    { key: 'velocity.slope', words: 'slope of the drift', settled: false },
    { key: 'velocity.curvature', words: 'curvature of the drift', settled: false },
  ];
}

export const determined: ReportSection = {
  heading: 'What is well determined and what is not',
  blocks: (solved) => {
    if (verdictOf(solved.record) === 'unusable') return [];
    const items = [
      ...modeItems(solved),
      ...solved.record.companions.flatMap((companion) => [
        ...longPeriodItem(companion, solved),
        ...sizesItem(companion, solved),
        ...eccentricityItem(companion, solved),
        ...impactItem(companion, solved),
        ...orientationItem(companion),
      ]),
      ...(hasVelocities(solved) ? driftItems(solved) : []),
      ...jitterItems(solved),
      ...correlationSentences(solved.posterior, namedColumns(solved)),
      ...shapeSentences(solved.posterior, namedColumns(solved)),
    ];
    if (items.length === 0) return [];
    return [
      'Errors are half the central 68.3 % interval; in percent, or as 1 part in so many, they are relative to the value.',
      items.map((item) => `- ${typographicMinus(item)}`).join('\n'),
    ];
  },
};
