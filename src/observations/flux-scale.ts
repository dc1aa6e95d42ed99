/** From the numbers of a light curve as written (flux, counts, magnitudes, ppm) to relative flux and its errors. */
import type { IssueList } from './issues.js';
import type { LightCurveColumns } from './light-curve-columns.js';
import { fluxUnitOf, splitLabel, unitWord } from './photometry-labels.js';
import type { TextTable } from './table-text.js';
import type { ErrorUnit, FluxUnit, TableNotice, TableRequest } from './types.js';
import { FLUX_PER_MAGNITUDE } from './units.js';
import { median } from './validate.js';

export interface FluxReading {
  readonly unit: FluxUnit;
  /** Magnitudes per number written: 0.001 for mmag. */
  readonly scale: number;
  /** Unit of the errors; `null` is that of the values. */
  readonly errorUnit: ErrorUnit | null;
}

export interface RelativeFlux {
  readonly flux: Float64Array;
  readonly sigmas: Float64Array | null;
  readonly normalisation: number;
}

/** Median, and the 5 % and 95 % points, of the values as written. */
interface Range {
  readonly middle: number;
  readonly low: number;
  readonly high: number;
}

function rangeOf(values: Float64Array): Range {
  const sorted = Float64Array.from(values).sort();
  const at = (share: number): number => sorted[Math.round(share * (sorted.length - 1))]!;
  return { middle: median(sorted), low: at(0.05), high: at(0.95) };
}

/** The unit that brackets, a unit row or the column list give; empty text where none does. */
function writtenUnit(index: number, table: TextTable, plan: LightCurveColumns): string {
  const { unit } = splitLabel(plan.labels?.[index] ?? '');
  if (unit !== '') return unit;
  const row = table.unitRow[index] ?? '';
  if (row !== '') return row.replace(/^[[({]|[\])}]$/g, '');
  const described = /\b(m?mag|ppm|percent|relative)\b/i.exec(plan.descriptions.get(index)?.text ?? '');
  return described?.[1] ?? '';
}

/**
 * Decides the units of values and errors; what cannot be told from the numbers becomes an issue.
 *
 * @param values - as written, used rows
 */
export function readFluxUnit(
  table: TextTable,
  plan: LightCurveColumns,
  request: TableRequest,
  values: Float64Array,
  issues: IssueList,
  notices: TableNotice[],
): FluxReading {
  const declared = request.lightCurve?.fluxUnit ?? null;
  const written = fluxUnitOf(writtenUnit(plan.value, table, plan));
  const scale = written === 'mmag' && (declared ?? 'mag') === 'mag' ? 0.001 : 1;
  const stated = declared ?? (written === 'mmag' ? 'mag' : written);
  if (declared !== null && written !== null && (written === 'mmag' ? 'mag' : written) !== declared)
    notices.push({ code: 'unit-override', message: `the table says ${written}; ${declared} was declared and is used`, lines: [] }); // prettier-ignore
  const range = rangeOf(values);
  const unit = stated ?? (plan.isMagnitude ? 'mag' : unitOfNumbers(range, plan, issues));
  if (stated === 'relative' && looksLikeMagnitudes(range)) complainOfMagnitudes(range, plan, issues);
  if (unit === 'mag' && (range.middle * scale > 40 || range.middle * scale < -30))
    issues.add({
      code: 'not-magnitudes',
      field: plan.labels?.[plan.value] ?? null,
      message: `values near ${short(range.middle)} are no magnitudes`,
      hint: 'is it flux? declare the unit: relative or counts',
    });
  return { unit, scale, errorUnit: errorUnitOf(table, plan, request) };
}

function errorUnitOf(table: TextTable, plan: LightCurveColumns, request: TableRequest): ErrorUnit | null {
  const index = plan.of.get('error');
  if (index === undefined) return null;
  return request.errorUnit ?? unitWord(writtenUnit(index, table, plan));
}

function looksLikeMagnitudes({ middle, low, high }: Range): boolean {
  return middle >= 5 && middle <= 25 && high - low < 2;
}

function complainOfMagnitudes({ middle }: Range, plan: LightCurveColumns, issues: IssueList): void {
  issues.add({
    code: 'looks-like-magnitudes',
    field: plan.labels?.[plan.value] ?? null,
    message: `a flux is expected, but values near ${short(middle)} that vary so little look like magnitudes`,
    hint: 'declare the unit of the table: mag, or counts if it is a flux indeed',
  });
}

/** A flux without a unit: relative when near 1, else counts of some kind. */
function unitOfNumbers(range: Range, plan: LightCurveColumns, issues: IssueList): FluxUnit {
  if (looksLikeMagnitudes(range)) complainOfMagnitudes(range, plan, issues);
  return range.middle > 0.5 && range.middle < 2 ? 'relative' : 'counts';
}

