/** Collects the problems of one input, so that a person sees all of them at once and a bad file cannot fill the memory. */
import { InputDataError, type InputIssue } from '../errors.js';

/** More than this many problems of one file are counted, not kept. */
export const MOST_ISSUES_KEPT = 100;

export class IssueList {
  readonly file: string;
  private readonly kept: InputIssue[] = [];
  private total = 0;

  constructor(file: string) {
    this.file = file;
  }

  get count(): number {
    return this.total;
  }

  add(issue: {
    code: string;
    message: string;
    line?: number | null;
    column?: number | null;
    field?: string | null;
    hint?: string;
  }): void {
    this.total++;
    if (this.kept.length >= MOST_ISSUES_KEPT) return;
    this.kept.push({
      code: issue.code,
      file: this.file,
      line: issue.line ?? null,
      column: issue.column ?? null,
      field: issue.field ?? null,
      message: issue.message,
      hint: issue.hint ?? '',
    });
  }

  /** The problems in the order of the file; those without a line come first. */
  list(): readonly InputIssue[] {
    const sorted = [...this.kept].sort(
      (a, b) => (a.line ?? 0) - (b.line ?? 0) || (a.column ?? 0) - (b.column ?? 0),
    );
    if (this.total > sorted.length) {
      sorted.push({
        code: 'more-problems',
        file: this.file,
        line: null,
        column: null,
        field: null,
        message: `${this.total - sorted.length} further problems are not listed`,
        hint: 'many problems of one kind usually have one cause: look at the first lines',
      });
    }
    return sorted;
  }

  /** @throws InputDataError if there is any problem */
  throwIfAny(): void {
    if (this.total > 0) throw new InputDataError(this.list());
  }
}

/** An error with a single problem. */
export function singleIssue(file: string, code: string, message: string, hint = ''): InputDataError {
  return new InputDataError([{ code, file, line: null, column: null, field: null, message, hint }]);
}
