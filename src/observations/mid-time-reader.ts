/** From a `SourceTable` to a `MidTimeTable`: columns, rows, dates, cycles, kinds, checks. */
import { decideTime } from './column-units.js';
import type { ContentReading } from './content.js';
import { daysPerUnit } from './exposure.js';
import type { IssueList } from './issues.js';
import type { FileFacts } from './light-curve-reader.js';
import { planMidTimes, type MidTimeColumns } from './mid-time-columns.js';
import { readCycles, readKinds, repeatedTimes } from './mid-time-rows.js';
import { checkSpan, errorsArePositive, timeUnit } from './photometry-checks.js';
import { splitLabel, unitWord } from './photometry-labels.js';
import { columnName, usedRows } from './photometry-rows.js';
import type { MidTimeTable } from './photometry-types.js';
import type { SourceTable } from './source-table.js';
import type { TextTable } from './table-text.js';
import { quoted, withoutControls } from './text.js';
import { toBjdTdb } from './time-scale.js';
import type { ColumnReading, TableNotice, TableRequest } from './types.js';
import { median } from './validate.js';

/** Nobody times a transit worse than that: the error is in another unit, or the column is another one. */
const LARGEST_ERROR_DAYS = 1;
const MOST_NAMED = 30;

/** @throws InputDataError with all problems of the table */
export function readMidTimes(
  source: SourceTable,
  request: TableRequest,
  reading: ContentReading,
  file: FileFacts,
  issues: IssueList,
): MidTimeTable {
  const { sample } = source;
  const notices: TableNotice[] = [];
  const plan = planMidTimes(sample, request, reading, issues, notices);
  issues.throwIfAny();
  const { of, labels } = plan!;
  const [time, error] = [of.get('time')!, of.get('error')!];
  const [cycle, kind, from, quality] = (['cycle', 'kind', 'source', 'quality'] as const).map((meaning) => of.get(meaning) ?? null) as [number | null, number | null, number | null, number | null]; // prettier-ignore
  const numbers = [time, error, cycle, quality].filter((index) => index !== null);
  const texts = [cycle, kind, from].filter((index) => index !== null);
  const columns = source.columns(numbers, texts, issues);
  const needed = [time, error, ...(cycle === null ? [] : [cycle])];
  const used = usedRows(columns, { labels, quality, needed, gapsAreAllowed: false }, issues, notices);
  errorsArePositive(columns, used, error, labels, source, issues);
  const pick = (index: number): Float64Array =>
    Float64Array.from(used, (row) => columns.numbers.get(index)![row]!);
  const lines = used.map((row) => columns.lines[row]!);
  const [unit, unitIsKnown] = errorUnit(sample, plan!, request, issues);
  const sigmasDays = pick(error).map((value) => value * daysPerUnit(unit)!);
  checkSizes(sigmasDays, unit, unitIsKnown, lines, columnName(labels, error), issues, notices);
  const timeReading = decideTime(sample, plan!, request, pick(time), issues, notices);
  checkSpan(columns.numbers.get(time)!, used, columns.lines, issues);
  const timesBjdTdb = toBjdTdb(timeReading.scale, pick(time).map((days) => days + timeReading.offsetDays)); // prettier-ignore
  const cycles = cycle === null ? null : readCycles(pick(cycle), lines, columnName(labels, cycle), issues);
  const kinds = kind === null ? null : Array.from(used, (row) => columns.texts.get(kind)![row]!);
  const isOccultation = readKinds(kinds, used.length, request, lines, issues);
  issues.throwIfAny();
  notices.push(...repeatedTimes(timesBjdTdb, isOccultation, lines));
  return {
    content: 'mid-times', ...file, rows: columns.rows, used: used.length, lines,
    columns: describeColumns(sample, plan!, timeUnit(timeReading), unit),
    timeScale: timeReading.scale, timeOffsetDays: timeReading.offsetDays,
    timesBjdTdb, sigmasDays, cycles, isOccultation,
    sources: from === null ? Array<string>(used.length).fill(withoutControls(request.instrument ?? '')) : Array.from(used, (row) => withoutControls(columns.texts.get(from)![row]!)),
    companion: request.midTimes?.companion ?? null, notices,
  }; // prettier-ignore
}

type TimeUnit = 'd' | 'h' | 'min' | 's';

/** The unit of the errors: declared, or in brackets, in a unit row, or in the column list; else days. */
function errorUnit(
  table: TextTable,
  plan: MidTimeColumns,
  request: TableRequest,
  issues: IssueList,
): readonly [TimeUnit, boolean] {
  const index = plan.of.get('error')!;
  const declared = request.errorUnit ?? null;
  const label = plan.labels?.[index] ?? '';
  const described = /\bin (days?|hours?|min(?:ute)?s?|s(?:ec(?:ond)?s?)?)\b/i.exec(plan.descriptions.get(index)?.text ?? '')?.[1]; // prettier-ignore
  const atTheEnd = /[_\s](d|days?|h|hours?|min|minutes?|s|sec|seconds?)$/i.exec(label.trim())?.[1];
  const written = splitLabel(label).unit || table.unitRow[index] || atTheEnd || described || '';
  const unit = declared ?? unitWord(written);
  if (unit === 'd' || unit === 'h' || unit === 'min' || unit === 's') return [unit, true];
  if (unit !== null)
    issues.add({
      code: 'unknown-unit',
      field: columnName(plan.labels, index),
      message: `found the unit ${quoted(declared ?? written)} for the errors of mid-times`,
      hint: 'declare error-unit: d, h, min or s',
    });
  return ['d', false];
}

function checkSizes(
  sigmasDays: Float64Array,
  unit: TimeUnit,
  unitIsKnown: boolean,
  lines: Uint32Array,
  field: string,
  issues: IssueList,
  notices: TableNotice[],
): void {
  const large = [...sigmasDays.keys()].filter((row) => sigmasDays[row]! > LARGEST_ERROR_DAYS);
  for (const row of large.slice(0, MOST_NAMED))
    issues.add({
      code: 'error-too-large',
      line: lines[row]!,
      field,
      message: `an error of ${Number(sigmasDays[row]!.toPrecision(4))} d is longer than any transit`,
      hint:
        unit === 'd'
          ? 'are the errors in minutes or seconds? declare error-unit: min or s'
          : 'is its unit right?',
    });
  if (large.length > MOST_NAMED)
    issues.add({ code: 'error-too-large', field, message: `${large.length - MOST_NAMED} further errors are longer than 1 d` }); // prettier-ignore
  if (unitIsKnown || large.length > 0 || sigmasDays.length === 0) return;
  const usual = median(sigmasDays);
  if (usual > 0.1)
    notices.push({
      code: 'error-unit',
      message: `the usual error would be ${Number(usual.toPrecision(3))} d: declare its unit (error-unit: min) if these are minutes`,
      lines: [],
    });
}

function describeColumns(
  table: TextTable,
  plan: MidTimeColumns,
  time: string,
  error: string,
): ColumnReading[] {
  const meanings = new Map<number, ColumnReading['meaning']>(
    [...plan.of].map(([meaning, index]) => [index, meaning]),
  );
  return Array.from({ length: table.width }, (_, index): ColumnReading => {
    const meaning = meanings.get(index) ?? 'kept';
    const unit = meaning === 'time' ? time : meaning === 'error' ? error : '';
    return {
      position: index + 1,
      label: plan.labels?.[index] ?? null,
      meaning,
      unit,
      known: plan.known.get(index) ?? '',
    };
  });
}
