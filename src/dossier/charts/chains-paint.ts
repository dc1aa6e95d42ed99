/** Draws the panels of the chart of chains: two quantities a row, each with its trace and its ranks. */
import type { PosteriorDraws } from '../../solving/types.js';
import { paddedRange } from './axes.js';
import { HEADING_PX } from './freehand.js';
import type { Sheet } from './freehand.js';
import type { DrawnQuantity } from './posterior-quantities.js';
import { rankCounts } from './rank-counts.js';
import { drawFrame, drawLeftLabels, inside, yOf } from './small-panel.js';
import type { Box } from './small-panel.js';
import { BAND_COLOUR, FAINT_TEXT_COLOUR, markerStyle, TEXT_COLOUR, TICK_FONT_PX } from './style.js';
import { drawRuns } from './text-runs.js';
import { keepExtremes } from './thin.js';
import { pick, thinnedIndices } from './thin-draws.js';
import { valueAxis } from './value-axis.js';

/** Height of one row. */
export const CELL_PX = 53;
const TITLE_PX = 12;
const PANEL_PX = 35;
const LABELS_PX = 42;
const RANKS_PX = 92;
const GAP_PX = 7;
const BETWEEN_PX = 12;
const RIGHT_PX = 8;
const RANK_BINS = 20;
/** Half of the height of a panel of ranks, unless a chain goes further astray. */
const SHOWN_SIGMA = 5;
/** Points of all traces together: keeps the SVG below 400 kB. */
const TRACE_POINTS = 9000;
const FINEST_PX = 0.5;
/** Ranks need no more draws than this: their scatter is then below a tenth of their mean. */
const MOST_RANKED = 8000;

export function paintChains(sheet: Sheet, quantities: readonly DrawnQuantity[], draws: PosteriorDraws): void {
  const half = (sheet.widthPx - RIGHT_PX - BETWEEN_PX) / 2;
  const traceWidth = half - LABELS_PX - GAP_PX - RANKS_PX;
  const perChain = TRACE_POINTS / (2 * quantities.length * draws.chains);
  const columns = Math.max(12, Math.floor(Math.min(traceWidth / draws.chains / FINEST_PX, perChain)));
  quantities.forEach((quantity, index) => {
    const left = (index % 2) * (half + BETWEEN_PX) + LABELS_PX;
    const top = HEADING_PX + Math.floor(index / 2) * CELL_PX + TITLE_PX;
    const trace = { left, top, width: traceWidth, height: PANEL_PX };
    const ranks = { left: left + traceWidth + GAP_PX, top, width: RANKS_PX, height: PANEL_PX };
    paintTrace(sheet, trace, quantity, draws, columns);
    paintRanks(sheet, ranks, quantity, draws);
    if (index >= quantities.length - 2) {
      write(sheet, 'draws, chain after chain', trace.left + trace.width / 2, top + PANEL_PX + 8);
      write(sheet, 'rank', ranks.left + ranks.width / 2, top + PANEL_PX + 8);
    }
  });
  paintChainKey(sheet, draws.chains);
}

function paintTrace(
  sheet: Sheet,
  box: Box,
  quantity: DrawnQuantity,
  { chains, drawsPerChain }: PosteriorDraws,
  columns: number,
): void {
  const { ctx } = sheet;
  const [lowest, highest] = extremes(quantity.values);
  const { min, max } = paddedRange(lowest, highest, 0.06);
  const axis = valueAxis(quantity.symbol, quantity.unit, min, max, 3, 6);
  const width = box.width / chains;
  const positions = Float64Array.from(
    { length: drawsPerChain },
    (_, draw) => (columns * (draw + 0.5)) / drawsPerChain,
  );
  inside(sheet, box, () => {
    ctx.lineWidth = 0.5;
    ctx.lineJoin = 'round';
    for (let chain = 0; chain < chains; chain += 1) {
      const values = quantity.values.subarray(chain * drawsPerChain, (chain + 1) * drawsPerChain);
      ctx.strokeStyle = chainColour(chain);
      ctx.beginPath();
      for (const draw of keepExtremes(positions, values, columns)) {
        const x = box.left + width * (chain + positions[draw]! / columns);
        ctx.lineTo(x, yOf(box, axis, values[draw]!));
      }
      ctx.stroke();
    }
  });
  drawFrame(sheet, box, null, axis);
  drawLeftLabels(sheet, box, axis);
  drawRuns(ctx, axis.title, box.left, box.top - TITLE_PX / 2, {
    sizePx: 8.8,
    colour: TEXT_COLOUR,
    align: 'left',
  });
}

