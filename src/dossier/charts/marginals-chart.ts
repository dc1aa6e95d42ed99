/** Posterior densities of what people ask for first, of all companions: period, eccentricity, minimum mass. */
import type { Solved } from '../../solving/types.js';
import { hasVelocities } from '../observed.js';
import { CSS_PX_PER_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { freehand, HEADING_PX } from './freehand.js';
import { cleanLabel } from './labels.js';
import { paintMarginals, ROW_PX } from './marginals-paint.js';
import type { MarginalRow } from './marginals-paint.js';
import { drawCount, FEWEST_DRAWS, headingName } from './posterior-look.js';
import { companionQuantities } from './posterior-quantities.js';

/** The chart as a list of one, or of none without companions or a posterior. */
export function marginalsCharts(solved: Solved): ChartDrawing[] {
  const { record, posterior } = solved;
  if (posterior === null || drawCount(solved) < FEWEST_DRAWS || record.companions.length === 0) return [];
  const light = !hasVelocities(solved);
  const third = (
    one: (key: string) => MarginalRow['quantities'][number],
  ): MarginalRow['quantities'][number] =>
    light
      ? (one('radius') ?? one('radiusRatio'))
      : (one('minimumMass') ?? one('mass') ?? one('semiAmplitude'));
  const rows = record.companions.map((companion, index): MarginalRow => {
    const one = (key: string): MarginalRow['quantities'][number] =>
      companionQuantities(solved, index, [key], true)[0] ?? null;
    return {
      quantities: [one('period'), one('eccentricity'), third(one)],
      absent: [
        'period not sampled',
        companion.circular ? 'circular orbit: e = 0' : 'eccentricity not sampled',
        hasVelocities(solved) ? 'mass not sampled' : 'radius not sampled',
      ],
    };
  });
  return [
    {
      name: 'marginals',
      widthMm: TWO_COLUMNS_MM,
      heightMm: (HEADING_PX + rows.length * ROW_PX + 2) / CSS_PX_PER_MM,
      title: `Posterior densities of the companions of ${cleanLabel(record.target, 80)}`,
      caption: [
        light
          ? 'Posterior densities of period, eccentricity and radius (radius ratio where the radius of the star is not known), one row per companion.'
          : 'Posterior densities of period, eccentricity and minimum mass (semi-amplitude where the mass of the star is not known), one row per companion.',
        'Dark and light: central 68.3 % and 95.4 %; black line: median; orange line: reported value.',
        'Kernel densities, reflected at the bounds of each quantity.',
      ].join(' '),
      configure: () =>
        freehand(`${headingName(solved)}posterior`, (sheet) => {
          paintMarginals(sheet, rows, posterior);
        }),
    },
  ];
}
