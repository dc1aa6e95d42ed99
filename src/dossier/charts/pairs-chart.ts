/** Posterior of the elements of a companion, two by two. */
import type { Solved } from '../../solving/types.js';
import { hasVelocities } from '../observed.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { CONTOUR_SHARES } from './density-map.js';
import { freehand } from './freehand.js';
import { cleanLabel, fileLetter, fixedText } from './labels.js';
import { pairsLayout } from './pairs-layout.js';
import { paintPairs, preparePairs } from './pairs-paint.js';
import type { PreparedPairs } from './pairs-paint.js';
import { drawCount, FEWEST_DRAWS, headingName } from './posterior-look.js';
import { companionQuantities, limbDarkeningQuantities } from './posterior-quantities.js';
import type { DrawnQuantity } from './posterior-quantities.js';

const ECCENTRIC = ['period', 'semiAmplitude', 'eccentricity', 'argumentOfPeriastron', 'timeOfPeriastron', 'minimumMass']; // prettier-ignore
const CIRCULAR = ['period', 'semiAmplitude', 'timeOfInferiorConjunction', 'minimumMass'];
const WITHOUT_VELOCITIES = [
  'period',
  'timeOfInferiorConjunction',
  'eccentricity',
  'argumentOfPeriastron',
  'radius',
];

const OF_TRANSIT = ['radiusRatio', 'impactParameter', 'scaledSemiMajorAxis'];

/** One chart per companion with at least two free elements; none without a posterior. */
export function pairsCharts(solved: Solved): ChartDrawing[] {
  if (drawCount(solved) < FEWEST_DRAWS) return [];
  return solved.record.companions.flatMap((_, companion) => {
    const drawings = [pairsChart(solved, companion), shapePairsChart(solved, companion)];
    return drawings.filter((drawing) => drawing !== null);
  });
}

/** Posterior of the companion with this index; `null` when fewer than two of its elements have draws. */
export function pairsChart(solved: Solved, companion: number): ChartDrawing | null {
  const own = solved.record.companions[companion]!;
  const light = !hasVelocities(solved);
  const quantities = companionQuantities(
    solved,
    companion,
    light ? WITHOUT_VELOCITIES : own.circular ? CIRCULAR : ECCENTRIC,
    false,
  );
  const epochs = own.circular || light ? 'inferior conjunction (T conj)' : 'periastron passage (T peri)';
  return pairs(solved, companion, quantities, {
    name: 'pairs',
    what: 'elements',
    closing: `Epochs of ${epochs} are BJD TDB.`,
  });
}

/** What shapes the transits of the companion with this index, limb darkening included; `null` where no light curve shows them. */
export function shapePairsChart(solved: Solved, companion: number): ChartDrawing | null {
  const own = solved.record.companions[companion]!;
  if (own.elements.radiusRatio === undefined) return null;
  const band = solved.record.photometry?.bands[0]?.name ?? null;
  const quantities = [
    ...companionQuantities(solved, companion, OF_TRANSIT, false),
    ...(band === null ? [] : limbDarkeningQuantities(solved, band)),
  ];
  return pairs(solved, companion, quantities, {
    name: 'shape',
    what: 'elements of the transits',
    closing: `k: radius ratio; b: impact parameter; a/R★: semi-major axis in stellar radii; u1, u2: limb darkening${band === null ? '' : ` in the band ${cleanLabel(band, 24)}`}.`,
  });
}

function pairs(
  solved: Solved,
  companion: number,
  quantities: readonly DrawnQuantity[],
  words: { readonly name: string; readonly what: string; readonly closing: string },
): ChartDrawing | null {
  if (quantities.length < 2) return null;
  const { record } = solved;
  const own = record.companions[companion]!;
  let prepared: PreparedPairs | null = null;
  const layout = pairsLayout(quantities.length);
  const letter = cleanLabel(own.letter, 8);
  const [inner, outer] = CONTOUR_SHARES.map((share) => `${fixedText(100 * share, 1)} %`) as [string, string];
  return {
    name: `${words.name}-${fileLetter(own.letter, companion)}`,
    widthMm: TWO_COLUMNS_MM,
    heightMm: layout.heightMm,
    title: `Posterior of companion ${letter} of ${cleanLabel(record.target, 80)}`,
    caption: [
      `Posterior of the ${words.what} of companion ${letter}, two by two.`,
      `Contours hold ${inner} and ${outer} of the draws (one and two standard deviations of a Gaussian in two dimensions); dots: some of the draws outside.`,
      'On the diagonal: histograms, the central 68.3 % dark, the median as a black line.',
      'Orange lines and crosses: the reported value.',
      words.closing,
    ].join(' '),
    configure: () =>
      freehand(`${headingName(solved, companion)}posterior`, (sheet) => {
        prepared ??= preparePairs(quantities, solved.posterior!);
        paintPairs(sheet, layout, prepared);
      }),
  };
}
