/** Looks for rows that are probably wrong. Nothing is repaired: each finding is a notice with its lines, and the rows are used. */
import { quoted } from './text.js';
import type { TableNotice } from './types.js';
import { plainWord } from './suggest.js';

/** The used rows in file order. */
export interface CheckedRows {
  readonly timesBjdTdb: Float64Array;
  readonly velocitiesMps: Float64Array;
  readonly sigmasMps: Float64Array;
  readonly instrumentOf: Uint16Array;
  readonly instruments: readonly string[];
  readonly lines: Uint32Array;
}

const JUMP_DAYS = 1000;
/** "Three orders of magnitude", for outliers and odd errors. */
const HUGE_FACTOR = 1000;
const MOST_LINES_NAMED = 200;

export function suspiciousRows(rows: CheckedRows): TableNotice[] {
  const groups: number[][] = rows.instruments.map(() => []);
  for (const [row, instrument] of rows.instrumentOf.entries()) groups[instrument]!.push(row);
  const notices: TableNotice[] = [];
  const say: Say = (code, message, found) => {
    if (found.length === 0) return;
    const all =
      found.length > MOST_LINES_NAMED
        ? ` (${found.length} rows; the first ${MOST_LINES_NAMED} are named)`
        : '';
    notices.push({
      code,
      message: message + all,
      lines: found.slice(0, MOST_LINES_NAMED).map((row) => rows.lines[row]!),
    });
  };
  repeats(rows, say);
  say(
    'unsorted',
    `times go back; the rows are sorted before the fit`,
    groups.flatMap((group) => stepsBack(rows, group)),
  );
  say(
    'time-jump',
    `the time jumps by ${JUMP_DAYS} d or more: a gap in the data, or a mistyped date?`,
    groups.flatMap((group) => jumps(rows, group)),
  );
  const mixed = groups.flatMap((group) => mixedUnits(rows, group));
  say('mixed-units', `velocity and error are both about 1000 times off the rest: km/s and m/s mixed?`, mixed);
  const outliers = groups
    .flatMap((group) => farVelocities(rows, group))
    .filter((row) => !mixed.includes(row));
  say('outlier', `the velocity lies more than ${HUGE_FACTOR} times the usual scatter away`, outliers);
  const odd = groups.flatMap((group) => oddErrors(rows, group)).filter((row) => !mixed.includes(row));
  say('odd-error', `the error is ${HUGE_FACTOR} times larger or smaller than usual`, odd);
  notices.push(...mixedInstruments(rows, groups), ...similarNames(rows.instruments));
  return notices;
}

type Say = (code: string, message: string, found: readonly number[]) => void;

function repeats(rows: CheckedRows, say: Say): void {
  const seen = new Map<string, number>();
  const same: number[] = [];
  const sameTime: number[] = [];
  for (const row of rows.lines.keys()) {
    const key = `${rows.timesBjdTdb[row]!}|${rows.instrumentOf[row]!}`;
    const first = seen.get(key);
    if (first === undefined) seen.set(key, row);
    else if (
      rows.velocitiesMps[row] === rows.velocitiesMps[first] &&
      rows.sigmasMps[row] === rows.sigmasMps[first]
    )
      same.push(row);
    else sameTime.push(row);
  }
  say('repeated-row', `time, velocity and error repeat an earlier row: counted twice`, same);
  say(
    'repeated-time',
    `the time repeats an earlier row of the same instrument, with another velocity: two reductions of one exposure?`,
    sameTime,
  );
}

function stepsBack({ timesBjdTdb }: CheckedRows, group: readonly number[]): number[] {
  return group.filter((row, place) => place > 0 && timesBjdTdb[row]! < timesBjdTdb[group[place - 1]!]!);
}

function jumps({ timesBjdTdb }: CheckedRows, group: readonly number[]): number[] {
  return group.filter(
    (row, place) => place > 0 && Math.abs(timesBjdTdb[row]! - timesBjdTdb[group[place - 1]!]!) >= JUMP_DAYS,
  );
}

/** Rows whose velocity and error are both larger (or both smaller) than usual by a factor near 1000. */
function mixedUnits({ velocitiesMps, sigmasMps }: CheckedRows, group: readonly number[]): number[] {
  if (group.length < 4) return [];
  const sizes = group.map((row) => Math.abs(velocitiesMps[row]!));
  const size = median(sizes);
  const sigma = median(group.map((row) => sigmasMps[row]!));
  return group.filter((row, place) => {
    const [errors, values] = [sigmasMps[row]! / sigma, sizes[place]! / size];
    return (
      (errors > 200 && errors < 5000 && values > 100) ||
      (errors < 1 / 200 && errors > 1 / 5000 && values < 1 / 100)
    );
  });
}

function farVelocities({ velocitiesMps, sigmasMps }: CheckedRows, group: readonly number[]): number[] {
  if (group.length < 4) return [];
  const centre = median(group.map((row) => velocitiesMps[row]!));
  const deviation = median(group.map((row) => Math.abs(velocitiesMps[row]! - centre)));
  const scatter = Math.max(1.4826 * deviation, median(group.map((row) => sigmasMps[row]!))); // 1.4826: from median deviation to sigma
  return group.filter((row) => Math.abs(velocitiesMps[row]! - centre) > HUGE_FACTOR * scatter);
}

function oddErrors({ sigmasMps }: CheckedRows, group: readonly number[]): number[] {
  if (group.length < 4) return [];
  const usual = median(group.map((row) => sigmasMps[row]!));
  return group.filter(
    (row) => sigmasMps[row]! > HUGE_FACTOR * usual || sigmasMps[row]! < usual / HUGE_FACTOR,
  );
}

/** Two instruments of which one seems to be in km/s and the other in m/s. */
function mixedInstruments(rows: CheckedRows, groups: readonly (readonly number[])[]): TableNotice[] {
  const typical = groups.map((group) => ({
    size: median(group.map((row) => Math.abs(rows.velocitiesMps[row]!))),
    sigma: median(group.map((row) => rows.sigmasMps[row]!)),
  }));
  for (const [first, a] of typical.entries()) {
    for (const [second, b] of typical.entries()) {
      const near = (ratio: number): boolean => ratio > 100 && ratio < 10_000;
      if (near(a.size / b.size) && near(a.sigma / b.sigma)) {
        const names = `${quoted(rows.instruments[first]!)} and ${quoted(rows.instruments[second]!)}`;
        return [
          {
            code: 'mixed-units',
            message: `velocities and errors of ${names} differ by a factor near 1000: km/s and m/s mixed?`,
            lines: [],
          },
        ];
      }
    }
  }
  return [];
}

/** Instruments whose names differ only in case, blanks, hyphens or underscores. */
export function similarNames(instruments: readonly string[]): TableNotice[] {
  const groups = new Map<string, string[]>();
  for (const name of instruments) {
    const key = plainWord(name);
    groups.set(key, [...(groups.get(key) ?? []), name]);
  }
  return [...groups].flatMap(([key, names]) => {
    if (names.length < 2 || key === '') return [];
    const list = names.map(quoted).join(', ');
    return [
      {
        code: 'similar-instruments',
        message: `${list} are taken as different instruments, each with its own zero point; is it one?`,
        lines: [],
      },
    ];
  });
}

/** Middle value; the mean of the two middle ones of an even number. NaN for none. */
export function median(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  const middle = sorted.length >> 1;
  if (sorted.length === 0) return NaN;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}
