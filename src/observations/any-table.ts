/** Reads a table of any content: velocities, a light curve or mid-times. */
import { createHash } from 'node:crypto';
import { InputDataError, type InputIssue } from '../errors.js';
import { decideContent } from './content.js';
import { IssueList } from './issues.js';
import { readLightCurve } from './light-curve-reader.js';
import { readMidTimes } from './mid-time-reader.js';
import type { LightCurveTable, MidTimeTable } from './photometry-types.js';
import { readTextFile } from './read-text.js';
import { sourceOfText } from './source-text.js';
import { parseHashedTable } from './table-reader.js';
import type { ColumnMeaning, TableContent, TableNotice, TableRequest, VelocityTable } from './types.js';

export type AnyTable = VelocityTable | LightCurveTable | MidTimeTable;

/** Larger files are refused unread. */
export const LARGEST_FILE_BYTES = 256e6;

/** @throws InputDataError with all problems of the file, each with line and column where it has them */
export async function readAnyTable(request: TableRequest): Promise<AnyTable> {
  const { text, sha256 } = await readTextFile(request.path, LARGEST_FILE_BYTES);
  return parse(text, request.path, request, sha256);
}

/** Reads several tables; the problems of all of them come in one InputDataError. */
export async function readAnyTables(requests: readonly TableRequest[]): Promise<AnyTable[]> {
  const tables: AnyTable[] = [];
  const issues: InputIssue[] = [];
  for (const request of requests) {
    try {
      tables.push(await readAnyTable(request));
    } catch (cause) {
      if (!(cause instanceof InputDataError)) throw cause;
      issues.push(...cause.issues);
    }
  }
  if (issues.length > 0) throw new InputDataError(issues);
  return tables;
}

/** What `readAnyTable` does once the file is read. @throws InputDataError with all problems of the text */
export function parseAnyTable(text: string, path: string, request: TableRequest): AnyTable {
  return parse(text, path, request, createHash('sha256').update(text, 'utf8').digest('hex'));
}

function parse(text: string, path: string, request: TableRequest, sha256: string): AnyTable {
  const issues = new IssueList(path);
  const source = sourceOfText(text, issues);
  const reading = source === null ? null : decideContent(source.sample, request, issues);
  if (source === null || reading === null) throw new InputDataError(issues.list());
  const { content } = reading;
  checkColumnChoices(request, content, issues);
  issues.throwIfAny();
  const file = { path, sha256 };
  const unused = unusedChoices(request, content);
  const table =
    content === 'velocities'
      ? parseHashedTable(text, path, request, sha256)
      : content === 'light curve'
        ? readLightCurve(source, request, reading, file, issues)
        : readMidTimes(source, request, reading, file, issues);
  return unused.length === 0 ? table : { ...table, notices: [...table.notices, ...unused] };
}

const COLUMNS_OF: Readonly<Record<TableContent, readonly ColumnMeaning[]>> = {
  velocities: ['time', 'velocity', 'velocity-error', 'error', 'instrument', 'quality'],
  'light curve': ['time', 'flux', 'magnitude', 'error', 'velocity-error', 'quality', 'exposure', 'band'],
  'mid-times': ['time', 'error', 'velocity-error', 'cycle', 'source', 'kind', 'quality'],
};

/** A column that is named for something that such a table does not have is a misunderstanding, not a wish to be passed over. */
function checkColumnChoices(request: TableRequest, content: TableContent, issues: IssueList): void {
  for (const meaning of Object.keys(request.columns) as ColumnMeaning[]) {
    if (request.columns[meaning] === undefined || COLUMNS_OF[content].includes(meaning)) continue;
    issues.add({
      code: 'column-meaning',
      field: meaning,
      message: `a column is named as the ${meaning}, but the table holds ${nameOfContent(content)}`,
      hint: `columns of such a table: ${COLUMNS_OF[content].filter((name) => name !== 'velocity-error' || content === 'velocities').join(', ')}`,
    });
  }
}

/** `a light curve`, for sentences. */
export function nameOfContent(content: TableContent): string {
  return content === 'light curve' ? 'a light curve' : content;
}

/** What was declared for another kind of table; options speak for all tables of a call, so that this is no mistake. */
function unusedChoices(request: TableRequest, content: TableContent): TableNotice[] {
  const stated = (choices: object | undefined): string[] =>
    Object.entries(choices ?? {}).flatMap(([name, value]) =>
      value === null || value === undefined ? [] : [name],
    );
  const unused = [
    ...(content === 'light curve' ? [] : stated(request.lightCurve)),
    ...(content === 'mid-times' ? [] : stated(request.midTimes)),
    ...(content === 'velocities'
      ? stated({ errorUnit: request.errorUnit })
      : stated({ velocityUnit: request.velocityUnit })),
  ].map((name) => name.replace(/Days$/, '').replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`));
  if (unused.length === 0) return [];
  const message = `the table holds ${nameOfContent(content)}; declared, but not used for it: ${unused.join(', ')}`;
  return [{ code: 'choice-not-used', message, lines: [] }];
}
