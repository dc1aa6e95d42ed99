/** The periodogram at each stage of the search, false-alarm levels and window function included. */
import type { ChartConfiguration } from 'chart.js';
import type { SearchStage, Solved, WindowFunction } from '../../solving/types.js';
import { axis, leftAxisWidthPx } from './axes.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { heading, legend } from './headings.js';
import { cleanLabel, percentText, significantText } from './labels.js';
import { panelFrames } from './panel-frames.js';
import { peakMarks } from './peak-marks.js';
import type { PeakMark } from './peak-marks.js';
import { sideLabels } from './side-labels.js';
import { commonOptions, FAINT_TEXT_COLOUR, markerStyle } from './style.js';
import { keepExtremes } from './thin.js';

const HEIGHT_MM = 80;
const MOST_PEAKS = 6;
const MOST_WINDOW_PEAKS = 4;
/** Two columns per CSS px: 0.13 mm on paper. */
const COLUMNS = 1200;
const LEVEL_MARGIN_PX = 52;
const POWER_COLOUR = markerStyle(0).fill;
const SCAN_COLOUR = markerStyle(1).fill;
const POWER_LABEL = 'power';
const LONGEST_TARGET = 30;

/** What we use of a line of the annotation plugin (its own types cannot be imported by name from a module). */
interface LineAnnotation {
  readonly type: 'line';
  readonly xScaleID: 'x';
  readonly yScaleID: 'y';
  readonly xMin?: number;
  readonly xMax?: number;
  readonly yMin?: number;
  readonly yMax?: number;
  readonly borderColor: string;
  readonly borderWidth: number;
  readonly borderDash: number[];
  readonly drawTime: 'beforeDatasetsDraw';
}
type LineAnnotations = Record<string, LineAnnotation>;

/** One chart per stage, two columns wide. */
export function periodogramCharts(solved: Solved): ChartDrawing[] {
  return solved.stages.map((stage, index) => periodogramChart(solved, stage, index));
}

/** What the chart looks at beside the stage: a solution has it, and so has a search alone. `target` may be any text. */
export interface Searched {
  readonly window: WindowFunction;
  readonly record: { readonly target: string };
}

/** The periodogram of one stage; `index` counts stages from 0. */
export function periodogramChart(searched: Searched, stage: SearchStage, index: number): ChartDrawing {
  const { frequenciesPerDay } = stage;
  const positive = frequenciesPerDay.filter((frequency) => frequency > 0);
  const xRange = {
    min: 1 / (positive[positive.length - 1] ?? 1),
    max: 1 / (positive[0] ?? 0.001),
  };
  if (!(xRange.max > xRange.min)) xRange.max = xRange.min * 10;
  const spectrum = curvePoints(stage, xRange);
  const window = curvePoints(searched.window, xRange);
  let top = 0;
  for (const y of spectrum.y) top = Math.max(top, y);
  for (const { power } of stage.levels) top = Math.max(top, power);
  const yRange = { min: 0, max: top > 0 ? top * 1.2 : 1 };
  const width = leftAxisWidthPx({ ...yRange, ticks: 5 }, { min: 0, max: 1.4, ticks: 3 });
  const title = cleanLabel(stage.title, 80);
  const target = cleanLabel(searched.record.target, LONGEST_TARGET + 1);
  const headingText = target.length <= LONGEST_TARGET && target !== '' ? `${target}: ${title}` : title;
  const scan = stage.eccentricPeak;
  const scanText =
    scan === null
      ? ''
      : `best eccentric orbit: ${significantText(scan.periodDays, 4)} d, e = ${significantText(scan.eccentricity, 2)}`;

  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        curveDataset(POWER_LABEL, { colour: POWER_COLOUR, widthPx: 0.7 }, 10),
        ...(scanText === ''
          ? []
          : [curveDataset(scanText, { colour: SCAN_COLOUR, widthPx: 1, dash: [3, 2] }, 20)]),
      ],
    },
    options: {
      ...commonOptions(),
      layout: { padding: { left: 2, right: LEVEL_MARGIN_PX, top: 3, bottom: 2 } },
      scales: {
        x: axis({ title: 'period (d)', ...xRange, position: 'bottom', logarithmic: true }),
        yWin: axis({
          title: 'window',
          min: 0,
          max: 1.4,
          position: 'left',
          ticks: 3,
          stackWeight: 1,
          edge: [0.1, 0.1],
          thicknessPx: width,
        }),
        y: axis({
          title: 'normalised power',
          ...yRange,
          position: 'left',
          ticks: 5,
          stackWeight: 2.8,
          edge: [0, 0.04],
          thicknessPx: width,
        }),
      },
      plugins: {
        title: heading(headingText),
        legend: legend(new Set(scanText === '' ? [] : [scanText])),
        annotation: { annotations: { ...levelLines(stage), ...eccentricLine(stage) } },
      },
    },
    plugins: [
      curves(
        [
          { yAxisID: 'y', ...spectrum, colour: POWER_COLOUR, widthPx: 0.7 },
          { yAxisID: 'yWin', ...window, colour: FAINT_TEXT_COLOUR, widthPx: 0.7 },
        ],
        POWER_LABEL,
      ),
      panelFrames(['y', 'yWin']),
      sideLabels(
        'y',
        stage.levels.map((level) => ({
          value: level.power,
          text: `FAP ${percentText(level.falseAlarmProbability)}`,
        })),
      ),
      peakMarks('y', stagePeaks(stage), scan === null ? [] : [scan.periodDays]),
      peakMarks('yWin', windowPeaks(searched.window)),
    ],
  });
  return {
    name: `periodogram-${index + 1}`,
    widthMm: TWO_COLUMNS_MM,
    heightMm: HEIGHT_MM,
    title: `Periodogram of ${cleanLabel(searched.record.target, 80)}: ${title}`,
    caption: caption(stage),
    configure,
  };
}

