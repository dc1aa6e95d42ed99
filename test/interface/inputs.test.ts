import { mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

import { noticeText, requestedCase } from '../../src/cli/inputs.js';
import { parseCommandLine } from '../../src/cli/command-line.js';
import type { Case } from '../../src/observations/types.js';
import { tugline } from './listening-terminal.js';

const TABLE =
  'BJD_TDB,RV (m/s),e_RV (m/s)\n2459910.25,10.5,2\n2459950.75,-3.25,2.5\n2460001.5,3,3\n2460400.1,1,2\n';
const CASE = `target: Vellamo
star:
  mass: 0.94 +- 0.03 M_sun
tables:
  - good.csv
companions: [{ period: 41 .. 42 d }]
drift: linear
`;

let place: string;
const at = (name: string): string => join(place, name);

beforeAll(async () => {
  place = await mkdtemp(join(tmpdir(), 'tugline-inputs-'));
  await writeFile(at('good.csv'), TABLE);
  await writeFile(at('twin.csv'), TABLE);
  await writeFile(
    at('broken.csv'),
    'BJD_TDB,RV (m/s),e_RV (m/s)\n2459910.25,fast,2\n2459950.75,-3.25,-2.5\n',
  );
  await writeFile(at('empty.csv'), '');
  await writeFile(at('binary.csv'), Buffer.from([80, 75, 0, 0, 1]));
  await writeFile(at('vellamo.yaml'), CASE);
  await writeFile(at('no-tables.yaml'), 'target: Vellamo\n');
  await writeFile(at('typo.yaml'), 'target: Vellamo\ntabels: [good.csv]\n');
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

async function caseOf(...argv: string[]): Promise<Case> {
  const request = await parseCommandLine(argv);
  if (request.kind !== 'run') throw new Error('expected a command');
  return requestedCase(request.given);
}

describe('options win over the case', () => {
  it('keeps what no option touches', async () => {
    const theCase = await caseOf('solve', at('vellamo.yaml'));
    expect(theCase).toMatchObject({
      target: 'Vellamo',
      drift: 'linear',
      star: { massSolar: { value: 0.94, sigma: 0.03 } },
    });
    expect(theCase.tables.map((table) => table.path)).toEqual([at('good.csv')]);
  });

  it('replaces what options name, and only that', async () => {
    const theCase = await caseOf(
      ...['solve', at('vellamo.yaml'), '--target', 'Louhi', '--star-mass', '1.1 +- 0.1', '--drift', 'none'],
      ...[
        '--companions',
        '2',
        '--longest-period',
        '1 yr',
        '--unit',
        'km/s',
        '--time-scale',
        'BJD_TDB - 2457000',
      ],
    );
    expect(theCase).toMatchObject({
      target: 'Louhi',
      companions: 2,
      drift: 'none',
      star: { massSolar: { value: 1.1, sigma: 0.1 }, radiusSolar: null },
      periodRangeDays: { low: null, high: 365.25 }, // a Julian year
    });
    expect(theCase.tables[0]).toMatchObject({
      velocityUnit: 'km/s',
      timeScale: 'BJD_TDB',
      timeOffsetDays: 2457000,
    });
  });

  it('makes described companions circular as well', async () => {
    const theCase = await caseOf('solve', at('vellamo.yaml'), '--circular');
    expect(theCase.circular).toBe(true);
    expect(theCase.companions).toMatchObject([{ letter: 'b', circular: true }]);
  });

  it('makes a case of bare tables, named after the first', async () => {
    const theCase = await caseOf(
      'solve',
      at('good.csv'),
      at('twin.csv'),
      '--columns',
      'time=1,velocity=RV (m/s)',
    );
    expect(theCase).toMatchObject({ path: null, target: 'good', companions: 'auto' });
    expect(theCase.tables[1]?.columns).toEqual({ time: '1', velocity: 'RV (m/s)' });
  });
});

describe('check', () => {
  it('says what it understood, and exits with 0', async () => {
    const { exitCode, stdout, stderr } = await tugline(['check', at('good.csv')]);
    expect(exitCode).toBe(0);
    expect(stderr).toBe('');
    expect(stdout).toContain(`${at('good.csv')}: 4 rows, separated by comma`);
    expect(stdout).toMatch(/1 +BJD_TDB +time/);
    expect(stdout).toContain('read in m/s; -3.25 to 10.5 m/s');
    expect(stdout).toContain('2; pauses 399 d from 2460001.50'); // 2460400.1 - 2460001.5
  });

  it('reads standard input under a name that is not a dash', async () => {
    const { exitCode, stdout } = await tugline(['check', '-', '--json'], TABLE);
    expect(exitCode).toBe(0);
    expect(JSON.parse(stdout)).toMatchObject({
      schema: 'tugline/tables',
      tables: [{ path: 'standard-input', rows: 4, instruments: [{ name: 'standard-input', count: 4 }] }],
    });
  });

  it('shows the tables that it could read, then the problems of the others, all of them', async () => {
    const { exitCode, stdout, stderr } = await tugline([
      'check',
      at('broken.csv'),
      at('good.csv'),
      at('none.csv'),
    ]);
    expect(exitCode).toBe(2);
    expect(stdout).toContain('good.csv: 4 rows');
    expect(stderr).toContain('error: 3 problems in 2 inputs');
    expect(stderr).toMatch(/broken\.csv:2:12 .*"fast"/);
    expect(stderr).toMatch(/broken\.csv:3:18 .*-2\.5/);
    expect(stderr).toMatch(/none\.csv: /);
  });

  it('prints no JSON at all when a table is broken', async () => {
    const { exitCode, stdout } = await tugline(['check', at('good.csv'), at('broken.csv'), '--json']);
    expect(exitCode).toBe(2);
    expect(stdout).toBe('');
  });
});

describe('inputs that cannot be used end with exit code 2 and no stack', () => {
  it.each([
    [['solve', 'none.csv'], /none\.csv/],
    [['solve', 'none.yaml'], /none\.yaml/],
    [['periods', 'empty.csv'], /empty\.csv/],
    [['periods', 'binary.csv'], /binary/],
    [['solve', 'no-tables.yaml'], /no-tables\.yaml[\s\S]*tables/],
    [['solve', 'typo.yaml'], /typo\.yaml:2:1[\s\S]*tables/],
    [['mock', 'vellamo.yaml'], /has no mock block/],
    [['solve', '.'], /folder/],
    [['solve', 'good.csv', '--columns', 'velocity=nowhere'], /nowhere/],
  ])('%j', async ([command = '', file = '', ...rest], message) => {
    const { exitCode, stdout, stderr } = await tugline([command, at(file), ...rest, '--out', at('out')]);
    expect(stderr).toMatch(/^error: /);
    expect(stderr).toMatch(message);
    expect(stderr).not.toMatch(/\n {4}at /);
    expect(stdout).toBe('');
    expect(exitCode).toBe(2);
    expect(await readdir(place)).not.toContain('out');
  });
});

describe('instruments that a case makes choices for', () => {
  it('must be in a table: the error names file, line and column, and ends with exit code 2', async () => {
    // The name stands in the fourth line, behind two blanks; the only table has the instrument "good".
    await writeFile(
      at('misnamed.yaml'),
      'target: Vellamo\ntables: [good.csv]\ninstruments:\n  goood: { jitter: 1 m/s }\n',
    );
    for (const command of ['solve', 'periods']) {
      const heard = await tugline([command, at('misnamed.yaml'), '--drift', 'none', '--out', at('out')]);
      expect(heard.exitCode).toBe(2);
      expect(heard.stdout).toBe('');
      expect(heard.stderr).toContain('error: no table has an instrument "goood"');
      expect(heard.stderr).toContain(`${at('misnamed.yaml')}:4:3 instruments.goood`);
      expect(heard.stderr).toContain('did you mean "good"?');
    }
    expect(await readdir(place)).not.toContain('out');
  });
});

describe('outputs that must not be touched', () => {
  it('refuses a folder that exists before anything is read', async () => {
    await mkdir(at('taken'), { recursive: true });
    await writeFile(at('taken/notes.txt'), 'mine');
    const refused = await tugline(['solve', at('good.csv'), '--out', at('taken')]);
    expect(refused.exitCode).toBe(2);
    expect(refused.stderr).toContain('exists already');
    expect(refused.stderr).toContain('--force');
    const forced = await tugline(['solve', at('good.csv'), '--out', at('taken'), '--force']);
    expect(forced.exitCode).toBe(2);
    expect(forced.stderr).toContain('is not a dossier');
    expect(await readFile(at('taken/notes.txt'), 'utf8')).toBe('mine');
  });

  it('refuses an output below a file', async () => {
    const { exitCode, stderr } = await tugline(['solve', at('good.csv'), '--out', at('good.csv/d')]);
    expect(exitCode).toBe(2);
    expect(stderr).toContain('cannot be written');
  });
});

describe('mock', () => {
  it('writes the tables of a case, the same for the same seed, and overwrites only with --force', async () => {
    const demo = 'data-samples/vellamo.yaml';
    const first = await tugline(['mock', demo, '--out', at('simulated'), '--json']);
    expect(first.exitCode).toBe(0);
    expect(JSON.parse(first.stdout)).toMatchObject({
      seed: 1,
      tables: [{ path: at('simulated/north.csv') }, {}],
    });
    const north = await readFile(at('simulated/north.csv'), 'utf8');

    const again = await tugline(['mock', demo, '--out', at('simulated')]);
    expect(again.exitCode).toBe(2);
    expect(again.stderr).toContain('exist already');
    expect((await tugline(['mock', demo, '--out', at('simulated'), '--force'])).exitCode).toBe(0);
    expect(await readFile(at('simulated/north.csv'), 'utf8')).toBe(north);
    await tugline(['mock', demo, '--out', at('simulated'), '--force', '--seed', '2']);
    expect(await readFile(at('simulated/north.csv'), 'utf8')).not.toBe(north);
  });
});

describe('noticeText', () => {
  it('adds the lines of the file, the first eight of many', () => {
    const lines = Array.from({ length: 11 }, (_, index) => index + 2);
    expect(noticeText({ message: 'odd', lines: [4] })).toBe('odd (line 4)');
    expect(noticeText({ message: 'odd', lines })).toBe('odd (lines 2, 3, 4, 5, 6, 7, 8, 9 and 3 more)');
    expect(noticeText({ message: 'odd', lines: [] })).toBe('odd');
  });
});
