/** Posterior of the elements of a companion, two by two. */
import type { Solved } from '../../solving/types.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { CONTOUR_SHARES } from './density-map.js';
import { freehand } from './freehand.js';
import { cleanLabel, fileLetter, fixedText } from './labels.js';
import { pairsLayout } from './pairs-layout.js';
import { paintPairs, preparePairs } from './pairs-paint.js';
import type { PreparedPairs } from './pairs-paint.js';
import { drawCount, FEWEST_DRAWS, headingName } from './posterior-look.js';
import { companionQuantities } from './posterior-quantities.js';

const ECCENTRIC = ['period', 'semiAmplitude', 'eccentricity', 'argumentOfPeriastron', 'timeOfPeriastron', 'minimumMass']; // prettier-ignore
const CIRCULAR = ['period', 'semiAmplitude', 'timeOfInferiorConjunction', 'minimumMass'];

/** One chart per companion with at least two free elements; none without a posterior. */
export function pairsCharts(solved: Solved): ChartDrawing[] {
  if (drawCount(solved) < FEWEST_DRAWS) return [];
  return solved.record.companions.flatMap((_, companion) => {
    const drawing = pairsChart(solved, companion);
    return drawing === null ? [] : [drawing];
  });
}

/** Posterior of the companion with this index; `null` when fewer than two of its elements have draws. */
export function pairsChart(solved: Solved, companion: number): ChartDrawing | null {
  const { record } = solved;
  const own = record.companions[companion]!;
  const quantities = companionQuantities(solved, companion, own.circular ? CIRCULAR : ECCENTRIC, false);
  if (quantities.length < 2) return null;
  let prepared: PreparedPairs | null = null;
  const layout = pairsLayout(quantities.length);
  const letter = cleanLabel(own.letter, 8);
  const epochs = own.circular ? 'inferior conjunction (T conj)' : 'periastron passage (T peri)';
  const [inner, outer] = CONTOUR_SHARES.map((share) => `${fixedText(100 * share, 1)} %`) as [string, string];
  return {
    name: `pairs-${fileLetter(own.letter, companion)}`,
    widthMm: TWO_COLUMNS_MM,
    heightMm: layout.heightMm,
    title: `Posterior of companion ${letter} of ${cleanLabel(record.target, 80)}`,
    caption: [
      `Posterior of the elements of companion ${letter}, two by two.`,
      `Contours hold ${inner} and ${outer} of the draws (one and two standard deviations of a Gaussian in two dimensions); dots: some of the draws outside.`,
      'On the diagonal: histograms, the central 68.3 % dark, the median as a black line.',
      'Orange lines and crosses: the reported value.',
      `Epochs of ${epochs} are BJD TDB.`,
    ].join(' '),
    configure: () =>
      freehand(`${headingName(solved, companion)}posterior`, (sheet) => {
        prepared ??= preparePairs(quantities, solved.posterior!);
        paintPairs(sheet, layout, prepared);
      }),
  };
}
