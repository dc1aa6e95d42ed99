/** O-C of mid-times with every model, the prediction's own uncertainty running into the future, and the residuals below. */
import type { ChartConfiguration } from 'chart.js';
import type { TimingModelName } from '../../solving/timing/model-forms.js';
import type { TimingCurve, TimingSolved } from '../../solving/timing/types.js';
import { axis, leftAxisWidthPx, paddedRange } from './axes.js';
import { TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves, type Curve } from './curves.js';
import { errorBars } from './error-bars.js';
import { heading, legend } from './headings.js';
import { cleanLabel, fixedText } from './labels.js';
import { panelFrames } from './panel-frames.js';
import { grow, rangeWithBars } from './ranges.js';
import { BAND_COLOUR, commonOptions, MODEL_COLOUR } from './style.js';
import { timingBars, timingPoints, timingSeries, type TimingPanel } from './timing-series.js';
import { timeOffset } from './velocities-chart.js';
import { zeroLine } from './panel-parts.js';

const LONGEST_TITLE = 40;
const PANEL_HEIGHT_MM = 52;
const BAND_LABEL = '1 σ of the prediction';
/** A modulation of more cycles than this within the chart would be a solid block. */
const MOST_MODULATIONS_DRAWN = 80;
/** The preferred model is black; the others keep their colours, which no source has. */
const LINE_COLOURS: Readonly<Record<TimingModelName, string>> = {
  linear: '#8c8c8c',
  quadratic: '#7a4a1e',
  sinusoidal: '#5e3c99',
  precessing: '#2b6b3f',
};
const KINDS = [
  { kind: 'transit', axisID: 'y', title: 'O − C, transits (min)' },
  { kind: 'occultation', axisID: 'yOcc', title: 'O − C, occultations (min)' },
] as const;

interface KindPanel {
  readonly axisID: string;
  readonly title: string;
  readonly range: { readonly min: number; readonly max: number };
  readonly panel: TimingPanel;
  readonly curves: readonly TimingCurve[];
}

function isDrawable(curve: TimingCurve, solved: TimingSolved): boolean {
  const model = solved.record.models.find(({ name }) => name === curve.model);
  const modulation = model?.parameters.modulationPeriod?.value ?? null;
  const span = curve.timesBjdTdb[curve.timesBjdTdb.length - 1]! - curve.timesBjdTdb[0]!;
  return modulation === null || span / modulation <= MOST_MODULATIONS_DRAWN;
}

function panelsOf(solved: TimingSolved, x: Float64Array, inflated: Float64Array): KindPanel[] {
  const { rows } = solved;
  return KINDS.flatMap(({ kind, axisID, title }, isOccultation) => {
    const shows = (row: number): boolean => rows.isOccultation[row] === isOccultation;
    if (!rows.isOccultation.some((flag) => flag === isOccultation)) return [];
    const own = solved.curves.filter((curve) => curve.kind === kind && isDrawable(curve, solved));
    const keep = (_: number, row: number): boolean => shows(row);
    let bounds = rangeWithBars(rows.oMinusCMinutes.filter(keep), inflated.filter(keep));
    for (const curve of own) bounds = grow(bounds, shownValues(curve, solved.record.preferred, bounds));
    const panel: TimingPanel = { yAxisID: axisID, x, y: rows.oMinusCMinutes, shows, size: 1 };
    return [{ axisID, title, range: paddedRange(bounds.low, bounds.high, 0.05), panel, curves: own }];
  });
}

/** All of the preferred curve and its band; of the others what does not leave the data far behind. */
function shownValues(
  curve: TimingCurve,
  preferred: TimingModelName,
  bounds: { readonly low: number; readonly high: number },
): number[] {
  const reach = 0.3 * (bounds.high - bounds.low);
  if (curve.model !== preferred)
    return Array.from(curve.oMinusCMinutes).filter(
      (value) => value > bounds.low - reach && value < bounds.high + reach,
    );
  return Array.from(curve.oMinusCMinutes).flatMap((value, k) => {
    const sigma = curve.sigmaMinutes?.[k] ?? 0;
    return [value - sigma, value + sigma];
  });
}

function lineOf(curve: TimingCurve, preferred: boolean, axisID: string, offset: number): Curve {
  return {
    yAxisID: axisID,
    x: curve.timesBjdTdb.map((time) => time - offset),
    y: curve.oMinusCMinutes,
    colour: preferred ? MODEL_COLOUR : LINE_COLOURS[curve.model],
    widthPx: preferred ? 1.2 : 0.9,
  };
}

function bandOf(curve: TimingCurve, axisID: string, offset: number): Curve[] {
  const sigma = curve.sigmaMinutes;
  if (sigma === null) return [];
  return [
    {
      yAxisID: axisID,
      x: curve.timesBjdTdb.map((time) => time - offset),
      y: curve.oMinusCMinutes.map((value, k) => value + sigma[k]!),
      colour: BAND_COLOUR,
      widthPx: 0.4,
      band: { y: curve.oMinusCMinutes.map((value, k) => value - sigma[k]!), fill: BAND_COLOUR },
    },
  ];
}

