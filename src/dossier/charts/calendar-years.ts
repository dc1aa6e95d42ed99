/** Calendar years along the top of a panel whose axis counts something else. */
import type { ChartPlugin } from './chart-drawing.js';
import { FONT_FAMILY, FRAME_COLOUR, TEXT_COLOUR } from './style.js';

const FONT_PX = 8.4;
const TICK_PX = 4;
/** Julian date of 2000 January 1, 0 h; a Julian year for one of the calendar is wrong by less than a day within the century. */
const START_OF_2000 = 2451544.5;
const DAYS_PER_YEAR = 365.25;

export interface YearsRequest {
  readonly scaleID: string;
  readonly yAxisID: string;
  /** Full Julian date at a value of the axis; rises with it. */
  readonly timeOf: (value: number) => number;
}

/** A plugin that marks beginnings of years inside the upper edge, every 1, 2, 5, 10 ... of them; none for spans below two years. */
export function calendarYears({ scaleID, yAxisID, timeOf }: YearsRequest): ChartPlugin {
  return {
    id: 'calendarYears',
    afterDatasetsDraw: (chart) => {
      const x = chart.scales[scaleID];
      const y = chart.scales[yAxisID];
      if (x === undefined || y === undefined) return;
      const yearOf = (value: number): number => 2000 + (timeOf(value) - START_OF_2000) / DAYS_PER_YEAR;
      const [first, last] = [yearOf(x.min), yearOf(x.max)];
      if (!(last - first >= 2) || last - first > 2000) return;
      const wanted = (last - first) / Math.max(2, (x.right - x.left) / 70);
      const step = [1, 2, 5, 10, 20, 50, 100, 200, 500].find((one) => one >= wanted) ?? 1000;
      const { ctx } = chart;
      ctx.save();
      ctx.font = `${FONT_PX}px ${FONT_FAMILY}`;
      ctx.fillStyle = TEXT_COLOUR;
      ctx.strokeStyle = FRAME_COLOUR;
      ctx.lineWidth = 0.8;
      ctx.textAlign = 'center';
      ctx.textBaseline = 'top';
      for (let year = Math.ceil(first / step) * step; year <= last; year += step) {
        const share = (year - first) / (last - first);
        const px = x.left + share * (x.right - x.left);
        ctx.beginPath();
        ctx.moveTo(px, y.top);
        ctx.lineTo(px, y.top + TICK_PX);
        ctx.stroke();
        const half = ctx.measureText(String(year)).width / 2;
        if (px - half < x.left + 2 || px + half > x.right - 2) continue;
        ctx.fillText(String(year), px, y.top + TICK_PX + 2);
      }
      ctx.restore();
    },
  };
}
