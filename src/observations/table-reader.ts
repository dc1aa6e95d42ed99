/** From a file (or its text) to a `VelocityTable`: read, recognise, convert, check. */
import { createHash } from 'node:crypto';
import { InputDataError, type InputIssue } from '../errors.js';
import { planColumns, type VelocityColumns } from './columns.js';
import { decideTime, decideVelocityUnits, type TimeReading, type VelocityUnits } from './column-units.js';
import { IssueList } from './issues.js';
import { readTextFile } from './read-text.js';
import { readRows, type NumberRows } from './table-rows.js';
import { readTableText, type TextTable } from './table-text.js';
import { fileStem, lineList, quoted, withoutControls } from './text.js';
import { toBjdTdb } from './time-scale.js';
import type { ColumnReading, TableNotice, TableRequest, VelocityTable } from './types.js';
import { metresPerSecond } from './units.js';
import { median, suspiciousRows } from './validate.js';

/** Larger tables are refused unread. */
export const LARGEST_TABLE_BYTES = 64e6;
export const MOST_INSTRUMENTS = 200;
/** No velocity is older than the 1870s: a longer span is a mistake in the dates, and would never be searched through. */
export const LONGEST_SPAN_DAYS = 73_050;
const SPEED_OF_LIGHT_MPS = 299_792_458; // exact, SI

/** A request without any declaration: everything is recognised from the table. */
export function requestFor(path: string): TableRequest {
  return { path, instrument: null, timeScale: null, timeOffsetDays: null, velocityUnit: null, columns: {} };
}

/**
 * Reads one table of velocities.
 *
 * @throws InputDataError with all problems of the file, each with line and column where it has them
 */
export async function readTable(request: TableRequest): Promise<VelocityTable> {
  const { text, sha256 } = await readTextFile(request.path, LARGEST_TABLE_BYTES);
  return parseHashedTable(text, request.path, request, sha256);
}

/** Reads several tables; the problems of all of them come in one InputDataError. */
export async function readTables(requests: readonly TableRequest[]): Promise<VelocityTable[]> {
  const tables: VelocityTable[] = [];
  const issues: InputIssue[] = [];
  for (const request of requests) {
    try {
      tables.push(await readTable(request));
    } catch (cause) {
      if (!(cause instanceof InputDataError)) throw cause;
      issues.push(...cause.issues);
    }
  }
  if (issues.length > 0) throw new InputDataError(issues);
  return tables;
}

/**
 * Understands the text of a table (what `readTable` does once the file is read; for standard input, too).
 *
 * @param path - name of the text in messages; its stem is the instrument when nothing else names one
 * @throws InputDataError with all problems of the text
 */
export function parseTable(text: string, path: string, request: TableRequest): VelocityTable {
  return parseHashedTable(text, path, request, createHash('sha256').update(text, 'utf8').digest('hex'));
}

/** `parseTable` for a text whose checksum is known. */
export function parseHashedTable(
  text: string,
  path: string,
  request: TableRequest,
  sha256: string,
): VelocityTable {
  const issues = new IssueList(path);
  const notices: TableNotice[] = [];
  const table = readTableText(text, issues);
  const plan = table === null ? null : planColumns(table, request, issues, notices);
  if (table === null || plan === null) throw new InputDataError(issues.list());
  const units = decideVelocityUnits(table, plan, request, issues, notices);
  const rows = readRows(table, plan, issues, notices);
  const time = decideTime(table, plan, request, rows.times, issues, notices);
  const timesBjdTdb = toBjdTdb(
    time.scale,
    rows.times.map((days) => days + time.offsetDays),
  );
  const velocitiesMps = rows.velocities.map((velocity) => velocity * metresPerSecond(units.velocity));
  const sigmasMps = rows.sigmas.map((sigma) => sigma * metresPerSecond(units.error));
  checkSizes(timesBjdTdb, velocitiesMps, rows, issues);
  const { instruments, instrumentOf } = instrumentsOf(rows, plan, path, request, issues, notices);
  issues.throwIfAny();
  hintAtKilometres(units, rows, notices);
  const used = { timesBjdTdb, velocitiesMps, sigmasMps, instrumentOf, instruments, lines: rows.lines };
  notices.push(...suspiciousRows(used));
  return {
    content: 'velocities', path, sha256, rows: table.rows.length, used: rows.lines.length, delimiter: table.format.delimiter,
    columns: describeColumns(table, plan, units, time),
    timeScale: time.scale, timeOffsetDays: time.offsetDays, velocityUnit: units.velocity,
    ...used, kept: keptColumns(table, plan, rows), notices,
  }; // prettier-ignore
}

