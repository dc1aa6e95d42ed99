/** Variation of the mid-times of one of several interacting companions, with the integrated model and what it predicts. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import type { ChartConfiguration, ChartDataset } from 'chart.js';
import type { InteractionFit, InteractionTable } from '../../solving/timing/interaction-types.js';
import { axis, leftAxisWidthPx, paddedRange } from './axes.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { errorBars } from './error-bars.js';
import type { ErrorBarSeries } from './error-bars.js';
import { heading, legend } from './headings.js';
import { cleanLabel, fileLetter, fixedText, significantText } from './labels.js';
import { panelFrames } from './panel-frames.js';
import { grow, rangeWithBars } from './ranges.js';
import { BAND_COLOUR, commonOptions, markerRadius, markerStyle, MODEL_COLOUR, tint } from './style.js';
import { timeOffset } from './velocities-chart.js';
import { markedPoints, zeroLine } from './panel-parts.js';

const HEIGHT_MM = 84;
const DATA_LABEL = 'observed';
const MODEL_LABEL = 'interacting orbits';
const BAND_LABEL = '1 σ of the prediction';
const MODEL_LINE = { colour: MODEL_COLOUR, widthPx: 1 };

/**
 * One chart per companion.
 *
 * @param timeLabel - what the axis of times is called
 */
export function interactionCharts(
  fit: InteractionFit,
  tables: readonly InteractionTable[],
  target: string,
  timeLabel = 'BJD TDB',
): ChartDrawing[] {
  return fit.predictions.map((_, index) => interactionChart(fit, tables, target, timeLabel, index));
}

function interactionChart(
  fit: InteractionFit,
  tables: readonly InteractionTable[],
  target: string,
  timeLabel: string,
  index: number,
): ChartDrawing {
  const prediction = fit.predictions[index]!;
  const companion = fit.companions[index]!;
  const table = tables[index]!;
  const times = Float64Array.from(table.timesDays);
  const sigmas = Float64Array.from(table.sigmasDays, (sigma) => sigma * MINUTES_PER_DAY);
  const inflated = sigmas.map((sigma) => Math.hypot(sigma, companion.jitter.value ?? 0));
  const model = prediction.timesDays;
  const [first, last] = [
    Math.min(times[0] ?? 0, model[0] ?? 0),
    times.reduce((latest, time) => Math.max(latest, time), model[model.length - 1] ?? 1),
  ];
  const offset = timeOffset(first, last);
  const range = paddedRange(0, last - first, 0.02);
  const x = times.map((time) => time - offset);
  const modelX = model.map((time) => time - offset);
  const band = prediction.sigmasDays.map((sigma) => (Number.isFinite(sigma) ? sigma * MINUTES_PER_DAY : 0));
  const upper = prediction.variationMinutes.map((value, i) => value + band[i]!);
  const lower = prediction.variationMinutes.map((value, i) => value - band[i]!);
  const y = prediction.observedVariationMinutes;
  const yBounds = grow(grow(rangeWithBars(y, inflated), upper), lower);
  const yRange = paddedRange(yBounds.low, yBounds.high, 0.05);
  const rBounds = rangeWithBars(prediction.residualMinutes, inflated);
  const rRange = paddedRange(Math.min(rBounds.low, 0), Math.max(rBounds.high, 0), 0.12);
  const width = leftAxisWidthPx({ ...yRange, ticks: 6 }, { ...rRange, ticks: 4 });
  const letter = cleanLabel(prediction.letter, 8);
  const name = cleanLabel(target, 40);
  const bars = (values: Float64Array, yAxisID: string): ErrorBarSeries[] => [
    { yAxisID, x, y: values, sigma: inflated, colour: tint(markerStyle(index).bar, 0.6), widthPx: 1.3 },
    { yAxisID, x, y: values, sigma: sigmas, colour: markerStyle(index).bar, widthPx: 0.9 },
  ];

  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        points(x, y, 'y', index, 1),
        points(x, prediction.residualMinutes, 'yRes', index, 0.9),
        curveDataset(BAND_LABEL, { ...MODEL_LINE, widthPx: 0, fill: BAND_COLOUR }, 30),
        curveDataset(MODEL_LABEL, MODEL_LINE, 10),
      ],
    },
    options: {
      ...commonOptions(),
      scales: {
        x: axis({
          title: offset === 0 ? `${timeLabel} (d)` : `${timeLabel} − ${fixedText(offset, 0)} (d)`,
          min: first + range.min - offset,
          max: first + range.max - offset,
          position: 'bottom',
          ticks: 9,
        }),
        yRes: axis({
          title: 'residual (min)',
          ...rRange,
          position: 'left',
          ticks: 4,
          stackWeight: 1,
          edge: [0.07, 0.09],
          thicknessPx: width,
        }),
        y: axis({
          title: 'O − C (min)',
          ...yRange,
          position: 'left',
          ticks: 6,
          stackWeight: 2.2,
          edge: [0.025, 0.025],
          thicknessPx: width,
        }),
      },
      plugins: {
        title: heading(`${name} ${letter}, P = ${significantText(prediction.lineDays[1], 6)} d`),
        legend: legend(new Set([DATA_LABEL, MODEL_LABEL, BAND_LABEL])),
        annotation: {
          clip: false,
          annotations: {
            zero: zeroLine('yRes'),
          },
        },
      },
    },
    plugins: [
      errorBars([...bars(y, 'y'), ...bars(prediction.residualMinutes, 'yRes')], DATA_LABEL),
      curves(
        [
          {
            yAxisID: 'y',
            x: modelX,
            y: upper,
            colour: BAND_COLOUR,
            widthPx: 0.4,
            band: { y: lower, fill: BAND_COLOUR },
          },
        ],
        BAND_LABEL,
      ),
      curves([{ yAxisID: 'y', x: modelX, y: prediction.variationMinutes, ...MODEL_LINE }], MODEL_LABEL),
      panelFrames(['y', 'yRes']),
    ],
  });
  return {
    name: `interaction-${fileLetter(prediction.letter, index)}`,
    widthMm: TWO_COLUMNS_MM,
    heightMm: HEIGHT_MM,
    title: `Mid-times of ${name} ${letter} with interacting orbits`,
    caption:
      `Mid-transit times of companion ${letter} against the straight line through the observed ones, and residuals from the model below. ` +
      'Line: orbits of all companions integrated with the best masses and eccentricities, joined from transit to transit and carried beyond the data; grey: one standard deviation of the prediction. ' +
      'Error bars: as stated; pale extension: with the jitter.',
    configure,
  };
}

function points(
  x: Float64Array,
  y: Float64Array,
  yAxisID: string,
  index: number,
  size: number,
): ChartDataset<'scatter'> {
  const data = Array.from(x, (value, row) => ({ x: value, y: y[row]! }));
  return markedPoints(DATA_LABEL, data, yAxisID, index, markerRadius(x.length) * size);
}
