/** Small functions for text that came from outside: quoting it safely in messages, names from paths. */

const CONTROL = /[\u0000-\u001f\u007f-\u009f\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff]/g;
const LONGEST_QUOTE = 60;

/** Text in double quotes for a message: control characters are shown as `\u001b`, long text is cut at 60 characters. */
export function quoted(text: string): string {
  const cut = text.length > LONGEST_QUOTE ? `${text.slice(0, LONGEST_QUOTE)}…` : text;
  return `"${cut.replace(CONTROL, (character) => `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`)}"`;
}

/** `text` without control and invisible formatting characters, trimmed. They could forge or reorder a terminal line. */
export function withoutControls(text: string): string {
  return text.replace(CONTROL, '').trim();
}

/** File name without folders and without its last extension: `data/north.csv` gives `north`. */
export function fileStem(path: string): string {
  const name =
    path
      .split(/[/\\]/)
      .filter((part) => part !== '')
      .at(-1) ?? '';
  const stem = name.replace(/\.[^.]*$/, '');
  const clean = withoutControls(stem === '' ? name : stem);
  return clean === '' || clean === '-' ? 'table' : clean;
}

/** `3 rows`, `1 row`. */
export function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}

/** Line numbers for a sentence, at most eight of them: `lines 4, 9, 12`. */
export function lineList(lines: readonly number[]): string {
  const shown = lines.slice(0, 8).join(', ');
  const rest = lines.length > 8 ? ` and ${lines.length - 8} more` : '';
  return `${lines.length === 1 ? 'line' : 'lines'} ${shown}${rest}`;
}
