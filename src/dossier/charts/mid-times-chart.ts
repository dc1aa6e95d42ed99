/** Mid-times of each companion against its ephemeris: observed minus computed, with the band of the ephemeris. */
import type { ChartConfiguration, ChartDataset } from 'chart.js';
import type { FittedMidTimes } from '../../solving/transit-types.js';
import type { Solved } from '../../solving/types.js';
import { axis, leftAxisWidthPx, paddedRange } from './axes.js';
import { calendarYears } from './calendar-years.js';
import { ONE_COLUMN_MM, TWO_COLUMNS_MM } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { curveDataset, curves } from './curves.js';
import { errorBars } from './error-bars.js';
import { heading, legend } from './headings.js';
import { cleanLabel, fileLetter, significantText } from './labels.js';
import { panelFrames } from './panel-frames.js';
import { grow, rangeWithBars } from './ranges.js';
import { BAND_COLOUR, commonOptions, FAINT_TEXT_COLOUR, markerRadius, markerStyle } from './style.js';
import { zeroLine } from './panel-parts.js';

const HEIGHT_MM = 78;
const MOST_NARROW = 12;
const MOST_SOURCES = 7;
const OTHERS = 'others';
const BAND_LABEL = 'ephemeris, 1 σ';
const BAND_POINTS = 120;

/** One chart per companion with at least two mid-times: `mid-times-b`. */
export function midTimesCharts(solved: Solved): ChartDrawing[] {
  return (solved.photometry?.midTimes ?? []).flatMap((times) =>
    times.cycles.length < 2 ? [] : [midTimesChart(solved, times)],
  );
}

/** Sources by the number of their times, those beyond the seventh called others. */
function sourcesOf({ sources }: FittedMidTimes): {
  readonly names: readonly string[];
  readonly of: Int32Array;
} {
  const clean = sources.map((source) => cleanLabel(source, 22) || 'mid-times');
  const names = [...new Set(clean)];
  const counts = new Map(names.map((name) => [name, clean.filter((one) => one === name).length]));
  const shown =
    names.length <= MOST_SOURCES + 1
      ? names
      : [...names].sort((one, other) => counts.get(other)! - counts.get(one)!).slice(0, MOST_SOURCES);
  return {
    names: shown.length < names.length ? [...shown, OTHERS] : shown,
    of: Int32Array.from(clean, (name) => (shown.includes(name) ? shown.indexOf(name) : shown.length)),
  };
}

/**
 * Standard error of the ephemeris at any cycle. Its square is a parabola of the cycle for a linear ephemeris; the parabola is
 * fitted to the given values, or these are joined by lines where they are fewer than three.
 */
export function ephemerisSigma(cycles: ArrayLike<number>, sigmas: Float64Array): (cycle: number) => number {
  const n = cycles.length;
  const centre = Array.from(cycles).reduce((sum, value) => sum + value, 0) / Math.max(1, n);
  const scale = Math.max(1, ...Array.from(cycles, (value) => Math.abs(value - centre)));
  const distinct = new Set(Array.from(cycles)).size;
  const order = distinct >= 3 ? 3 : distinct;
  // Normal equations of at most three unknowns, by elimination; rows scaled to the unit interval.
  const rows = Array.from({ length: order }, (_, i) =>
    Array.from({ length: order + 1 }, (_, j) => {
      let sum = 0;
      for (let k = 0; k < n; k += 1) {
        const x = (cycles[k]! - centre) / scale;
        sum += x ** i * (j < order ? x ** j : sigmas[k]! ** 2);
      }
      return sum;
    }),
  );
  for (let i = 0; i < order; i += 1)
    for (let k = i + 1; k < order; k += 1) {
      const factor = rows[k]![i]! / rows[i]![i]!;
      for (let j = i; j <= order; j += 1) rows[k]![j]! -= factor * rows[i]![j]!;
    }
  const solution = new Array<number>(order).fill(0);
  for (let i = order - 1; i >= 0; i -= 1) {
    let sum = rows[i]![order]!;
    for (let j = i + 1; j < order; j += 1) sum -= rows[i]![j]! * solution[j]!;
    solution[i] = sum / rows[i]![i]!;
  }
  return (cycle) => {
    const x = (cycle - centre) / scale;
    return Math.sqrt(
      Math.max(
        0,
        solution.reduce((sum, value, power) => sum + value * x ** power, 0),
      ),
    );
  };
}

