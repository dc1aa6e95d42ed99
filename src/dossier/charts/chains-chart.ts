/** Diagnosis of the sampling: trace and ranks of every fitted quantity, chain by chain. */
import type { Solved } from '../../solving/types.js';
import { CSS_PX_PER_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { CELL_PX, paintChains } from './chains-paint.js';
import { freehand, HEADING_PX } from './freehand.js';
import { cleanLabel } from './labels.js';
import { drawCount, headingName } from './posterior-look.js';
import { fittedQuantities } from './posterior-quantities.js';

const FEWEST_DRAWS_PER_CHAIN = 20;
/** More rows than fit on a page help nobody; the quantities of the companions come first. */
const MOST_QUANTITIES = 40;
const FOOT_PX = 16;

/** The chart as a list of one, or of none without a posterior or with too few draws to judge. */
export function chainsCharts(solved: Solved): ChartDrawing[] {
  const { posterior, record } = solved;
  if (posterior === null || drawCount(solved) < FEWEST_DRAWS_PER_CHAIN * posterior.chains) return [];
  const all = fittedQuantities(solved);
  const quantities = all.slice(0, MOST_QUANTITIES);
  if (quantities.length === 0) return [];
  const rows = Math.ceil(quantities.length / 2);
  const left = all.length - quantities.length;
  return [
    {
      name: 'chains',
      widthMm: TWO_COLUMNS_MM,
      heightMm: (HEADING_PX + rows * CELL_PX + FOOT_PX) / CSS_PX_PER_MM,
      title: `Chains of the posterior of ${cleanLabel(record.target, 80)}`,
      caption: [
        `Chains of the posterior: ${posterior.chains} chains of ${posterior.drawsPerChain} draws after warm-up.`,
        'Left of each pair: draws in their order, chain after chain (thinned, extremes kept); chains that have converged look alike and show no drift.',
        'Right: how many draws of each chain fall in each twentieth of the ranks of all draws (Vehtari et al. 2021).',
        'Level lines mean that all chains sample the same distribution; the grey band is what 95 % of independent draws would show, and correlated draws scatter more.',
        left > 0 ? `${left} more quantities are not shown.` : '',
      ]
        .filter((sentence) => sentence !== '')
        .join(' '),
      configure: () =>
        freehand(`${headingName(solved)}chains of the posterior`, (sheet) => {
          paintChains(sheet, quantities, posterior);
        }),
    },
  ];
}
