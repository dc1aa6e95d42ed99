/** Just enough Markdown for checking documents: fenced blocks, links, and the text between the blocks. */

export interface FencedBlock {
  /** Word after the opening fence, e.g. `sh`; empty without one. */
  readonly language: string;
  readonly text: string;
  /** Line of the opening fence, from 1. */
  readonly line: number;
  /** Nothing but blank lines between this block and the one before it. */
  readonly followsBlock: boolean;
}

export function fencedBlocks(markdown: string): FencedBlock[] {
  const blocks: FencedBlock[] = [];
  let open: { readonly language: string; readonly line: number; readonly followsBlock: boolean } | null =
    null;
  let inside: string[] = [];
  let proseSinceBlock = true;
  for (const [index, line] of markdown.split('\n').entries()) {
    const fence = /^```\s*(\S*)/.exec(line);
    if (open !== null && fence !== null) {
      blocks.push({ ...open, text: `${inside.join('\n')}\n` });
      open = null;
      proseSinceBlock = false;
    } else if (open !== null) inside.push(line);
    else if (fence !== null) {
      open = { language: fence[1]!, line: index + 1, followsBlock: !proseSinceBlock };
      inside = [];
    } else if (line.trim() !== '') proseSinceBlock = true;
  }
  if (open !== null) throw new Error(`the fenced block of line ${open.line} is not closed`);
  return blocks;
}

export interface Example {
  readonly line: number;
  /** Shell text, comments and all. */
  readonly script: string;
  /** What standard output must be; `null` where the document does not show it. A line `...` stands for any lines. */
  readonly output: string | null;
}

/** Shell blocks, each with the `text` block that follows it directly, if there is one. */
export function shellExamples(markdown: string): Example[] {
  const blocks = fencedBlocks(markdown);
  return blocks.flatMap(({ language, text, line }, index) => {
    if (language !== 'sh') return [];
    const next = blocks[index + 1];
    const output = next?.followsBlock === true && next.language === 'text' ? next.text : null;
    return [{ line, script: text, output }];
  });
}

/** Whether `got` is `want`, where a line `...` in `want` stands for any number of lines. */
export function matchesOutput(got: string, want: string): boolean {
  const pattern = want
    .split('\n')
    .map((line) =>
      line.trim() === '...' ? '(?:.*\\n)*' : `${line.replace(/[\\^$.*+?()[\]{}|]/g, '\\$&')}\\n`,
    )
    .join('')
    .replace(/\\n$/, '');
  return new RegExp(`^${pattern}$`).test(got);
}

/** Targets of links and pictures that lead to files, without their `#anchor`. */
export function relativeLinks(markdown: string): string[] {
  return [...markdown.matchAll(/\]\(([^)\s]+)\)/g)]
    .map((match) => match[1]!)
    .filter((target) => !/^[a-z]+:/i.test(target) && !target.startsWith('#'))
    .map((target) => target.replace(/#.*$/, ''));
}

/** Paths of the project named between backquotes: `src/...`, `test/...` and so on, without patterns and placeholders. */
export function namedPaths(markdown: string): string[] {
  return [...markdown.matchAll(/`((?:src|test|bin|data-samples|\.ci)\/[\w./-]*)`/g)].map(
    (match) => match[1]!,
  );
}
