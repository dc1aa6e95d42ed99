/** The `@example expression // => value` lines of docstrings hold: each is evaluated with the exports of its file. */
import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { runInNewContext } from 'node:vm';
import { describe, expect, it } from 'vitest';
import { ROOT } from '../interface/built-program.js';

interface DocExample {
  readonly path: string;
  readonly line: number;
  readonly expression: string;
  readonly value: string;
}

function examplesIn(path: string, text: string): DocExample[] {
  const examples: DocExample[] = [];
  text.split('\n').forEach((line, index) => {
    const match = /^\s*(?:\/\*\*|\*)\s*@example (.+?)\s*\/\/ => (.+?)\s*(?:\*\/)?$/.exec(line);
    if (match !== null) examples.push({ path, line: index + 1, expression: match[1]!, value: match[2]! });
  });
  return examples;
}

const src = join(ROOT, 'src');
const files = readdirSync(src, { recursive: true, encoding: 'utf8' }).filter((path) => path.endsWith('.ts'));
const texts = files.map((path) => [path, readFileSync(join(src, path), 'utf8')] as const);
const examples = texts.flatMap(([path, text]) => examplesIn(path, text));

/** Comparable text: twelve digits are the same on every version of the runtime, the last ones need not be. */
function printed(value: unknown): string {
  return JSON.stringify(value, (_, part: unknown) => {
    if (typeof part === 'number') return Number.isFinite(part) ? Number(part.toPrecision(12)) : String(part);
    return ArrayBuffer.isView(part) ? Array.from(part as Float64Array) : part;
  });
}

describe('the examples in docstrings', () => {
  it('are all found', () => {
    const written = texts.reduce((sum, [, text]) => sum + (text.match(/@example/g) ?? []).length, 0);
    expect(written).toBeGreaterThan(0);
    expect(examples).toHaveLength(written);
  });

  it.each(examples.map((example) => [`src/${example.path}:${example.line}`, example] as const))(
    '%s',
    async (_, { path, expression, value }) => {
      const module = (await import(/* @vite-ignore */ join(src, path))) as Record<string, unknown>;
      const got: unknown = runInNewContext(`(${expression})`, { ...module });
      expect(printed(got)).toBe(printed(runInNewContext(`(${value})`)));
    },
  );

  it('that are wrong are noticed', () => {
    expect(printed(1 + 1e-9)).not.toBe(printed(1));
    expect(printed({ value: 1000 })).not.toBe(printed({ value: 1000, sigma: 500 }));
    expect(examplesIn('a.ts', ' * @example f(1) // => 2\n')).toEqual([
      { path: 'a.ts', line: 1, expression: 'f(1)', value: '2' },
    ]);
  });
});