/** Samples of a spectrum against period, ascending, thinned to what can be seen. */
function curvePoints(
  spectrum: Pick<WindowFunction, 'frequenciesPerDay' | 'power'>,
  periods: { readonly min: number; readonly max: number },
): { x: Float64Array; y: Float64Array } {
  const scale = COLUMNS / Math.log(periods.max / periods.min);
  const positions = spectrum.frequenciesPerDay.map(
    (frequency) => Math.log(1 / frequency / periods.min) * scale,
  );
  const kept = keepExtremes(positions, spectrum.power, COLUMNS).reverse();
  return {
    x: Float64Array.from(kept, (index) => 1 / spectrum.frequenciesPerDay[index]!),
    y: Float64Array.from(kept, (index) => spectrum.power[index]!),
  };
}

function levelLines(stage: SearchStage): LineAnnotations {
  return Object.fromEntries(
    stage.levels.map((level, index) => [
      `level${index}`,
      {
        type: 'line' as const,
        xScaleID: 'x',
        yScaleID: 'y',
        yMin: level.power,
        yMax: level.power,
        borderColor: FAINT_TEXT_COLOUR,
        borderWidth: 0.8,
        borderDash: [[1.5, 2], [4, 2.5], [8, 3]][index % 3]!, // prettier-ignore
        drawTime: 'beforeDatasetsDraw' as const,
      },
    ]),
  );
}

function eccentricLine(stage: SearchStage): LineAnnotations {
  const peak = stage.eccentricPeak;
  if (peak === null) return {};
  return {
    eccentric: {
      type: 'line',
      xScaleID: 'x',
      yScaleID: 'y',
      xMin: peak.periodDays,
      xMax: peak.periodDays,
      borderColor: SCAN_COLOUR,
      borderWidth: 1,
      borderDash: [3, 2],
      drawTime: 'beforeDatasetsDraw',
    },
  };
}

function stagePeaks(stage: SearchStage): PeakMark[] {
  return (
    [...stage.peaks]
      .sort((one, other) => other.power - one.power)
      // Peaks that noise makes as well are not worth a label; the highest is always marked.
      .filter((peak, rank) => rank === 0 || peak.falseAlarmProbability < 0.1)
      .slice(0, MOST_PEAKS)
      .map((peak, rank) => ({
        x: peak.periodDays,
        y: peak.power,
        text: `${significantText(peak.periodDays, 4)} d`,
        strong: rank === 0 && peak.falseAlarmProbability < 0.1,
      }))
  );
}

function windowPeaks(window: WindowFunction): PeakMark[] {
  return [...window.peaks]
    .sort((one, other) => other.power - one.power)
    .slice(0, MOST_WINDOW_PEAKS)
    .map((peak) => ({
      x: peak.periodDays,
      y: peak.power,
      text: peak.name === null ? `${significantText(peak.periodDays, 4)} d` : cleanLabel(peak.name, 24),
      strong: false,
    }));
}

function caption(stage: SearchStage): string {
  const levels = stage.levels.map((level) => percentText(level.falseAlarmProbability)).join(', ');
  const peak = stage.eccentricPeak;
  return [
    `Periodogram with ${stage.companionsFitted === 0 ? 'no companion' : `${stage.companionsFitted} companion${stage.companionsFitted === 1 ? '' : 's'}`} in the model; drift and zero points refitted at each frequency.`,
    levels === '' ? '' : `Dashed lines: power at false-alarm probabilities of ${levels}.`,
    peak === null
      ? ''
      : `Upright dashed line: best eccentric orbit of the Keplerian scan, ${significantText(peak.periodDays, 4)} d with e = ${significantText(peak.eccentricity, 2)}.`,
    'Below: window function of the times of observation.',
  ]
    .filter((sentence) => sentence !== '')
    .join(' ');
}
