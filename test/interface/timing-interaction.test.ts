import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

import { JUPITER_MASS_IN_EARTH, SOLAR_MASS_IN_EARTH } from '../../src/orbit/constants.js';
import { superPeriodDays } from '../../src/orbit/interaction/near-resonance.js';
import type { InteractionTable } from '../../src/solving/timing/interaction-types.js';
import type { TimingSystemRecord } from '../../src/solving/timing/system-types.js';
import type { TimingRecord } from '../../src/solving/timing/types.js';
import { simulateInteraction } from '../solving/timing/simulate-interaction.js';
import { expectWithin } from '../support/expect-within.js';
import { tugline, type Heard } from './listening-terminal.js';

/** Invented companions 2.5 % outside of 2:1. */
const TRUTH = [
  { massRatio: 5e-5, periodDays: 20, eCosOmega: 0.01, eSinOmega: -0.015 },
  { massRatio: 7e-5, periodDays: 41, eCosOmega: -0.012, eSinOmega: 0.01 },
] as const;
const STAR_SOLAR = 0.9;

let place: string;
const at = (name: string): string => join(place, name);

function table({ cycles, timesDays, sigmasDays }: InteractionTable, withCycles = true): string {
  const rows = Array.from(timesDays, (time, row) =>
    [...(withCycles ? [cycles[row]!] : []), time.toFixed(6), sigmasDays[row]!].join(','),
  );
  return `${withCycles ? 'cycle,' : ''}BJD_TDB,error (d)\n${rows.join('\n')}\n`;
}

function caseText(tables: readonly string[], more = ''): string {
  return `target: Two of them\nstar:\n  mass: ${STAR_SOLAR} +- 0.02\ntables:\n${tables.join('\n')}\n${more}`;
}

async function recordIn(folder: string): Promise<TimingSystemRecord> {
  return JSON.parse(await readFile(at(`${folder}/timing.json`), 'utf8')) as TimingSystemRecord;
}

