/** Columns of text for a screen of 80 characters. */

export const SCREEN_WIDTH = 80;

/** Characters as they stand on a screen; our texts hold no wide characters beside labels, which are cut. */
function width(text: string): number {
  return Array.from(text).length;
}

export function padded(text: string, columns: number, side: 'left' | 'right' = 'left'): string {
  const blanks = ' '.repeat(Math.max(0, columns - width(text)));
  return side === 'left' ? text + blanks : blanks + text;
}

/** Rows of cells in columns that are as wide as their widest cell; columns in `right` are aligned to the right. */
export function columnsOf(
  rows: readonly (readonly string[])[],
  right: readonly number[] = [],
  gap = 2,
): string[] {
  const widths: number[] = [];
  for (const row of rows)
    for (const [index, cell] of row.entries()) widths[index] = Math.max(widths[index] ?? 0, width(cell));
  return rows.map((row) =>
    row
      .map((cell, index) => padded(cell, widths[index]!, right.includes(index) ? 'right' : 'left'))
      .join(' '.repeat(gap))
      .trimEnd(),
  );
}
