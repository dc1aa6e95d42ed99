/** From a `SourceTable` to a `LightCurveTable`: columns, rows, dates, relative flux, exposure, regressors, checks. */
import { decideTime, type TimeReading } from './column-units.js';
import type { ContentReading } from './content.js';
import { decideExposure } from './exposure.js';
import { pointToPoint, readFluxUnit, toRelativeFlux, unitWords, type FluxReading } from './flux-scale.js';
import type { IssueList } from './issues.js';
import { suspiciousCurve } from './light-curve-checks.js';
import { planLightCurve, type LightCurveColumns } from './light-curve-columns.js';
import { baselineOf, usableRegressors } from './light-curve-regressors.js';
import { checkSpan, errorsArePositive, timeUnit } from './photometry-checks.js';
import { usedRows } from './photometry-rows.js';
import type { LightCurveTable } from './photometry-types.js';
import type { SourceColumns, SourceTable } from './source-table.js';
import { fileStem, quoted, withoutControls } from './text.js';
import { toBjdTdb } from './time-scale.js';
import type { ColumnReading, TableNotice, TableRequest } from './types.js';

export interface FileFacts {
  readonly path: string;
  readonly sha256: string;
}

/** @throws InputDataError with all problems of the table */
export function readLightCurve(
  source: SourceTable,
  request: TableRequest,
  reading: ContentReading,
  file: FileFacts,
  issues: IssueList,
): LightCurveTable {
  const { sample } = source;
  const notices: TableNotice[] = [];
  const plan = planLightCurve(sample, request, reading, issues, notices);
  issues.throwIfAny();
  const rows = readRowsInOrder(source, plan!, request, issues, notices);
  const { times, values, errors, lines } = rows;
  const unit = readFluxUnit(sample, plan!, request, values, issues, notices);
  const relative = toRelativeFlux(unit, values, errors, issues, notices);
  issues.throwIfAny();
  const { flux, normalisation } = relative!;
  const scatter = pointToPoint(flux);
  const sigmas = relative!.sigmas ?? scatterAsErrors(flux.length, scatter, issues, notices);
  const exposure = decideExposure(
    sample,
    plan!,
    request.lightCurve?.exposureDays ?? null,
    times,
    rows.exposures,
    notices,
  );
  const regressors = usableRegressors(rows.regressors, lines, notices);
  const baseline = baselineOf(request.lightCurve?.baseline ?? null, regressors, issues);
  const band = bandOf(rows.bands, source, request, issues, notices);
  issues.throwIfAny();
  notices.push(
    ...suspiciousCurve({ timesBjdTdb: times, flux, sigmas, hasErrors: errors !== null, scatter, lines }),
  );
  const name = nameOf(request, file.path);
  return {
    content: 'light curve', ...file, rows: rows.count, used: times.length, lines,
    columns: describeColumns(source, plan!, unit, rows.time, regressors),
    timeScale: rows.time.scale, timeOffsetDays: rows.time.offsetDays,
    name, band: band ?? name, fluxUnit: unit.unit === 'mag' ? 'magnitude' : unit.unit === 'counts' ? 'counts' : 'relative',
    timesBjdTdb: times, flux, sigmas, sigmasKnown: errors === null ? 'scatter' : 'column', normalisation,
    exposureDays: exposure.days, exposureKnown: exposure.known, regressors,
    dilution: request.lightCurve?.dilution ?? { value: 0, sigma: 0 },
    baseline, jitter: request.lightCurve?.jitter ?? null, noise: request.lightCurve?.noise ?? 'white', notices,
  }; // prettier-ignore
}

/** The used rows in order of time, numbers as written except the times. */
interface OrderedRows {
  readonly count: number;
  readonly time: TimeReading;
  readonly times: Float64Array;
  readonly values: Float64Array;
  readonly errors: Float64Array | null;
  readonly exposures: Float64Array | null;
  readonly regressors: ReadonlyMap<string, Float64Array>;
  readonly bands: ReadonlySet<string>;
  readonly lines: Uint32Array;
}

function readRowsInOrder(
  source: SourceTable,
  plan: LightCurveColumns,
  request: TableRequest,
  issues: IssueList,
  notices: TableNotice[],
): OrderedRows {
  const at = (meaning: 'error' | 'quality' | 'exposure' | 'band'): number | null =>
    plan.of.get(meaning) ?? null;
  const time = plan.of.get('time')!;
  const [named, quality, exposure, band] = [at('error'), at('quality'), at('exposure'), at('band')];
  const optional = [named, quality, exposure].filter((index) => index !== null);
  const numbers = [...new Set([time, plan.value, ...optional, ...plan.regressors.values()])];
  const columns = source.columns(numbers, band === null ? [] : [band], issues);
  const error = withNumbers(named, columns, notices);
  const needed = [time, plan.value, ...(error === null ? [] : [error])];
  let used = usedRows(
    columns,
    { labels: plan.labels, quality, needed, gapsAreAllowed: true },
    issues,
    notices,
  );
  const written = columns.numbers.get(time)!;
  if (error !== null) errorsArePositive(columns, used, error, plan.labels, source, issues);
  const timeReading = decideTime(source.sample, plan, request, pick(written, used), issues, notices);
  checkSpan(written, used, columns.lines, issues);
  issues.throwIfAny();
  used = inOrder(written, used, notices);
  const take = (index: number | null): Float64Array | null =>
    index === null ? null : pick(columns.numbers.get(index)!, used);
  const bandTexts = band === null ? [] : columns.texts.get(band)!;
  return {
    count: columns.rows,
    time: timeReading,
    times: toBjdTdb(timeReading.scale, pick(written, used).map((days) => days + timeReading.offsetDays)),
    values: take(plan.value)!, errors: take(error), exposures: take(exposure),
    regressors: new Map([...plan.regressors].map(([name, index]) => [name, take(index)!])),
    bands: new Set(band === null ? [] : Array.from(used, (row) => withoutControls(bandTexts[row]!))),
    lines: used.map((row) => columns.lines[row]!),
  }; // prettier-ignore
}

