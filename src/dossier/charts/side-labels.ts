/** Labels at the right of a panel, outside its frame, moved apart where they would overlap. */
import type { ChartPlugin } from './chart-drawing.js';
import { FONT_FAMILY, TEXT_COLOUR } from './style.js';

export interface SideLabel {
  readonly value: number;
  readonly text: string;
}

const FONT_PX = 8.4;
const LINE_PX = 9.5;

/**
 * Heights at which labels of one line each do not overlap: of all such, those with the least sum of squared shifts
 * (isotonic regression by pooling neighbours that clash), then moved inside the limits.
 *
 * @param wanted - (n), ascending
 * @param apart - least distance
 * @param low - none lies below
 * @param high - none lies above, unless there is no room for all
 */
export function spread(wanted: readonly number[], apart: number, low: number, high: number): number[] {
  const pools: { sum: number; count: number }[] = [];
  wanted.forEach((value, index) => {
    let pool = { sum: value - index * apart, count: 1 };
    for (let last = pools.at(-1); last !== undefined; last = pools.at(-1)) {
      if (last.sum / last.count <= pool.sum / pool.count) break;
      pools.pop();
      pool = { sum: pool.sum + last.sum, count: pool.count + last.count };
    }
    pools.push(pool);
  });
  const placed = pools
    .flatMap(({ sum, count }) => new Array<number>(count).fill(sum / count))
    .map((value, index) => value + index * apart);
  const n = placed.length;
  return placed
    .map((value, index) => Math.min(value, high - (n - 1 - index) * apart))
    .map((value, index) => Math.max(value, low + index * apart));
}

/** A plugin that writes the labels beside the panel of one y axis. */
export function sideLabels(yAxisID: string, labels: readonly SideLabel[]): ChartPlugin {
  return {
    id: 'sideLabels',
    afterDraw: (chart) => {
      const scale = chart.scales[yAxisID];
      if (scale === undefined) return;
      const inside = labels
        .map(({ value, text }) => ({ text, y: scale.getPixelForValue(value) }))
        .filter(({ y }) => y >= scale.top && y <= scale.bottom)
        .sort((one, other) => one.y - other.y);
      const heights = spread(
        inside.map(({ y }) => y),
        LINE_PX,
        scale.top + LINE_PX / 2,
        scale.bottom - LINE_PX / 2,
      );
      const { ctx } = chart;
      ctx.save();
      ctx.font = `${FONT_PX}px ${FONT_FAMILY}`;
      ctx.fillStyle = TEXT_COLOUR;
      ctx.textAlign = 'left';
      ctx.textBaseline = 'middle';
      inside.forEach(({ text }, index) => {
        ctx.fillText(text, chart.chartArea.right + 5, heights[index]!);
      });
      ctx.restore();
    },
  };
}
