/** How errors look to people, and which exit code they mean. */
import {
  ConvergenceError,
  InputDataError,
  ModelDomainError,
  UsageError,
  type InputIssue,
} from '../errors.js';
import { plainLabel } from '../dossier/escape.js';

/** More than this many problems on a screen help nobody. */
const MOST_ISSUES_SHOWN = 20;
const MOST_HINTS_SHOWN = 5;

export interface Failure {
  readonly lines: readonly string[];
  readonly exitCode: 1 | 2;
}

function labelled(label: 'where' | 'allowed' | 'try', text: string): string[] {
  return text === '' ? [] : [`  ${label.padEnd(8)}${plainLabel(text, 500)}`];
}

/** `file:line:column field`, leaving out what is not known. */
function place(issue: InputIssue): string {
  const numbers = [issue.line, issue.column].filter((part) => part !== null);
  const field = issue.field === null ? '' : ` ${issue.field}`;
  return plainLabel([issue.file, ...numbers].join(':') + field, 300);
}

function inputFailure(issues: readonly InputIssue[]): string[] {
  if (issues.length === 1) {
    const issue = issues[0]!;
    return [
      `error: ${plainLabel(issue.message, 500)}`,
      ...labelled('where', place(issue)),
      ...labelled('try', issue.hint),
    ];
  }
  const files = new Set(issues.map((issue) => issue.file)).size;
  const shown = issues.slice(0, MOST_ISSUES_SHOWN);
  const hidden = issues.length - shown.length;
  const hints = [...new Set(shown.map((issue) => issue.hint).filter((hint) => hint !== ''))];
  return [
    `error: ${issues.length} problems in ${files === 1 ? 'one input' : `${files} inputs`}`,
    ...shown.map((issue) => `  ${place(issue)}: ${plainLabel(issue.message, 500)}`),
    ...(hidden > 0 ? [`  ... and ${hidden} more`] : []),
    ...hints.slice(0, MOST_HINTS_SHOWN).flatMap((hint) => labelled('try', hint)),
  ];
}

function details(numbers: Readonly<Record<string, number>>): string {
  return Object.entries(numbers)
    .map(([name, value]) => `${name} ${value}`)
    .join(', ');
}

/** A user's mistake in a few lines without a stack; anything unknown is a defect and keeps its stack. */
export function describeFailure(error: unknown): Failure {
  if (error instanceof InputDataError) return { exitCode: 2, lines: inputFailure(error.issues) };
  if (error instanceof UsageError)
    return {
      exitCode: 2,
      lines: [
        `error: ${plainLabel(error.message, 500)}`,
        ...labelled('allowed', error.allowed),
        ...labelled('try', error.hint),
      ],
    };
  if (error instanceof ModelDomainError)
    return {
      exitCode: 2,
      lines: [`error: ${plainLabel(error.message, 500)}`, ...labelled('allowed', error.allowed)],
    };
  if (error instanceof ConvergenceError)
    return {
      exitCode: 1,
      lines: [
        `error: ${plainLabel(error.message, 500)}`,
        ...labelled('where', details(error.details)),
        ...labelled('try', 'more data, a narrower range of periods, or fewer companions'),
      ],
    };
  const stack = error instanceof Error ? (error.stack ?? error.message) : String(error);
  return {
    exitCode: 1,
    lines: [
      'error: this is a defect of tugline, not of your data',
      ...stack.split('\n').map((line) => `  ${plainLabel(line, 500)}`),
      ...labelled('try', 'send these lines, the command and, if you may, the tables to the authors'),
    ],
  };
}
