/** How the transits were found, and what else the search looked at: other periods, odd against even, the opposite phase. */
import type {
  DetectionRecord,
  DipSpectrum,
  DipVetting,
  PhotometryRecord,
} from '../../solving/transit-types.js';
import type { Quantity } from '../../solving/types.js';
import { escapeMarkdown } from '../escape.js';
import { formatProbability, formatQuantity, significant } from '../numbers.js';
import { counted } from '../titles.js';
import { chartBlocks, markdownTable, type ReportSection } from './section.js';

const MOST_PEAKS = 6;
const MOST_REFUSED = 8;
/** Where an ephemeris came from before the fit. */
const ORIGINS: Readonly<Record<DetectionRecord['how'], string>> = {
  search: 'found by the search for dips',
  'mid-times': 'period and epoch from the mid-times',
  case: 'period and epoch from the case',
  velocities: 'period and epoch from the velocities',
  'one event': 'seen in one event only, so that the light does not give its period',
};
/** Beyond this odd and even depths are said to differ, and a dip at another phase to be there. */
const FIRM_SIGMAS = 3;

function ppm(value: number, sigma: number): Quantity {
  return { value, sigma, lower: value - sigma, upper: value + sigma, unit: 'ppm' };
}

function stageRows(spectrum: DipSpectrum): string[][] {
  return [...spectrum.peaks]
    .sort((one, other) => other.efficiency - one.efficiency)
    .slice(0, MOST_PEAKS)
    .map((peak, rank) => [
      rank === 0 ? escapeMarkdown(spectrum.title) : '',
      significant(peak.periodDays, 7),
      significant(peak.efficiency, 3),
      escapeMarkdown(peak.kind),
    ]);
}

function vettingItem(one: DipVetting): string {
  const odd = formatQuantity(ppm(one.oddDepthPpm, one.oddDepthSigmaPpm), 'markdown');
  const even = formatQuantity(ppm(one.evenDepthPpm, one.evenDepthSigmaPpm), 'markdown');
  const spread = Math.hypot(one.oddDepthSigmaPpm, one.evenDepthSigmaPpm);
  const apart = spread > 0 ? Math.abs(one.oddDepthPpm - one.evenDepthPpm) / spread : 0;
  const parity =
    apart > FIRM_SIGMAS
      ? `**Every second transit of ${one.letter} has another depth** (${odd} against ${even}, ${significant(apart, 2)} σ): this may be a pair of stars that eclipse one another, with twice the period.`
      : `Every second transit of ${one.letter} has the same depth as the others (${odd} against ${even}, ${significant(apart, 2)} σ).`;
  const { secondary } = one;
  if (secondary === null) return `${parity} No secondary dip was looked for.`;
  const strength = secondary.sigmaPpm > 0 ? secondary.depthPpm / secondary.sigmaPpm : 0;
  const size = formatQuantity(ppm(secondary.depthPpm, secondary.sigmaPpm), 'markdown');
  return strength > FIRM_SIGMAS
    ? `${parity} **There is a second dip at phase ${significant(secondary.phase, 3)}**, ${size} deep: an occultation, or the eclipse of a star that shines by itself.`
    : `${parity} No second dip: the strongest at any other phase is ${size} at ${significant(secondary.phase, 3)}.`;
}

/** Where each ephemeris came from, and how far the dips stand out. */
function detectionItem(one: DetectionRecord): string {
  const { signalToNoise, efficiency, falseAlarmProbability } = one;
  const numbers = [
    ...(signalToNoise === null ? [] : [`signal-to-noise ratio ${significant(signalToNoise, 3)}`]),
    ...(efficiency === null ? [] : [`efficiency ${significant(efficiency, 3)}`]),
    ...(falseAlarmProbability === null
      ? []
      : [`false-alarm probability ${formatProbability(falseAlarmProbability, 'markdown')}`]),
  ];
  const strength = numbers.length === 0 ? '' : `; ${numbers.join(', ')}`;
  const events = one.events === 0 ? 'no transit with data' : `${counted(one.events, 'transit')} with data`;
  return `Companion ${escapeMarkdown(one.letter)}: ${ORIGINS[one.how]}, ${events}${strength}.`;
}

/** Dips that were not taken, the reason with each. */
function refusedBlocks(refused: PhotometryRecord['refused']): string[] {
  if (refused.length === 0) return [];
  const items = refused.slice(0, MOST_REFUSED).map(({ period, depth, why }) => {
    const when = period === null ? 'a dip that does not return' : `dips every ${significant(period, 6)} d`;
    return `- ${when}, ${significant(depth, 3)} ppm deep: ${escapeMarkdown(why)}`;
  });
  return [
    'Looked at and not taken:',
    items.join('\n'),
    ...(refused.length > MOST_REFUSED
      ? [`And ${refused.length - MOST_REFUSED} more, which solution.json lists.`]
      : []),
  ];
}

export const dipSearch: ReportSection = {
  heading: 'How the transits were found',
  blocks: ({ photometry, record }, context) => {
    if (photometry === undefined) return [];
    const found = (record.photometry?.detections ?? []).map(detectionItem);
    const refused = refusedBlocks(record.photometry?.refused ?? []);
    if (photometry.spectra.length + photometry.vettings.length + found.length + refused.length === 0)
      return [];
    const rows = photometry.spectra.flatMap(stageRows);
    return [
      ...(found.length === 0 ? [] : [found.map((item) => `- ${item}`).join('\n')]),
      ...(rows.length === 0
        ? []
        : [
            'Box-shaped dips were sought over period, phase and duration (Kovács et al. 2002) after slow trends had been removed, and again with the dips found so far masked. The efficiency is by how many standard deviations of the spectrum a peak stands out.',
            markdownTable(['search', 'period (d)', 'efficiency', 'what it is'], rows, [1, 2]),
          ]),
      ...(photometry.vettings.length === 0
        ? []
        : [photometry.vettings.map((one) => `- ${vettingItem(one)}`).join('\n')]),
      ...refused,
      ...chartBlocks(context, /^(dips|odd-even)-/),
    ];
  },
};
