/** Checks that light curves and mid-times share: positive errors, and dates that belong together. */
import type { TimeReading } from './column-units.js';
import type { IssueList } from './issues.js';
import { columnName } from './photometry-rows.js';
import type { SourceColumns, SourceTable } from './source-table.js';
import { LONGEST_SPAN_DAYS } from './table-reader.js';
import { lineList } from './text.js';
import { median } from './validate.js';

const MOST_NAMED = 30;

/** An issue for each used row whose error is zero or negative (for the first thirty). */
export function errorsArePositive(
  columns: SourceColumns,
  used: Uint32Array,
  error: number,
  labels: readonly string[] | null,
  source: SourceTable,
  issues: IssueList,
): void {
  const errors = columns.numbers.get(error)!;
  const bad = Array.from(used.filter((row) => errors[row]! <= 0));
  for (const row of bad.slice(0, MOST_NAMED)) {
    const line = columns.lines[row]!;
    const place = source.placeOf(line, error);
    issues.add({
      code: 'non-positive-error', line, column: place, field: columnName(labels, error),
      message: `found "${errors[row]!}"; a measurement error must be > 0`, hint: 'flag the row, or give its real error',
    }); // prettier-ignore
  }
  if (bad.length > MOST_NAMED)
    issues.add({
      code: 'non-positive-error',
      field: columnName(labels, error),
      message: `${bad.length - MOST_NAMED} further rows have an error of zero or below`,
      hint: 'is it the column of errors?',
    });
}

/** Dates more than 200 years from the others are mistyped. */
export function checkSpan(
  times: Float64Array,
  used: Uint32Array,
  lines: Uint32Array,
  issues: IssueList,
): void {
  if (used.length === 0) return;
  const middle = median(Float64Array.from(used, (row) => times[row]!));
  const far = Array.from(used.filter((row) => Math.abs(times[row]! - middle) > LONGEST_SPAN_DAYS));
  if (far.length === 0) return;
  const found = far.map((row) => lines[row]!);
  issues.add({
    code: 'impossible-span',
    line: found[0]!,
    field: 'time',
    message: `dates more than 200 years from the others in ${lineList(found)}`,
    hint: 'look for mistyped dates, or for dates with and without their first digits',
  });
}

/** `BJD_TDB - 2450000 (d)`. */
export function timeUnit({ scale, offsetDays }: TimeReading): string {
  return `${scale === 'unknown' ? 'unknown scale' : scale}${offsetDays === 0 ? '' : ` - ${offsetDays}`} (d)`;
}
