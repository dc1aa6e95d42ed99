import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

import { RandomStream } from '../../src/numerics/random.js';
import type { TimingRecord } from '../../src/solving/timing/types.js';
import { tugline } from './listening-terminal.js';

let place: string;
const at = (name: string): string => join(place, name);
const PERIOD = 2.2;
const FIRST = 2459000.4;

/** 24 invented mid-times of a period that is constant, as text. */
function table(choices: { cycles: boolean; wrong?: number }): string {
  const random = RandomStream.fromSeed(3);
  const rows = Array.from({ length: 24 }, (_, k) => {
    const cycle = k < 2 ? k : 9 * k + random.integerBelow(8);
    const time = (FIRST + PERIOD * cycle + 6e-4 * random.normal()).toFixed(5);
    const written = k === choices.wrong ? cycle + 1 : cycle;
    return choices.cycles ? `${written},${time},0.0006,site ${k % 3}` : `${time},0.0006,site ${k % 3}`;
  });
  return `${choices.cycles ? 'cycle,' : ''}BJD_TDB,error (d),source\n${rows.join('\n')}\n`;
}

beforeAll(async () => {
  place = await mkdtemp(join(tmpdir(), 'tugline-timing-'));
  await writeFile(at('times.csv'), table({ cycles: true }));
  await writeFile(at('bare.csv'), table({ cycles: false }));
  await writeFile(at('wrong.csv'), table({ cycles: true, wrong: 7 }));
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

describe('tugline timing', () => {
  it('writes a folder and shows ephemeris, models and predictions within 80 columns', async () => {
    const heard = await tugline(['timing', at('times.csv'), '--out', at('found'), '--quiet']);
    expect(heard.exitCode).toBe(0);
    expect(heard.stderr).toBe('');
    expect(heard.stdout).toContain('the period is constant (24 mid-times');
    expect(heard.stdout).toMatch(/linear \*/);
    expect(heard.stdout).toContain('Next');
    for (const line of heard.stdout.split('\n')) expect(Array.from(line).length).toBeLessThanOrEqual(80);
    expect((await readdir(at('found'))).sort()).toEqual([
      'o-minus-c.csv',
      'o-minus-c.png',
      'o-minus-c.svg',
      'report.md',
      'timing.json',
    ]);
    const record = JSON.parse(await readFile(at('found/timing.json'), 'utf8')) as TimingRecord;
    expect([record.schema, record.version]).toEqual(['tugline/timing', 1]);
    const { period } = record.models[0]!.parameters;
    expect(Math.abs(period!.value! - PERIOD)).toBeLessThan(4 * period!.sigma!);
  });

  it('gives the same bytes again, and refuses to write over them without --force', async () => {
    const again = await tugline(['timing', at('times.csv'), '--out', at('found'), '--quiet']);
    expect(again.exitCode).toBe(2);
    expect(again.stderr).toContain('--force');
    const before = await readFile(at('found/o-minus-c.csv'));
    const json = await readFile(at('found/timing.json'), 'utf8');
    const forced = await tugline(['timing', at('times.csv'), '--out', at('found'), '--quiet', '--force']);
    expect(forced.exitCode).toBe(0);
    expect((await readFile(at('found/o-minus-c.csv'))).equals(before)).toBe(true);
    const later = await readFile(at('found/timing.json'), 'utf8');
    const strip = (text: string): unknown => ({ ...(JSON.parse(text) as TimingRecord), provenance: null });
    expect(strip(later)).toEqual(strip(json));
  });

  it('--json prints the record alone; --next and --after choose the predictions', async () => {
    const heard = await tugline([
      'timing', at('bare.csv'), '--out', at('json'), '--quiet', '--json', '--next', '2', '--after', '2460000',
    ]); // prettier-ignore
    const record = JSON.parse(heard.stdout) as TimingRecord;
    expect(record.numbering.how).toBe('recovered');
    expect(record.predictions).toHaveLength(2);
    const [next] = record.predictions;
    expect(next!.time.value!).toBeGreaterThan(2460000);
    expect(next!.time.value!).toBeLessThan(2460000 + PERIOD);
    expect(next!.cycle).toBe(Math.ceil((2460000 - FIRST) / PERIOD));
  });

  it('names a wrong cycle with file, line and the right number', async () => {
    const heard = await tugline(['timing', at('wrong.csv'), '--out', at('none'), '--quiet']);
    expect(heard.exitCode).toBe(2);
    expect(heard.stderr).toContain('wrong.csv:9');
    expect(heard.stderr).toMatch(/it is cycle \d+/);
    expect(heard.stderr).toContain('--renumber');
    const renumbered = await tugline([
      'timing',
      at('wrong.csv'),
      '--renumber',
      '--out',
      at('new'),
      '--quiet',
    ]);
    expect(renumbered.exitCode).toBe(0);
  });

  it('says so where there are no mid-times', async () => {
    const heard = await tugline(['timing', 'data-samples/north.csv', '--out', at('none'), '--quiet']);
    expect(heard.exitCode).toBe(2);
    expect(heard.stderr).toContain('no mid-times');
  });

  it.each([
    [['--next', '0'], '--next is "0"'],
    [['--period', '-3'], '--period'],
    [['--shortest-modulation', '50', '--longest-modulation', '20'], 'not below the longest'],
    [['--mass-ratio', '0'], '--mass-ratio'],
  ])('refuses %j in words', async (words, said) => {
    const heard = await tugline(['timing', at('times.csv'), '--out', at('none'), '--quiet', ...words]);
    expect(heard.exitCode).toBe(2);
    expect(heard.stderr).toContain(said);
  });
});
