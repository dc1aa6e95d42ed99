/** What npm would publish: only what belongs, and a program and a library that work from it in another folder. */
import { execFile, execFileSync } from 'node:child_process';
import {
  cpSync, existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, realpathSync, rmSync, symlinkSync,
} from 'node:fs'; // prettier-ignore
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import ts from 'typescript';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildProgram, ROOT } from '../interface/built-program.js';

interface Lock {
  readonly packages: Readonly<Record<string, { readonly dev?: boolean; readonly optional?: boolean }>>;
}

interface Ran {
  readonly code: number;
  readonly stdout: string;
  readonly stderr: string;
}

const manifest = JSON.parse(readFileSync(join(ROOT, 'package.json'), 'utf8')) as {
  readonly version: string;
  readonly dependencies: Readonly<Record<string, string>>;
  readonly exports: { readonly '.': { readonly types: string; readonly default: string } };
};

let folder = '';
let home = '';
let contents: readonly string[] = [];

/** Runtime packages only, as an installation without development tools would have them. */
function linkRuntimePackages(target: string): void {
  const lock = JSON.parse(readFileSync(join(ROOT, 'package-lock.json'), 'utf8')) as Lock;
  for (const [path, entry] of Object.entries(lock.packages)) {
    const isTop = path.startsWith('node_modules/') && path.lastIndexOf('node_modules/') === 0;
    if (!isTop || entry.dev === true || !existsSync(join(ROOT, path))) continue;
    const place = join(target, path);
    mkdirSync(dirname(place), { recursive: true });
    symlinkSync(join(ROOT, path), place, 'dir');
  }
}

function node(words: readonly string[]): Promise<Ran> {
  return new Promise((resolve) => {
    execFile(process.execPath, words, { cwd: folder }, (error, stdout, stderr) => {
      resolve({ code: error === null ? 0 : Number(error.code ?? -1), stdout, stderr });
    });
  });
}

beforeAll(() => {
  buildProgram();
  folder = realpathSync(mkdtempSync(join(tmpdir(), 'tugline-package-')));
  const words = ['pack', '--ignore-scripts', '--offline', '--silent', '--pack-destination', folder];
  execFileSync('npm', words, { cwd: ROOT, shell: process.platform === 'win32' });
  const tarball = readdirSync(folder).find((name) => name.endsWith('.tgz'))!;
  contents = execFileSync('tar', ['-tzf', join(folder, tarball)], { encoding: 'utf8' })
    .split('\n')
    .filter((line) => line !== '')
    .map((line) => line.replace(/^package\//, ''));
  home = join(folder, 'node_modules/tugline');
  mkdirSync(home, { recursive: true });
  execFileSync('tar', ['-xzf', join(folder, tarball), '-C', home, '--strip-components=1']);
  linkRuntimePackages(folder);
  cpSync(join(ROOT, 'data-samples'), join(folder, 'data-samples'), { recursive: true });
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

describe('the package', () => {
  it('holds the program, its types, its licence, and nothing else', () => {
    const allowed = /^(package\.json|README\.md|LICENSE|bin\/tugline\.js|dist\/[\w./-]+\.(js|d\.ts))$/;
    expect(contents.filter((path) => !allowed.test(path))).toEqual([]);
    expect(contents).toEqual(
      expect.arrayContaining(['LICENSE', 'README.md', 'bin/tugline.js', 'dist/cli/main.js']),
    );
    expect(
      contents.filter((path) => /(^|\/)tests?\/|\.(test|spec|bench)\.|samples|\.map$/.test(path)),
    ).toEqual([]);
  });

  it('names no path of the machine on which it was built', () => {
    const marked = contents.filter((path) => readFileSync(join(home, path), 'utf8').includes(ROOT));
    expect(marked).toEqual([]);
  });

  it('declares every package that it imports', () => {
    const imported = new Set<string>();
    for (const path of contents.filter((name) => name.endsWith('.js'))) {
      for (const { fileName } of ts.preProcessFile(readFileSync(join(home, path), 'utf8')).importedFiles) {
        if (/^(\.|node:)/.test(fileName)) continue;
        imported.add(fileName.split('/', fileName.startsWith('@') ? 2 : 1).join('/'));
      }
    }
    expect(imported.size).toBeGreaterThan(3);
    expect([...imported].filter((name) => !(name in manifest.dependencies))).toEqual([]);
  });

  it('tells its version from another folder', async () => {
    const ran = await node([join(home, 'bin/tugline.js'), '--version']);
    expect(ran).toEqual({ code: 0, stdout: `${manifest.version}\n`, stderr: '' });
  });

  it('solves a case from another folder, charts included', async () => {
    const program = join(home, 'bin/tugline.js');
    const ran = await node([program, 'solve', 'data-samples/vellamo.yaml', '--quick', '--out', 'out']);
    expect(ran.stderr).not.toContain('error:');
    expect(ran.code).toBe(0);
    const solution = JSON.parse(readFileSync(join(folder, 'out/solution.json'), 'utf8')) as {
      readonly companions: readonly { readonly elements: { readonly period: { readonly value: number } } }[];
    };
    // 41.627 d is the period in the mock block of data-samples/vellamo.yaml; 0.1 d is some 10 standard errors.
    expect(solution.companions).toHaveLength(1);
    expect(Math.abs(solution.companions[0]!.elements.period.value - 41.627)).toBeLessThan(0.1);
    expect(readdirSync(join(folder, 'out/charts')).some((name) => name.endsWith('.png'))).toBe(true);
  });

  it('is a library too: what package.json promises can be imported by name', async () => {
    for (const path of [manifest.exports['.'].default, manifest.exports['.'].types])
      expect(contents).toContain(path.replace('./', ''));
    const script =
      "const all = await import('tugline'); console.log(Object.keys(all).includes('solveCase'));";
    const ran = await node(['--input-type=module', '-e', script]);
    expect(ran).toEqual({ code: 0, stdout: 'true\n', stderr: '' });
  });
});