/**
 * Relative flux, divided by the median (magnitudes: by the flux of the median magnitude).
 *
 * @param errors - as written; `null` when there are none
 * @returns `null` when the values cannot be normalised (an issue says so)
 */
export function toRelativeFlux(
  reading: FluxReading,
  values: Float64Array,
  errors: Float64Array | null,
  issues: IssueList,
  notices: TableNotice[],
): RelativeFlux | null {
  const { unit, scale } = reading;
  const { middle, low, high } = rangeOf(values);
  if (unit === 'mag') {
    const flux = values.map((value) => 10 ** (-0.4 * scale * (value - middle)));
    const sigmas = errors && errors.map((error, row) => error * magnitudeErrorFactor(reading) * flux[row]!);
    return { flux, sigmas, normalisation: middle * scale };
  }
  if (unit === 'ppm') {
    const level = 1 + 1e-6 * middle;
    notices.push({ code: 'ppm', message: 'values are read as deviations from the usual flux in parts per million', lines: [] }); // prettier-ignore
    if (level > 0 && 1 + 1e-6 * low > 0) {
      const flux = values.map((value) => (1 + 1e-6 * value) / level);
      return { flux, sigmas: errors && errors.map((error) => error * linearErrorFactor(reading, level)), normalisation: level }; // prettier-ignore
    }
  }
  if (middle <= 0 || low <= 0) {
    issues.add({
      code: 'not-normalisable',
      field: 'flux',
      message: `nine of ten values lie from ${short(low)} to ${short(high)}, the median is ${short(middle)}: flux around zero cannot be divided by its usual value`,
      hint: 'give the flux with the star in it; or declare the unit: ppm (deviations), or mag (differential magnitudes)',
    });
    return null;
  }
  if (Math.abs(middle - 1) > 0.01)
    notices.push({
      code: 'normalised',
      message: `the flux is divided by its median, ${short(middle)}`,
      lines: [],
    });
  const flux = values.map((value) => value / middle);
  return { flux, sigmas: errors && errors.map((error) => error * linearErrorFactor(reading, middle)), normalisation: middle }; // prettier-ignore
}

/** Relative error per number written, for a flux with the median `middle`. */
function linearErrorFactor({ unit, errorUnit }: FluxReading, middle: number): number {
  switch (errorUnit) {
    case 'percent':
      return 0.01;
    case 'ppm':
      return 1e-6;
    case 'mag':
      return FLUX_PER_MAGNITUDE;
    case 'mmag':
      return 0.001 * FLUX_PER_MAGNITUDE;
    case 'relative':
      return unit === 'relative' ? 1 / middle : 1;
    default:
      return unit === 'ppm' ? 1e-6 / middle : 1 / middle;
  }
}

/** Relative error per number written, for magnitudes. */
function magnitudeErrorFactor({ scale, errorUnit }: FluxReading): number {
  switch (errorUnit) {
    case 'percent':
      return 0.01;
    case 'ppm':
      return 1e-6;
    case 'relative':
      return 1;
    case 'mag':
      return FLUX_PER_MAGNITUDE;
    case 'mmag':
      return 0.001 * FLUX_PER_MAGNITUDE;
    default:
      return scale * FLUX_PER_MAGNITUDE;
  }
}

/** Scatter from one row to the next, robust: 1.4826 times the median of |differences| over the square root of 2. NaN below three rows. */
export function pointToPoint(flux: Float64Array): number {
  if (flux.length < 3) return NaN;
  const steps = new Float64Array(flux.length - 1);
  for (let row = 0; row < steps.length; row++) steps[row] = Math.abs(flux[row + 1]! - flux[row]!);
  return (1.4826 * median(steps)) / Math.SQRT2;
}

export function short(value: number): string {
  return String(Number(value.toPrecision(5)));
}

/** Words for the unit of a column in `check`. */
export function unitWords(reading: FluxReading): { readonly value: string; readonly error: string } {
  const value = reading.unit === 'mag' ? (reading.scale === 1 ? 'mag' : 'mmag') : reading.unit;
  return { value, error: reading.errorUnit ?? value };
}

/** Why an error column may be in another unit than its flux. */
export function errorUnitNotice(sigmas: Float64Array, scatter: number): TableNotice[] {
  const usual = median(sigmas);
  const ratio = usual / scatter;
  if (!(scatter > 0) || (ratio < 100 && ratio > 0.01)) return [];
  const factor = ratio > 1 ? ratio : 1 / ratio;
  const message = `the usual error, ${short(usual)} of the flux, is about ${Number(factor.toPrecision(1))} times ${ratio > 1 ? 'larger' : 'smaller'} than the scatter from row to row, ${short(scatter)}: are the errors in another unit? (error-unit in a case: ppm, percent, relative, mag, mmag)`;
  return [{ code: 'error-unit', message, lines: [] }];
}
