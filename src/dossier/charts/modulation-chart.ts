/** The sinusoid of mid-times folded on its own period; only where it is the preferred model. */
import type { ChartConfiguration } from 'chart.js';
import type { TimingSolved } from '../../solving/timing/types.js';
import { axis, leftAxisWidthPx, paddedRange } from './axes.js';
import { ONE_COLUMN_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { errorBars } from './error-bars.js';
import { heading, legend } from './headings.js';
import { cleanLabel, significantText } from './labels.js';
import { panelFrames } from './panel-frames.js';
import { grow, rangeWithBars } from './ranges.js';
import { commonOptions, MODEL_COLOUR } from './style.js';
import { timingBars, timingPoints, timingSeries, type TimingPanel } from './timing-series.js';

const POINTS = 300;
const CURVE_LABEL = 'sinusoid';
const LONGEST_TITLE = 40;

/** One column wide; empty unless the sinusoidal model is preferred. */
export function modulationCharts(solved: TimingSolved): ChartDrawing[] {
  const { record, rows } = solved;
  const model = record.models.find(({ name }) => name === record.preferred);
  const period = model?.parameters.modulationPeriod?.value ?? null;
  const amplitude = model?.parameters.modulationAmplitude?.value ?? null;
  const peak = model?.parameters.modulationPeak?.value ?? null;
  if (period === null || amplitude === null || peak === null) return [];
  const turn = (time: number): number => {
    const cycles = (time - peak) / period;
    return cycles - Math.floor(cycles);
  };
  const x = rows.timesBjdTdb.map(turn);
  const y = rows.residualsMinutes.map(
    (residual, row) => residual + amplitude * Math.cos(2 * Math.PI * x[row]!),
  );
  const jitter = model?.jitter.value ?? 0;
  const inflated = rows.sigmasMinutes.map((sigma) => Math.hypot(sigma, jitter));
  const bounds = grow(rangeWithBars(y, inflated), [-amplitude, amplitude]);
  const range = paddedRange(bounds.low, bounds.high, 0.05);
  const series = timingSeries(solved);
  const panel: TimingPanel = { yAxisID: 'y', x, y, shows: () => true, size: 1 };
  const curveX = Float64Array.from({ length: POINTS }, (_, k) => k / (POINTS - 1));
  const curveY = curveX.map((phase) => amplitude * Math.cos(2 * Math.PI * phase));
  const target = cleanLabel(record.target, LONGEST_TITLE + 1);
  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        ...timingPoints(series, rows.count, panel),
        curveDataset(CURVE_LABEL, { colour: MODEL_COLOUR, widthPx: 1.2 }, 10),
      ],
    },
    options: {
      ...commonOptions(),
      scales: {
        x: axis({
          title: `phase of the modulation (period ${significantText(period, 5)} d)`,
          min: 0,
          max: 1,
          position: 'bottom',
          ticks: 5,
        }),
        y: axis({
          title: 'deviation (min)',
          ...range,
          position: 'left',
          ticks: 6,
          thicknessPx: leftAxisWidthPx({ ...range, ticks: 6 }),
        }),
      },
      plugins: {
        title: heading(target.length <= LONGEST_TITLE ? target : ''),
        legend: legend(new Set([...series.map(({ label }) => label), CURVE_LABEL])),
      },
    },
    plugins: [
      errorBars(timingBars(series, rows.sigmasMinutes, inflated, panel)),
      curves([{ yAxisID: 'y', x: curveX, y: curveY, colour: MODEL_COLOUR, widthPx: 1.2 }], CURVE_LABEL),
      panelFrames(['y']),
    ],
  });
  return [
    {
      name: 'modulation',
      widthMm: ONE_COLUMN_MM,
      heightMm: 70,
      title: `Modulation of the mid-times of ${cleanLabel(record.target, 80)}`,
      caption: `Deviation of the mid-times from an even clock, folded on the ${significantText(period, 5)} d of the sinusoid; phase 0 is the latest. Line: the sinusoid.`,
      configure,
    },
  ];
}
