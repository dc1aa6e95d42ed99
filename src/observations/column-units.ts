/** Which units and which time scale the chosen columns are in, and how that is known. Assumptions become notices. */
import { upperMedian } from '../numerics/summary.js';
import type { VelocityColumns } from './columns.js';
import type { IssueList } from './issues.js';
import { readLabel } from './labels.js';
import type { TextTable } from './table-text.js';
import { quoted } from './text.js';
import { readTimeLabel, timeLabelsIn, type TimeLabel } from './time-label.js';
import { timeScaleError } from './time-scale.js';
import type { TableNotice, TableRequest, TimeScale } from './types.js';
import { velocityUnit, velocityUnitsIn } from './units.js';

type SpeedUnit = 'm/s' | 'km/s';

export interface VelocityUnits {
  readonly velocity: SpeedUnit;
  readonly error: SpeedUnit;
  readonly assumed: boolean;
}

/** The unit that header, unit row or column list give to one column. */
function unitOfColumn(
  index: number,
  table: TextTable,
  plan: VelocityColumns,
  issues: IssueList,
  declared: boolean,
): SpeedUnit | null {
  const label = readLabel(plan.labels?.[index] ?? '');
  if (label.strangeUnit !== null && !declared) {
    issues.add({
      code: 'unknown-unit',
      field: plan.labels?.[index] ?? null,
      message: `found the unit ${quoted(label.strangeUnit)}; velocities are read in m/s or km/s`,
      hint: 'convert the column, or declare the unit of the table',
    });
  }
  if (label.unit !== null) return label.unit;
  const fromRow = velocityUnit(table.unitRow[index] ?? '');
  if (fromRow !== null) return fromRow;
  const described = velocityUnitsIn(plan.descriptions.get(index)?.text ?? '');
  return described.length === 1 ? described[0]! : null;
}

export function decideVelocityUnits(
  table: TextTable,
  plan: VelocityColumns,
  request: TableRequest,
  issues: IssueList,
  notices: TableNotice[],
): VelocityUnits {
  const declared = request.velocityUnit;
  const velocity = unitOfColumn(plan.of.get('velocity')!, table, plan, issues, declared !== null);
  const error = unitOfColumn(plan.of.get('velocity-error')!, table, plan, issues, declared !== null);
  if (declared !== null) {
    const disagrees = velocity !== null && velocity !== declared;
    if (disagrees)
      notices.push({
        code: 'unit-override',
        message: `the table says ${velocity}; ${declared} was declared and is used`,
        lines: [],
      });
    // A header that gives the two columns different units still tells which of them is meant for which.
    const errorUnit =
      velocity !== null && error !== null && velocity !== error && !disagrees ? error : declared;
    return { velocity: declared, error: errorUnit, assumed: false };
  }
  const stated = velocity ?? error;
  if (stated !== null) return { velocity: stated, error: error ?? stated, assumed: false };
  const lines = table.comments.filter(({ text }) => velocityUnitsIn(text).length > 0);
  const named = new Set(lines.flatMap(({ text }) => velocityUnitsIn(text)));
  if (named.size === 1) {
    const unit = [...named][0]!;
    const numbers = lines.map(({ number }) => number);
    notices.push({
      code: 'unit-from-comment',
      message: `velocities are read in ${unit}, as the comments say`,
      lines: numbers,
    });
    return { velocity: unit, error: unit, assumed: false };
  }
  const why =
    named.size > 1
      ? 'its comments name both m/s and km/s'
      : 'the table does not name the unit of its velocities';
  notices.push({ code: 'unit-assumed', message: `${why}: m/s is assumed`, lines: [] });
  return { velocity: 'm/s', error: 'm/s', assumed: true };
}

export interface TimeReading {
  readonly scale: TimeScale;
  readonly offsetDays: number;
}

/** Numbers below this cannot be full Julian dates of any velocity ever measured (2 300 000 is the year 1584). */
export const SMALLEST_FULL_DATE = 2_300_000;
/** ... and none above this (the year 2405). */
export const LARGEST_FULL_DATE = 2_600_000;

/** What is needed of a plan to understand its dates. */
export interface TimeColumn {
  readonly of: { get(meaning: 'time'): number | undefined };
  readonly labels: readonly string[] | null;
  readonly descriptions: VelocityColumns['descriptions'];
}

/**
 * @param times - the numbers of the time column, as written
 */
