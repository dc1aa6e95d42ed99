/** When the transits happened: each with a mid-time of its own, and the tables of mid-times. */
import type { PhotometryRecord, TransitEventRecord } from '../../solving/transit-types.js';
import type { Quantity } from '../../solving/types.js';
import { escapeMarkdown, markdownCode } from '../escape.js';
import { fixedPlaces, formatQuantity, significant, typographicMinus } from '../numbers.js';
import { capitalised, counted, listed } from '../titles.js';
import { chartBlocks, markdownTable, type ReportSection } from './section.js';

const MOST_ROWS = 40;
/** |O-C| beyond this many of its errors is named. */
const FAR_SIGMAS = 3;

function bare(quantity: Quantity): string {
  return formatQuantity(quantity, 'markdown', { withUnit: false });
}

function isFar({ oMinusC: { value, sigma } }: TransitEventRecord): boolean {
  return value !== null && sigma !== null && sigma > 0 && Math.abs(value) > FAR_SIGMAS * sigma;
}

function eventBlocks({ events }: PhotometryRecord): string[] {
  if (events.length === 0) return [];
  const shown = events.slice(0, MOST_ROWS);
  const far = events.filter(isFar);
  const farWords = far
    .slice(0, 5)
    .map(
      ({ letter, cycle, table }) => `cycle ${cycle} of ${escapeMarkdown(letter)} in ${escapeMarkdown(table)}`,
    )
    .join(', ');
  return [
    'Each transit in the light curves with a mid-time of its own, the shape kept as in the solution; O−C is against the ephemeris of this solution.',
    markdownTable(
      ['companion', 'cycle', 'light curve', 'points', 'mid-time (d)', 'O−C (min)'],
      shown.map((event) => [
        escapeMarkdown(event.letter),
        String(event.cycle),
        escapeMarkdown(event.table),
        String(event.points),
        bare(event.midTime),
        bare(event.oMinusC),
      ]),
      [1, 3, 4, 5],
    ),
    ...(events.length > shown.length
      ? [`The first ${shown.length} of ${events.length} are listed; solution.json has all of them.`]
      : []),
    ...(far.length === 0
      ? []
      : [
          `${far.length === 1 ? 'One transit lies' : `${far.length} transits lie`} more than ${FAR_SIGMAS} σ from the ephemeris: ${farWords}${far.length > 5 ? ' ...' : ''}.`,
        ]),
  ];
}

function tableBlocks({ midTimes }: PhotometryRecord): string[] {
  if (midTimes.length === 0) return [];
  return [
    `${capitalised(counted(midTimes.length, 'table'))} of mid-times entered the fit; a jitter is added in quadrature to the errors of each.`,
    markdownTable(
      ['table', 'companion', 'mid-times', 'jitter (min)', 'rms of residuals (min)'],
      midTimes.map(({ letter, path, count, jitter, rms }) => [
        markdownCode(path),
        escapeMarkdown(letter),
        String(count),
        formatQuantity(jitter, 'markdown', { withUnit: false, zeroBounded: true }),
        significant(rms, 3),
      ]),
      [2, 3, 4],
    ),
  ];
}

/** What the masses of this solution say of the pull of the companions at each other. */
function pullBlocks({ interaction }: PhotometryRecord): string[] {
  if (interaction === undefined) return [];
  const { letters, nearResonance, superPeriod, predictedAmplitudeMinutes, comparisons } = interaction;
  const shifts = letters.map((letter) => {
    const amplitude = predictedAmplitudeMinutes[letter]!;
    const whole = interaction.superPeriodAmplitudeMinutes[letter];
    return `${escapeMarkdown(letter)} ${formatQuantity(amplitude, 'markdown', { zeroBounded: true })}${whole === undefined ? '' : ` (${significant(whole, 2)} min over a whole super-period; ${significant(interaction.eccentricityLeverMinutes[letter]!, 2)} min more or less for 0.01 in eccentricity)`}`;
  });
  const resonance =
    nearResonance === null || superPeriod === null
      ? 'no two of them are near a resonance of first order'
      : `${listed(nearResonance.letters.map(escapeMarkdown))} are ${significant(Math.abs(100 * nearResonance.distance), 2)} % ${nearResonance.distance > 0 ? 'outside' : 'inside'} the ${nearResonance.ratio} resonance, with a super-period of ${significant(superPeriod, 4)} d`;
  const seen = letters.flatMap((letter) => {
    const comparison = comparisons[letter];
    if (comparison === undefined) return [];
    const { count, chiSquareLine, chiSquare, medianErrorMinutes } = comparison;
    return [
      `the ${count} mid-transits of ${escapeMarkdown(letter)} (usual error ${significant(medianErrorMinutes, 2)} min) have χ² ${fixedPlaces(chiSquareLine, 1)} about a straight line and ${fixedPlaces(chiSquare, 1)} with the predicted variation`,
    ];
  });
  return [
    typographicMinus(
      `This solution has the companions on undisturbed orbits. With its masses and eccentricities the pull of ${listed(letters.map(escapeMarkdown))} at each other should move mid-transits, to either side of an even clock within these data, by: ${shifts.join('; ')}; ${resonance}.`,
    ),
    ...(seen.length === 0 ? [] : [`${capitalised(seen.join('; '))}; errors as stated.`]),
  ];
}

export const midTimes: ReportSection = {
  heading: 'Mid-times',
  blocks: ({ record: { photometry } }, context) => {
    if (photometry === undefined) return [];
    const body = [...eventBlocks(photometry), ...tableBlocks(photometry), ...pullBlocks(photometry)];
    return body.length === 0 ? [] : [...chartBlocks(context, /^mid-times-/), ...body];
  },
};
