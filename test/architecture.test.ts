/** The house stays in order: see architecture-rules.ts for the rules, and below for proof that they bite. */
import { readFileSync, readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { asBjdTdb } from '../src/observations/time-scale.js';
import type { BjdTdb } from '../src/observations/types.js';
import { architectureViolations, DIRECTION, type SourceFiles } from './architecture-rules.js';

const SRC = fileURLToPath(new URL('../src/', import.meta.url));

function sourceFiles(): SourceFiles {
  const paths = readdirSync(SRC, { recursive: true, encoding: 'utf8' })
    .map((path) => path.replaceAll('\\', '/'))
    .filter((path) => path.endsWith('.ts'))
    .sort();
  return new Map(paths.map((path) => [path, readFileSync(`${SRC}${path}`, 'utf8')]));
}

/** A small house in order, into which violations are planted. */
const TIDY: readonly (readonly [string, string])[] = [
  ['errors.ts', 'export class UsageError extends Error {}\n'],
  ['index.ts', "export { solve } from './solving/solve.js';\n"],
  ['numerics/sum.ts', 'export const sum = (a: number, b: number): number => a + b;\n'],
  ['orbit/constants.ts', 'export const AU_M = 149597870700;\n'],
  ['orbit/kepler.ts', "import { sum } from '../numerics/sum.js';\nexport const kepler = sum(1, 2);\n"],
  ['observations/units.ts', "import { AU_M } from '../orbit/constants.js';\nexport const au = AU_M;\n"],
  ['solving/solve.ts', "import { kepler } from '../orbit/kepler.js';\nexport const solve = kepler;\n"],
  ['dossier/charts/paint.ts', "export const load = () => import('chart.js');\n"],
  ['cli/main.ts', "import { solve } from '../solving/solve.js';\nconsole.log(solve, process.argv);\n"],
];

function violationsWith(...planted: readonly (readonly [string, string])[]): string[] {
  return architectureViolations(new Map([...TIDY, ...planted]));
}

describe('the source files', () => {
  it('keep the rules of the house', () => {
    const files = sourceFiles();
    expect(files.size).toBeGreaterThan(50);
    expect(architectureViolations(files)).toEqual([]);
  });
});

describe('the rules', () => {
  it('find nothing in a tidy house', () => {
    expect(violationsWith()).toEqual([]);
  });

  it.each([
    ['upward', 'numerics/sum.ts', "\nimport { kepler } from '../orbit/kepler.js';\n", 'src/numerics/sum.ts:2'],
    ['upward, re-exported', 'orbit/kepler.ts', "export * from '../solving/solve.js';\n", 'src/orbit/kepler.ts:1'],
    ['upward, types only', 'orbit/kepler.ts', "import type { A } from '../cli/main.js';\n", 'src/orbit/kepler.ts:1'],
    ['upward, in a type', 'orbit/kepler.ts', "type A = import('../cli/main.js').A;\n", 'src/orbit/kepler.ts:1'],
    ['upward, dynamic', 'solving/solve.ts', "\n\nawait import('../cli/main.js');\n", 'src/solving/solve.ts:3'],
    ['upward, many lines', 'orbit/kepler.ts', "import {\n  solve,\n} from '../solving/solve.js';\n", 'src/orbit/kepler.ts:1'],
    ['from orbit to observations', 'orbit/kepler.ts', "import { au } from '../observations/units.js';\n", 'src/orbit/kepler.ts:1'],
    ['from observations to the motion', 'observations/units.ts', "import { kepler } from '../orbit/kepler.js';\n", 'src/observations/units.ts:1'],
    ['of the library face from inside', 'orbit/kepler.ts', "import { solve } from '../index.js';\n", 'src/orbit/kepler.ts:1'],
    ['of the command line by the library face', 'index.ts', "export * from './cli/main.js';\n", 'src/index.ts:1'],
  ])('catch an import %s', (_, path, text, place) => {
    const found = violationsWith([path, text]);
    expect(found).toContainEqual(expect.stringMatching(new RegExp(`^${place}: imports .*allowed is`)));
    expect(found.join()).toContain(DIRECTION);
  }); // prettier-ignore

  it('catch a circle, also of types and of two steps', () => {
    const found = violationsWith(
      ['orbit/a.ts', "import type { B } from './b.js';\n"],
      ['orbit/b.ts', "import { C } from './c.js';\n"],
      ['orbit/c.ts', "export { A } from './a.js';\n"],
    );
    expect(found).toEqual([
      `src/orbit/a.ts -> src/orbit/b.ts -> src/orbit/c.ts -> src/orbit/a.ts: circular import; ${DIRECTION}`,
    ]);
  });

  it.each([
    ['console', 'solving/x.ts', 'console.log(1);\n', 'src/solving/x.ts:1: touches console'],
    ['process', 'dossier/x.ts', '\nexport const a = process.env;\n', 'src/dossier/x.ts:2: touches process'],
    ['process as a module', 'dossier/x.ts', "import p from 'node:process';\n", 'src/dossier/x.ts:1: imports node:process'],
    ['any', 'orbit/x.ts', 'export let a: any;\n', 'src/orbit/x.ts:1: the type any'],
    ['a cast to any', 'cli/x.ts', 'export const a = 1 as any;\n', 'src/cli/x.ts:1: the type any'],
    ['a missing file', 'orbit/x.ts', "import './nowhere.js';\n", 'src/orbit/x.ts:1: imports ./nowhere.js, but'],
    ['a missing ending', 'orbit/x.ts', "import './kepler';\n", 'src/orbit/x.ts:1: imports ./kepler; relative'],
    ['a computed module', 'orbit/x.ts', 'await import(name);\n', 'src/orbit/x.ts:1: imports a module whose name is computed'],
    ['an eager heavy module', 'dossier/charts/x.ts', "import { Chart } from 'chart.js';\n", 'src/dossier/charts/x.ts:1: imports chart.js'],
    ['a heavy module elsewhere', 'cli/x.ts', "await import('@napi-rs/canvas');\n", 'src/cli/x.ts:1: imports @napi-rs/canvas'],
    ['a long file', 'orbit/x.ts', '// line\n'.repeat(301), 'src/orbit/x.ts:301: 301 lines; allowed are 300'],
    ['a file outside the folders', 'helpers.ts', '', 'src/helpers.ts:1: stands outside'],
  ])('catch %s', (_, path, text, start) => {
    const found = violationsWith([path, text]);
    expect(found.map((line) => line.slice(0, start.length))).toEqual([start]);
  }); // prettier-ignore

  it('let pass what only looks like a violation', () => {
    expect(
      violationsWith(
        [
          'solving/x.ts',
          "// console and any in words\nexport const a = { process: 1 }.process + 'any'.length;\n",
        ],
        ['dossier/charts/y.ts', "import type { Chart } from 'chart.js';\nexport type C = Chart;\n"],
        ['orbit/z.ts', '// line\n'.repeat(300)],
      ),
    ).toEqual([]);
  });
});

describe('the time scale', () => {
  it('is part of the type of a time', () => {
    const julianDay = (time: BjdTdb): number => Math.floor(time);
    // @ts-expect-error a raw number is not a time in BJD_TDB; the type check of the tests fails if it is taken for one
    expect(julianDay(2460000.5)).toBe(2460000);
    // @ts-expect-error neither is what arithmetic makes of two times
    expect(julianDay(asBjdTdb(2460000.5) + 1)).toBe(2460001);
    expect(julianDay(asBjdTdb(2460000.5))).toBe(2460000);
  });
});
