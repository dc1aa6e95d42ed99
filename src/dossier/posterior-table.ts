/** `posterior.csv`: the draws of the posterior, one a row, at full precision. */
import type { PosteriorDraws } from '../solving/types.js';
import { csvLines, csvText } from './escape.js';
import { machineNumber } from './numbers.js';

/** A table larger than this is a burden to mail and to open; it is thinned. */
const LARGEST_BYTES = 8_000_000;
const MOST_ROWS_THINNED = 20_000;
/** A double at full precision with its comma. */
const BYTES_PER_NUMBER = 19;

/** How many draws stand for one row: 1 when every draw is written, else the step of the thinning within each chain. */
export function thinningOf({ chains, drawsPerChain, columns }: PosteriorDraws): number {
  const rows = chains * drawsPerChain;
  if (rows * (columns.length + 2) * BYTES_PER_NUMBER <= LARGEST_BYTES) return 1;
  const rowsPerChain = Math.max(1, Math.floor(MOST_ROWS_THINNED / chains));
  return Math.max(1, Math.ceil(drawsPerChain / rowsPerChain));
}

/**
 * Columns: `chain`, `draw` (both from 1; the number of the draw within its chain after warm-up, also when thinned),
 * `log_density` (ln of the posterior density in the coordinates of the sampler, up to a constant), then one column per
 * free quantity, named by its path in `solution.json` and in the unit that it has there. Angles run on past 0° and 360°.
 */
export function posteriorTable(draws: PosteriorDraws): string {
  const { chains, drawsPerChain, columns, logDensity } = draws;
  const step = thinningOf(draws);
  const rows: string[][] = [
    ['chain', 'draw', 'log_density', ...columns.map((column) => csvText(column.key))],
  ];
  for (let chain = 0; chain < chains; chain += 1)
    for (let draw = 0; draw < drawsPerChain; draw += step) {
      const at = chain * drawsPerChain + draw;
      rows.push([
        String(chain + 1),
        String(draw + 1),
        machineNumber(logDensity[at]!),
        ...columns.map((column) => machineNumber(column.values[at]!)),
      ]);
    }
  return csvLines(rows);
}
