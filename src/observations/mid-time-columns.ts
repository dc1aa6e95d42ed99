/** Decides which column of a table of mid-times is what. */
import { ColumnChooser, reportMissingColumns, type ColumnPlan } from './column-plan.js';
import type { ContentReading } from './content.js';
import type { IssueList } from './issues.js';
import { errorRank, qualityRank } from './labels.js';
import { readCell } from './numbers.js';
import {
  cycleRank,
  kindRank,
  midTimeRank,
  namesTimeError,
  sourceRank,
  splitLabel,
  withoutTimeUnit,
} from './photometry-labels.js';
import type { TextTable } from './table-text.js';
import { quoted } from './text.js';
import type { TableNotice, TableRequest } from './types.js';

const MEANINGS = ['time', 'error', 'cycle', 'source', 'kind', 'quality'] as const;
type MidTimeMeaning = (typeof MEANINGS)[number];
export type MidTimeColumns = ColumnPlan<MidTimeMeaning>;

/** Names that mean a cycle even where a number in the column is not whole. */
const SURE_CYCLES = /^(cycle|epoch|cycles|cyclenumber|epochnumber|transitnumber)$/;

/** Names of a column that says whose mid-time it is. */
const COMPANIONS = /^(companion|companions|planet|object|letter)$/;

/** @returns `null` when time or error is missing or ambiguous; the issues say which */
export function planMidTimes(
  table: TextTable,
  request: TableRequest,
  { values }: ContentReading,
  issues: IssueList,
  notices: TableNotice[],
): MidTimeColumns | null {
  const before = issues.count;
  const plan = new ColumnChooser<MidTimeMeaning>(table, ['time', 'error', 'cycle'], issues, notices);
  for (const meaning of MEANINGS)
    plan.takeNamed(meaning, request.columns, meaning === 'error' ? ['velocity-error'] : []);
  if (plan.labels === null && plan.of.size === 0 && values !== null) {
    for (const [meaning, index] of values.of) plan.assign(meaning as MidTimeMeaning, index, 'magnitude');
    const list = [...values.of].map(([meaning, index]) => `column ${index + 1} as the ${meaning}`).join(', ');
    notices.push({
      code: 'headerless',
      message: `the table has no header and was read as mid-times, ${list} (${values.message})`,
      lines: [],
    });
  }
  plan.choose('cycle', (label, index) => {
    const rank = cycleRank(label);
    return rank !== null &&
      (SURE_CYCLES.test(splitLabel(label).word) ? hasSmallNumbers(table, index) : isWhole(table, index))
      ? rank
      : null;
  });
  plan.choose('time', midTimeRank);
  const time = plan.of.get('time');
  const timeLabel = time === undefined ? '' : (plan.labels?.[time] ?? '');
  plan.choose('error', (label) => {
    if (namesTimeError(label, timeLabel)) return 0;
    const general = errorRank(splitLabel(withoutTimeUnit(label)).word, '');
    return general === null ? null : 1 + general;
  });
  plan.choose('kind', kindRank);
  plan.choose('source', sourceRank);
  plan.choose('quality', (label) => qualityRank(splitLabel(label).word));
  plan.withoutTextQuality('quality', request.columns.quality !== undefined);
  const taken = new Set(plan.of.values());
  const named = plan.labels?.findIndex(
    (label, index) => !taken.has(index) && COMPANIONS.test(splitLabel(label).word),
  );
  if (named !== undefined && named >= 0)
    notices.push({
      code: 'companion-column',
      message: `column ${quoted(plan.labels![named]!)} is not used: all mid-times of a table belong to one companion; a table for each, with companion: in the case, tells them apart`,
      lines: [],
    });
  if (issues.count === before) {
    const missing = (['time', 'error'] as const).filter((meaning) => !plan.of.has(meaning));
    if (plan.labels !== null) reportMissingColumns(missing, plan.labels, issues);
    else if (missing.length > 0)
      issues.add({
        code: 'columns-unknown',
        line: table.firstLine,
        message: 'the table has no header, and its columns were not recognised as those of mid-times',
        hint: 'name the columns: --columns time=1,error=2,cycle=3',
      });
  }
  return issues.count > before ? null : plan;
}

function numbersOf(table: TextTable, index: number): number[] {
  return table.rows.slice(0, 100).flatMap((row) => {
    const read = readCell(row.cells[index]!);
    return read.kind === 'number' ? [read.value] : [];
  });
}

function isWhole(table: TextTable, index: number): boolean {
  const numbers = numbersOf(table, index);
  return numbers.length > 0 && numbers.every(Number.isInteger) && hasSmallNumbers(table, index);
}

/** `epoch` is a date where its numbers are those of Julian dates. */
function hasSmallNumbers(table: TextTable, index: number): boolean {
  const numbers = numbersOf(table, index);
  return numbers.length > 0 && numbers.every((value) => Math.abs(value) < 1e6);
}