/** O-C against date, two columns wide. */
export function oMinusCChart(solved: TimingSolved): ChartDrawing {
  const { rows, record } = solved;
  const { preferred } = record;
  const jitter = record.models.find(({ name }) => name === preferred)?.jitter.value ?? 0;
  const inflated = rows.sigmasMinutes.map((sigma) => Math.hypot(sigma, jitter));
  const grid = solved.curves[0]?.timesBjdTdb ?? rows.timesBjdTdb;
  const [first, last] = [grid[0] ?? 0, grid[grid.length - 1] ?? 1];
  const offset = timeOffset(first, last);
  const x = rows.timesBjdTdb.map((time) => time - offset);
  const panels = panelsOf(solved, x, inflated);
  const series = timingSeries(solved);
  const rBounds = rangeWithBars(rows.residualsMinutes, inflated);
  const rRange = paddedRange(Math.min(rBounds.low, 0), Math.max(rBounds.high, 0), 0.12);
  const residualPanel: TimingPanel = {
    yAxisID: 'yRes',
    x,
    y: rows.residualsMinutes,
    shows: () => true,
    size: 0.9,
  };
  const models = [...new Set(panels.flatMap((panel) => panel.curves.map(({ model }) => model)))];
  const labelOf = (model: TimingModelName): string => (model === preferred ? `${model} (preferred)` : model);
  const width = leftAxisWidthPx(...panels.map(({ range }) => ({ ...range, ticks: 6 })), {
    ...rRange,
    ticks: 4,
  });
  const scale = record.timeScale === 'unknown' ? 'date' : record.timeScale.replace('_', ' ');
  const target = cleanLabel(record.target, LONGEST_TITLE + 1);

  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        ...panels.flatMap(({ panel }) => timingPoints(series, rows.count, panel)),
        ...timingPoints(series, rows.count, residualPanel),
        ...models.map((model) =>
          curveDataset(
            labelOf(model),
            { colour: model === preferred ? MODEL_COLOUR : LINE_COLOURS[model], widthPx: 1.2 },
            model === preferred ? 10 : 25,
          ),
        ),
        curveDataset(BAND_LABEL, { colour: BAND_COLOUR, widthPx: 0.5, fill: BAND_COLOUR }, 30),
      ],
    },
    options: {
      ...commonOptions(),
      scales: {
        x: axis({
          title: offset === 0 ? `${scale} (d)` : `${scale} \u2212 ${fixedText(offset, 0)} (d)`,
          min: first - offset,
          max: last - offset,
          position: 'bottom',
          ticks: 9,
        }),
        // Stacked panels are laid out from the bottom up in the order of this list.
        yRes: axis({
          title: 'residual (min)',
          ...rRange,
          position: 'left',
          ticks: 4,
          stackWeight: 1,
          edge: [0.06, 0.08],
          thicknessPx: width,
        }),
        ...Object.fromEntries(
          [...panels].reverse().map(({ axisID, title, range }) => [
            axisID,
            axis({
              title,
              ...range,
              position: 'left',
              ticks: 6,
              stackWeight: 2,
              edge: [0.03, 0.03],
              thicknessPx: width,
            }),
          ]),
        ),
      },
      plugins: {
        title: heading(target.length <= LONGEST_TITLE ? target : ''),
        legend: legend(new Set([...series.map(({ label }) => label), ...models.map(labelOf), BAND_LABEL])),
        annotation: {
          clip: false,
          annotations: {
            zero: zeroLine('yRes'),
          },
        },
      },
    },
    plugins: [
      errorBars(
        [
          ...panels.flatMap(({ panel }) => timingBars(series, rows.sigmasMinutes, inflated, panel)),
          ...timingBars(series, rows.sigmasMinutes, inflated, residualPanel),
        ],
        series[0]?.label,
      ),
      curves(
        panels.flatMap(({ axisID, curves: own }) =>
          own.filter(({ model }) => model === preferred).flatMap((curve) => bandOf(curve, axisID, offset)),
        ),
        BAND_LABEL,
      ),
      ...models.map((model) =>
        curves(
          panels.flatMap(({ axisID, curves: own }) =>
            own
              .filter((curve) => curve.model === model)
              .map((curve) => lineOf(curve, model === preferred, axisID, offset)),
          ),
          labelOf(model),
        ),
      ),
      panelFrames([...panels.map(({ axisID }) => axisID), 'yRes']),
    ],
  });
  return {
    name: 'o-minus-c',
    widthMm: TWO_COLUMNS_MM,
    heightMm: 48 + PANEL_HEIGHT_MM * panels.length,
    title: `Mid-times of ${cleanLabel(record.target, 80)}`,
    caption: caption(solved, models),
    configure,
  };
}

function caption(solved: TimingSolved, drawn: readonly TimingModelName[]): string {
  const { preferred, models } = solved.record;
  const missing = models.filter(({ name }) => !drawn.includes(name)).map(({ name }) => name);
  return [
    'Observed mid-times minus the linear ephemeris; an occultation is compared with half a period after its transit.',
    `Lines: the models; grey band: one standard deviation of the prediction by the preferred (${preferred}) model, drawn on into the future.`,
    'Below: observed minus preferred model. Error bars: stated error; pale extension: with the jitter.',
    ...(missing.length === 0
      ? []
      : [`The ${missing.join(' and the ')} model swings too often to be drawn against date.`]),
  ].join(' ');
}
