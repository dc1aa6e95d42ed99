/** Velocities against time with the model, and the residuals below. */
import type { ChartConfiguration } from 'chart.js';
import type { Solved } from '../../solving/types.js';
import { axis, leftAxisWidthPx, paddedRange } from './axes.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { errorBars } from './error-bars.js';
import { heading, legend } from './headings.js';
import { errorBarSeries, inflatedSigmas, instrumentLabels, pointDatasets } from './instrument-series.js';
import { cleanLabel, fixedText, significantText } from './labels.js';
import { MOST_CYCLES_DRAWN, sampleModel } from './model-curve.js';
import type { ModelCurve } from './model-curve.js';
import { panelFrames } from './panel-frames.js';
import { grow, rangeWithBars } from './ranges.js';
import { BAND_COLOUR, commonOptions, FAINT_TEXT_COLOUR, MODEL_COLOUR } from './style.js';
import { zeroLine } from './panel-parts.js';

const LONGEST_TITLE = 40;
const HEIGHT_MM = 100;
const MODEL_LABEL = 'model';
const BAND_LABEL = 'range of the model';
const MODEL_LINE = { colour: MODEL_COLOUR, widthPx: 1 };
const BAND_EDGE = { colour: FAINT_TEXT_COLOUR, widthPx: 0.5 };

/** Velocities against time, two columns wide. */
export function velocitiesChart(solved: Solved): ChartDrawing {
  const { velocities, residualsMps, best, record } = solved;
  const times = velocities.timesBjdTdb;
  const [first, last] = [times[0] ?? 0, times[times.length - 1] ?? 1];
  // Padded as a span: a Julian date is so large that the padding of a single one would be years.
  const fromFirst = paddedRange(0, last - first, 0.02);
  const timeRange = { min: first + fromFirst.min, max: first + fromFirst.max };
  const offset = timeOffset(first, last);
  const curve = sampleModel(best, timeRange.min, timeRange.max);
  // Dates that were taken as BJD_TDB without being it keep the name of their own scale.
  const scale = velocities.timeScale === 'unknown' ? 'date' : velocities.timeScale.replace('_', ' ');
  const x = times.map((time) => time - offset);
  const y = velocities.velocitiesMps.map(
    (value, row) => value - (best.zeroPointsMps[velocities.instrumentOf[row]!] ?? 0),
  );
  const sigmas = inflatedSigmas(solved);
  let yBounds = grow(rangeWithBars(y, sigmas), curve.lowMps);
  yBounds = grow(yBounds, curve.highMps);
  const yRange = paddedRange(yBounds.low, yBounds.high, 0.05);
  const rBounds = rangeWithBars(residualsMps, sigmas);
  const rRange = paddedRange(Math.min(rBounds.low, 0), Math.max(rBounds.high, 0), 0.12);
  const target = cleanLabel(record.target, LONGEST_TITLE + 1);
  const titleText = target.length <= LONGEST_TITLE ? target : '';
  const names = [...new Set(instrumentLabels(solved))];
  const isBand = curve.bandOf.length > 0;
  const modelCurve = {
    ...(isBand ? { ...BAND_EDGE, band: { y: curve.lowMps, fill: BAND_COLOUR } } : MODEL_LINE),
    yAxisID: 'y',
    x: curve.timesBjdTdb.map((time) => time - offset),
    y: curve.highMps,
  };
  const width = leftAxisWidthPx({ ...yRange, ticks: 7 }, { ...rRange, ticks: 4 });

  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        ...pointDatasets(solved, x, y, 'y'),
        ...pointDatasets(solved, x, residualsMps, 'yRes', 0.9),
        isBand
          ? curveDataset(BAND_LABEL, { ...BAND_EDGE, fill: BAND_COLOUR }, 30)
          : curveDataset(MODEL_LABEL, MODEL_LINE, 10),
      ],
    },
    options: {
      ...commonOptions(),
      scales: {
        x: axis({
          title: offset === 0 ? `${scale} (d)` : `${scale} \u2212 ${fixedText(offset, 0)} (d)`,
          min: timeRange.min - offset,
          max: timeRange.max - offset,
          position: 'bottom',
          ticks: 9,
        }),
        // Stacked panels are laid out from the bottom up in the order of this list.
        yRes: axis({
          title: 'residual (m/s)',
          ...rRange,
          position: 'left',
          ticks: 4,
          stackWeight: 1,
          edge: [0.06, 0.08],
          thicknessPx: width,
        }),
        y: axis({
          title: 'radial velocity (m/s)',
          ...yRange,
          position: 'left',
          ticks: 7,
          stackWeight: 2.6,
          edge: [0.02, 0.02],
          thicknessPx: width,
        }),
      },
      plugins: {
        title: heading(titleText),
        legend: legend(new Set([...names, MODEL_LABEL, BAND_LABEL])),
        annotation: {
          clip: false,
          annotations: {
            zero: zeroLine('yRes'),
          },
        },
      },
    },
    plugins: [
      errorBars([...errorBarSeries(solved, x, y, 'y'), ...errorBarSeries(solved, x, residualsMps, 'yRes')]),
      curves([modelCurve], isBand ? BAND_LABEL : MODEL_LABEL),
      panelFrames(['y', 'yRes']),
    ],
  });
  return {
    name: 'velocities',
    widthMm: TWO_COLUMNS_MM,
    heightMm: HEIGHT_MM,
    title: `Radial velocities of ${cleanLabel(record.target, 80)}`,
    caption: caption(solved, curve),
    configure,
  };
}

/** A round number of days not after the first time, so that the axis carries short numbers. */
export function timeOffset(firstBjdTdb: number, lastBjdTdb: number): number {
  const unit = lastBjdTdb - firstBjdTdb < 300 ? 100 : 1000;
  return Math.floor(firstBjdTdb / unit) * unit;
}

function caption(solved: Solved, curve: ModelCurve): string {
  const { best } = solved;
  const parts = [
    'Radial velocities against time, the zero point of each instrument subtracted, and residuals below.',
    'Error bars: measurement error; pale extension: with the jitter of the instrument.',
  ];
  if (curve.bandOf.length > 0) {
    const which = curve.bandOf
      .map(
        (index) =>
          `${cleanLabel(best.letters[index] ?? '?', 8)} (${significantText(best.companions[index]!.periodDays, 4)} d)`,
      )
      .join(', ');
    parts.push(
      `The span holds more than ${MOST_CYCLES_DRAWN} cycles of ${which}, too many to draw one by one: the grey band is the whole range of the model.`,
    );
  } else {
    parts.push(
      best.companions.length === 0
        ? 'Line: drift only, no companion.'
        : 'Line: model of all companions and the drift.',
    );
  }
  return parts.join(' ');
}
