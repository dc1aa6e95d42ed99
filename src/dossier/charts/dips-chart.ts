/** Spectra of the search for dips, one chart per stage, with the peaks named. */
import type { ChartConfiguration } from 'chart.js';
import type { DipSpectrum } from '../../solving/transit-types.js';
import type { Solved } from '../../solving/types.js';
import { axis, leftAxisWidthPx } from './axes.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { heading, legend } from './headings.js';
import { cleanLabel, significantText } from './labels.js';
import { panelFrames } from './panel-frames.js';
import { peakMarks } from './peak-marks.js';
import type { PeakMark } from './peak-marks.js';
import { commonOptions, markerStyle } from './style.js';
import { keepExtremes } from './thin.js';

const HEIGHT_MM = 62;
const MOST_PEAKS = 6;
const COLUMNS = 1200;
const LONGEST_TARGET = 30;
const CURVE_LABEL = 'efficiency';
const COLOUR = markerStyle(0).fill;

/** One chart per stage: `dips-1`, `dips-2` ... */
export function dipsCharts(solved: Solved): ChartDrawing[] {
  return dipSpectraCharts(solved.photometry?.spectra ?? [], solved.record.target);
}

/** @param target - any text */
export function dipSpectraCharts(spectra: readonly DipSpectrum[], target: string): ChartDrawing[] {
  return spectra.flatMap((spectrum, index) =>
    spectrum.periodsDays.length < 2 ? [] : [dipsChart(spectrum, index, target)],
  );
}

function dipsChart(spectrum: DipSpectrum, index: number, anyTarget: string): ChartDrawing {
  const { periodsDays, efficiency } = spectrum;
  let [low, high] = [Infinity, -Infinity];
  for (const period of periodsDays) {
    low = Math.min(low, period);
    high = Math.max(high, period);
  }
  let [bottom, top] = [0, 0];
  for (const value of efficiency) {
    if (!Number.isFinite(value)) continue;
    bottom = Math.min(bottom, value);
    top = Math.max(top, value);
  }
  for (const peak of spectrum.peaks) top = Math.max(top, peak.efficiency);
  const yRange = { min: Math.max(bottom, -0.2 * Math.max(top, 1)), max: top > 0 ? 1.22 * top : 1 };
  const curve = thinned(periodsDays, efficiency, low, high);
  const target = cleanLabel(anyTarget, LONGEST_TARGET + 1);
  const title = cleanLabel(spectrum.title, 80);
  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: { datasets: [curveDataset(CURVE_LABEL, { colour: COLOUR, widthPx: 0.7 }, 10)] },
    options: {
      ...commonOptions(),
      scales: {
        x: axis({ title: 'period (d)', min: low, max: high, position: 'bottom', logarithmic: true }),
        y: axis({
          title: 'detection efficiency (σ)',
          ...yRange,
          position: 'left',
          ticks: 5,
          edge: [0, 0.04],
          thicknessPx: leftAxisWidthPx({ ...yRange, ticks: 5 }),
        }),
      },
      plugins: {
        title: heading(target.length <= LONGEST_TARGET && target !== '' ? `${target}: ${title}` : title),
        legend: legend(new Set()),
      },
    },
    plugins: [
      curves([{ yAxisID: 'y', ...curve, colour: COLOUR, widthPx: 0.7 }], CURVE_LABEL),
      panelFrames(['y']),
      peakMarks('y', peaksOf(spectrum)),
    ],
  });
  return {
    name: `dips-${index + 1}`,
    widthMm: TWO_COLUMNS_MM,
    heightMm: HEIGHT_MM,
    title: `Search for dips in the light of ${cleanLabel(anyTarget, 80)}: ${title}`,
    caption: `Search for dips that return, ${title}: by how many standard deviations of the spectrum the best dip of each period stands out (Kovács et al. 2002). The highest peaks are named.`,
    configure,
  };
}

/** Highest and lowest sample of every column of the chart, by ascending period. */
function thinned(
  periods: Float64Array,
  values: Float64Array,
  low: number,
  high: number,
): { x: Float64Array; y: Float64Array } {
  const scale = COLUMNS / Math.log(high / low);
  const positions = periods.map((period) => Math.log(period / low) * scale);
  const kept = keepExtremes(positions, values, COLUMNS);
  if (periods[0]! > periods[periods.length - 1]!) kept.reverse();
  return {
    x: Float64Array.from(kept, (row) => periods[row]!),
    y: Float64Array.from(kept, (row) => values[row]!),
  };
}

function peaksOf({ peaks }: DipSpectrum): PeakMark[] {
  return [...peaks]
    .sort((one, other) => other.efficiency - one.efficiency)
    .slice(0, MOST_PEAKS)
    .map((peak) => ({
      x: peak.periodDays,
      y: peak.efficiency,
      text: `${significantText(peak.periodDays, 5)} d${isPlain(peak.kind) ? '' : `, ${cleanLabel(peak.kind, 24)}`}`,
      strong: isPlain(peak.kind),
    }));
}

/** The peak that needs no name: the period that was found, or where none was the strongest. */
function isPlain(kind: string): boolean {
  return kind === 'found' || kind === 'strongest';
}
