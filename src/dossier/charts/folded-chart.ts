/** Velocities folded on each companion in turn, with residuals below; phase zero is periastron. */
import type { ChartConfiguration } from 'chart.js';
import type { Solved } from '../../solving/types.js';
import { axis, leftAxisWidthPx, paddedRange } from './axes.js';
import { ONE_COLUMN_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { errorBars } from './error-bars.js';
import { binResiduals, foldOn } from './fold.js';
import { heading, legend } from './headings.js';
import { errorBarSeries, inflatedSigmas, instrumentLabels, pointDatasets } from './instrument-series.js';
import { cleanLabel, fileLetter, significantText } from './labels.js';
import { sampleCompanions } from './model-curve.js';
import { panelFrames } from './panel-frames.js';
import { grow, rangeWithBars } from './ranges.js';
import { commonOptions, MODEL_COLOUR } from './style.js';
import { zeroLine } from './panel-parts.js';

const HEIGHT_MM = 82;
const LEGEND_LINE_MM = 3.4;
const BIN_COLOUR = '#000000';
const BINS_LABEL = 'binned';
const MODEL_LABEL = 'model';
const MODEL_LINE = { colour: MODEL_COLOUR, widthPx: 1.1 };

/** One chart per companion, one column wide. */
export function foldedCharts(solved: Solved): ChartDrawing[] {
  return solved.best.companions.map((_, companion) => foldedChart(solved, companion));
}

/** Velocities folded on the companion with this index. */
export function foldedChart(solved: Solved, companion: number): ChartDrawing {
  const { best, record } = solved;
  const orbit = best.companions[companion]!;
  const letter = cleanLabel(best.letters[companion] ?? '', 8);
  const folded = foldOn(solved, companion);
  const sigmas = inflatedSigmas(solved);
  const start = orbit.timePeriastronBjdTdb - orbit.periodDays / 2;
  const curve = sampleCompanions(best, [companion], false, start, start + orbit.periodDays);
  const curvePhases = curve.timesBjdTdb.map((time) => (time - orbit.timePeriastronBjdTdb) / orbit.periodDays);
  const bins = binResiduals(folded.phases, folded.residualsMps, sigmas);
  const binPhases = Float64Array.from(bins, (bin) => bin.phase);
  const binResidual = Float64Array.from(bins, (bin) => bin.residualMps);
  const binSigma = Float64Array.from(bins, (bin) => bin.sigmaMps);
  const binVelocity = binPhases.map(
    (phase, index) => interpolate(curvePhases, curve.velocitiesMps, phase) + binResidual[index]!,
  );

  const yBounds = grow(rangeWithBars(folded.velocitiesMps, sigmas), curve.velocitiesMps);
  const yRange = paddedRange(yBounds.low, yBounds.high, 0.05);
  const rBounds = rangeWithBars(folded.residualsMps, sigmas);
  const rRange = paddedRange(Math.min(rBounds.low, 0), Math.max(rBounds.high, 0), 0.12);
  const width = leftAxisWidthPx({ ...yRange, ticks: 6 }, { ...rRange, ticks: 4 });
  const target = cleanLabel(record.target, 19);
  const name = target.endsWith('…') ? 'companion' : target;
  const period = significantText(orbit.periodDays, 5);
  const names = [...new Set(instrumentLabels(solved))];
  const listed = [...names, ...(bins.length > 0 ? [BINS_LABEL] : [])];
  const phaseZero = record.companions[companion]?.circular === true ? 'inferior conjunction' : 'periastron';

  const bars = (y: Float64Array, yAxisID: string): Parameters<typeof errorBars>[0] => [
    { yAxisID, x: binPhases, y, sigma: binSigma, colour: BIN_COLOUR, widthPx: 1.3 },
  ];
  const binDataset = (
    y: Float64Array,
    yAxisID: string,
  ): ChartConfiguration<'scatter'>['data']['datasets'][number] => ({
    type: 'scatter',
    label: BINS_LABEL,
    data: Array.from(binPhases, (x, index) => ({ x, y: y[index]! })),
    yAxisID,
    pointStyle: 'circle',
    pointRadius: 2.8,
    pointBackgroundColor: '#ffffff',
    pointBorderColor: BIN_COLOUR,
    pointBorderWidth: 1.3,
    backgroundColor: '#ffffff',
    borderColor: BIN_COLOUR,
    borderWidth: 1.3,
    order: 5,
  });

  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        ...pointDatasets(solved, folded.phases, folded.velocitiesMps, 'y'),
        ...pointDatasets(solved, folded.phases, folded.residualsMps, 'yRes', 0.9),
        ...(bins.length > 0 ? [binDataset(binVelocity, 'y'), binDataset(binResidual, 'yRes')] : []),
        curveDataset(MODEL_LABEL, MODEL_LINE, 10),
      ],
    },
    options: {
      ...commonOptions(),
      scales: {
        x: axis({
          title: `orbital phase (0: ${phaseZero})`,
          min: -0.5,
          max: 0.5,
          position: 'bottom',
          ticks: 6,
        }),
        yRes: axis({
          title: 'residual (m/s)',
          ...rRange,
          position: 'left',
          ticks: 4,
          stackWeight: 1,
          edge: [0.07, 0.09],
          thicknessPx: width,
        }),
        y: axis({
          title: 'radial velocity (m/s)',
          ...yRange,
          position: 'left',
          ticks: 6,
          stackWeight: 2.4,
          edge: [0.025, 0.025],
          thicknessPx: width,
        }),
      },
      plugins: {
        title: heading(`${name} ${letter}, P = ${period} d`),
        legend: legend(new Set(listed)),
        annotation: {
          clip: false,
          annotations: {
            zero: zeroLine('yRes'),
          },
        },
      },
    },
    plugins: [
      errorBars([
        ...errorBarSeries(solved, folded.phases, folded.velocitiesMps, 'y'),
        ...errorBarSeries(solved, folded.phases, folded.residualsMps, 'yRes'),
      ]),
      // The bars of the means lie over the points but under the means' own white discs, so they are drawn ahead of those.
      errorBars([...bars(binVelocity, 'y'), ...bars(binResidual, 'yRes')], BINS_LABEL),
      curves([{ yAxisID: 'y', x: curvePhases, y: curve.velocitiesMps, ...MODEL_LINE }], MODEL_LABEL),
      panelFrames(['y', 'yRes']),
    ],
  });
  return {
    name: `folded-${fileLetter(best.letters[companion] ?? '', companion)}`,
    widthMm: ONE_COLUMN_MM,
    heightMm: HEIGHT_MM + LEGEND_LINE_MM * Math.max(0, Math.ceil(listed.join('    ').length / 44) - 1),
    title: `Radial velocities of ${cleanLabel(record.target, 80)} folded on companion ${letter}`,
    caption: [
      `Radial velocities folded on companion ${letter} (period ${period} d); zero points, drift and the other companions subtracted.`,
      `Phase 0 is ${phaseZero}. Line: model. Residuals below.`,
      bins.length > 0
        ? 'Open circles: weighted means in bins of phase; means are taken of the residuals and set on the model.'
        : '',
    ]
      .filter((sentence) => sentence !== '')
      .join(' '),
    configure,
  };
}

/** Height of a curve of ascending x at a place inside it. */
function interpolate(xs: Float64Array, ys: Float64Array, x: number): number {
  let [low, high] = [0, xs.length - 1];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (xs[middle]! <= x) low = middle;
    else high = middle;
  }
  const step = xs[high]! - xs[low]!;
  return step === 0 ? ys[low]! : ys[low]! + ((ys[high]! - ys[low]!) * (x - xs[low]!)) / step;
}