function paintRanks(
  sheet: Sheet,
  box: Box,
  quantity: DrawnQuantity,
  { chains, drawsPerChain }: PosteriorDraws,
): void {
  const { ctx } = sheet;
  const indices = thinnedIndices(chains, drawsPerChain, MOST_RANKED);
  const perChain = indices.length / chains;
  const counts = rankCounts(pick(quantity.values, indices), chains, perChain, RANK_BINS);
  const mean = perChain / RANK_BINS;
  // Drawing without replacement from all draws: binomial, less the part that the other chains fix.
  const sigma = Math.sqrt(mean * (1 - 1 / RANK_BINS) * (chains > 1 ? 1 - 1 / chains : 1));
  const away = counts.reduce(
    (most, own) => own.reduce((top, count) => Math.max(top, Math.abs(count - mean)), most),
    SHOWN_SIGMA * sigma,
  );
  const ends = { low: Math.max(-0.02 * mean, mean - 1.06 * away), high: mean + 1.06 * away };
  inside(sheet, box, () => {
    const [upper, lower] = [1.96, -1.96].map((away95) => yOf(box, ends, mean + away95 * sigma)) as [
      number,
      number,
    ];
    ctx.fillStyle = BAND_COLOUR;
    ctx.fillRect(box.left, upper, box.width, Math.min(lower, box.top + box.height) - upper);
    ctx.lineWidth = 0.8;
    counts.forEach((own, chain) => {
      ctx.strokeStyle = chainColour(chain);
      ctx.beginPath();
      own.forEach((count, bin) => {
        const y = yOf(box, ends, count);
        ctx.lineTo(box.left + (box.width * bin) / RANK_BINS, y);
        ctx.lineTo(box.left + (box.width * (bin + 1)) / RANK_BINS, y);
      });
      ctx.stroke();
    });
  });
  drawFrame(sheet, box, null, null);
}

function extremes(values: Float64Array): [number, number] {
  let [low, high] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return [low, high];
}

function chainColour(chain: number): string {
  return markerStyle(chain).edge;
}

/** Which colour is which chain, at the right of the heading. */
function paintChainKey(sheet: Sheet, chains: number): void {
  const { ctx } = sheet;
  const listed = Math.min(chains, 8);
  const step = 30;
  let x = sheet.widthPx - RIGHT_PX - listed * step;
  const y = HEADING_PX / 2;
  drawRuns(ctx, [{ text: 'chain' }], x - 6, y, { sizePx: TICK_FONT_PX, colour: TEXT_COLOUR, align: 'right' });
  for (let chain = 0; chain < listed; chain += 1) {
    ctx.strokeStyle = chainColour(chain);
    ctx.lineWidth = 1.6;
    ctx.beginPath();
    ctx.moveTo(x, y);
    ctx.lineTo(x + 12, y);
    ctx.stroke();
    drawRuns(ctx, [{ text: String(chain + 1) }], x + 15, y, {
      sizePx: TICK_FONT_PX,
      colour: TEXT_COLOUR,
      align: 'left',
    });
    x += step;
  }
}

function write({ ctx }: Sheet, text: string, x: number, y: number): void {
  drawRuns(ctx, [{ text }], x, y, { sizePx: 8.2, colour: FAINT_TEXT_COLOUR, align: 'center' });
}