function midTimesChart(solved: Solved, times: FittedMidTimes): ChartDrawing {
  const { record } = solved;
  const companion = Math.max(
    0,
    record.companions.findIndex(({ letter }) => letter === times.letter),
  );
  const letter = cleanLabel(times.letter, 8);
  const { names, of } = sourcesOf(times);
  const hasOccultations = times.isOccultation.some((value) => value === 1);
  const x = Float64Array.from(times.cycles, (cycle, i) => cycle + (times.isOccultation[i] === 1 ? 0.5 : 0));
  const y = times.oMinusCMinutes;
  const sigmas = times.sigmasDays.map((value) => 1440 * value);
  const cycleRange = paddedRange(Math.min(...x), Math.max(...x), 0.04);
  const sigmaAt = ephemerisSigma(x, times.ephemerisSigmaMinutes);
  const bandX = Float64Array.from(
    { length: BAND_POINTS + 1 },
    (_, i) => cycleRange.min + ((cycleRange.max - cycleRange.min) * i) / BAND_POINTS,
  );
  const bandHigh = bandX.map(sigmaAt);
  const bounds = grow(
    grow(rangeWithBars(y, sigmas), bandHigh),
    bandHigh.map((value) => -value),
  );
  const yRange = paddedRange(bounds.low, bounds.high, 0.08);
  const isWide = x.length > MOST_NARROW;
  const radius = markerRadius(x.length);
  const reference =
    times.timesBjdTdb[0]! - x[0]! * (record.companions[companion]?.elements.period.value ?? 0);
  const period = record.companions[companion]?.elements.period.value ?? null;
  const target = cleanLabel(record.target, isWide ? 30 : 19);
  const name = target.endsWith('…') || target === '' ? 'companion' : target;
  const groups = names.flatMap((label, source) =>
    [0, 1].map((occultation) => ({
      label,
      source,
      occultation,
      rows: Array.from(of.keys()).filter(
        (row) => of[row] === source && times.isOccultation[row] === occultation,
      ),
    })),
  );
  const dataset = (group: (typeof groups)[number]): ChartDataset<'scatter'> => {
    const style = markerStyle(group.source);
    const fill = group.occultation === 1 ? '#ffffff' : style.fill;
    return {
      type: 'scatter',
      label: group.occultation === 1 ? `${group.label} (occultation)` : group.label,
      data: group.rows.map((row) => ({ x: x[row]!, y: y[row]! })),
      yAxisID: 'y',
      pointStyle: style.shape,
      pointRadius: radius * style.sizeFactor,
      pointBackgroundColor: fill,
      pointBorderColor: style.edge,
      pointBorderWidth: group.occultation === 1 ? 1.1 : 0.7,
      backgroundColor: fill,
      borderColor: style.edge,
      order: 5,
    };
  };
  const filled = groups.filter(({ rows }) => rows.length > 0);
  const listed = [...filled.map((group) => dataset(group).label!), BAND_LABEL];
  const width = leftAxisWidthPx({ ...yRange, ticks: 6 });
  const configure = (): ChartConfiguration => ({
    type: 'scatter',
    data: {
      datasets: [
        ...filled.map(dataset),
        curveDataset(BAND_LABEL, { colour: FAINT_TEXT_COLOUR, widthPx: 0.5, fill: BAND_COLOUR }, 30),
      ],
    },
    options: {
      ...commonOptions(),
      layout: { padding: { left: 2, right: 10, top: 3, bottom: 2 } },
      scales: {
        x: axis({ title: hasOccultations ? 'cycle (occultations at half cycles)' : 'cycle', ...cycleRange, position: 'bottom', ticks: isWide ? 9 : 5 }), // prettier-ignore
        y: axis({ title: 'observed − computed (min)', ...yRange, position: 'left', ticks: 6, thicknessPx: width }),
      },
      plugins: {
        title: heading(`${name} ${letter}: mid-times`),
        legend: legend(new Set(listed)),
        annotation: {
          clip: false,
          annotations: {
            zero: zeroLine('y'),
          },
        },
      },
    },
    plugins: [
      errorBars(filled.map((group) => ({
        yAxisID: 'y',
        x: Float64Array.from(group.rows, (row) => x[row]!),
        y: Float64Array.from(group.rows, (row) => y[row]!),
        sigma: Float64Array.from(group.rows, (row) => sigmas[row]!),
        colour: markerStyle(group.source).bar,
        widthPx: 0.9,
      })), filled[0] === undefined ? undefined : dataset(filled[0]).label),
      curves([{ yAxisID: 'y', x: bandX, y: bandHigh, colour: FAINT_TEXT_COLOUR, widthPx: 0.5, band: { y: bandHigh.map((value) => -value), fill: BAND_COLOUR } }], BAND_LABEL),
      panelFrames(['y']),
      ...(period === null ? [] : [calendarYears({ scaleID: 'x', yAxisID: 'y', timeOf: (cycle) => reference + cycle * period })]),
    ],
  }); // prettier-ignore
  return {
    name: `mid-times-${fileLetter(times.letter, companion)}`,
    widthMm: isWide ? TWO_COLUMNS_MM : ONE_COLUMN_MM,
    heightMm:
      HEIGHT_MM + 3.4 * Math.max(0, Math.ceil(listed.join('      ').length / (isWide ? 100 : 44)) - 1),
    title: `Mid-times of companion ${letter} of ${cleanLabel(record.target, 80)}`,
    caption: [
      `Mid-times of companion ${letter} against the ephemeris of this solution${period === null ? '' : ` (period ${significantText(period, 8)} d)`}: observed minus computed.`,
      'Grey band: standard error of the ephemeris itself.',
      hasOccultations ? 'Open marks: occultations, at half cycles.' : '',
      names.includes(OTHERS) ? `Sources beyond the ${MOST_SOURCES} with most times are called others.` : '',
    ]
      .filter((sentence) => sentence !== '')
      .join(' '),
    configure,
  };
}
