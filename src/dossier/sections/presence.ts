/** The companions and their orbits, in sentences and in one table each. */
import type { CompanionRecord, Quantity, SolutionRecord, Solved } from '../../solving/types.js';
import { keyOf, drawnBoundOf } from '../draws.js';
import { escapeMarkdown } from '../escape.js';
import { formatProbability, formatQuantity, isUpperLimit, significant, type DrawnBound } from '../numbers.js';
import { hasVelocities, observedSpan, observedWords } from '../observed.js';
import { modeText, shownModes } from '../posterior-words.js';
import {
  counted,
  ELEMENT_TITLES,
  isTransiting,
  listed,
  readableDerived,
  titledElements,
  type Title,
} from '../titles.js';
import { verdictOf } from '../verdict.js';
import { chartBlocks, markdownTable, type ReportSection } from './section.js';

function shown(quantity: Quantity, title?: Title, drawn: DrawnBound | null = null): string {
  return formatQuantity(quantity, 'markdown', { zeroBounded: title?.zeroBounded === true, drawn });
}

function overview(solved: Solved): string {
  const { record } = solved;
  const { first, last } = observedSpan(solved);
  const verdict = {
    companions: `show ${counted(record.companions.length, 'companion')}`,
    nothing: 'show no companion that clears the thresholds of this search',
    unusable: 'gave no usable solution; what follows is where the search stopped and must not be cited',
  }[verdictOf(record)];
  return (
    `${observedSentenceStart(solved)} over ${significant(last - first, 5)} d ` +
    `(from ${first.toFixed(2)} to ${last.toFixed(2)}, ${record.timeScale}), ${verdict}.`
  );
}

function observedSentenceStart(solved: Solved): string {
  const { record, velocities } = solved;
  const target = escapeMarkdown(record.target);
  return record.photometry === undefined
    ? `The ${velocities.count} velocities of ${target}, taken with ${counted(velocities.instruments.length, 'instrument')}`
    : `The observations of ${target}, ${observedWords(solved)},`;
}

function orbitSentence(companion: CompanionRecord, { record: { star }, posterior }: Solved): string {
  const { letter, elements, derived } = companion;
  const drawn = drawnBoundOf(posterior, keyOf.element(letter, 'eccentricity'));
  const shape = companion.circular
    ? 'on a circular orbit'
    : isUpperLimit(elements.eccentricity, drawn)
      ? `on an orbit whose eccentricity is ${shown(elements.eccentricity, ELEMENT_TITLES.eccentricity, drawn)}`
      : `on an eccentric orbit, e = ${shown(elements.eccentricity)}`;
  // A transit fixes the inclination, so that nothing is a minimum any more.
  const isBound = derived.mass.value === null && !isTransiting(companion);
  const heavy = isBound ? derived.minimumMass : derived.mass;
  const massName = isBound ? 'minimum mass (m sin i)' : 'mass';
  const mass =
    heavy.value === null
      ? `Its ${massName} is not known${heavy.why === undefined ? '' : `: ${escapeMarkdown(heavy.why)}`}.`
      : `Its ${massName} is ${shown(heavy)} for a star of ${shown(star.mass)}.`;
  const pull =
    elements.semiAmplitude.value === null
      ? `; how it moves the star is ${shown(elements.semiAmplitude)}`
      : `, and moves the star with a semi-amplitude of ${shown(elements.semiAmplitude)}`;
  const period =
    elements.period.value === null
      ? `has a period that is ${shown(elements.period)}`
      : `goes round in ${shown(elements.period)} ${shape}`;
  return `Companion ${letter} ${period}${pull}. ${mass}`;
}

function quantitiesTable(companion: CompanionRecord, { posterior }: Solved): string {
  const rows = [
    ...titledElements(companion).map(({ key, title, quantity }) => [
      title.words,
      shown(quantity, title, drawnBoundOf(posterior, keyOf.element(companion.letter, key))),
    ]),
    ...readableDerived(companion)
      .filter(({ quantity }) => quantity.value !== null)
      .map(({ title, quantity }) => [title.words, shown(quantity, title)]),
  ];
  return markdownTable(['quantity', 'value'], rows);
}

/** What could not be derived, with the reason said once for all the quantities that share it. */
function missing(companion: CompanionRecord): string[] {
  const byReason = new Map<string, string[]>();
  for (const { title, quantity } of readableDerived(companion)) {
    if (quantity.value !== null) continue;
    const reason = quantity.why ?? 'no reason recorded';
    byReason.set(reason, [...(byReason.get(reason) ?? []), title.words]);
  }
  return [...byReason].map(
    ([reason, names]) => `Not derived (${escapeMarkdown(reason)}): ${names.join('; ')}.`,
  );
}

function driftSentence({ velocity }: SolutionRecord): string[] {
  const parts: string[] = [];
  if (velocity.slope.value !== null && velocity.slope.fixed !== true)
    parts.push(`a slope of ${shown(velocity.slope)}`);
  if (velocity.curvature.value !== null && velocity.curvature.fixed !== true)
    parts.push(`a curvature of ${shown(velocity.curvature)}`);
  if (parts.length === 0) return ['No drift of the mean velocity is part of the model.'];
  return [
    `The mean velocity drifts, with ${parts.join(' and ')}; this may be a companion with a period longer than the data.`,
  ];
}

function candidateSentences(record: SolutionRecord): string[] {
  return record.candidates.map(
    (candidate) =>
      `A further signal at ${significant(candidate.period, 6)} d (semi-amplitude ${significant(candidate.semiAmplitude, 3)} m/s, ` +
      `false-alarm probability ${formatProbability(candidate.falseAlarmProbability, 'markdown')}, ` +
      `BIC better by ${significant(candidate.deltaBic, 3)}) is a candidate only: it clears the weaker thresholds, not the stronger, and is not part of the model.`,
  );
}

function neighbourSentences(record: SolutionRecord): string[] {
  return record.neighbours.map(({ letters, periodRatio, nearRatio, mutualHillSpacing }) => {
    const near = nearRatio === null ? '' : `, close to ${nearRatio}`;
    const spacing =
      mutualHillSpacing.value === null
        ? ''
        : ` They are ${shown({ ...mutualHillSpacing, unit: '' })} mutual Hill radii apart.`;
    return `The periods of ${letters[0]} and ${letters[1]} stand as ${significant(periodRatio, 5)} to 1${near}.${spacing}`;
  });
}

/** A reader who stops after the first paragraph must not take the period for settled. */
function modesSentence({ posterior }: SolutionRecord): string[] {
  const [, ...others] = shownModes(posterior);
  if (others.length === 0) return [];
  const texts = others.map((mode) => modeText(mode, 'markdown'));
  return [
    `**The data leave more than one period.** The one given here is the most probable; beside it ${listed(texts)} share the probability.`,
  ];
}

export const presence: ReportSection = {
  heading: 'What is there',
  blocks: (solved, context) => {
    const { record } = solved;
    return [
      overview(solved),
      ...modesSentence(record),
      ...chartBlocks(context, /^velocities$/),
      ...record.companions.flatMap((companion) => [
        `### Companion ${companion.letter}`,
        orbitSentence(companion, solved),
        quantitiesTable(companion, solved),
        ...missing(companion),
        ...chartBlocks(context, new RegExp(`^(folded|orbit)-${companion.letter}$`)),
      ]),
      ...(hasVelocities(solved) ? driftSentence(record) : []),
      ...candidateSentences(record),
      ...neighbourSentences(record),
      ...chartBlocks(context, /^orbits$/),
    ];
  },
};
