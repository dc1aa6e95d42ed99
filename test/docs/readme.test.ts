/** What the documents say is tried: commands run, links lead somewhere, options and scripts exist. */
import { execFile } from 'node:child_process';
import {
  chmodSync,
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  readdirSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { delimiter, dirname, join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildProgram, ROOT } from '../interface/built-program.js';
import { fencedBlocks, matchesOutput, namedPaths, relativeLinks, shellExamples } from './markdown.js';

const DOCUMENTS = ['README.md', 'DEVELOPERS.md', 'data-samples/README.md'];

function read(path: string): string {
  return readFileSync(join(ROOT, path), 'utf8');
}

const readme = read('README.md');
const { scripts } = JSON.parse(read('package.json')) as { scripts: Record<string, string> };

let folder = '';

beforeAll(() => {
  buildProgram();
  folder = mkdtempSync(join(tmpdir(), 'tugline-docs-'));
  mkdirSync(join(folder, 'commands'));
  const command = join(folder, 'commands/tugline');
  writeFileSync(command, `#!/bin/sh\nexec "${process.execPath}" "${join(ROOT, 'bin/tugline.js')}" "$@"\n`);
  chmodSync(command, 0o755);
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

interface Ran {
  readonly code: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs shell text in a fresh folder that holds a copy of the samples, with `tugline` on the path. */
function runShell(script: string): Promise<Ran> {
  const here = mkdtempSync(join(folder, 'run-'));
  cpSync(join(ROOT, 'data-samples'), join(here, 'data-samples'), { recursive: true });
  const path = [join(folder, 'commands'), process.env['PATH'] ?? ''].join(delimiter);
  const env = { ...process.env, PATH: path, NO_COLOR: '1' };
  return new Promise((resolve) => {
    execFile('sh', ['-e', '-c', script], { cwd: here, env }, (error, stdout, stderr) => {
      resolve({ code: error === null ? 0 : Number(error.code ?? -1), stdout, stderr });
    });
  });
}

/** `npm` lines are for a checkout with a network; they are compared with package.json instead of run. */
function withoutNpm(script: string): string {
  return script
    .split('\n')
    .filter((line) => !/^\s*(npm|git|cd)\b/.test(line))
    .join('\n');
}

const examples = shellExamples(readme).filter(({ script }) => withoutNpm(script).trim() !== '');

describe('the commands in README.md', () => {
  it('are there', () => {
    expect(examples.length).toBeGreaterThan(0);
  });

  it.each(examples.map((example) => [example.line, example] as const))(
    'run, and print what line %i says they print',
    async (_, { script, output }) => {
      const ran = await runShell(withoutNpm(script));
      expect(ran.stderr).not.toContain('error:');
      expect(ran.code).toBe(0);
      if (output !== null && !matchesOutput(ran.stdout, output)) expect(ran.stdout).toBe(output);
    },
  );

  it('and options are those of --help, all of them', async () => {
    const help = (await runShell('tugline --help')).stdout;
    const commands = /^Commands\n((?: {2}.*\n)+)/m.exec(help)![1]!;
    const names = [...commands.matchAll(/^ {2}(\S+)/gm)].map((match) => match[1]!);
    const helps = await Promise.all(
      names.map(async (name) => (await runShell(`tugline ${name} --help`)).stdout),
    );
    const offered = new Set(
      [help, ...helps].flatMap((text) => [...text.matchAll(/^ {2}--([a-z-]+)/gm)].map((match) => match[1]!)),
    );
    const ours = withoutNpm(readme);
    const told = new Set([...ours.matchAll(/(?<![\w-])--([a-z][a-z-]*)/g)].map((match) => match[1]!));
    const called = new Set(
      [...ours.matchAll(/\btugline ([a-z]+)(?= [A-Z]| data-|`)/g)].map((match) => match[1]!),
    );
    expect([...told].filter((name) => !offered.has(name))).toEqual([]);
    expect([...offered].filter((name) => !told.has(name))).toEqual([]);
    expect([...called].sort()).toEqual([...names].sort());
  });
});

describe('the documents', () => {
  it.each(DOCUMENTS)('%s links to files that exist', (document) => {
    const home = join(ROOT, dirname(document));
    expect(relativeLinks(read(document)).filter((target) => !existsSync(join(home, target)))).toEqual([]);
    expect(namedPaths(read(document)).filter((path) => !existsSync(join(ROOT, path)))).toEqual([]);
  });

  it.each(DOCUMENTS)('%s names only npm scripts that exist', (document) => {
    const named = [...read(document).matchAll(/\bnpm (?:run (?:--silent )?)?([a-z]+)/g)].map(
      (match) => match[1]!,
    );
    const own = ['ci', 'install', 'link', 'pack', 'run'];
    expect(named.filter((name) => !own.includes(name) && !(name in scripts))).toEqual([]);
  });

  it('explain every reference that code cites by key', () => {
    const src = join(ROOT, 'src');
    const texts = readdirSync(src, { recursive: true, encoding: 'utf8' })
      .filter((path) => path.endsWith('.ts'))
      .map((path) => readFileSync(join(src, path), 'utf8'));
    const keys = texts.flatMap((text) =>
      [...text.matchAll(/\[((?:[A-Z][A-Za-z]+[12]\d{3}[a-z]?(?:, )?)+)\]/g)].flatMap((match) =>
        match[1]!.split(', '),
      ),
    );
    expect(keys.length).toBeGreaterThan(0);
    const references = read('DEVELOPERS.md').split('\n## References\n')[1] ?? '';
    expect([...new Set(keys)].filter((key) => !references.includes(`- [${key}] `))).toEqual([]);
  });

  it('tell the test command that the continuous check runs', () => {
    const commands = read('.ci/run').match(/^npm .*$/gm) ?? [];
    expect(commands).toEqual(['npm ci', 'npm test']);
    expect(commands.filter((command) => !readme.includes(command))).toEqual([]);
  });
});

describe('the reading of Markdown', () => {
  const text =
    'a\n```sh\nls\n```\n\n```text\nout\n```\nb [x](y.md#z) [w](https://a.b) `src/orbit/`\n```sh\nid\n```\nc\n```text\n1\n```\n';

  it('pairs a command with the output that follows directly', () => {
    expect(fencedBlocks(text)).toHaveLength(4);
    expect(shellExamples(text)).toEqual([
      { line: 2, script: 'ls\n', output: 'out\n' },
      { line: 10, script: 'id\n', output: null },
    ]);
    expect(relativeLinks(text)).toEqual(['y.md']);
    expect(namedPaths(text)).toEqual(['src/orbit/']);
  });

  it('lets ... stand for any lines and nothing else for anything', () => {
    expect(matchesOutput('a.b\nc\nd\n', 'a.b\n...\nd\n')).toBe(true);
    expect(matchesOutput('a.b\nd\n', 'a.b\n...\nd\n')).toBe(true);
    expect(matchesOutput('a.b\nc\nd\n', 'a.b\nc\n')).toBe(false);
    expect(matchesOutput('axb\n', 'a.b\n')).toBe(false);
    expect(matchesOutput('a.b\n', 'a.b\n')).toBe(true);
  });
});
