/** Numbers as tables write them. */

const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][+-]?\d+)?$/;
const ABSENT = /^(?:[+-]?nan|null|none|n\/?a|-+|\.{2,}|\*+|)$/i;
const INFINITE = /^[+-]?inf(?:inity)?$/i;
const DECIMAL_COMMA = /^[+-]?\d+,\d+$/;

export type CellNumber =
  | { readonly kind: 'number'; readonly value: number }
  | { readonly kind: 'absent' | 'infinite' | 'decimal-comma' | 'text' };

/** Reads one cell. `1.5D+03` is a number (Fortran); empty, `NaN`, `--`, `N/A` are absent. */
export function readCell(cell: string): CellNumber {
  const text = cell.replace(/^−/, '-');
  if (text.length < 64 && NUMBER.test(text)) {
    const value = Number(text.replace(/[dD]/, 'e'));
    return Number.isFinite(value) ? { kind: 'number', value } : { kind: 'infinite' };
  }
  if (text.length < 64 && ABSENT.test(text)) return { kind: 'absent' };
  if (INFINITE.test(text)) return { kind: 'infinite' };
  return { kind: text.length < 64 && DECIMAL_COMMA.test(text) ? 'decimal-comma' : 'text' };
}

/** Whether a cell of the first line shows that the line is data and not a header. */
export function isNumberLike(cell: string): boolean {
  const { kind } = readCell(cell);
  return kind === 'number' || kind === 'infinite' || kind === 'decimal-comma' || /^[+-]?nan$/i.test(cell);
}
