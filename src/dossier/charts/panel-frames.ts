/** A frame around every panel, drawn last so that nothing crosses it. */
import type { ChartPlugin } from './chart-drawing.js';
import { FRAME_COLOUR } from './style.js';

/** A plugin that frames the panels of the given y axes. */
export function panelFrames(yAxisIDs: readonly string[]): ChartPlugin {
  return {
    id: 'panelFrames',
    afterDatasetsDraw: (chart) => {
      const { ctx, chartArea } = chart;
      ctx.save();
      ctx.strokeStyle = FRAME_COLOUR;
      ctx.lineWidth = 0.8;
      for (const id of yAxisIDs) {
        const scale = chart.scales[id];
        if (scale !== undefined) ctx.strokeRect(chartArea.left, scale.top, chartArea.width, scale.height);
      }
      ctx.restore();
    },
  };
}
