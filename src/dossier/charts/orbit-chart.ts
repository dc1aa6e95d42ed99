/** Orbits seen from above: one chart per companion, and one of all of them where there are several. */
import type { ChartConfiguration } from 'chart.js';
import type { Solved } from '../../solving/types.js';
import { axis, leftAxisWidthPx } from './axes.js';
import { CSS_PX_PER_MM, ONE_COLUMN_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { cleanLabel, fileLetter, significantText } from './labels.js';
import { orbitMarks } from './orbit-marks.js';
import { planOrbits, SECTOR_COUNT, squareView } from './orbit-plan.js';
import { panelFrames } from './panel-frames.js';
import { commonOptions, FONT_FAMILY, HEADING_FONT_PX, TEXT_COLOUR } from './style.js';

const TOP_PX = 36;
const RIGHT_PX = 12;
const BOTTOM_AXIS_PX = 32;
const TICKS = 5;

/** `orbit-b`, `orbit-c` ... and `orbits`. */
export function orbitCharts(solved: Solved): ChartDrawing[] {
  // Of an orbit without a period nothing is known that could be drawn.
  const indices = solved.best.companions.flatMap((_, index) =>
    solved.record.companions[index]?.elements.period.value === null ? [] : [index],
  );
  const single = indices.map((index) => orbitChart(solved, [index]));
  return indices.length > 1 ? [...single, orbitChart(solved, indices)] : single;
}

/** The orbits of the chosen companions to scale, the others lightly behind them. */
export function orbitChart(solved: Solved, chosen: readonly number[]): ChartDrawing {
  const { best, record } = solved;
  const largest =
    [...chosen].sort(
      (one, other) => best.companions[other]!.periodDays - best.companions[one]!.periodDays,
    )[0] ?? 0;
  const plan = planOrbits(solved, largest);
  const view = squareView(chosen.map((index) => plan.orbits[index]!));
  const leftAxisPx = leftAxisWidthPx({ ...view.y, ticks: TICKS });
  // The panel is made square by giving every margin a fixed size and the drawing the height that is left over.
  const widthPx = Math.floor(ONE_COLUMN_MM * CSS_PX_PER_MM);
  const sidePx = widthPx - 2 - leftAxisPx - RIGHT_PX;
  const heightPx = TOP_PX + sidePx + BOTTOM_AXIS_PX + 2;
  const letters = chosen.map((index) => cleanLabel(best.letters[index] ?? '', 8));
  const only = chosen.length === 1 ? best.companions[chosen[0]!]! : null;
  const target = cleanLabel(record.target, 19);
  const name = target.endsWith('…') ? (only === null ? 'orbits' : 'orbit of') : target;
  const elements =
    only === null
      ? letters.join(', ')
      : `${letters[0]!}, ${only.eccentricity === 0 ? 'circular' : `e = ${significantText(only.eccentricity, 2)}`}`;
  const unit = cleanLabel(plan.unit, 40);

  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: { datasets: [] },
    options: {
      ...commonOptions(),
      layout: { autoPadding: false, padding: { left: 2, right: RIGHT_PX, top: TOP_PX, bottom: 2 } },
      scales: {
        x: axis({
          title: `across the line of sight (${unit})`,
          ...view.x,
          position: 'bottom',
          ticks: TICKS,
          edge: [0.03, 0.03],
          thicknessPx: BOTTOM_AXIS_PX,
        }),
        y: axis({
          title: `away from the observer (${unit})`,
          ...view.y,
          position: 'left',
          ticks: TICKS,
          edge: [0.02, 0.02],
          thicknessPx: leftAxisPx,
        }),
      },
      plugins: { title: { display: false }, legend: { display: false } },
    },
    plugins: [
      orbitMarks(plan, chosen),
      panelFrames(['y']),
      {
        id: 'orbitHeading',
        afterDraw: (chart) => {
          chart.ctx.save();
          chart.ctx.font = `bold ${HEADING_FONT_PX}px ${FONT_FAMILY}`;
          chart.ctx.fillStyle = TEXT_COLOUR;
          chart.ctx.textAlign = 'left';
          chart.ctx.textBaseline = 'middle';
          chart.ctx.fillText(`${name} ${elements}`, chart.chartArea.left, 10);
          chart.ctx.restore();
        },
      },
    ],
  });
  return {
    name: only === null ? 'orbits' : `orbit-${fileLetter(best.letters[chosen[0]!] ?? '', chosen[0]!)}`,
    widthMm: ONE_COLUMN_MM,
    heightMm: (heightPx + 0.01) / CSS_PX_PER_MM,
    title: `${only === null ? 'Orbits' : 'Orbit'} of ${letters.join(', ')} about ${cleanLabel(record.target, 80)}`,
    caption: caption(only !== null, best.companions.length, unit),
    configure,
  };
}

function caption(single: boolean, companions: number, unit: string): string {
  return [
    `Relative orbit${single ? '' : 's'} seen from above the orbital plane, the star at the focus, the observer far below the picture; unit: ${unit}.`,
    single ? `Shaded sectors: ${SECTOR_COUNT} parts of equal time, beginning at periastron.` : '',
    companions > 1
      ? 'All orbits are drawn as if they lay in one plane and ran the same way round, which velocities cannot tell.'
      : '',
  ]
    .filter((sentence) => sentence !== '')
    .join(' ');
}
