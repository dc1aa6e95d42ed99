/** From the operands and options of a call to a case and its tables. */
import { InputDataError, UsageError } from '../errors.js';
import { plainLabel } from '../dossier/escape.js';
import {
  caseFromTables,
  checkChoices,
  checkInstrumentChoices,
  combineTables,
  gatherObservations,
  parseAnyTable,
  readAnyTable,
  readCase,
  type AnyTable,
} from '../observations/index.js';
import { type Case, type TableRequest, type VelocitySet, type VelocityTable } from '../observations/types.js';
import type { Observations } from '../observations/photometry-types.js';
import type { CommandArguments } from './command-arguments.js';
import { requestChoices } from './table-options.js';
import type { Terminal } from './terminal.js';

/** As much as is read of a file. */
const INPUT_LIMIT_BYTES = 256 * 1024 * 1024;
/** What standard input is called in messages and records, and its instrument unless it has a name. */
const INPUT_NAME = 'standard-input';
const MOST_COMPANIONS = 20;
const LINES_SHOWN = 8;

function isCase(path: string): boolean {
  return /\.ya?ml$/i.test(path);
}

function companionsChoice(given: CommandArguments): number | 'auto' | null {
  if (given.text('companions')?.trim().toLowerCase() === 'auto') return 'auto';
  return given.wholeNumber('companions', 0, MOST_COMPANIONS);
}

/** `--circular` also speaks for companions that a case describes one by one. */
function withShape(companions: Case['companions'], circular: boolean): Case['companions'] {
  if (!circular || typeof companions !== 'object') return companions;
  return companions.map((companion) => ({ ...companion, circular: true }));
}

/** The case with what the options say put over what the file says. */
function withOptions(base: Case, given: CommandArguments): Case {
  const companions = companionsChoice(given);
  const shortest = given.quantity('shortest-period', 'period')?.value ?? base.periodRangeDays.low;
  const longest = given.quantity('longest-period', 'period')?.value ?? base.periodRangeDays.high;
  if (shortest !== null && longest !== null && shortest >= longest)
    throw new UsageError(`the shortest period, ${shortest} d, is not below the longest, ${longest} d`, {
      hint: 'change --shortest-period or --longest-period',
    });
  const choices = requestChoices(given);
  return {
    ...base,
    target: plainLabel(given.text('target') ?? base.target).trim(),
    star: {
      massSolar: given.quantity('star-mass', 'star mass') ?? base.star.massSolar,
      radiusSolar: given.quantity('star-radius', 'star radius') ?? base.star.radiusSolar,
      effectiveTemperatureK:
        given.quantity('star-temperature', 'temperature') ?? base.star.effectiveTemperatureK,
      ...(base.star.densityGcc === undefined ? {} : { densityGcc: base.star.densityGcc }),
    },
    tables: base.tables.map((request) => ({
      ...request,
      ...choices,
      lightCurve: { ...request.lightCurve, ...choices.lightCurve },
    })),
    companions: withShape(companions ?? base.companions, given.isOn('circular')),
    drift: given.choice('drift', ['auto', 'none', 'linear', 'quadratic']) ?? base.drift,
    circular: given.isOn('circular') ? true : base.circular,
    periodRangeDays: { low: shortest, high: longest },
  };
}

/** @throws UsageError without an operand, or when a case and tables are mixed */
export async function requestedCase(given: CommandArguments): Promise<Case> {
  const { operands } = given;
  if (operands.length === 0)
    throw new UsageError('no case and no table is named', {
      allowed: 'one case (a .yaml file), or one or more tables; - reads one table from standard input',
      hint: 'tugline solve data-samples/vellamo.yaml',
    });
  const cases = operands.filter(isCase);
  if (cases.length > 1 || (cases.length === 1 && operands.length > 1))
    throw new UsageError(
      cases.length > 1 ? `${cases.length} cases are named` : 'a case and tables are named together',
      { allowed: 'one case, or tables', hint: 'list the tables inside the case' },
    );
  if (operands.filter((path) => path === '-').length > 1)
    throw new UsageError('standard input (-) is named more than once', { allowed: 'once' });
  const base = cases.length === 1 ? await readCase(operands[0]!) : caseFromTables(operands);
  const [first] = operands;
  if (base.tables.length === 0)
    throw new UsageError(`the case "${plainLabel(operands[0]!)}" lists no tables`, {
      allowed: 'a list tables: with at least one file',
      hint: 'tugline mock simulates tables for a case that has a mock block',
    });
  return withOptions(first === '-' ? { ...base, target: INPUT_NAME } : base, given);
}

