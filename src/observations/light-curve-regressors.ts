/** Columns that a light curve's baseline may use, and the baseline that a case asks for. */
import type { IssueList } from './issues.js';
import { LineTally } from './photometry-rows.js';
import { didYouMean, plainWord } from './suggest.js';
import { quoted } from './text.js';
import type { TableNotice } from './types.js';

/** Terms of a baseline that need no column. */
export const TIME_TERMS: readonly string[] = ['time', 'time^2', 'time^3'];

/** Columns without gaps that are not the same in all rows; what is left out is said. */
export function usableRegressors(
  found: ReadonlyMap<string, Float64Array>,
  lines: Uint32Array,
  notices: TableNotice[],
): Map<string, Float64Array> {
  const usable = new Map<string, Float64Array>();
  const constant: string[] = [];
  for (const [name, values] of found) {
    const gaps = new LineTally(lines);
    let differs = false;
    for (let row = 0; row < values.length; row++) {
      if (Number.isNaN(values[row]!)) gaps.add(row);
      else if (values[row] !== values[0]) differs = true;
    }
    if (gaps.count === values.length) continue;
    if (gaps.count > 0)
      notices.push(gaps.notice('regressor-gaps', `column ${quoted(name)} has no number in some used rows, so that no baseline can use it`)); // prettier-ignore
    else if (differs) usable.set(name, values);
    else constant.push(name);
  }
  if (constant.length > 0)
    notices.push({
      code: 'regressor-constant',
      message: `${constant.length === 1 ? 'column' : 'columns'} ${constant.map(quoted).join(', ').slice(0, 300)} ${constant.length === 1 ? 'holds' : 'hold'} the same number in every row: of no use to a baseline`,
      lines: [],
    });
  return usable;
}

/** The terms of a declared baseline by the names of the columns; `auto` when none is declared. */
export function baselineOf(
  declared: readonly string[] | 'auto' | null,
  regressors: ReadonlyMap<string, Float64Array>,
  issues: IssueList,
): readonly string[] | 'auto' {
  if (declared === null || declared === 'auto') return 'auto';
  const terms = new Set<string>();
  for (const wanted of declared) {
    const term = TIME_TERMS.find((name) => name === wanted.replace(/\s+/g, '').toLowerCase());
    const name = term ?? nameLike(wanted, [...regressors.keys()]);
    if (name !== null) terms.add(name);
    else
      issues.add({
        code: 'unknown-regressor',
        field: 'baseline',
        message: `the table has no column ${quoted(wanted)} that a baseline could use: one of numbers that vary, without gaps`,
        hint: didYouMean(wanted, [...TIME_TERMS, ...regressors.keys()]),
      });
  }
  return [...terms];
}

function nameLike(wanted: string, names: readonly string[]): string | null {
  if (names.includes(wanted)) return wanted;
  const alike = names.filter((name) => plainWord(name) === plainWord(wanted));
  return alike.length === 1 ? alike[0]! : null;
}
