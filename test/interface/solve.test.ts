import { mkdtemp, readdir, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

import { readCase } from '../../src/observations/index.js';
import type { Quantity, SolutionRecord } from '../../src/solving/types.js';
import { tugline, type Heard } from './listening-terminal.js';

const DEMO = 'data-samples/vellamo.yaml';
let place: string;
let first: Heard;
const at = (name: string): string => join(place, name);

async function filesOf(folder: string): Promise<string[]> {
  const names: string[] = [];
  for (const entry of await readdir(folder, { recursive: true }))
    if ((await stat(join(folder, entry))).isFile()) names.push(entry);
  return names.sort();
}

async function recordIn(folder: string): Promise<SolutionRecord> {
  return JSON.parse(await readFile(join(folder, 'solution.json'), 'utf8')) as SolutionRecord;
}

function expectTruth(found: Quantity, truth: number): void {
  // Five standard errors: a false alarm once in two million, and the demonstration data never change.
  expect(Math.abs(found.value! - truth) / found.sigma!).toBeLessThan(5);
}

beforeAll(async () => {
  place = await mkdtemp(join(tmpdir(), 'tugline-solve-'));
  first = await tugline(['solve', DEMO, '--quick', '--out', at('first')]);
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

describe('tugline solve on the demonstration', () => {
  it('exits with 0 and shows the solution on one screen', () => {
    expect(first.stderr).not.toContain('error');
    expect(first.exitCode).toBe(0);
    expect(first.stdout).toContain('Vellamo: 1 companion; ');
    expect(first.stdout.trimEnd().split('\n').length).toBeLessThanOrEqual(40);
    expect(first.stdout.split('\n').filter((line) => line.length > 80 && !line.includes(place))).toEqual([]);
  });

  it('writes the whole dossier and nothing beside it', async () => {
    const files = await filesOf(at('first'));
    for (const name of [
      'solution.json',
      'report.md',
      'elements.csv',
      'residuals.csv',
      'model.csv',
      'run.json',
    ])
      expect(files).toContain(name);
    expect(files.filter((name) => name.startsWith('charts')).length).toBeGreaterThanOrEqual(6);
    expect((await readdir(place)).sort()).toEqual(['first']);
  });

  it('finds the truth that the data were simulated from (mock block of data-samples/vellamo.yaml)', async () => {
    const { companions, velocity } = await recordIn(at('first'));
    const { mock } = await readCase(DEMO);
    const truth = mock!.companions[0]!;
    expect(companions).toHaveLength(1);
    const { elements } = companions[0]!;
    expectTruth(elements.period, truth.periodDays);
    expectTruth(elements.eccentricity, truth.eccentricity);
    expectTruth(elements.argumentOfPeriastron, truth.argPeriastronStarDeg);
    expectTruth(elements.semiAmplitude, truth.semiAmplitudeMps);
    expectTruth(velocity.slope, mock!.slopeMpsPerYear);
  });

  it('writes the same bytes again into another folder, run.json excepted; --json prints solution.json and nothing else', async () => {
    const again = await tugline(['solve', DEMO, '--quick', '--out', at('first'), '--force']);
    expect(again.stdout).toBe(first.stdout);
    const json = await tugline(['solve', DEMO, '--quick', '--out', at('second'), '--json', '--quiet']);
    expect(json.stderr).toBe('');
    expect(json.stdout).toBe(await readFile(at('second/solution.json'), 'utf8'));
    for (const name of await filesOf(at('second'))) {
      if (name === 'run.json') continue;
      const [one, two] = await Promise.all([readFile(at(`first/${name}`)), readFile(at(`second/${name}`))]);
      expect(one.equals(two), name).toBe(true);
    }
  });

  it('refuses to replace a dossier without --force, and leaves it alone', async () => {
    const before = await readFile(at('first/run.json'), 'utf8');
    const refused = await tugline(['solve', DEMO, '--quick', '--out', at('first')]);
    expect(refused.exitCode).toBe(2);
    expect(await readFile(at('first/run.json'), 'utf8')).toBe(before);
  });

  it('has a report whose links lead to files of the dossier', async () => {
    const text = await readFile(at('first/report.md'), 'utf8');
    const files = await filesOf(at('first'));
    const links = Array.from(text.matchAll(/\]\(([^)]+)\)/g), (match) => match[1]!);
    expect(links.length).toBeGreaterThan(2);
    for (const link of links) expect(files).toContain(link);
    expect(text).not.toMatch(/NaN|undefined|\[object/);
  });
});

describe('tugline periods on the demonstration', () => {
  it('lists the true period first, and draws charts when asked', async () => {
    const { exitCode, stdout } = await tugline(['periods', DEMO, '--out', at('periods'), '--json']);
    expect(exitCode).toBe(0);
    const { peaks } = JSON.parse(stdout) as { peaks: { periodDays: number }[] };
    // The width of a peak is about P²/span = 41.6² / 1079 = 1.6 d.
    expect(Math.abs(peaks[0]!.periodDays - 41.627)).toBeLessThan(1.6);
    expect((await filesOf(at('periods'))).filter((name) => name.endsWith('.png'))).toHaveLength(1);
  });
});

describe('tugline solve on hopeless data', () => {
  it('never ends in a stack: two velocities', async () => {
    await writeFile(at('two.csv'), 'BJD_TDB,RV (m/s),e_RV (m/s)\n2459910.25,10.5,2\n2459950.75,-3.25,2.5\n');
    const { exitCode, stderr, stdout } = await tugline([
      'solve',
      at('two.csv'),
      '--quick',
      '--out',
      at('two'),
    ]);
    expect([0, 1, 2]).toContain(exitCode);
    expect(stderr + stdout).not.toContain('defect');
  });
});
