/** Short ways to the readers for the tests of this room. All tables are invented. */
import { InputDataError, type InputIssue } from '../../src/errors.js';
import { parseCase, parseTable, requestFor } from '../../src/observations/index.js';
import type { Case, TableNotice, TableRequest, VelocityTable } from '../../src/observations/types.js';

export function read(text: string, declared: Partial<TableRequest> = {}, path = 'north.csv'): VelocityTable {
  return parseTable(text, path, { ...requestFor(path), ...declared });
}

/** The problems that `work` throws; fails when it throws nothing or anything else. */
export function issuesOf(work: () => unknown): readonly InputIssue[] {
  try {
    work();
  } catch (error) {
    if (error instanceof InputDataError) return error.issues;
    throw error;
  }
  throw new Error('expected an InputDataError, but nothing was thrown');
}

export function tableIssues(text: string, declared: Partial<TableRequest> = {}): readonly InputIssue[] {
  return issuesOf(() => read(text, declared));
}

export function caseOf(text: string): Case {
  return parseCase(text, 'cases/vellamo.yaml');
}

export function caseIssues(text: string): readonly InputIssue[] {
  return issuesOf(() => caseOf(text));
}

/** `line:column code field`, the part of an issue that tests hold. */
export function brief(issues: readonly InputIssue[]): string[] {
  return issues.map(
    ({ line, column, code, field }) => `${line ?? '-'}:${column ?? '-'} ${code} ${field ?? '-'}`,
  );
}

export function notice(
  table: { readonly notices: readonly TableNotice[] },
  code: string,
): TableNotice | undefined {
  return table.notices.find((one) => one.code === code);
}
