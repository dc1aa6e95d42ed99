/** Rows of a light curve that are probably wrong. Nothing is repaired: each finding is a notice with its lines, and the rows are used. */
import { errorUnitNotice } from './flux-scale.js';
import { LineTally } from './photometry-rows.js';
import type { TableNotice } from './types.js';
import { median } from './validate.js';

const JUMP_DAYS = 1000;
const HUGE_FACTOR = 1000;

/** Used rows in order of time. */
export interface CheckedCurve {
  readonly timesBjdTdb: Float64Array;
  readonly flux: Float64Array;
  readonly sigmas: Float64Array;
  /** Errors come from the table, not from its scatter. */
  readonly hasErrors: boolean;
  readonly scatter: number;
  readonly lines: Uint32Array;
}

export function suspiciousCurve(curve: CheckedCurve): TableNotice[] {
  const { timesBjdTdb: times, flux, sigmas, lines, scatter } = curve;
  const [repeats, jumps, negative, far, odd] = [0, 1, 2, 3, 4].map(() => new LineTally(lines)) as [LineTally, LineTally, LineTally, LineTally, LineTally]; // prettier-ignore
  const usual = median(sigmas);
  const wide = HUGE_FACTOR * Math.max(scatter, usual);
  for (let row = 0; row < times.length; row++) {
    if (row > 0 && times[row] === times[row - 1]) repeats.add(row);
    if (row > 0 && times[row]! - times[row - 1]! >= JUMP_DAYS) jumps.add(row);
    if (flux[row]! <= 0) negative.add(row);
    else if (Math.abs(flux[row]! - 1) > wide) far.add(row);
    if (sigmas[row]! > HUGE_FACTOR * usual || sigmas[row]! < usual / HUGE_FACTOR) odd.add(row);
  }
  const notices: TableNotice[] = [];
  const say = (tally: LineTally, code: string, message: string): void => {
    if (tally.count > 0) notices.push(tally.notice(code, message));
  };
  say(repeats, 'repeated-time', 'the time repeats an earlier row: two reductions of one exposure?');
  say(jumps, 'time-jump', `the time jumps by ${JUMP_DAYS} d or more: a gap in the data, or a mistyped date?`);
  say(negative, 'outlier', 'the flux is zero or below: rows without light are used like all others');
  say(far, 'outlier', `the flux lies more than ${HUGE_FACTOR} times the usual scatter away`);
  if (flux.length > 1 && flux.every((value) => value === flux[0]))
    notices.push({ code: 'constant-flux', message: 'the flux is the same in every row: is it the right column?', lines: [] }); // prettier-ignore
  if (curve.hasErrors) {
    say(odd, 'odd-error', `the error is ${HUGE_FACTOR} times larger or smaller than usual`);
    notices.push(...errorUnitNotice(sigmas, scatter));
  }
  return notices;
}
