/** Columns separated by runs of blanks or tabs, labels possibly in double quotes. csv-parse cannot take runs of blanks. */
import type { RawRow, TableFormat } from './format.js';

const CELL = /"([^"]*)"|\S+/g;

interface Cell {
  readonly text: string;
  readonly start: number;
}

function cellsOf(line: string): Cell[] {
  const cells: Cell[] = [];
  for (const match of line.matchAll(CELL)) {
    if (match[0].startsWith('#') && cells.length > 0) break; // the rest is a comment
    cells.push({ text: match[1] ?? match[0], start: match.index });
  }
  return cells;
}

/** Joins `RV` `(km/s)` and `BJD` `-` `2450000`: a bracket or a subtraction belongs to the label before it. */
function rejoined(cells: readonly string[]): string[] {
  const labels: string[] = [];
  let open = false;
  let joinNext = false;
  for (const cell of cells) {
    const belongs = open || joinNext || /^[([]/.test(cell) || /^[-−–+](\d.*)?$/.test(cell);
    if (belongs && labels.length > 0) labels.push(`${labels.pop()!} ${cell}`);
    else labels.push(cell);
    joinNext = /^[-−–+]$/.test(cell);
    const label = labels.at(-1)!;
    open = (label.match(/[([]/g) ?? []).length > (label.match(/[)\]]/g) ?? []).length;
  }
  return labels;
}

export const blanksFormat: TableFormat = {
  delimiter: 'blanks',
  separator: ' ',
  looksLike: () => true,
  split(lines) {
    const rows: RawRow[] = lines.map((line) => ({
      line: line.number,
      cells: cellsOf(line.text).map((cell) => cell.text),
    }));
    return { rows, broken: [] };
  },
  splitHeader(text, expected) {
    const cells = cellsOf(text).map((cell) => cell.text);
    return cells.length === expected ? cells : rejoined(cells);
  },
  columnOf(text, index) {
    return (cellsOf(text)[index]?.start ?? text.length) + 1;
  },
};
