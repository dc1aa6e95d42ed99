import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { tugline } from './listening-terminal.js';

let place: string;
beforeAll(async () => {
  place = await mkdtemp(join(tmpdir(), 'tugline-mock-'));
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

describe('mock with light curves and mid-times', () => {
  it('writes all tables of the case and says what is in each', async () => {
    const folder = join(place, 'simulated');
    const { exitCode, stdout } = await tugline(['mock', 'data-samples/lainehtar.yaml', '--out', folder]);
    expect(exitCode).toBe(0);
    const said = (name: string): string => stdout.split('\n').find((line) => line.includes(name)) ?? '';
    expect(said('lainehtar-north.csv')).toContain(': 14 simulated velocities (seed 1)');
    expect(said('lainehtar-night-1.csv')).toMatch(/: \d+ simulated points of a light curve \(seed 1\)/);
    expect(said('lainehtar-mid-times.csv')).toContain(': 12 simulated mid-times (seed 1)');
    expect(await readFile(join(folder, 'lainehtar-survey.csv'), 'utf8')).toBe(
      await readFile('data-samples/lainehtar-survey.csv', 'utf8'),
    );
  });

  it('as JSON: path, content and rows of each', async () => {
    const folder = join(place, 'as-json');
    const { stdout } = await tugline(['mock', 'data-samples/lainehtar.yaml', '--out', folder, '--json']);
    const { tables } = JSON.parse(stdout) as { tables: { holds: string; rows: number }[] };
    expect(tables.map(({ holds }) => holds)).toEqual([
      'velocities', 'velocities', 'light curve', 'light curve', 'light curve', 'mid-times',
    ]); // prettier-ignore
  });

  it('a mistake in the block is named with its line', async () => {
    const text = await readFile('data-samples/lainehtar.yaml', 'utf8');
    const broken = join(place, 'broken.yaml');
    await writeFile(broken, text.replace('noise: 460 ppm', 'noise: 460 m/s'));
    const line = text.split('\n').findIndex((each) => each.includes('noise: 460 ppm')) + 1;
    const { exitCode, stderr } = await tugline(['mock', broken, '--out', join(place, 'never')]);
    expect(exitCode).toBe(2);
    expect(stderr).toContain(`broken.yaml:${line}`);
    expect(stderr).toContain('ppm, ppt, %');
  });
});
