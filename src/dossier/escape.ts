/**
 * Labels (target, instruments, files) come from the user's files and go into files that other programs open.
 * Each output format has its own way of being tricked; each is closed here, once.
 */

/** Control characters, line separators, and the invisible marks that reorder text on a screen. */
const UNPRINTABLE =
  /[\u0000-\u001f\u007f-\u009f\u00ad\u061c\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff\ufff9-\ufffb]/gu;

/** Sentences fit; a label that is longer than any sentence is an attack. */
const LONGEST_TEXT = 2000;

/** A label that is safe to print on a terminal: one line, nothing invisible, at most `longest` characters. */
export function plainLabel(text: string, longest = 200): string {
  const oneLine = text.replace(/[\t\r\n]+/g, ' ').replace(UNPRINTABLE, '');
  const characters = Array.from(oneLine);
  return characters.length <= longest ? oneLine : `${characters.slice(0, longest - 1).join('')}…`;
}

/** Text inside a Markdown sentence or table cell; HTML tags, links and emphasis are shown, not obeyed. */
export function escapeMarkdown(text: string): string {
  return plainLabel(text, LONGEST_TEXT)
    .replace(/[\\`*_[\]|~$]/g, '\\$&')
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/^\s*([-+=#])/, '\\$1')
    .replace(/^(\d+)([.)])/, '$1\\$2')
    .replace(/(https?|ftp|www)(?=[:.])/gi, '$1&#8203;');
}

/** Text as a Markdown code span (paths, commands): the fence is longer than any run of backticks inside. */
export function markdownCode(text: string): string {
  const plain = plainLabel(text, LONGEST_TEXT);
  const runs = plain.match(/`+/g) ?? [];
  const fence = '`'.repeat(Math.max(0, ...runs.map((run) => run.length)) + 1);
  const pad = plain.startsWith('`') || plain.endsWith('`') || plain.trim() === '' ? ' ' : '';
  return `${fence}${pad}${plain}${pad}${fence}`.replace(/\|/g, '\\|');
}

/**
 * One CSV field of text [RFC 4180]. Spreadsheets run a field that starts with = + - or @ as a formula, so a label of
 * that kind gets an apostrophe in front. For labels only: numbers are written as they are.
 */
export function csvText(text: string): string {
  const plain = plainLabel(text, LONGEST_TEXT);
  const inert = /^\s*[=+\-@]/.test(plain) ? `'${plain}` : plain;
  return /[",\r\n]/.test(inert) ? `"${inert.replace(/"/g, '""')}"` : inert;
}

/** Rows of ready-made fields as CSV text with CRLF line ends [RFC 4180]. */
export function csvLines(rows: readonly (readonly string[])[]): string {
  return rows.map((row) => `${row.join(',')}\r\n`).join('');
}

/** A file name made of a label: letters, digits, dots, dashes; never empty, never a path, never hidden. */
export function fileNameFrom(label: string, fallback: string): string {
  const name = label
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .toLowerCase()
    .replace(/[^a-z0-9.]+/g, '-')
    .replace(/\.{2,}/g, '.')
    .replace(/^[-.]+|[-.]+$/g, '')
    .slice(0, 60)
    .replace(/[-.]+$/, '');
  return name === '' ? fallback : name;
}
