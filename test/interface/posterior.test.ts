import { spawn } from 'node:child_process';
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

import type { SolutionRecord } from '../../src/solving/types.js';
import { randomSource } from '../support/solved-fixture.js';
import { buildProgram, ROOT, runProgram, type Finished } from './built-program.js';
import { tugline } from './listening-terminal.js';

const DEMO = 'data-samples/vellamo.yaml';
let place: string;
const at = (name: string): string => join(place, name);

beforeAll(async () => {
  buildProgram();
  place = await mkdtemp(join(tmpdir(), 'tugline-posterior-'));
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

async function recordIn(folder: string): Promise<SolutionRecord> {
  return JSON.parse(await readFile(join(folder, 'solution.json'), 'utf8')) as SolutionRecord;
}

/** A third of an orbit: the chains wander along the tail of long periods and need many thousand draws. */
function partialOrbit(): string {
  const random = randomSource(6);
  const lines = Array.from({ length: 14 }, () => {
    const days = 500 * random.uniform();
    const velocity = 60 * Math.sin((2 * Math.PI * (days - 100)) / 1400) + 3 * random.gauss();
    return `${(2459000 + days).toFixed(5)},${velocity.toFixed(3)},3`;
  });
  return `BJD_TDB,RV (m/s),e_RV (m/s)\n${lines.sort().join('\n')}\n`;
}

/** Tells when the program begins to listen for Ctrl-C, which a pipe would not show. */
const WATCH =
  'data:text/javascript,process.on("newListener",(name)=>{if(name==="SIGINT")process.stderr.write("LISTENING\\n")})';

/** Runs the program and presses Ctrl-C when it first listens, and again when it has said that it stops if `twice`. */
function runInterrupted(
  argv: readonly string[],
  twice: boolean,
): Promise<Finished & { signal: string | null }> {
  return new Promise((resolve, reject) => {
    const words = ['--import', WATCH, join(ROOT, 'bin/tugline.js'), ...argv];
    const child = spawn(process.execPath, words, { cwd: place });
    let [stdout, stderr] = ['', ''];
    child.stdout.on('data', (part: Buffer) => (stdout += part.toString()));
    child.stderr.on('data', (part: Buffer) => {
      const before = stderr;
      stderr += part.toString();
      const now = (word: string): boolean => stderr.includes(word) && !before.includes(word);
      if (now('LISTENING')) child.kill('SIGINT');
      if (twice && now('stopping early')) child.kill('SIGINT');
    });
    child.on('error', reject);
    child.on('close', (exitCode, signal) => {
      resolve({ exitCode, signal, stdout, stderr });
    });
  });
}

describe('tugline solve without --quick', () => {
  it('samples the posterior to convergence, and the threads change no byte of the dossier', async () => {
    const threaded = await runProgram(['solve', DEMO, '--out', at('threads')]);
    expect(threaded.exitCode).toBe(0);
    expect(threaded.stdout).toContain('posterior, converged; intervals hold 68.3 %');
    expect(threaded.stdout.split('\n').filter((line) => line.length > 80 && !line.includes(place))).toEqual([]);
    const { posterior, companions, velocity } = await recordIn(at('threads'));
    expect(posterior).toMatchObject({ status: 'converged', chains: 4 });
    const rows: Record<string, string>[] = parse(await readFile(at('threads/posterior.csv'), 'utf8'), { columns: true });
    expect(rows).toHaveLength(posterior!.draws);
    expect(new Set(rows.map((row) => row['chain']))).toEqual(new Set(['1', '2', '3', '4']));

    // The interval of the record is that of the column: both ends by counting rows on either side of them.
    for (const [key, { lower, upper }] of [
      ['companions.b.elements.period', companions[0]!.elements.period],
      ['companions.b.elements.eccentricity', companions[0]!.elements.eccentricity],
      ['velocity.slope', velocity.slope],
    ] as const) {
      const values = rows.map((row) => Number(row[key]));
      const below = values.filter((value) => value < lower!).length / values.length;
      const above = values.filter((value) => value > upper!).length / values.length;
      // (1 - erf(1/sqrt 2)) / 2 = 0.15866; a row more or less is 0.00025.
      expect(Math.abs(below - 0.15866), key).toBeLessThan(0.001);
      expect(Math.abs(above - 0.15866), key).toBeLessThan(0.001);
    }

    // From the sources the chains run one after the other in a single thread.
    const alone = await tugline(['solve', DEMO, '--out', at('alone')]);
    expect(alone.exitCode).toBe(0);
    for (const name of ['solution.json', 'posterior.csv', 'report.md', 'elements.csv'])
      expect(await readFile(at(`alone/${name}`), 'utf8'), name).toBe(await readFile(at(`threads/${name}`), 'utf8'));
  }); // prettier-ignore

  it('ends sampling at Ctrl-C and gives the result so far, marked as interrupted', async () => {
    await writeFile(at('partial.csv'), partialOrbit());
    const call = ['solve', 'partial.csv', '--companions', '1', '--drift', 'none', '--draw-limit', '1000000'];
    const { exitCode, stdout, stderr } = await runInterrupted([...call, '--out', 'stopped'], false);
    expect(stderr).toContain('stopping early with the draws so far');
    expect(exitCode).toBe(0);
    expect(stdout).toContain('posterior, NOT converged (interrupted)');
    const { posterior } = await recordIn(at('stopped'));
    expect(posterior!.status).toBe('interrupted');
    expect(posterior!.draws).toBeLessThan(400_000);
    const report = await readFile(at('stopped/report.md'), 'utf8');
    expect(report).toContain('Sampling was interrupted before the chains agreed');
    expect(report).not.toContain('chains have converged');
    expect(report).not.toContain('byte for byte');

    const killed = await runInterrupted([...call, '--out', 'killed'], true);
    expect(killed.signal).toBe('SIGINT');
    expect(killed.stdout).toBe('');
    await expect(readFile(at('killed/solution.json'))).rejects.toThrow(/ENOENT/);
  });

  it('says so when the limit of draws came before convergence', async () => {
    await writeFile(at('partial.csv'), partialOrbit());
    const call = ['solve', at('partial.csv'), '--companions', '1', '--drift', 'none', '--draw-limit', '1000'];
    const { exitCode, stdout } = await tugline([...call, '--out', at('limited')]);
    expect(exitCode).toBe(0);
    expect(stdout).toContain('posterior, NOT converged (draw limit)');
    expect((await recordIn(at('limited'))).posterior).toMatchObject({ status: 'draw-limit', draws: 4000 });
  });
});
