/** Decides which column of a light curve is what, and which are left as regressors for its baseline. */
import { ColumnChooser, isNumeric, reportMissingColumns, timeRank, type ColumnPlan } from './column-plan.js';
import type { ContentReading } from './content.js';
import type { IssueList } from './issues.js';
import { errorRank } from './labels.js';
import {
  bandRank,
  exposureRank,
  fluxRank,
  magnitudeRank,
  photometricErrorRank,
  photometricQualityRank,
  splitLabel,
} from './photometry-labels.js';
import type { TextTable } from './table-text.js';
import { withoutControls } from './text.js';
import { readTimeLabel } from './time-label.js';
import type { TableNotice, TableRequest } from './types.js';

const MEANINGS = ['time', 'flux', 'magnitude', 'error', 'quality', 'exposure', 'band'] as const;
type LightCurveMeaning = (typeof MEANINGS)[number];

export interface LightCurveColumns extends ColumnPlan<LightCurveMeaning> {
  /** Index of the flux or the magnitude. */
  readonly value: number;
  readonly isMagnitude: boolean;
  /** Further columns of numbers, by name; names are unique. */
  readonly regressors: ReadonlyMap<string, number>;
}

/** @returns `null` when a needed column is missing or ambiguous; the issues say which */
export function planLightCurve(
  table: TextTable,
  request: TableRequest,
  reading: ContentReading,
  issues: IssueList,
  notices: TableNotice[],
): LightCurveColumns | null {
  const before = issues.count;
  const plan = new ColumnChooser<LightCurveMeaning>(
    table,
    ['time', 'flux', 'magnitude', 'error'],
    issues,
    notices,
  );
  for (const meaning of MEANINGS)
    plan.takeNamed(meaning, request.columns, meaning === 'error' ? ['velocity-error'] : []);
  assignByValues(plan, reading, table, notices);
  plan.choose('time', timeRank);
  if (!plan.of.has('magnitude')) plan.choose('flux', fluxRank);
  if (!plan.of.has('flux')) plan.choose('magnitude', magnitudeRank);
  const value = plan.of.get('flux') ?? plan.of.get('magnitude');
  const valueLabel = value === undefined ? '' : (plan.labels?.[value] ?? '');
  plan.choose('error', (label) => photometricErrorRank(label, valueLabel));
  plan.choose('quality', photometricQualityRank);
  plan.choose('exposure', exposureRank);
  plan.choose('band', bandRank);
  plan.withoutTextQuality('quality', request.columns.quality !== undefined);
  if (issues.count === before) {
    const missing = [...(plan.of.has('time') ? [] : ['time']), ...(value === undefined ? ['flux'] : [])];
    if (plan.labels !== null) reportMissingColumns(missing, plan.labels, issues);
    else if (missing.length > 0)
      issues.add({
        code: 'columns-unknown',
        line: table.firstLine,
        message: `the table has no header, and its columns were not recognised as those of a light curve`,
        hint: 'name the columns: --columns time=1,flux=2,error=3',
      });
  }
  if (issues.count > before || value === undefined) return null;
  return {
    of: plan.of, known: plan.known, labels: plan.labels, descriptions: plan.descriptions,
    value, isMagnitude: plan.of.has('magnitude'), regressors: regressorsOf(table, plan),
  }; // prettier-ignore
}

function assignByValues(
  plan: ColumnChooser<LightCurveMeaning>,
  { values }: ContentReading,
  table: TextTable,
  notices: TableNotice[],
): void {
  if (plan.labels !== null || plan.of.size > 0 || values === null) return;
  const taken: string[] = [];
  for (const meaning of MEANINGS) {
    const index = values.of.get(meaning);
    if (index === undefined) continue;
    plan.assign(meaning, index, 'magnitude');
    taken.push(`column ${index + 1} as the ${meaning}`);
  }
  notices.push({
    code: 'headerless',
    message: `the table has no header and was read as a light curve, ${taken.join(', ')} (${values.message})`,
    lines: table.firstLine === 1 ? [] : [table.firstLine],
  });
}

/** Errors of other things, second times and second fluxes explain no baseline. */
function isNoRegressor(label: string, others: readonly string[]): boolean {
  const { word } = splitLabel(label);
  const isError =
    errorRank(word, '') !== null || /^(err|error|sigma|unc)[a-z]|(err|error|sigma|unc)$/.test(word);
  // `e_x` beside `x`; but `dx` may be a shift, and `sx` a width.
  const isErrorOf = others.some((other) => word === `e${splitLabel(other).word}`);
  const isValue = fluxRank(label) !== null || magnitudeRank(label) !== null;
  return readTimeLabel(label) !== null || isValue || isError || isErrorOf;
}

function regressorsOf(table: TextTable, plan: ColumnPlan<LightCurveMeaning>): Map<string, number> {
  const taken = new Set(plan.of.values());
  const found = new Map<string, number>();
  for (let index = 0; index < table.width; index++) {
    if (taken.has(index) || !isNumeric(table, index)) continue;
    const label = withoutControls(plan.labels?.[index] ?? '').slice(0, 100);
    if (label !== '' && isNoRegressor(label, plan.labels ?? [])) continue;
    found.set(
      label === '' || found.has(label) ? `${label === '' ? 'column' : label} ${index + 1}` : label,
      index,
    );
  }
  return found;
}
