/** Conventions, assumptions and warnings: what a reader must know before citing a number. */
import type { SolutionRecord } from '../../solving/types.js';
import { escapeMarkdown } from '../escape.js';
import { hasVelocities } from '../observed.js';
import type { ReportSection } from './section.js';

const SIGN_OF_VELOCITIES = 'Velocities are positive when the star recedes from us.';
const NOISE_OF_VELOCITIES =
  'The likelihood of a velocity is Gaussian, with the square of its error plus the square of the jitter of its instrument as variance.';

const OF_LIGHT: readonly string[] = [
  'Light curves are relative to the star out of transit; depths are losses of that light, 1 ppm a millionth of it.',
  'The impact parameter is the distance of the two centres on the sky in mid-transit, in stellar radii.',
  'The likelihood of a flux is Gaussian about baseline times transit, with the square of its error plus the square of the jitter of its table as variance.',
];

const CONVENTIONS: readonly string[] = [
  "The argument of periastron is that of the star's orbit about the barycentre; that of the companion's orbit differs by 180°.",
  'At inferior conjunction the companion stands between the star and us, where a transit would be seen; the true anomaly is then 90° minus the argument of periastron.',
  'Periastron passage and inferior conjunction are given for the passage nearest to the weighted mean time of the data.',
  'Masses follow from the exact equation of two bodies, whatever their ratio. Constants are the nominal values of IAU 2015 Resolution B3; the astronomical unit is that of IAU 2012 Resolution B2.',
];

function bullets(items: readonly string[]): string {
  return items.map((item) => `- ${item}`).join('\n');
}

/** What the solver assumed, and the priors where they count. */
function stated({ assumptions: sentences, posterior }: SolutionRecord): string[] {
  const all = [...sentences, ...(posterior?.priors ?? [])];
  return all.length === 0 ? [] : [bullets(all.map(escapeMarkdown))];
}

export const assumptions: ReportSection = {
  heading: 'What these numbers assume',
  blocks: (solved) => {
    const { record } = solved;
    const velocities = hasVelocities(solved);
    return [
      ...(record.warnings.length === 0
        ? []
        : [
            '**Keep in mind:**',
            bullets(record.warnings.map((warning) => `**${escapeMarkdown(warning.message)}**`)),
          ]),
      ...stated(record),
      'Conventions:',
      bullets([
        `Times are full Julian dates; the time scale is ${record.timeScale === 'unknown' ? 'not known' : record.timeScale}.`,
        ...(velocities ? [SIGN_OF_VELOCITIES] : []),
        ...CONVENTIONS,
        ...(velocities ? [NOISE_OF_VELOCITIES] : []),
        ...((record.photometry?.lightCurves.length ?? 0) > 0 ? OF_LIGHT : []),
        ...(velocities
          ? [
              `Slope and curvature of a drift refer to ${record.epoch.toFixed(4)}: velocity = slope · (t − epoch) + ½ · curvature · (t − epoch)².`,
            ]
          : []),
      ]),
    ];
  },
};
