/** All charts of a solution, drawn and encoded. */
import type { DipSpectrum } from '../../solving/transit-types.js';
import type { SearchStage, Solved, WindowFunction } from '../../solving/types.js';
import { hasVelocities } from '../observed.js';
import { chainsCharts } from './chains-chart.js';
import type { ChartDrawing, ChartFile } from './chart-drawing.js';
import { dipSpectraCharts, dipsCharts } from './dips-chart.js';
import { foldedCharts } from './folded-chart.js';
import { lightCurveCharts } from './light-curve-chart.js';
import { marginalsCharts } from './marginals-chart.js';
import { midTimesCharts } from './mid-times-chart.js';
import { oddEvenCharts } from './odd-even-chart.js';
import { orbitCharts } from './orbit-chart.js';
import { loadPainter } from './paint.js';
import { pairsCharts } from './pairs-chart.js';
import { periodogramChart, periodogramCharts } from './periodogram-chart.js';
import { transitCharts } from './transit-chart.js';
import { transitsCharts } from './transits-chart.js';
import { velocitiesChart } from './velocities-chart.js';

/** The charts of a dossier, in its order. A new chart is one file and one line here. */
const CHARTS: readonly ((solved: Solved) => readonly ChartDrawing[])[] = [
  (solved) => (hasVelocities(solved) ? [velocitiesChart(solved)] : []),
  lightCurveCharts,
  transitCharts,
  transitsCharts,
  oddEvenCharts,
  midTimesCharts,
  dipsCharts,
  (solved) => (hasVelocities(solved) ? [...foldedCharts(solved), ...periodogramCharts(solved)] : []),
  orbitCharts,
  marginalsCharts,
  pairsCharts,
  chainsCharts,
];

/** Describes all charts of a solution; pure, draws nothing and loads nothing heavy. */
export function describeCharts(solved: Solved): ChartDrawing[] {
  return CHARTS.flatMap((describe) => describe(solved));
}

/**
 * Draws all charts of a solution, each as PNG (300 dpi) and as SVG.
 *
 * @param solved - read, never modified
 * @returns files in the order of the dossier, PNG before SVG; the same bytes for the same input on one machine
 */
export function renderCharts(solved: Solved): Promise<ChartFile[]> {
  return renderDrawings(describeCharts(solved));
}

/**
 * Draws the periodograms of a search that was not followed by a solution.
 *
 * @param stages - one chart each
 * @param window - window function of the same times
 * @param target - name of the target; any text
 */
export function renderPeriodsCharts(
  stages: readonly SearchStage[],
  window: WindowFunction,
  target: string,
): Promise<ChartFile[]> {
  return renderDrawings(
    stages.map((stage, index) => periodogramChart({ window, record: { target } }, stage, index)),
  );
}

/**
 * Draws the spectra of a search for dips that was not followed by a solution.
 *
 * @param spectra - one chart each
 * @param target - name of the target; any text
 */
export function renderDipsCharts(spectra: readonly DipSpectrum[], target: string): Promise<ChartFile[]> {
  return renderDrawings(dipSpectraCharts(spectra, target));
}

/** Draws what is described, each as PNG and as SVG. */
export async function renderDrawings(drawings: readonly ChartDrawing[]): Promise<ChartFile[]> {
  const painter = await loadPainter();
  const files: Promise<ChartFile[]>[] = [];
  for (const drawing of drawings) {
    files.push(filesOf(drawing, painter));
    // Lets the canvas library free the memory of charts that are done.
    await new Promise((resolve) => setImmediate(resolve));
  }
  return (await Promise.all(files)).flat();
}

async function filesOf(
  drawing: ChartDrawing,
  painter: Awaited<ReturnType<typeof loadPainter>>,
): Promise<ChartFile[]> {
  const { name, caption } = drawing;
  const png = painter.png(drawing); // encoded on another thread while the SVG is written
  const svg = painter.svg(drawing);
  return [
    { name: `${name}.png`, bytes: await png, caption },
    { name: `${name}.svg`, bytes: svg, caption },
  ];
}
