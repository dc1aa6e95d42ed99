/** Marks peaks with a small triangle and a text above it; a text that would cover an earlier one is left out. */
import type { ChartPlugin } from './chart-drawing.js';
import { FAINT_TEXT_COLOUR, FONT_FAMILY, TEXT_COLOUR } from './style.js';

export interface PeakMark {
  readonly x: number;
  readonly y: number;
  readonly text: string;
  /** The one that matters most is written in bold. */
  readonly strong: boolean;
}

const FONT_PX = 8.6;

interface Box {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

/** A place for a text above a peak, clear of earlier texts and of the flanks of higher peaks; null if there is none. */
function place(
  px: number,
  py: number,
  width: number,
  area: { readonly left: number; readonly right: number },
  taken: readonly Box[],
  lines: readonly { readonly x: number; readonly top: number }[],
): Box | null {
  // Centred, or moved sideways as long as the text still touches its triangle.
  for (const shift of [0, -0.25, 0.25, -0.51, 0.51]) {
    const centre = Math.min(Math.max(px + shift * width, area.left + width / 2), area.right - width / 2);
    const box = { left: centre - width / 2, right: centre + width / 2, top: py - FONT_PX - 6, bottom: py };
    const free =
      taken.every(
        (other) =>
          box.right < other.left ||
          box.left > other.right ||
          box.bottom < other.top ||
          box.top > other.bottom,
      ) && lines.every(({ x, top }) => x < box.left || x > box.right || top > box.bottom);
    if (free) return box;
  }
  return null;
}

/**
 * A plugin that marks the peaks of one panel.
 *
 * @param marks - in order of importance
 * @param walls - places on the x axis of upright lines that no text may cross
 */
export function peakMarks(
  yAxisID: string,
  marks: readonly PeakMark[],
  walls: readonly number[] = [],
): ChartPlugin {
  return {
    id: `peakMarks ${yAxisID}`,
    afterDatasetsDraw: (chart) => {
      const { ctx, chartArea } = chart;
      const xAxis = chart.scales['x'];
      const yAxis = chart.scales[yAxisID];
      if (xAxis === undefined || yAxis === undefined) return;
      const taken: Box[] = [];
      const lines = walls.map((x) => ({ x: xAxis.getPixelForValue(x), top: yAxis.top }));
      ctx.save();
      ctx.textAlign = 'center';
      ctx.textBaseline = 'bottom';
      for (const { x, y, text, strong } of marks) {
        const px = xAxis.getPixelForValue(x);
        if (!(px >= chartArea.left && px <= chartArea.right)) continue;
        const py = Math.max(yAxis.getPixelForValue(y) - 2, yAxis.top + FONT_PX + 8);
        ctx.font = `${strong ? 'bold ' : ''}${FONT_PX}px ${FONT_FAMILY}`;
        const width = ctx.measureText(text).width + 4;
        const box = place(px, py, width, chartArea, taken, lines);
        lines.push({ x: px, top: py });
        if (box === null) continue;
        taken.push(box);
        ctx.fillStyle = strong ? TEXT_COLOUR : FAINT_TEXT_COLOUR;
        ctx.beginPath();
        ctx.moveTo(px, py);
        ctx.lineTo(px - 2.5, py - 4.5);
        ctx.lineTo(px + 2.5, py - 4.5);
        ctx.closePath();
        ctx.fill();
        ctx.fillText(text, (box.left + box.right) / 2, py - 5);
      }
      ctx.restore();
    },
  };
}
