/** How long the exposures of a light curve are, and how that is known. */
import { SECONDS_PER_DAY } from '../orbit/constants.js';
import type { LightCurveColumns } from './light-curve-columns.js';
import { short } from './flux-scale.js';
import type { LightCurveTable } from './photometry-types.js';
import { splitLabel, unitWord } from './photometry-labels.js';
import type { TextTable } from './table-text.js';
import type { TableNotice } from './types.js';
import { median } from './validate.js';

const DAYS_PER_UNIT: Readonly<Record<'s' | 'min' | 'h' | 'd', number>> = {
  s: 1 / SECONDS_PER_DAY,
  min: 60 / SECONDS_PER_DAY,
  h: 1 / 24,
  d: 1,
};

/** Days per unit of time; `null` for any other unit. */
export function daysPerUnit(unit: string | null): number | null {
  return unit === 's' || unit === 'min' || unit === 'h' || unit === 'd' ? DAYS_PER_UNIT[unit] : null;
}

/** Longest exposure that a case may state; rows farther apart are single exposures of a night, not a cadence. */
const LONGEST_DAYS = 0.5;

export interface Exposure {
  readonly days: number;
  readonly known: LightCurveTable['exposureKnown'];
}

const UNIT = '(s|sec|seconds?|min|minutes?|h|hours?|d|days?)\\b';
const BEFORE = new RegExp(String.raw`\bexp(?:osure)?(?:[\s_-]?time)?\s*(?:is|was|of|[=:])?\s*(\d+(?:\.\d+)?)\s*${UNIT}`, 'i'); // prettier-ignore
const BEHIND = new RegExp(String.raw`(\d+(?:\.\d+)?)[\s-]*${UNIT}[\s-]+exp(?:osures?)?\b`, 'i');

/** `exposure 58.85 s`, `exptime = 2 min`, `30 s exposures`. */
function exposureInComments(
  table: TextTable,
): { readonly days: number; readonly line: number } | 'several' | null {
  const found = table.comments.flatMap(({ number, text }) => {
    const match = BEFORE.exec(text) ?? BEHIND.exec(text);
    const factor = match === null ? null : daysPerUnit(unitWord(match[2]!));
    return match === null || factor === null ? [] : [{ days: Number(match[1]) * factor, line: number }];
  });
  if (found.length === 0) return null;
  return found.every(({ days }) => days === found[0]!.days) ? found[0]! : 'several';
}

/**
 * @param times - days, ascending
 * @param column - the exposure column of the used rows, as written; `null` when there is none
 */
export function decideExposure(
  table: TextTable,
  plan: LightCurveColumns,
  declaredDays: number | null,
  times: Float64Array,
  column: Float64Array | null,
  notices: TableNotice[],
): Exposure {
  const spacing = usualSpacing(times);
  const exposure = known(table, plan, declaredDays, column, spacing, notices);
  if (exposure.known !== 'spacing' && spacing > 0 && exposure.days > 1.5 * spacing)
    notices.push({
      code: 'exposure-too-long',
      message: `an exposure of ${seconds(exposure.days)} does not fit between rows that are ${seconds(spacing)} apart: is its unit right?`,
      lines: [],
    });
  return exposure;
}

function known(
  table: TextTable,
  plan: LightCurveColumns,
  declaredDays: number | null,
  column: Float64Array | null,
  spacing: number,
  notices: TableNotice[],
): Exposure {
  if (declaredDays !== null) return { days: declaredDays, known: 'stated' };
  if (column !== null) {
    const days = ofColumn(column, plan, notices);
    if (days !== null) return { days, known: 'column' };
  }
  const comment = exposureInComments(table);
  if (comment !== null && comment !== 'several') {
    notices.push({ code: 'exposure-from-comment', message: `exposures are taken as ${seconds(comment.days)}, as the comments say`, lines: [comment.line] }); // prettier-ignore
    return { days: comment.days, known: 'header' };
  }
  const why =
    comment === 'several' ? 'the comments name several exposure times' : 'no exposure time is stated';
  const hint = '(state it with --exposure, or exposure: in the case)';
  if (spacing > LONGEST_DAYS) {
    notices.push({
      code: 'exposure-unknown',
      message: `${why}, and rows ${short(spacing)} d apart tell none: exposures are taken as instantaneous ${hint}`,
      lines: [],
    });
    return { days: 0, known: 'none' };
  }
  if (spacing > 0) {
    notices.push({
      code: 'exposure-assumed',
      message: `${why}: the usual distance of rows, ${seconds(spacing)}, stands for it, which is too long where reading out takes time ${hint}`,
      lines: [],
    });
    return { days: spacing, known: 'spacing' };
  }
  notices.push({
    code: 'exposure-unknown',
    message: `${why}: exposures are taken as instantaneous ${hint}`,
    lines: [],
  });
  return { days: 0, known: 'none' };
}

function ofColumn(column: Float64Array, plan: LightCurveColumns, notices: TableNotice[]): number | null {
  const numbers = column.filter((value) => value > 0);
  if (numbers.length === 0) {
    notices.push({ code: 'exposure-column', message: 'the exposure column holds no number above 0 and is not used', lines: [] }); // prettier-ignore
    return null;
  }
  const index = plan.of.get('exposure')!;
  const middle = median(numbers);
  let factor = daysPerUnit(unitWord(splitLabel(plan.labels?.[index] ?? '').unit));
  if (factor === null) {
    const unit = middle >= 1 ? 's' : 'd';
    factor = DAYS_PER_UNIT[unit];
    notices.push({ code: 'exposure-column', message: `the exposure column has no unit: ${short(middle)} is read in ${unit}`, lines: [] }); // prettier-ignore
  }
  const differing = numbers.filter((value) => Math.abs(value - middle) > 0.01 * middle).length;
  if (differing > 0)
    notices.push({
      code: 'exposure-varies',
      message: `${differing} rows have another exposure time than the median, ${seconds(middle * factor)}, which is taken for all`,
      lines: [],
    });
  return middle * factor;
}

/** Median distance of successive rows; 0 with fewer than two. */
export function usualSpacing(times: Float64Array): number {
  if (times.length < 2) return 0;
  const steps = new Float64Array(times.length - 1);
  for (let row = 0; row < steps.length; row++) steps[row] = times[row + 1]! - times[row]!;
  return median(steps);
}

function seconds(days: number): string {
  return `${Number((days * SECONDS_PER_DAY).toPrecision(4))} s`;
}
