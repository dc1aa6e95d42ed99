/** Each light curve with its baseline and its noise, and the limb darkening of each band. */
import type { BandRecord, LightCurveRecord, PhotometryRecord } from '../../solving/transit-types.js';
import type { PosteriorDraws, Quantity, Solved } from '../../solving/types.js';
import { drawnBoundOf, keyOf } from '../draws.js';
import { escapeMarkdown } from '../escape.js';
import { formatQuantity, significant } from '../numbers.js';
import { listed } from '../titles.js';
import { markdownTable, type ReportSection } from './section.js';

const SECONDS_PER_DAY = 86_400;

function jitterText(name: string, jitter: Quantity, posterior: PosteriorDraws | null): string {
  return formatQuantity(jitter, 'markdown', {
    withUnit: false,
    zeroBounded: true,
    drawn: drawnBoundOf(posterior, keyOf.lightCurveJitter(name)),
  });
}

function noiseTable({ lightCurves }: PhotometryRecord, posterior: PosteriorDraws | null): string {
  return markdownTable(
    [
      'light curve',
      'band',
      'points in the fit',
      'rows',
      'exposure (s)',
      'jitter (ppm)',
      'rms of residuals (ppm)',
    ],
    lightCurves.map((one) => [
      escapeMarkdown(one.name),
      escapeMarkdown(one.band),
      String(one.count),
      String(one.rows),
      one.exposure > 0 ? significant(SECONDS_PER_DAY * one.exposure, 4) : 'taken as 0',
      jitterText(one.name, one.jitter, posterior),
      significant(one.rms, 3),
    ]),
    [2, 3, 4, 5, 6],
  );
}

/** Which points, which baseline, which correlated noise, how much foreign light: one sentence or two for each table. */
function tableItem(one: LightCurveRecord): string {
  const terms = listed(one.baseline.map(escapeMarkdown));
  const baseline =
    one.baseline.length === 0
      ? 'It has no baseline of its own.'
      : `Its baseline is made of ${terms}${one.perEvent ? ', for each transit anew' : ''}, fitted together with everything else.`;
  const noise =
    one.correlatedNoise === null
      ? ''
      : ` Correlated noise: ${formatQuantity(one.correlatedNoise.amplitude, 'markdown')} with a time scale of ${formatQuantity(one.correlatedNoise.timescale, 'markdown')}.`;
  const { dilution } = one;
  const foreign =
    dilution.value === null || (dilution.value === 0 && dilution.fixed === true)
      ? ''
      : ` Share of foreign light: ${formatQuantity(dilution, 'markdown')}.`;
  const averaged =
    one.averaged > 1 ? ` Each point of the fit is the mean of ${one.averaged} neighbouring rows.` : '';
  return `- **${escapeMarkdown(one.name)}**: ${escapeMarkdown(one.selection)}${averaged} ${baseline}${noise}${foreign}`;
}

/** Light of the companion itself, where its occultations are part of the model. */
function occultationSentences(bands: readonly BandRecord[]): string[] {
  const depths = bands.flatMap(({ name, occultationDepths }) =>
    Object.entries(occultationDepths ?? {}).map(
      ([letter, depth]) =>
        `${formatQuantity(depth, 'markdown')} by ${escapeMarkdown(letter)} in the band ${escapeMarkdown(name)}`,
    ),
  );
  return depths.length === 0 ? [] : [`Light lost in occultations: ${listed(depths)}.`];
}

function bandsTable({ bands }: PhotometryRecord): string[] {
  if (bands.length === 0) return [];
  const anyTriangular = bands.some(({ prior }) => prior === 'triangular');
  const anyStated = bands.some(({ prior }) => prior === 'stated');
  return [
    'Limb darkening is quadratic, one pair of coefficients for each band. ' +
      [
        anyTriangular ? 'Triangular: all physical pairs are equally probable beforehand (Kipping 2013).' : '',
        anyStated ? 'Stated: the case gives values.' : '',
      ]
        .filter((sentence) => sentence !== '')
        .join(' '),
    markdownTable(
      ['band', 'u1', 'u2', 'prior'],
      bands.map(({ name, u1, u2, prior }) => [
        escapeMarkdown(name),
        formatQuantity(u1, 'markdown'),
        formatQuantity(u2, 'markdown'),
        prior,
      ]),
      [1, 2],
    ),
    ...occultationSentences(bands),
  ];
}

export const lightCurves: ReportSection = {
  heading: 'Light curves, baselines and noise',
  blocks: ({ record: { photometry }, posterior }: Solved) => {
    if (photometry === undefined || photometry.lightCurves.length === 0) return [];
    return [
      'Each light curve has a baseline and a jitter of its own, the latter added in quadrature to its errors.',
      noiseTable(photometry, posterior),
      photometry.lightCurves.map(tableItem).join('\n'),
      ...bandsTable(photometry),
    ];
  },
};