async function readOne(request: TableRequest, terminal: Terminal): Promise<AnyTable> {
  if (request.path !== '-') return readAnyTable(request);
  const { text, complete } = await terminal.readInput(INPUT_LIMIT_BYTES);
  if (!complete)
    throw new UsageError(`standard input holds more than ${INPUT_LIMIT_BYTES / 1024 / 1024} MiB`, {
      hint: 'is it a table?',
    });
  return parseAnyTable(text, INPUT_NAME, { ...request, path: INPUT_NAME });
}

export interface ReadTables {
  readonly tables: readonly AnyTable[];
  /** All problems of the tables that could not be read; `null` without any. */
  readonly failure: InputDataError | null;
}

/** Reads every table, also past one that is broken, so that all problems are known at once. */
export async function readAllTables(
  requests: readonly TableRequest[],
  terminal: Terminal,
): Promise<ReadTables> {
  const tables: AnyTable[] = [];
  const issues: InputDataError['issues'][number][] = [];
  for (const request of requests)
    try {
      tables.push(await readOne(request, terminal));
    } catch (error) {
      if (!(error instanceof InputDataError)) throw error;
      issues.push(...error.issues);
    }
  return { tables, failure: issues.length === 0 ? null : new InputDataError(issues) };
}

/** A notice in words, with the lines of the file that it is about. */
export function noticeText(notice: { readonly message: string; readonly lines: readonly number[] }): string {
  const shown = notice.lines.slice(0, LINES_SHOWN).join(', ');
  const more = notice.lines.length > LINES_SHOWN ? ` and ${notice.lines.length - LINES_SHOWN} more` : '';
  const lines =
    notice.lines.length === 0 ? '' : ` (line${notice.lines.length === 1 ? '' : 's'} ${shown}${more})`;
  return `${plainLabel(notice.message, 400)}${lines}`;
}

function showNotices(
  notices: readonly { readonly path: string; readonly message: string; readonly lines: readonly number[] }[],
  given: CommandArguments,
  terminal: Terminal,
): void {
  if (given.isOn('quiet')) return;
  for (const notice of notices)
    terminal.note(
      `${terminal.paint('caution', 'note:', 'note')} ${plainLabel(notice.path)}: ${noticeText(notice)}`,
    );
}

/**
 * Everything observed, of every kind; what is to be known of the tables is noted.
 *
 * @throws InputDataError with the problems of all tables together
 */
export async function readObservations(
  theCase: Case,
  given: CommandArguments,
  terminal: Terminal,
): Promise<Observations> {
  const { tables, failure } = await readAllTables(theCase.tables, terminal);
  if (failure !== null) throw failure;
  const observations = gatherObservations(tables);
  checkChoices(theCase, observations);
  const others = [...observations.lightCurves, ...observations.midTimes];
  const notices = [
    ...(observations.velocities?.notices ?? []),
    ...others.flatMap((table) => table.notices.map((notice) => ({ ...notice, path: table.path }))),
  ];
  showNotices(notices, given, terminal);
  return observations;
}

const CONTENT_WORDS = { 'light curve': 'a light curve', 'mid-times': 'mid-times' } as const;

/**
 * For commands that fit velocities only.
 *
 * @throws InputDataError with the problems of all tables together, and for a table that holds anything but velocities
 */
export async function readVelocities(
  theCase: Case,
  given: CommandArguments,
  terminal: Terminal,
): Promise<VelocitySet> {
  const { tables, failure } = await readAllTables(theCase.tables, terminal);
  const issues = [...(failure?.issues ?? [])];
  const velocities: VelocityTable[] = [];
  for (const table of tables) {
    if (table.content === 'velocities') velocities.push(table);
    else
      issues.push({
        code: 'not-velocities', file: table.path, line: null, column: null, field: null,
        message: `the table holds ${CONTENT_WORDS[table.content]}; this command reads velocities only`,
        hint: 'leave the table out; if it does hold velocities, say so with --holds velocities',
      }); // prettier-ignore
  }
  if (issues.length > 0) throw new InputDataError(issues);
  const set = combineTables(velocities);
  checkInstrumentChoices(theCase, set);
  showNotices(set.notices, given, terminal);
  return set;
}
