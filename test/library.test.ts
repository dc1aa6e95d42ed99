/** The library's face: the example of its docstring runs as it stands, and the way from tables to a dossier is complete. */
import { mkdtemp, readFile, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { runInNewContext } from 'node:vm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import * as library from '../src/index.js';
import type { Case, Observations, Quantity, Solved, VelocitySet } from '../src/index.js';

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

  it('predicts light as geometry says: a small disc in the middle of a uniform star covers its share of the area', () => {
    const out = new Float64Array(5);
    library.transitFlux(0, 0.1, 0, 0, out);
    expect(Math.abs(out[0]! - 0.99)).toBeLessThan(1e-14); // 1 - k^2; rounding alone
  });

  it('throws the errors that it exports', async () => {
    await expect(library.readTables([library.requestFor(sample('none.csv'))])).rejects.toBeInstanceOf(
      library.InputDataError,
    );
    expect(() => library.solveKepler(1, 1.03)).toThrow(library.ModelDomainError);
    expect(() => library.caseFromTables(['a.csv'], { starMass: '-1' })).toThrow(library.UsageError);
  });
});

describe('the library with velocities, light curves and mid-times together', () => {
  let observations: Observations;
  let lainehtar: Case;
  let together: Solved;
  const provenance = { version: '0.0.0', node: 'v20', command: ['lainehtar.mjs'] };

  beforeAll(async () => {
    lainehtar = await library.readCase(sample('lainehtar.yaml'));
    observations = library.gatherObservations(await library.readAnyTables(lainehtar.tables));
    const choices = { seed: 1, quick: true, permutations: 0, threads: 0, drawLimit: 1000, provenance };
    together = await library.solveObservations(lainehtar, observations, choices);
  });

  it('tells the kinds of tables apart', () => {
    expect(observations.velocities!.timesBjdTdb).toHaveLength(14 + 11); // counts of the mock block of the case
    expect(observations.lightCurves.map(({ band }) => band)).toEqual(['broad', 'red', 'red']);
    expect(observations.midTimes.map(({ used }) => used)).toEqual([12]);
  });

  it('finds orbit and size that the samples were simulated with (mock block of data-samples/lainehtar.yaml)', () => {
    const truth = lainehtar.mock!.companions[0]!;
    const { companions, photometry } = together.record;
    expect(companions).toHaveLength(1);
    const { elements, derived } = companions[0]!;
    expectTruth(elements.period, truth.periodDays);
    expectTruth(elements.semiAmplitude, truth.semiAmplitudeMps);
    expectTruth(elements.radiusRatio!, 0.1063);
    expectTruth(elements.impactParameter!, 0.34);
    // 1 R_sun over 1 R_jup, both nominal equatorial: 6.957e8 m and 7.1492e7 m (IAU 2015 Resolution B3).
    expectTruth(derived.radius!, (0.1063 * 0.99 * 6.957e8) / 7.1492e7);
    expect(photometry!.starDensityTension).toBeLessThan(5);
  });

  it('writes the tables of a light curve: points, mid-times, and timings that it reads again', () => {
    const { photometry, record } = together;
    const rows = (text: string): string[] => text.trimEnd().split('\n').slice(1);
    const points = record.photometry!.lightCurves.reduce((sum, { count }) => sum + count, 0);
    expect(rows(library.lightCurveTable(photometry!))).toHaveLength(points);
    const timed = record.photometry!.events.filter(({ midTime }) => midTime.value !== null).length;
    expect(rows(library.midTimesTable(photometry!))).toHaveLength(12 + timed);
    const text = String(library.timingsTables(together, 'times.csv')[0]!.bytes);
    const table = library.parseAnyTable(text, 'timings.csv', library.requestFor('timings.csv'));
    if (table.content !== 'mid-times') throw new Error(`read as ${table.content}`);
    expect(table.used).toBe(timed);
  });

  it('finds the dips alone, and the ephemeris of mid-times alone', async () => {
    const truth = lainehtar.mock!.companions[0]!.periodDays;
    const [dip] = library.searchTables(lainehtar, observations.lightCurves.slice(0, 1)).search.candidates;
    expect(Math.abs(dip!.periodDays! - truth)).toBeLessThan(5 * dip!.periodSigmaDays!);
    const timing = library.solveTiming(observations.midTimes, {
      target: 'Lainehtar',
      periodDays: null,
      renumber: false,
      facts: { massRatio: null, scaledSemiMajorAxis: null, semiMajorAxisAu: null, properMotionMasPerYear: null, distanceParsec: null },
      starMassSolar: null,
      modulationDays: { low: null, high: null },
      next: 3,
      afterBjdTdb: null,
      seed: 1,
      provenance,
    }); // prettier-ignore
    expect(timing.record.preferred).toBe('linear');
    expectTruth(timing.record.models[0]!.parameters.period!, truth);
    const charts = await library.renderTimingCharts(timing);
    expect(charts.map(({ name }) => name)).toEqual(['o-minus-c.png', 'o-minus-c.svg']);
    const files = library.timingFiles(timing, charts).map(({ name }) => name);
    expect(files).toEqual(expect.arrayContaining(['timing.json', 'o-minus-c.csv', 'report.md']));
  });
});
