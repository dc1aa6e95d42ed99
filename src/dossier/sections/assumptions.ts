/** Conventions, assumptions and warnings: what a reader must know before citing a number. */
import type { SolutionRecord } from '../../solving/types.js';
import { escapeMarkdown } from '../escape.js';
import type { ReportSection } from './section.js';

const CONVENTIONS: readonly string[] = [
  'Velocities are positive when the star recedes from us.',
  "The argument of periastron is that of the star's orbit about the barycentre; that of the companion's orbit differs by 180°.",
  'At inferior conjunction the companion stands between the star and us, where a transit would be seen; the true anomaly is then 90° minus the argument of periastron.',
  'Periastron passage and inferior conjunction are given for the passage nearest to the weighted mean time of the data.',
  'Masses follow from the exact equation of two bodies, whatever their ratio. Constants are the nominal values of IAU 2015 Resolution B3; the astronomical unit is that of IAU 2012 Resolution B2.',
  'The likelihood of a velocity is Gaussian, with the square of its error plus the square of the jitter of its instrument as variance.',
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
  blocks: ({ record }) => [
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
      ...CONVENTIONS,
      `Slope and curvature of a drift refer to ${record.epoch.toFixed(4)}: velocity = slope · (t − epoch) + ½ · curvature · (t − epoch)².`,
    ]),
  ],
};