beforeAll(async () => {
  place = await mkdtemp(join(tmpdir(), 'tugline-pair-'));
  const [b, c] = simulateInteraction(TRUTH, 700, 0.00035, 17);
  await writeFile(at('b.csv'), table(b!));
  await writeFile(at('c.csv'), table(c!));
  await writeFile(at('bare-b.csv'), table(b!, false));
  await writeFile(at('few.csv'), `${table(c!).split('\n').slice(0, 4).join('\n')}\n`);
  await writeFile(at('wrong-b.csv'), table(b!).replace(/\n5,/, '\n6,'));
  await writeFile(at('wrong-c.csv'), table(c!).replace(/\n2,/, '\n3,'));
  const own = (file: string, letter: string): string => `  - { file: ${file}, companion: ${letter} }`;
  await writeFile(at('pair.yaml'), caseText([own('b.csv', 'b'), own('c.csv', 'c')]));
  await writeFile(at('few.yaml'), caseText([own('b.csv', 'b'), own('few.csv', 'c')]));
  await writeFile(at('wrong.yaml'), caseText([own('wrong-b.csv', 'b'), own('wrong-c.csv', 'c')]));
  await writeFile(at('same.yaml'), caseText([own('b.csv', 'b'), own('bare-b.csv', 'c')]));
  await writeFile(at('unnamed.yaml'), caseText([own('b.csv', 'b'), '  - { file: c.csv }']));
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

describe('tugline timing with mid-times of two companions', () => {
  let heard: Heard;
  let record: TimingSystemRecord;
  beforeAll(async () => {
    heard = await tugline(['timing', at('pair.yaml'), '--out', at('pair'), '--next', '3', '--quiet']);
    record = await recordIn('pair');
  }, 60_000);

  it('writes each ephemeris, the interacting orbits, charts, tables and a report', async () => {
    expect(heard.stderr).toBe('');
    expect(heard.exitCode).toBe(0);
    const names = await readdir(at('pair'));
    for (const name of ['timing.json', 'report.md', 'interaction.csv', 'o-minus-c-b.csv', 'o-minus-c-c.csv', 'interaction-b.png', 'interaction-c.svg', 'o-minus-c-b.png', 'o-minus-c-c.svg'])
      expect(names).toContain(name);
    expect([record.schema, record.version]).toEqual(['tugline/timing-system', 1]);
    expect(record.companions.map(({ letter }) => letter)).toEqual(['b', 'c']);
    const report = await readFile(at('pair/report.md'), 'utf8');
    expect(report).toContain('b and c pull at each other');
    expect(report).toContain('## Companion c by itself');
    expect(report).toContain('](interaction-b.png)');
    expect(report).not.toMatch(/NaN|undefined/);
  }); // prettier-ignore

  it('recovers masses and eccentricities, with their ratios and units', () => {
    const interaction = record.interaction!;
    expect(interaction).toMatchObject({ status: 'converged', usable: true, needed: true });
    interaction.companions.forEach(({ massRatio, massEarth, massJupiter, eCosOmega, eSinOmega }, c) => {
      const truth = TRUTH[c]!;
      for (const [quantity, value] of [
        [massRatio, truth.massRatio],
        [eCosOmega, truth.eCosOmega],
        [eSinOmega, truth.eSinOmega],
      ] as const)
        expectWithin(quantity.value!, value, { abs: 3 * quantity.sigma!, unit: '1', why: 'three errors' });
      expect(massRatio.sigma!).toBeLessThan(0.3 * massRatio.value!);
      const earths = massRatio.value! * STAR_SOLAR * SOLAR_MASS_IN_EARTH;
      expectWithin(massEarth.value!, earths, { rel: 1e-9, unit: 'M_earth', why: 'rounding' });
      expectWithin(massJupiter.sigma!, massEarth.sigma! / JUPITER_MASS_IN_EARTH, {
        rel: 1e-9,
        unit: 'M_jup',
        why: 'rounding',
      });
      expect([massEarth.unit, massJupiter.unit]).toEqual(['M_earth', 'M_jup']);
    });
    expect(interaction.resonances).toHaveLength(1);
    expect(interaction.resonances[0]).toMatchObject({ letters: ['b', 'c'], ratio: '2:1' });
    expectWithin(interaction.resonances[0]!.superPeriod!, superPeriodDays(20, 41, 2), {
      rel: 0.03,
      unit: 'd',
      why: 'mean periods differ from osculating ones by a share of delta',
    });
  });

  it('predicts what comes next by the integrated orbits', () => {
    const later = simulateInteraction(TRUTH, 860, 0, 1);
    const { predictions } = record.interaction!;
    expect(predictions.map(({ letter }) => letter)).toEqual(['b', 'b', 'b', 'c', 'c', 'c']);
    for (const { letter, cycle, time } of predictions) {
      const { cycles, timesDays } = later[letter === 'b' ? 0 : 1]!;
      const truth = timesDays[Array.from(cycles).indexOf(cycle)]!;
      expectWithin(time.value!, truth, { abs: 4 * time.sigma!, unit: 'd', why: 'four errors' });
    }
  });

  it('shows masses and verdict within 80 columns', () => {
    expect(heard.stdout).toContain('Two of them: b and c pull at each other');
    expect(heard.stdout).toMatch(/mass +\d.* M_earth/);
    expect(heard.stdout).toContain('M_jup');
    expect(heard.stdout).toMatch(/outside 2:1, super-period \d+/);
    for (const line of heard.stdout.split('\n')) expect(Array.from(line).length).toBeLessThanOrEqual(80);
  });

  it('--quick takes the curvature; --json prints the record alone; the same bytes again', async () => {
    const run = (folder: string): Promise<Heard> =>
      tugline(['timing', at('pair.yaml'), '--quick', '--json', '--quiet', '--out', at(folder)]);
    const first = await run('quick');
    const quick = JSON.parse(first.stdout) as TimingSystemRecord;
    expect(quick.interaction!.posterior).toBeNull();
    expect(quick.interaction!.companions[0]!.massRatio.sigma).toBeGreaterThan(0);
    expect(record.interaction!.posterior!.status).toBe('converged');
    await run('again');
    for (const name of ['interaction.csv', 'interaction-b.png', 'o-minus-c-b.csv'])
      expect((await readFile(at(`again/${name}`))).equals(await readFile(at(`quick/${name}`)))).toBe(true);
  });

  it('--companion still takes one by itself, as before', async () => {
    const one = await tugline(['timing', at('pair.yaml'), '--companion', 'c', '--json', '--quiet', '--quick', '--out', at('one')]);
    const alone = JSON.parse(one.stdout) as TimingRecord;
    expect(one.exitCode).toBe(0);
    expect(alone.schema).toBe('tugline/timing');
    expect(alone.models).toEqual(record.companions[1]!.models);
    expect(await readdir(at('one'))).toContain('o-minus-c.csv');
  }); // prettier-ignore
});

describe('several companions whose orbits cannot be fitted together', () => {
  it('with too few mid-times have their ephemerides and a reason', async () => {
    const heard = await tugline(['timing', at('few.yaml'), '--quiet', '--out', at('few')]);
    expect(heard.exitCode).toBe(0);
    const record = await recordIn('few');
    expect(record.interaction).toBeNull();
    expect(record.interactionWhy).toContain('companion c has mid-transits of 3 cycles');
    expect(record.companions).toHaveLength(2);
    expect(await readdir(at('few'))).not.toContain('interaction.csv');
    expect(heard.stdout.replace(/\s+/g, ' ')).toContain('the orbits were not fitted together');
  });

  it('with one period end with exit code 1 and a reason', async () => {
    const heard = await tugline(['timing', at('same.yaml'), '--quiet', '--out', at('same')]);
    expect(heard.exitCode).toBe(1);
    expect((await recordIn('same')).interactionWhy).toContain('nearly the same period');
  });

  it('name the wrong cycles of all of them at once', async () => {
    const heard = await tugline(['timing', at('wrong.yaml'), '--quiet', '--out', at('none')]);
    expect(heard.exitCode).toBe(2);
    expect(heard.stderr).toContain('wrong-b.csv');
    expect(heard.stderr).toContain('wrong-c.csv');
  });

  it.each([
    [['unnamed.yaml'], 'one that is not named', 'companion: LETTER'],
    [['pair.yaml', '--mass-ratio', '0.001', '--period', '20'], '--period, --mass-ratio belong to one', '--companion b'],
    [['pair.yaml', '--companion', 'd'], 'companion "d"', 'b, c'],
  ])('refuse %j in words', async ([file, ...words], said, hint) => {
    const heard = await tugline(['timing', at(file!), ...words, '--quiet', '--out', at('none')]);
    expect(heard.exitCode).toBe(2);
    expect(heard.stderr).toContain(said);
    expect(heard.stderr).toContain(hint);
  }); // prettier-ignore
});
