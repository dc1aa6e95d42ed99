/** What the light curves say of each transiting companion, and of the density of the star. */
import type { PhotometryRecord } from '../../solving/transit-types.js';
import type { CompanionRecord, Quantity, Solved } from '../../solving/types.js';
import { drawnBoundOf, keyOf } from '../draws.js';
import { escapeMarkdown } from '../escape.js';
import { formatQuantity, significant } from '../numbers.js';
import { isTransiting } from '../titles.js';
import { chartBlocks, type ReportSection } from './section.js';

/** Beyond this the two densities are said to disagree. */
const TENSION_SIGMAS = 3;
const FIRM_TENSION = 2;

function shown(quantity: Quantity | undefined): string {
  return quantity === undefined ? 'unknown' : formatQuantity(quantity, 'markdown');
}

function transitSentences(companion: CompanionRecord, { record, posterior }: Solved): string {
  const { letter, elements, derived } = companion;
  const first = record.photometry?.bands[0];
  const events = (record.photometry?.events ?? []).filter((event) => event.letter === letter);
  const impact =
    elements.impactParameter === undefined
      ? 'unknown'
      : formatQuantity(elements.impactParameter, 'markdown', {
          zeroBounded: true,
          drawn: drawnBoundOf(posterior, keyOf.element(letter, 'impactParameter')),
        });
  const full =
    derived.fullDuration === undefined || derived.fullDuration.value === null
      ? `; it has no full phase${derived.fullDuration?.why === undefined ? '' : ` (${escapeMarkdown(derived.fullDuration.why)})`}`
      : `, of which ${shown(derived.fullDuration)} between second and third contact`;
  const radius =
    derived.radius === undefined || derived.radius.value === null
      ? `Its radius is not known${derived.radius?.why === undefined ? '' : `: ${escapeMarkdown(derived.radius.why)}`}.`
      : `Its radius is ${shown(derived.radius)} for a star of ${shown(record.star.radius)}.`;
  return [
    `**Companion ${letter}** takes ${shown(derived.midTransitDepth)} of the light in the middle of its transit` +
      `${first === undefined || (record.photometry?.bands.length ?? 0) < 2 ? '' : ` (band ${escapeMarkdown(first.name)})`}, ` +
      `which lasts ${shown(derived.totalDuration)} from first to last contact${full}.`,
    `The radius ratio is ${shown(elements.radiusRatio)}, the impact parameter ${impact}` +
      (elements.scaledSemiMajorAxis?.value === null
        ? '; without a period the semi-major axis and the inclination are not known.'
        : `, the semi-major axis ${shown(elements.scaledSemiMajorAxis)} stellar radii, the inclination ${shown(elements.inclination)}.`),
    radius,
    events.length === 0
      ? ''
      : `${events.length === 1 ? 'One transit' : `${events.length} transits`} of it ${events.length === 1 ? 'has' : 'have'} points in the fit.`,
  ]
    .filter((sentence) => sentence !== '')
    .join(' ');
}

/** The density that the shape of the transits asks for, against the one that the case states. */
function densityBlocks({ starDensity, starDensityGiven, starDensityTension }: PhotometryRecord): string[] {
  if (starDensity.value === null && starDensityGiven.value === null) return [];
  const own = `The shape of the transits asks for a star of ${shown(starDensity)}`;
  if (starDensityGiven.value === null || starDensityTension === null)
    return [
      `${own} on average; there is nothing to compare it with${starDensityGiven.why === undefined ? '' : ` (${escapeMarkdown(starDensityGiven.why)})`}.`,
    ];
  const size = Math.abs(starDensityTension);
  const apart = `${significant(size, 2)} σ apart`;
  const both = `${own}; the given mass and radius of the star make ${shown(starDensityGiven)}, ${apart}.`;
  if (size < FIRM_TENSION) return [`${both} The two agree.`];
  const reasons =
    'Light of another star in the aperture, an orbit more eccentric than the fit has it, a wrong mass or radius of the star, or an eclipsing pair behind it can do this';
  return size < TENSION_SIGMAS
    ? [`${both} ${reasons}; keep an eye on it.`]
    : [`**${both.slice(0, -1)}: they disagree.** ${reasons}. Do not cite the radius before this is settled.`];
}

export const transits: ReportSection = {
  heading: 'What the light curves say',
  blocks: (solved, context) => {
    const { photometry } = solved.record;
    if (photometry === undefined || photometry.lightCurves.length === 0) return [];
    const transiting = solved.record.companions.filter(isTransiting);
    return [
      ...chartBlocks(context, /^light-curve(-\d+)?$/),
      ...(transiting.length === 0
        ? ['No companion of this solution shows transits in the light curves.']
        : []),
      ...transiting.flatMap((companion) => [
        transitSentences(companion, solved),
        ...chartBlocks(context, new RegExp(`^(transit|transits)-${companion.letter}$`)),
      ]),
      ...densityBlocks(photometry),
    ];
  },
};
