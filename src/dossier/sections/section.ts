/** What every section of the report is made of. */
import type { Solved } from '../../solving/types.js';
import { escapeMarkdown } from '../escape.js';

export interface ReportChart {
  /** Path inside the dossier, e.g. `charts/velocities.png`. */
  readonly path: string;
  /** Plain text, not yet escaped. */
  readonly caption: string;
}

export interface ReportContext {
  /** Empty without charts. */
  readonly charts: readonly ReportChart[];
  /** Names of all files of the dossier, for the list at the end. */
  readonly files: readonly string[];
}

export interface ReportSection {
  readonly heading: string;
  /** Markdown blocks (paragraphs, tables, lists); they are joined by blank lines. No block: the section is left out. */
  readonly blocks: (solved: Solved, context: ReportContext) => string[];
}

/** A Markdown table; cells are ready-made Markdown. Columns named in `right` are aligned to the right. */
export function markdownTable(
  header: readonly string[],
  rows: readonly (readonly string[])[],
  right: readonly number[] = [],
): string {
  const rule = header.map((_, index) => (right.includes(index) ? '---:' : '---'));
  return [header, rule, ...rows].map((cells) => `| ${cells.join(' | ')} |`).join('\n');
}

function firstSentence(text: string): string {
  return text.split(/[.;:] /)[0]!.replace(/\.$/, '');
}

/** The charts whose bare name fits, each as an image with its caption below. */
export function chartBlocks(context: ReportContext, name: RegExp): string[] {
  return context.charts
    .filter(({ path }) => /\.png$/.test(path) && name.test(path.replace(/^.*\//, '').slice(0, -4)))
    .flatMap(({ path, caption }) => [
      `![${escapeMarkdown(firstSentence(caption))}](${path})`,
      `*${escapeMarkdown(caption)}*`,
    ]);
}
