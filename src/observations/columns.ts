/** Decides which column of a table of velocities is what: by `--columns`, by the names in the header, by the column list in a comment, by position. */
import { ColumnChooser, isNumeric, reportMissingColumns, timeRank, type ColumnPlan } from './column-plan.js';
import type { IssueList } from './issues.js';
import { errorRank, instrumentRank, qualityRank, readLabel, velocityRank } from './labels.js';
import type { TextTable } from './table-text.js';
import type { TableNotice, TableRequest } from './types.js';

const MEANINGS = ['time', 'velocity', 'velocity-error', 'instrument', 'quality'] as const;
const NEEDED = ['time', 'velocity', 'velocity-error'] as const;
export type VelocityMeaning = (typeof MEANINGS)[number];
export type VelocityColumns = ColumnPlan<VelocityMeaning>;

/**
 * @returns `null` when a needed column is missing or ambiguous; the issues say which
 */
export function planColumns(
  table: TextTable,
  request: TableRequest,
  issues: IssueList,
  notices: TableNotice[],
): VelocityColumns | null {
  const before = issues.count;
  const plan = new ColumnChooser<VelocityMeaning>(table, [...NEEDED, 'instrument'], issues, notices);
  for (const meaning of MEANINGS)
    plan.takeNamed(meaning, request.columns, meaning === 'velocity-error' ? ['error'] : []);
  if (plan.labels === null && plan.of.size === 0) assignByPosition(table, plan, notices);
  plan.choose('time', timeRank);
  plan.choose('velocity', (label) => velocityRank(readLabel(label).word));
  const velocity = plan.of.get('velocity');
  const velocityWord = velocity === undefined ? '' : readLabel(plan.labels?.[velocity] ?? '').word;
  plan.choose('velocity-error', (label) => errorRank(readLabel(label).word, velocityWord));
  plan.choose('instrument', (label) => instrumentRank(readLabel(label).word));
  plan.choose('quality', (label) => qualityRank(readLabel(label).word));
  plan.withoutTextQuality('quality', Boolean(request.columns.quality));
  if (issues.count === before) reportMissing(plan, table, issues);
  return issues.count > before ? null : plan;
}

/** A headerless table: three columns of numbers are time, velocity and error; one further column of text is the instrument. */
function assignByPosition(
  table: TextTable,
  plan: ColumnChooser<VelocityMeaning>,
  notices: TableNotice[],
): void {
  const indices = Array.from({ length: table.width }, (_, index) => index);
  const numeric = indices.filter((index) => isNumeric(table, index));
  const text = indices.filter((index) => !numeric.includes(index));
  if (numeric.length !== 3 || text.length > 1) return;
  for (const [place, meaning] of NEEDED.entries())
    plan.assign(meaning, numeric[place]!, 'position (headerless table)');
  if (text.length === 1) plan.assign('instrument', text[0]!, 'position (headerless table)');
  const list = numeric.map((index) => index + 1).join(', ');
  const instrument = text.length === 1 ? `, column ${text[0]! + 1} as the instrument` : '';
  notices.push({
    code: 'headerless',
    message: `the table has no header: columns ${list} were read as time, velocity and error${instrument}`,
    lines: [],
  });
}

function reportMissing(plan: VelocityColumns, table: TextTable, issues: IssueList): void {
  const missing = NEEDED.filter((meaning) => !plan.of.has(meaning));
  if (missing.length === 0) return;
  if (plan.labels !== null) {
    reportMissingColumns(missing, plan.labels, issues);
    return;
  }
  issues.add({
    code: 'columns-unknown',
    line: table.rows[0]?.line ?? null,
    message: `the table has no header and ${table.width} columns; only three columns of numbers (time, velocity, error), with at most one column of text, are understood without a header`,
    hint: 'name the columns: --columns time=1,velocity=2,velocity-error=3',
  });
}
