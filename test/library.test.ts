/** The library's face: the example of its docstring runs as it stands, and the way from tables to a dossier is complete. */
import { mkdtemp, readFile, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { runInNewContext } from 'node:vm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import * as library from '../src/index.js';
import type { Case, Quantity, Solved, VelocitySet } from '../src/index.js';

const ROOT = fileURLToPath(new URL('../', import.meta.url));
const sample = (name: string): string => join(ROOT, 'data-samples', name);

let scratch: string;
let theCase: Case;
let velocities: VelocitySet;
let solved: Solved;

beforeAll(async () => {
  scratch = await mkdtemp(join(tmpdir(), 'tugline-library-'));
  theCase = library.caseFromTables([sample('north.csv'), sample('south.csv')], {
    target: 'Vellamo',
    starMass: '0.94 +- 0.03 M_sun',
  });
  velocities = library.combineTables(await library.readTables(theCase.tables));
  solved = library.solveCase(theCase, velocities, {
    seed: 1,
    quick: true,
    permutations: 0,
    provenance: { version: '0.0.0', node: 'v20', command: ['vellamo.mjs'] },
  });
});

afterAll(async () => {
  await rm(scratch, { recursive: true, force: true });
});

/** The code between the fences of the docstring, its imports taken from `names`. */
async function docstringCode(): Promise<string> {
  const text = await readFile(join(ROOT, 'src/index.ts'), 'utf8');
  const fenced = /\* ```js\n([\s\S]*?)\n \* ```/.exec(text)![1]!;
  const code = fenced.replace(/^ \* ?/gm, '');
  return code.replace(/^import (\{[^}]*\}) from 'tugline';$/m, 'const $1 = tugline;');
}

/** Within five of its standard errors: once in two million by chance, and the samples never change. */
function expectTruth({ value, sigma }: Quantity, truth: number): void {
  expect(sigma).toBeGreaterThan(0);
  expect(Math.abs(value! - truth) / sigma!).toBeLessThan(5);
}

describe('the library', () => {
  it('runs the example of its docstring, which prints the period and the mass that the solution has', async () => {
    const printed: string[] = [];
    const script = (await docstringCode()).replaceAll("'data-samples/", `'${join(ROOT, 'data-samples')}/`);
    expect(script).toContain('const {');
    await (runInNewContext(`(async () => {${script}})()`, {
      tugline: library,
      process: { version: 'v20' },
      console: { log: (...words: unknown[]) => printed.push(words.join(' ')) },
    }) as Promise<void>);
    expect(printed).toHaveLength(1);
    expect(printed[0]).toMatch(/^b 41\.\d+ ± 0\.\d+ d 0\.\d+ ± 0\.\d+ M_jup$/);
  });

  it('finds the orbit that the samples were simulated with (mock block of data-samples/vellamo.yaml)', async () => {
    const { mock } = await library.readCase(sample('vellamo.yaml'));
    const truth = mock!.companions[0]!;
    const { companions, velocity, fit } = solved.record;
    expect(fit.usable).toBe(true);
    expect(companions).toHaveLength(1);
    const { elements, derived } = companions[0]!;
    expectTruth(elements.period, truth.periodDays);
    expectTruth(elements.eccentricity, truth.eccentricity);
    expectTruth(elements.argumentOfPeriastron, truth.argPeriastronStarDeg);
    expectTruth(elements.semiAmplitude, truth.semiAmplitudeMps);
    expectTruth(velocity.slope, mock!.slopeMpsPerYear);
    // Kepler's third law by hand, for a companion much lighter than its star (here one part in 1700, far below the error);
    // GM of Sun and Jupiter: IAU 2015 Resolution B3, nominal.
    const [gmSun, gmJupiter, starMassSolar] = [1.3271244e20, 1.2668653e17, 0.94];
    const speed = Math.cbrt((2 * Math.PI * gmSun * starMassSolar) / (truth.periodDays * 86400));
    const massRatio = (truth.semiAmplitudeMps * Math.sqrt(1 - truth.eccentricity ** 2)) / speed;
    expectTruth(derived.minimumMass, (massRatio * starMassSolar * gmSun) / gmJupiter);
  });

  it('predicts the velocities that it fitted: observed minus model is what the solution says is left', () => {
    const moved = library.evaluateVelocity(solved.best, velocities.timesBjdTdb);
    let largest = 0;
    for (const [i, residual] of solved.residualsMps.entries()) {
      const predicted = solved.best.zeroPointsMps[velocities.instrumentOf[i]!]! + moved[i]!;
      largest = Math.max(largest, Math.abs(velocities.velocitiesMps[i]! - predicted - residual));
    }
    expect(largest).toBeLessThan(1e-6); // m/s: a million times below the errors of the tables; it is rounding alone
  });

  it('lists the true period first when only periods are asked for', () => {
    const { stage } = library.searchPeriods(theCase, velocities, { seed: 1, permutations: 0 });
    // A peak is about P²/span = 41.6² / 1079 = 1.6 d wide.
    expect(Math.abs(stage.peaks[0]!.periodDays - 41.627)).toBeLessThan(1.6);
  });

  it('writes a dossier, without charts when none are given', async () => {
    const folder = join(scratch, 'vellamo');
    const machine = { system: 's', architecture: 'a', processors: 1 };
    const facts = { date: '2030-01-01T00:00:00.000Z', durationSeconds: 0, machine };
    const files = library.dossierFiles(solved, [], () => facts);
    await library.writeDossier(folder, files, { force: false });
    expect(await readdir(folder)).toEqual(expect.arrayContaining(['report.md', 'solution.json']) as string[]);
    const text = await readFile(join(folder, 'solution.json'), 'utf8');
    expect(JSON.parse(text)).toMatchObject({ schema: 'tugline/solution', target: 'Vellamo' });
  });

  it('throws the errors that it exports', async () => {
    await expect(library.readTables([library.requestFor(sample('none.csv'))])).rejects.toBeInstanceOf(
      library.InputDataError,
    );
    expect(() => library.solveKepler(1, 1.03)).toThrow(library.ModelDomainError);
    expect(() => library.caseFromTables(['a.csv'], { starMass: '-1' })).toThrow(library.UsageError);
  });
});