function checkSizes(
  times: Float64Array,
  velocities: Float64Array,
  rows: NumberRows,
  issues: IssueList,
): void {
  for (const [row, velocity] of velocities.entries()) {
    if (Math.abs(velocity) >= SPEED_OF_LIGHT_MPS) {
      issues.add({
        code: 'too-fast',
        line: rows.lines[row]!,
        field: 'velocity',
        message: `found ${rows.velocities[row]!}, faster than light`,
        hint: 'check the unit of the table',
      });
    }
  }
  const middle = median(times);
  const far = [...times.keys()].filter((row) => Math.abs(times[row]! - middle) > LONGEST_SPAN_DAYS);
  if (far.length > 0) {
    const lines = far.map((row) => rows.lines[row]!);
    issues.add({
      code: 'impossible-span',
      line: lines[0]!,
      field: 'time',
      message: `dates more than 200 years from the others in ${lineList(lines)}`,
      hint: 'look for mistyped dates, or for dates with and without their first digits',
    });
  }
}

function instrumentsOf(
  rows: NumberRows,
  plan: VelocityColumns,
  path: string,
  request: TableRequest,
  issues: IssueList,
  notices: TableNotice[],
): { instruments: readonly string[]; instrumentOf: Uint16Array } {
  // prettier-ignore
  const hasColumn = plan.of.has('instrument');
  const declared = request.instrument === null ? null : withoutControls(request.instrument);
  if (declared !== null && declared !== request.instrument?.trim()) {
    notices.push({
      code: 'control-characters',
      message: 'control characters were taken out of the declared instrument name',
      lines: [],
    });
  }
  if (!hasColumn || (declared !== null && request.columns.instrument === undefined)) {
    if (hasColumn)
      notices.push({
        code: 'instrument-declared',
        message: `all rows are taken as ${quoted(declared!)}, as declared; the instrument column is not used`,
        lines: [],
      });
    const name = declared === null || declared === '' ? fileStem(path) : declared;
    return { instruments: [name], instrumentOf: new Uint16Array(rows.lines.length) };
  }
  const places = new Map<string, number>();
  for (const name of rows.instruments) if (!places.has(name)) places.set(name, places.size);
  if (places.size > MOST_INSTRUMENTS) {
    issues.add({
      code: 'too-many-instruments',
      field: 'instrument',
      message: `the instrument column holds ${places.size} different names; at most ${MOST_INSTRUMENTS} are allowed`,
      hint: 'is it the right column?',
    });
    return { instruments: [], instrumentOf: new Uint16Array(0) };
  }
  return {
    instruments: [...places.keys()],
    instrumentOf: Uint16Array.from(rows.instruments, (name) => places.get(name)!),
  };
}

/** Velocities such as 46.3 with errors such as 0.002, read as m/s for want of a unit, are more likely km/s. */
function hintAtKilometres(units: VelocityUnits, rows: NumberRows, notices: TableNotice[]): void {
  if (!units.assumed || rows.lines.length === 0) return;
  const [velocity, error] = [median(rows.velocities), median(rows.sigmas)];
  if (Math.abs(velocity) >= 200 || error >= 0.1) return;
  const message = `the numbers look like km/s (median velocity ${Number(velocity.toPrecision(4))}, median error ${Number(error.toPrecision(2))}): declare km/s if so`;
  notices.push({ code: 'unit-hint', message, lines: [] });
}

function describeColumns(
  table: TextTable,
  plan: VelocityColumns,
  units: VelocityUnits,
  time: TimeReading,
): ColumnReading[] {
  const meanings = new Map([...plan.of].map(([meaning, index]) => [index, meaning]));
  const timeUnit = `${time.scale === 'unknown' ? 'unknown scale' : time.scale}${time.offsetDays === 0 ? '' : ` - ${time.offsetDays}`} (d)`;
  return Array.from({ length: table.width }, (_, index): ColumnReading => {
    const meaning = meanings.get(index) ?? 'kept';
    const unit =
      meaning === 'time'
        ? timeUnit
        : meaning === 'velocity'
          ? units.velocity
          : meaning === 'velocity-error'
            ? units.error
            : '';
    return {
      position: index + 1,
      label: plan.labels?.[index] ?? null,
      meaning,
      unit,
      known: plan.known.get(index) ?? '',
    };
  });
}

function keptColumns(
  table: TextTable,
  plan: VelocityColumns,
  rows: NumberRows,
): Map<string, readonly string[]> {
  const taken = new Set(plan.of.values());
  const kept = new Map<string, readonly string[]>();
  for (let index = 0; index < table.width; index++) {
    if (taken.has(index)) continue;
    const label = plan.labels?.[index] ?? '';
    const name = label === '' || kept.has(label) ? `${label === '' ? 'column' : label} ${index + 1}` : label;
    const cells = rows.indices.map((row) => table.rows[row]!.cells[index]!);
    if (label !== '' || cells.some((cell) => cell !== '')) kept.set(name, cells);
  }
  return kept;
}
