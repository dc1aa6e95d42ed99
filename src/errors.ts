/**
 * The errors that a user may meet. Each carries its data as fields; the command-line layer turns them into text
 * (what was found, where, what is allowed, what to try) and into exit code 2 (1 for `ConvergenceError`).
 * Anything else that is thrown is a defect and keeps its stack.
 */

/** One problem of an input file, with its place. `line` and `column` count from 1; `null` when there is none. */
export interface InputIssue {
  /** Machine-readable kind, e.g. `not-a-number`, `non-positive-error`, `unknown-key`. */
  readonly code: string;
  readonly file: string;
  readonly line: number | null;
  readonly column: number | null;
  /** Name of the table column or path of the case key, e.g. `companions[0].eccentricity`; `null` when there is none. */
  readonly field: string | null;
  /** What is wrong, in words, with the offending value quoted: `found "-0.8"; a measurement error must be > 0`. */
  readonly message: string;
  /** What to try; may be empty. */
  readonly hint: string;
}

/** A file could not be used; lists every problem found in it (all files' problems together where several were read). */
export class InputDataError extends Error {
  override readonly name = 'InputDataError';
  readonly issues: readonly InputIssue[];
  constructor(issues: readonly InputIssue[], options?: ErrorOptions) {
    super(issues.map((issue) => `${issue.file}:${issue.line ?? '-'}: ${issue.message}`).join('\n'), options);
    this.issues = issues;
  }
}

/** The request itself (command, option, output folder) cannot be carried out. */
export class UsageError extends Error {
  override readonly name = 'UsageError';
  readonly allowed: string;
  readonly hint: string;
  constructor(message: string, details: { allowed?: string; hint?: string } = {}, options?: ErrorOptions) {
    super(message, options);
    this.allowed = details.allowed ?? '';
    this.hint = details.hint ?? '';
  }
}

/** A number lies outside the domain of a model (an eccentricity of 1.03, a negative mass). */
export class ModelDomainError extends Error {
  override readonly name = 'ModelDomainError';
  readonly quantity: string;
  readonly found: number;
  readonly allowed: string;
  constructor(quantity: string, found: number, allowed: string, options?: ErrorOptions) {
    super(`${quantity} ${found} is outside ${allowed}`, options);
    this.quantity = quantity;
    this.found = found;
    this.allowed = allowed;
  }
}

/** An iteration did not reach its goal; carries what is known of the last step. */
export class ConvergenceError extends Error {
  override readonly name = 'ConvergenceError';
  readonly details: Readonly<Record<string, number>>;
  constructor(message: string, details: Readonly<Record<string, number>>, options?: ErrorOptions) {
    super(message, options);
    this.details = details;
  }
}