/** The column of errors, unless it is empty from top to bottom. */
function withNumbers(error: number | null, columns: SourceColumns, notices: TableNotice[]): number | null {
  if (error === null || columns.rows === 0) return error;
  const isEmpty = columns.numbers.get(error)!.every(Number.isNaN);
  if (!isEmpty || columns.odd.some((cell) => cell.column === error)) return error;
  notices.push({ code: 'errors-empty', message: 'the column of errors holds no numbers', lines: [] });
  return null;
}

function pick(values: Float64Array, rows: Uint32Array): Float64Array {
  const picked = new Float64Array(rows.length);
  for (let place = 0; place < rows.length; place++) picked[place] = values[rows[place]!]!;
  return picked;
}

/** Rows by time; those of equal time keep the order of the file. */
function inOrder(times: Float64Array, used: Uint32Array, notices: TableNotice[]): Uint32Array {
  let back = 0;
  for (let place = 1; place < used.length; place++)
    if (times[used[place]!]! < times[used[place - 1]!]!) back++;
  if (back === 0) return used;
  notices.push({ code: 'unsorted', message: `times go back ${back} times; the rows were sorted`, lines: [] });
  return used.sort((a, b) => times[a]! - times[b]! || a - b);
}

function scatterAsErrors(
  count: number,
  scatter: number,
  issues: IssueList,
  notices: TableNotice[],
): Float64Array {
  if (!(scatter > 0)) {
    issues.add({
      code: 'errors-missing',
      message:
        count < 3
          ? `there is no column of errors, and ${count} rows are too few to take them from the scatter`
          : 'there is no column of errors, and most rows repeat the value of the row before: the scatter is zero',
      hint: 'add a column of errors, or name it: --columns error=LABEL',
    });
    return new Float64Array(count);
  }
  notices.push({
    code: 'errors-from-scatter',
    message: `there is no column of errors: the scatter from row to row, ${Math.round(scatter * 1e6)} ppm, stands for them`,
    lines: [],
  });
  return new Float64Array(count).fill(scatter);
}

function nameOf(request: TableRequest, path: string): string {
  const declared = withoutControls(request.instrument ?? '');
  return declared === '' ? fileStem(path) : declared;
}

const BAND_COMMENT = /\b(?:band|filter|passband)\s*[:=]\s*([\w'-]{1,20})/i;

function bandOf(
  bands: ReadonlySet<string>,
  { sample }: SourceTable,
  request: TableRequest,
  issues: IssueList,
  notices: TableNotice[],
): string | null {
  const declared = withoutControls(request.lightCurve?.band ?? '');
  if (declared !== '') return declared;
  const named = [...bands].filter((name) => name !== '');
  if (named.length > 1)
    issues.add({
      code: 'several-bands',
      message: `the table holds rows of ${named.length} bands (${named.slice(0, 8).map(quoted).join(', ')})`,
      hint: 'a light curve has one band: make a table of each, or declare one band for all rows',
    });
  if (named.length > 0) return named[0]!;
  const comment = sample.comments.find(({ text }) => BAND_COMMENT.test(text));
  if (comment === undefined) return null;
  const band = BAND_COMMENT.exec(comment.text)![1]!;
  notices.push({ code: 'band-from-comment', message: `the band is ${quoted(band)}, as the comments say`, lines: [comment.number] }); // prettier-ignore
  return band;
}

function describeColumns(
  { sample }: SourceTable,
  plan: LightCurveColumns,
  unit: FluxReading,
  time: TimeReading,
  regressors: ReadonlyMap<string, Float64Array>,
): ColumnReading[] {
  const meanings = new Map<number, ColumnReading['meaning']>(
    [...plan.of].map(([meaning, index]) => [index, meaning]),
  );
  for (const [name, index] of plan.regressors) if (regressors.has(name)) meanings.set(index, 'regressor');
  const words = unitWords(unit);
  const units: Readonly<Partial<Record<ColumnReading['meaning'], string>>> = {
    time: timeUnit(time), flux: words.value, magnitude: words.value, error: words.error,
  }; // prettier-ignore
  return Array.from({ length: sample.width }, (_, index): ColumnReading => {
    const meaning = meanings.get(index) ?? 'kept';
    const known = plan.known.get(index) ?? (meaning === 'regressor' ? 'a column of numbers' : '');
    return {
      position: index + 1,
      label: plan.labels?.[index] ?? null,
      meaning,
      unit: units[meaning] ?? '',
      known,
    };
  });
}
