/** Puts everything observed of one target together: velocities, light curves and mid-times. */
import { InputDataError, type InputIssue } from '../errors.js';
import type { AnyTable } from './any-table.js';
import { combineTables } from './combine.js';
import { singleIssue } from './issues.js';
import type { LightCurveTable, MidTimeTable, Observations } from './photometry-types.js';
import { LONGEST_SPAN_DAYS } from './table-reader.js';
import { lineList, quoted } from './text.js';
import type { TableNotice, VelocityTable } from './types.js';

/**
 * Velocities are combined (`combineTables`), light curves get names of their own, and what only shows when the tables lie side
 * by side is added to the notices of the later table.
 *
 * @throws InputDataError without a table, with a table that is given twice, with dates that cannot be on one axis, and as
 * `combineTables` does
 */
export function gatherObservations(tables: readonly AnyTable[]): Observations {
  if (tables.length === 0) throw singleIssue('', 'no-rows', 'there is not a single table');
  const issues = [...givenTwice(tables), ...farApart(tables)];
  if (issues.length > 0) throw new InputDataError(issues);
  const velocities = tables.filter((table): table is VelocityTable => table.content === 'velocities');
  const lightCurves = tables.filter((table): table is LightCurveTable => table.content === 'light curve');
  const midTimes = tables.filter((table): table is MidTimeTable => table.content === 'mid-times');
  const scales = mixedScales(tables);
  return {
    velocities: velocities.length === 0 ? null : combineTables(velocities),
    lightCurves: withOwnNames(lightCurves).map((table, place, all) =>
      noted(table, [...sameExposures(table, all.slice(0, place)), ...(place === 0 ? scales : [])]),
    ),
    midTimes: midTimes.map((table, place) =>
      noted(table, [
        ...sameMidTimes(table, midTimes.slice(0, place)),
        ...(place === 0 && lightCurves.length === 0 ? scales : []),
      ]),
    ),
  };
}

function noted<T extends AnyTable>(table: T, notices: readonly TableNotice[]): T {
  return notices.length === 0 ? table : { ...table, notices: [...table.notices, ...notices] };
}

/** Velocities that are given twice are found, and said, where they are combined. */
function givenTwice(tables: readonly AnyTable[]): InputIssue[] {
  const seen = new Map<string, string>();
  const issues: InputIssue[] = [];
  for (const { content, path, sha256 } of tables) {
    const twin = seen.get(sha256);
    if (twin === undefined) seen.set(sha256, path);
    else if (content !== 'velocities')
      issues.push({
        code: 'same-table-twice', file: path, line: null, column: null, field: null,
        message: `this table has the same content as ${quoted(twin)}: it would count twice`, hint: 'name each table once',
      }); // prettier-ignore
  }
  return issues;
}

function extremes(times: Float64Array): readonly [number, number] {
  let [first, last] = [Infinity, -Infinity];
  for (const time of times) {
    if (time < first) first = time;
    if (time > last) last = time;
  }
  return [first, last];
}

/** Two tables of which one leaves out the first digits of its dates. */
function farApart(tables: readonly AnyTable[]): InputIssue[] {
  const spans = tables.map((table) => ({ table, span: extremes(table.timesBjdTdb) }));
  const earliest = spans.reduce((a, b) => (b.span[0] < a.span[0] ? b : a));
  const latest = spans.reduce((a, b) => (b.span[1] > a.span[1] ? b : a));
  const days = latest.span[1] - earliest.span[0];
  const isVelocities = earliest.table.content === 'velocities' && latest.table.content === 'velocities';
  if (!(days > LONGEST_SPAN_DAYS) || earliest.table === latest.table || isVelocities) return [];
  return [
    {
      code: 'impossible-span', file: earliest.table.path, line: null, column: null, field: 'time',
      message: `the dates of this table and of ${quoted(latest.table.path)} are ${Math.round(days)} d apart`,
      hint: 'one of them leaves out the first digits: declare its offset, e.g. time: BJD_TDB - 2450000',
    },
  ]; // prettier-ignore
}

/** Where velocities are not alone; among themselves they say it when they are combined. */
function mixedScales(tables: readonly AnyTable[]): TableNotice[] {
  const scales = new Set(tables.map((table) => table.timeScale));
  if (scales.size < 2) return [];
  const message = `the tables are in different time scales (${[...scales].join(', ')}); all dates are taken as BJD_TDB`;
  return [{ code: 'mixed-time-scales', message, lines: [] }];
}

/** A name that an earlier table has gets a number behind it: `south`, `south 2`. The band stays as it was. */
function withOwnNames(tables: readonly LightCurveTable[]): LightCurveTable[] {
  const taken = new Set<string>();
  const written = new Set(tables.map((table) => table.name));
  return tables.map((table) => {
    let name = table.name;
    for (let number = 2; taken.has(name) || (name !== table.name && written.has(name)); number++)
      name = `${table.name} ${number}`;
    taken.add(name);
    if (name === table.name) return table;
    const message = `an earlier table is called ${quoted(table.name)}, too; this one is called ${quoted(name)} from here on`;
    return noted({ ...table, name }, [{ code: 'renamed', message, lines: [] }]);
  });
}

/** Earlier tables of the same band that share half of the times of this one. */
function sameExposures(table: LightCurveTable, earlier: readonly LightCurveTable[]): TableNotice[] {
  return earlier.flatMap((other) => {
    if (other.band !== table.band) return [];
    const shared = sharedTimes(table.timesBjdTdb, other.timesBjdTdb);
    if (shared < 0.5 * Math.min(table.used, other.used)) return [];
    const message = `${shared} times stand in ${quoted(other.path)}, too: two reductions of the same exposures count twice`;
    return [{ code: 'repeated-table', message, lines: [] }];
  });
}

/** Number of times that both have; both ascending. */
function sharedTimes(first: Float64Array, second: Float64Array): number {
  let [shared, i, j] = [0, 0, 0];
  while (i < first.length && j < second.length) {
    const difference = first[i]! - second[j]!;
    if (difference === 0) shared++;
    if (difference <= 0) i++;
    if (difference >= 0) j++;
  }
  return shared;
}

/** Mid-times of the same companion and kind that an earlier table has to the last digit. */
function sameMidTimes(table: MidTimeTable, earlier: readonly MidTimeTable[]): TableNotice[] {
  return earlier.flatMap((other) => {
    if (other.companion !== table.companion) return [];
    const known = new Map(
      [...other.timesBjdTdb].map((time, row) => [`${time} ${other.isOccultation[row]!}`, other.lines[row]!]),
    );
    const twins = [...table.timesBjdTdb.keys()].flatMap((row) => {
      const line = known.get(`${table.timesBjdTdb[row]!} ${table.isOccultation[row]!}`);
      return line === undefined ? [] : [{ line: table.lines[row]!, other: line }];
    });
    if (twins.length === 0) return [];
    const message = `mid-times stand in ${quoted(other.path)}, too (${lineList(twins.map((twin) => twin.other))}), and count twice`;
    return [{ code: 'repeated-row', message, lines: twins.map((twin) => twin.line) }];
  });
}