export function decideTime(
  table: Pick<TextTable, 'comments'>,
  plan: TimeColumn,
  request: TableRequest,
  times: Float64Array,
  issues: IssueList,
  notices: TableNotice[],
): TimeReading {
  const index = plan.of.get('time')!;
  const written = plan.labels?.[index] ?? '';
  // `Tmid (BJD_TDB - 2450000)` is no name of a date, but contains one.
  const header = readTimeLabel(written) ?? timeLabelsIn(written)[0] ?? { scale: 'unknown', offsetDays: null };
  const comment = commentTime(table, plan.descriptions.get(index)?.text ?? '', header);
  const scale =
    request.timeScale ?? (header.scale === 'unknown' ? (comment?.label.scale ?? 'unknown') : header.scale);
  const isShort = times.length > 0 && times.every((time) => time < SMALLEST_FULL_DATE);
  let offsetDays = request.timeOffsetDays ?? header.offsetDays;
  if (offsetDays === null && comment?.label.offsetDays != null && isShort) {
    offsetDays = comment.label.offsetDays;
    notices.push({
      code: 'time-offset',
      message: `${offsetDays} d are added to the dates, as the comments say`,
      lines: comment.line === null ? [] : [comment.line],
    });
  }
  if (
    request.timeScale === null &&
    header.scale === 'unknown' &&
    comment !== null &&
    comment.label.scale !== 'unknown'
  ) {
    notices.push({
      code: 'time-scale-from-comment',
      message: `dates are read as ${comment.label.scale}, as the comments say`,
      lines: comment.line === null ? [] : [comment.line],
    });
  }
  if (request.timeScale !== null && header.scale !== 'unknown' && header.scale !== request.timeScale) {
    notices.push({
      code: 'time-scale-override',
      message: `the table says ${header.scale}; ${request.timeScale} was declared and is used`,
      lines: [],
    });
  }
  sayHowWrong(scale, notices);
  checkDates(times, offsetDays, issues, notices);
  return { scale, offsetDays: offsetDays ?? 0 };
}

/** The one time scale that the comments name; the description of the column itself counts before all others. */
function commentTime(
  table: Pick<TextTable, 'comments'>,
  description: string,
  header: TimeLabel,
): { label: TimeLabel; line: number | null } | null {
  const own = timeLabelsIn(description);
  if (own.length > 0) return { label: own[0]!, line: null };
  const found = table.comments.flatMap(({ number, text }) =>
    timeLabelsIn(text).map((label) => ({ label, line: number })),
  );
  const distinct = new Set(found.map(({ label }) => `${label.scale} ${label.offsetDays ?? ''}`));
  if (distinct.size !== 1) return null;
  const one = found[0]!;
  return header.scale === 'unknown' || one.label.scale === header.scale ? one : null;
}

function sayHowWrong(scale: TimeScale, notices: TableNotice[]): void {
  const { maximumSeconds, sentence } = timeScaleError(scale);
  if (maximumSeconds === 0) return;
  notices.push({
    code: 'time-scale',
    message: `${sentence} (at most ${Math.round(maximumSeconds)} s in all)`,
    lines: [],
  });
}

function checkDates(
  times: Float64Array,
  offsetDays: number | null,
  issues: IssueList,
  notices: TableNotice[],
): void {
  if (times.length === 0) return;
  const typical = upperMedian(times)!;
  const sum = typical + (offsetDays ?? 0);
  if (sum >= SMALLEST_FULL_DATE && sum <= LARGEST_FULL_DATE) return;
  if ((offsetDays ?? 0) !== 0 && typical >= SMALLEST_FULL_DATE && typical <= LARGEST_FULL_DATE) {
    issues.add({
      code: 'time-offset-contradiction',
      field: 'time',
      message: `dates near ${typical} are full Julian dates already, yet ${offsetDays ?? 0} d are declared to be left out`,
      hint: 'correct the header, or declare an offset of 0 for this table',
    });
    return;
  }
  const guess = typical > 30_000 && typical < 80_000 ? ' (they look like MJD or JD - 2400000)' : '';
  notices.push({
    code: 'not-julian-dates',
    message: `dates near ${Number(sum.toPrecision(9))} are no full Julian dates${guess} and are taken as they are; declare the offset, e.g. BJD_TDB - 2450000`,
    lines: [],
  });
}
