/**
 * What a table without a header holds, by its numbers. The rules, on the first rows (up to 400):
 *
 * - whole numbers that run along a straight line with full Julian dates are cycles: mid-times;
 * - two columns, dates and numbers from 0 to 0.1: mid-times; dates and numbers near 1: a light curve without errors;
 * - dates, then numbers near 1 (median 0.7 to 1.4, nine of ten from 0.3 to 1.7) with errors below 0.3, rows a tenth of a day
 *   apart or less: a light curve. Rows further apart may be velocities in km/s: unclear;
 * - dates, then numbers from 5 to 25 that vary by less than 2, errors below 0.5, rows as close: magnitudes or km/s, unclear;
 * - numbers above 10^6: no velocity, counts;
 * - anything else is left to the reader of velocities.
 */
import { isNumeric } from './column-plan.js';
import { LARGEST_FULL_DATE, SMALLEST_FULL_DATE } from './column-units.js';
import { readCell } from './numbers.js';
import type { TextTable } from './table-text.js';
import type { ColumnMeaning, TableContent } from './types.js';
import { median } from './validate.js';

export interface ValueReading {
  /** `null`: unclear. */
  readonly content: TableContent | null;
  /** Index of the column by meaning. */
  readonly of: ReadonlyMap<ColumnMeaning, number>;
  /** Why, or between what it is unclear. */
  readonly message: string;
}

const CLOSE_ROWS_DAYS = 0.1;
/** Two or three rows may lie on a line by chance; cycles in front of the dates can be nothing else. */
const FEWEST_CYCLES = 4;

function numbersOf(table: TextTable, index: number): Float64Array {
  return Float64Array.from(table.rows, (row) => {
    const read = readCell(row.cells[index]!);
    return read.kind === 'number' ? read.value : NaN;
  }).filter((value) => !Number.isNaN(value));
}

function reading(
  content: TableContent | null,
  message: string,
  of: readonly (readonly [ColumnMeaning, number])[] = [],
): ValueReading {
  return { content, message, of: new Map(of) };
}

/**
 * @param declared - what the table is said to hold: then only the place of its columns is asked
 * @returns `null` where the numbers speak for nothing but velocities
 */
export function contentByValues(table: TextTable, declared: TableContent | null): ValueReading | null {
  if (declared === 'velocities') return null;
  const numeric = Array.from({ length: table.width }, (_, index) => index).filter((index) =>
    isNumeric(table, index),
  );
  const columns = numeric.map((index) => numbersOf(table, index));
  if (columns.length < 2 || columns.some((column) => column.length === 0)) return null;
  const place = (meanings: readonly ColumnMeaning[]): [ColumnMeaning, number][] =>
    meanings.map((meaning, at) => [meaning, numeric[at]!]);
  if (declared !== 'light curve') {
    const cycles = findCycles(columns);
    if (cycles !== null) {
      const [time, error, cycle] = cycles;
      return reading('mid-times', 'whole numbers that count along with the dates are cycles', [
        ['time', numeric[time]!], ['error', numeric[error]!], ['cycle', numeric[cycle]!],
      ]); // prettier-ignore
    }
    const [times, errors] = [columns[0]!, columns[1]!];
    if (declared === 'mid-times') return reading('mid-times', 'declared', place(['time', 'error']));
    if (columns.length === 2 && areFullDates(times) && within(errors, 0, 0.1))
      return reading(
        'mid-times',
        'dates, each with a number from 0 to 0.1: mid-times and their errors',
        place(['time', 'error']),
      );
  }
  return lightCurve(columns, declared, place);
}

function lightCurve(
  columns: readonly Float64Array[],
  declared: TableContent | null,
  place: (meanings: readonly ColumnMeaning[]) => [ColumnMeaning, number][],
): ValueReading | null {
  const [times, values, errors] = [columns[0]!, columns[1]!, columns[2] ?? null];
  const size = Math.abs(median(values));
  const hasErrors =
    errors !== null && errors.every((error) => error > 0) && median(errors) < 0.3 * Math.max(size, 1);
  const asMagnitudes = size >= 5 && size <= 25 && spread(values) < 2;
  const of = place(['time', 'flux', ...(hasErrors ? (['error'] as const) : [])]);
  if (declared === 'light curve') return reading('light curve', 'declared', of);
  if (columns.length > 2 && !hasErrors) return null;
  const step = usualStep(times);
  const isClose = step > 0 && step <= CLOSE_ROWS_DAYS;
  if (isNearOne(values))
    return isClose
      ? reading('light curve', 'numbers near 1 on rows that follow closely are a flux', of)
      : reading(null, 'a flux near 1, or velocities in km/s: its rows are far apart');
  if (asMagnitudes && isClose && (errors === null || median(errors) < 0.5))
    return reading(null, 'magnitudes, or velocities in km/s');
  if (median(values) > 1e6 && isClose)
    return reading('light curve', 'numbers above a million are no velocities, but counts', of);
  return null;
}

/** Positions of times, errors and cycles, where whole numbers and full dates lie on one line. */
function findCycles(columns: readonly Float64Array[]): readonly [number, number, number] | null {
  for (const [cycle, numbers] of columns.entries()) {
    if (numbers.length < 2 || !numbers.every(Number.isInteger) || areFullDates(numbers)) continue;
    const time = columns.findIndex((column) => areFullDates(column) && column.length === numbers.length);
    if (time < 0 || !runsAlong(numbers, columns[time]!)) continue;
    if (cycle > time && numbers.length < FEWEST_CYCLES) continue;
    const error = columns.findIndex((column, at) => at > time && at !== cycle && within(column, 0, 1));
    if (error >= 0) return [time, error, cycle];
  }
  return null;
}

/** Correlation so close to 1 that only counting explains it. */
function runsAlong(cycles: Float64Array, times: Float64Array): boolean {
  const first = times[0]!;
  const [meanCycle, meanTime] = [mean(cycles), mean(times.map((time) => time - first))];
  let [both, ofCycle, ofTime] = [0, 0, 0];
  for (let row = 0; row < times.length; row++) {
    const [x, y] = [cycles[row]! - meanCycle, times[row]! - first - meanTime];
    both += x * y;
    ofCycle += x * x;
    ofTime += y * y;
  }
  return ofCycle > 0 && ofTime > 0 && both > 0 && 1 - both / Math.sqrt(ofCycle * ofTime) < 1e-6;
}

function mean(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

function areFullDates(values: Float64Array): boolean {
  return within(values, SMALLEST_FULL_DATE, LARGEST_FULL_DATE);
}

/** All of `values` above `low` and below `high`. */
function within(values: Float64Array, low: number, high: number): boolean {
  return values.length > 0 && values.every((value) => value > low && value < high);
}

function isNearOne(values: Float64Array): boolean {
  const middle = median(values);
  const near = values.filter((value) => value > 0.3 && value < 1.7);
  return middle > 0.7 && middle < 1.4 && near.length >= 0.9 * values.length;
}

/** Distance of the 5 % and the 95 % point. */
function spread(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  return sorted[Math.floor(0.95 * (sorted.length - 1))]! - sorted[Math.ceil(0.05 * (sorted.length - 1))]!;
}

function usualStep(times: Float64Array): number {
  const sorted = Float64Array.from(times).sort();
  const steps = sorted.subarray(1).map((time, place) => time - sorted[place]!);
  return steps.length === 0 ? 0 : median(steps);
}
