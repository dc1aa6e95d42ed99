/** Mid-times of all tables in one set, ready for the solver. */
import { lineList } from '../../observations/text.js';
import type { MidTimeTable } from '../../observations/photometry-types.js';

/** Where a mid-time was read. */
export interface MidTimeOrigin {
  readonly path: string;
  readonly line: number;
  /** Who measured it; empty where not said. Untrusted text. */
  readonly source: string;
}

/** Mid-times as read, cycles not yet settled. Arrays of length `count`, in the order of time. */
export interface MidTimes {
  readonly count: number;
  /** BJD_TDB of `timesDays` = 0, a whole day near the middle. */
  readonly originBjdTdb: number;
  /** Days since the origin. */
  readonly timesDays: Float64Array;
  readonly sigmasDays: Float64Array;
  readonly isOccultation: Uint8Array;
  /** Cycle as written; `null` where its table has none. */
  readonly written: readonly (number | null)[];
  /** Index of the table. */
  readonly tableOf: Uint16Array;
  readonly origins: readonly MidTimeOrigin[];
}

/** The same with a cycle for every row: an occultation carries the cycle of the transit before it. */
export interface NumberedTimes extends MidTimes {
  readonly cycles: Int32Array;
}

/** Something that the user should know, with the rows it is about. */
export interface TimingNotice {
  readonly code: string;
  readonly message: string;
}

/** `"a.csv" lines 3, 5; "b.csv" line 7`, at most `most` rows (8 at most). */
export function placesOf(times: MidTimes, rows: readonly number[], most = 8): string {
  const byPath = new Map<string, number[]>();
  for (const row of rows.slice(0, most)) {
    const { path, line } = times.origins[row]!;
    byPath.set(path, [...(byPath.get(path) ?? []), line]);
  }
  const parts = Array.from(byPath, ([path, lines]) => `"${path}" ${lineList(lines)}`);
  const more = rows.length > most ? ` and ${rows.length - most} more` : '';
  return parts.join('; ') + more;
}

/**
 * All rows of the tables sorted by time. Rows that repeat an earlier one to the last digit (same kind, time and error) are
 * left out and named; everything else is kept.
 *
 * @param tables - tables of one companion, at least one row in all
 */
export function mergeMidTimes(tables: readonly MidTimeTable[]): {
  readonly times: MidTimes;
  readonly notices: readonly TimingNotice[];
} {
  const rows = tables.flatMap((table, tableIndex) =>
    Array.from(table.timesBjdTdb, (time, row) => ({ table, tableIndex, row, time })),
  );
  rows.sort((a, b) => a.time - b.time || a.tableIndex - b.tableIndex || a.row - b.row);
  const seen = new Set<string>();
  const kept: typeof rows = [];
  const repeated: typeof rows = [];
  for (const entry of rows) {
    const { table, row, time } = entry;
    const key = `${time} ${table.sigmasDays[row]!} ${table.isOccultation[row]!}`;
    if (seen.has(key)) repeated.push(entry);
    else kept.push(entry);
    seen.add(key);
  }
  const first = kept[0]?.time ?? 0;
  const last = kept.at(-1)?.time ?? 0;
  const originBjdTdb = Math.round((first + last) / 2);
  const originOf = ({ table, row }: (typeof rows)[number]): MidTimeOrigin => ({
    path: table.path,
    line: table.lines[row] ?? 0,
    source: table.sources[row] ?? '',
  });
  const notices: TimingNotice[] = [];
  if (repeated.length > 0)
    notices.push({
      code: 'repeated-rows',
      message: `${repeated.length} row${repeated.length === 1 ? ' repeats another' : 's repeat others'} to the last digit of time and error and ${repeated.length === 1 ? 'is' : 'are'} used once: ${repeated
        .slice(0, 8)
        .map((entry) => `"${entry.table.path}" line ${originOf(entry).line}`)
        .join(', ')}${repeated.length > 8 ? ' ...' : ''}`,
    });
  const times: MidTimes = {
    count: kept.length,
    originBjdTdb,
    timesDays: Float64Array.from(kept, ({ time }) => time - originBjdTdb),
    sigmasDays: Float64Array.from(kept, ({ table, row }) => table.sigmasDays[row]!),
    isOccultation: Uint8Array.from(kept, ({ table, row }) => table.isOccultation[row]!),
    written: kept.map(({ table, row }) => table.cycles?.[row] ?? null),
    tableOf: Uint16Array.from(kept, ({ tableIndex }) => tableIndex),
    origins: kept.map(originOf),
  };
  return { times, notices };
}

/** One notice for all transits (and one for all occultations) that were timed more than once. */
export function sharedEventNotices(times: NumberedTimes): TimingNotice[] {
  return [0, 1].flatMap((kind) => {
    const groups = new Map<number, number[]>();
    for (let row = 0; row < times.count; row++) {
      if (times.isOccultation[row] !== kind) continue;
      const cycle = times.cycles[row]!;
      groups.set(cycle, [...(groups.get(cycle) ?? []), row]);
    }
    const shared = [...groups].filter(([, rows]) => rows.length > 1);
    if (shared.length === 0) return [];
    const name = kind === 1 ? 'occultation' : 'transit';
    const oneFile = new Set(times.origins.map(({ path }) => path)).size === 1;
    const shown = shared.slice(0, 5).map(([cycle, rows]) => {
      const lines = rows.map((row) => times.origins[row]!.line).sort((one, other) => one - other);
      return `cycle ${cycle} (${oneFile ? `lines ${lines.join(', ')}` : placesOf(times, rows, 4)})`;
    });
    return [
      {
        code: 'shared-events',
        message: `${shared.length} ${name}${shared.length === 1 ? ' is' : 's are'} timed more than once, and every time is kept: ${shown.join(', ')}${shared.length > 5 ? ' ...' : ''}`,
      },
    ];
  });
}
