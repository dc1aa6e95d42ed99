/** A light-curve table as it enters the fit: points near events, averaged where they are many, with a baseline per segment. */
import { standardDeviation, upperMedian } from '../../numerics/summary.js';
import type { LightCurveTable } from '../../observations/photometry-types.js';
import { daysOf, windowsOf, type Ephemeris, type Window } from './curve-windows.js';
import type { CurveData, CurveSegment } from './joint-data.js';

/** Points of one table that are fitted as they are; where there are more, neighbours are averaged. */
const MOST_POINTS = 2500;
/** An average is never longer than this share of the shortest duration: smearing is modelled, but ingress must be resolved. */
const LONGEST_AVERAGE = 1 / 40;

export interface PreparedCurve {
  readonly table: LightCurveTable;
  readonly data: CurveData;
  readonly windows: readonly Window[];
  /** Neighbouring points per fitted point. */
  readonly averaged: number;
  /** Of the baseline, beside the constant. */
  readonly terms: readonly string[];
  readonly selection: string;
}

/** Rows of the fit before any baseline is chosen. */
interface Selected {
  readonly timesDays: Float64Array;
  readonly flux: Float64Array;
  readonly sigmas: Float64Array;
  readonly averaged: Float64Array;
  readonly regressors: ReadonlyMap<string, Float64Array>;
  readonly windows: Window[];
}

/**
 * @param band - number of the table's band among the bands of the fit
 * @param terms - baseline beside the constant: `time`, `time^2`, `time^3`, or labels of regressors
 * @returns null where no event falls into the table
 */
export function prepareCurve(
  table: LightCurveTable,
  epochBjdTdb: number,
  ephemerides: readonly Ephemeris[],
  band: number,
  terms: readonly string[],
): PreparedCurve | null {
  const timesDays = daysOf(table, epochBjdTdb);
  const windows = windowsOf(timesDays, ephemerides);
  if (windows.length === 0) return null;
  const count = windows.reduce((sum, { start, end }) => sum + end - start, 0);
  const shortest = Math.min(...ephemerides.map(({ durationDays }) => durationDays));
  const group = groupSize(timesDays, windows, count, shortest);
  const selected = select(table, timesDays, windows, group);
  const step = group > 1 ? typicalStep(timesDays, windows) : 0;
  // One exposure with the same spread in time: points at equal steps, each spread over its own exposure.
  const exposureDays = Math.hypot(table.exposureDays, step * Math.sqrt(group * group - 1));
  const segments = selected.windows.map((window) => segmentOf(selected, window, terms));
  const typicalSigma = upperMedian(selected.sigmas) ?? 0;
  const data: CurveData = {
    name: table.name,
    timesDays: selected.timesDays,
    flux: selected.flux,
    sigmas: selected.sigmas,
    averaged: selected.averaged,
    exposureDays,
    band,
    segments,
    dilution: table.dilution,
    jitter: table.jitter,
    noise: table.noise,
    typicalSigma,
    scatter: Math.max(standardDeviation(selected.flux), typicalSigma),
  };
  return {
    table,
    data,
    windows: selected.windows,
    averaged: group,
    terms,
    selection: selectionSentence(table, windows, count, group),
  };
}

function selectionSentence(
  table: LightCurveTable,
  windows: readonly Window[],
  count: number,
  group: number,
): string {
  const averaging = group > 1 ? `, averaged by ${group}` : '';
  if (count === table.used) return `all ${count} points${averaging}`;
  const runs = `${windows.length} run${windows.length === 1 ? '' : 's'}`;
  return `${count} of ${table.used} points: those within 1.5 durations of an event (${runs})${averaging}`;
}

/** Usual distance of neighbouring points within the windows. */
function typicalStep(timesDays: Float64Array, windows: readonly Window[]): number {
  const steps: number[] = [];
  for (const { start, end } of windows)
    for (let i = start + 1; i < end; i++) steps.push(timesDays[i]! - timesDays[i - 1]!);
  return upperMedian(steps) ?? 0;
}

function groupSize(
  timesDays: Float64Array,
  windows: readonly Window[],
  count: number,
  shortestDays: number,
): number {
  if (count <= MOST_POINTS) return 1;
  const step = typicalStep(timesDays, windows);
  const most = step > 0 ? Math.floor((LONGEST_AVERAGE * shortestDays) / step) : 1;
  return Math.max(1, Math.min(Math.ceil(count / MOST_POINTS), most));
}

/** Copies the rows of the windows; with `group` > 1 runs of neighbours become weighted means. */
function select(
  table: LightCurveTable,
  timesDays: Float64Array,
  windows: readonly Window[],
  group: number,
): Selected {
  const runs: (readonly [number, number])[] = [];
  const moved: Window[] = [];
  const widest = (group - 0.5) * typicalStep(timesDays, windows);
  for (const { start, end, events } of windows) {
    const first = runs.length;
    for (let at = start; at < end;) {
      let to = Math.min(end, at + group);
      // An average must not reach across a gap.
      while (to > at + 1 && timesDays[to - 1]! - timesDays[at]! > widest) to--;
      runs.push([at, to]);
      at = to;
    }
    moved.push({ start: first, end: runs.length, events });
  }
  const weightOf = (i: number): number => table.sigmas[i]! ** -2;
  const mean = (values: Float64Array): Float64Array =>
    Float64Array.from(runs, ([from, to]) => {
      if (to === from + 1) return values[from]!;
      let total = 0;
      let sum = 0;
      for (let i = from; i < to; i++) {
        total += weightOf(i);
        sum += weightOf(i) * values[i]!;
      }
      return sum / total;
    });
  return {
    timesDays: mean(timesDays),
    flux: mean(table.flux),
    sigmas: Float64Array.from(runs, ([from, to]) => {
      let total = 0;
      for (let i = from; i < to; i++) total += weightOf(i);
      return 1 / Math.sqrt(total);
    }),
    averaged: Float64Array.from(runs, ([from, to]) => to - from),
    regressors: new Map([...table.regressors].map(([label, values]) => [label, mean(values)])),
    windows: moved,
  };
}

/** Columns of the baseline of one segment: the constant, then each term centred and scaled to unit spread. */
function segmentOf(selected: Selected, { start, end }: Window, terms: readonly string[]): CurveSegment {
  const rows = end - start;
  const columns = [
    new Float64Array(rows).fill(1),
    ...terms.map((term) => scaled(columnOf(selected, start, end, term))),
  ].filter((column, j) => j === 0 || column.some((value) => value !== 0));
  const design = new Float64Array(rows * columns.length);
  columns.forEach((column, j) => {
    for (let i = 0; i < rows; i++) design[i * columns.length + j] = column[i]!;
  });
  return { start, end, design, columns: columns.length };
}

function columnOf(selected: Selected, start: number, end: number, term: string): Float64Array {
  const times = selected.timesDays.subarray(start, end);
  const power = { time: 1, 'time^2': 2, 'time^3': 3 }[term];
  if (power !== undefined) {
    const middle = 0.5 * (times[0]! + times[times.length - 1]!);
    return times.map((time) => (time - middle) ** power);
  }
  return selected.regressors.get(term)!.slice(start, end);
}

function scaled(column: Float64Array): Float64Array {
  const mean = column.reduce((sum, value) => sum + value, 0) / column.length;
  const spread = standardDeviation(column);
  return column.map((value) => (spread > 0 ? (value - mean) / spread : 0));
}
