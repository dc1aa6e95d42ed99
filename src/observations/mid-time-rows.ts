/** What single rows of mid-times say: cycles, transit or occultation, and whether a row stands twice. */
import type { IssueList } from './issues.js';
import { quoted } from './text.js';
import type { TableNotice, TableRequest } from './types.js';

const LARGEST_CYCLE = 2 ** 31 - 1;
const MOST_NAMED = 30;

/** Whole numbers that fit; each other one is an issue (the first thirty). */
export function readCycles(
  written: Float64Array,
  lines: Uint32Array,
  field: string,
  issues: IssueList,
): Int32Array {
  let bad = 0;
  for (const [row, value] of written.entries()) {
    if (Number.isInteger(value) && Math.abs(value) <= LARGEST_CYCLE) continue;
    if (++bad > MOST_NAMED) break;
    issues.add({
      code: 'cycle-not-whole',
      line: lines[row]!,
      field,
      message: `found the cycle "${value}"; cycles are whole numbers`,
      hint: 'occultations carry the cycle of the transit before them; say what they are in a column kind',
    });
  }
  return Int32Array.from(written);
}

const TRANSIT = /^(t|tr|tra|transits?|p|pri|primary|mid-?transit|1|i)$/i;
const OCCULTATION = /^(o|occ|occultations?|s|sec|secondary|e|ecl|eclipses?|mid-?occultation|2|ii)$/i;

/** 1 for an occultation. @param kinds - as written per used row; `null` without such a column */
export function readKinds(
  kinds: readonly string[] | null,
  count: number,
  request: TableRequest,
  lines: Uint32Array,
  issues: IssueList,
): Uint8Array {
  if (kinds === null) return new Uint8Array(count).fill(request.midTimes?.kind === 'occultation' ? 1 : 0);
  let bad = 0;
  return Uint8Array.from(kinds, (kind, row) => {
    const word = kind.trim();
    if (!TRANSIT.test(word) && !OCCULTATION.test(word) && ++bad <= MOST_NAMED)
      issues.add({
        code: 'unknown-kind',
        line: lines[row]!,
        field: 'kind',
        message: `found ${quoted(kind)}; transit or occultation is expected`,
        hint: 'or name the column of kinds: --columns kind=LABEL',
      });
    return OCCULTATION.test(word) ? 1 : 0;
  });
}

/** Rows whose time, of the same kind, stands in an earlier row already. */
export function repeatedTimes(
  times: Float64Array,
  isOccultation: Uint8Array,
  lines: Uint32Array,
): TableNotice[] {
  const seen = new Set<string>();
  const repeated: number[] = [];
  for (const [row, time] of times.entries()) {
    const key = `${time} ${isOccultation[row]!}`;
    if (seen.has(key)) repeated.push(lines[row]!);
    seen.add(key);
  }
  if (repeated.length === 0) return [];
  return [{ code: 'repeated-time', message: 'the mid-time repeats an earlier row', lines: repeated }];
}
