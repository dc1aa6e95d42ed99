import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { UsageError, type InputIssue } from '../../src/errors.js';
import {
  caseFromTables,
  checkInstrumentChoices,
  combineTables,
  readCase,
} from '../../src/observations/index.js';
import { brief, caseIssues, caseOf, issuesOf, read } from './helpers.js';

const FULL = `target: Vellamo
star:
  mass: 0.94 +- 0.03 M_sun
  radius: 0.91 ± 0.02 R_sun
  temperature: 5480 +- 60 K
tables:
  - north.csv
  - { file: south.csv, instrument: south, unit: km/s, time: BJD_TDB - 2450000, columns: { velocity: RV, error: 3 } }
companions:
  - { period: 41.2 .. 41.9 d, eccentricity: 0, inclination: 88 +- 1 deg }
  - { letter: d, semi-amplitude: 40 +- 3 m/s, time-of-periastron: 2459010.25, argument-of-periastron: 1 rad }
  - { eccentricity: 0.1 .. 0.5, circular: auto }
drift: linear
circular: no
instruments: { north: { zero-point: 0 +- 20 m/s, jitter: 0 .. 10 m/s } }
search: { shortest-period: 12 h, longest-period: 2 yr, at-most: 3 }
`;

describe('a case', () => {
  it('is read with all its choices in canonical units', () => {
    const read1 = caseOf(FULL);
    expect(read1.star).toEqual({
      massSolar: { value: 0.94, sigma: 0.03 },
      radiusSolar: { value: 0.91, sigma: 0.02 },
      effectiveTemperatureK: { value: 5480, sigma: 60 },
    });
    expect(read1.tables.map((table) => table.path)).toEqual([
      join('cases', 'north.csv'),
      join('cases', 'south.csv'),
    ]);
    expect(read1.tables[1]).toMatchObject({
      instrument: 'south', velocityUnit: 'km/s', timeScale: 'BJD_TDB', timeOffsetDays: 2450000,
      columns: { velocity: 'RV', 'velocity-error': '3' },
    }); // prettier-ignore
    expect(read1.drift).toBe('linear');
    expect(read1.circular).toBe(false);
    expect(read1.maximumCompanions).toBe(3);
    expect(read1.periodRangeDays).toEqual({ low: 0.5, high: 730.5 }); // 12 h; 2 Julian years
    expect(read1.instruments['north']).toEqual({
      zeroPointMps: { kind: 'prior', value: 0, sigma: 20 },
      jitterMps: { kind: 'range', low: 0, high: 10 },
    });
    expect(read1.instruments['constructor']).toBeUndefined();
  });

  it('gives letters in order around those that are taken, and settles circular by the eccentricity', () => {
    const { companions } = caseOf(FULL);
    if (!Array.isArray(companions)) throw new Error('expected a list');
    expect(
      companions.map((one: { letter: string; circular: unknown }) => [one.letter, one.circular]),
    ).toEqual([
      ['b', true], // eccentricity fixed at 0
      ['d', false], // as for the whole case
      ['c', 'auto'], // its own word
    ]);
    expect(companions[0]).toMatchObject({
      elements: { period: { kind: 'range', low: 41.2, high: 41.9 } },
      inclinationDeg: { value: 88, sigma: 1 },
    });
    expect(companions[1]).toMatchObject({
      elements: {
        semiAmplitude: { kind: 'prior', value: 40, sigma: 3 },
        argumentOfPeriastron: { kind: 'fixed', value: 180 / Math.PI },
      },
    });
  });

  it('needs no more than target and tables', () => {
    expect(caseOf('target: Vellamo\ntables: [north.csv]\n')).toMatchObject({
      companions: 'auto', maximumCompanions: 5, drift: 'auto', circular: 'auto', mock: null,
      star: { massSolar: null, radiusSolar: null, effectiveTemperatureK: null }, periodRangeDays: { low: null, high: null },
    }); // prettier-ignore
    expect(caseOf('target: Vellamo\ntables: [north.csv]\ncompanions: 2\n').companions).toBe(2);
  });

  it('reads the circumstances of simulated observations', () => {
    const { mock } = caseOf(`target: Vellamo
mock:
  site: { name: Aallokko Point, latitude: 38.2 deg, longitude: -12.4 deg, elevation: 310 m }
  position: { right-ascension: 318.4 deg, declination: 17.6 }
  instruments:
    - { name: north, table: north.csv, count: 48, error: 2.5 m/s, zero-point: 0.25 km/s, from: 2459900.5, to: 2461000.5 }
  companions:
    - { period: 41.6 d, eccentricity: 0.35, argument-of-periastron: 128 deg, time-of-periastron: 2460412.83, semi-amplitude: 38.4 m/s }
  slope: -4.2 m/s/yr
`);
    expect(mock?.site).toEqual({
      name: 'Aallokko Point',
      latitudeDeg: 38.2,
      longitudeEastDeg: -12.4,
      elevationM: 310,
    });
    expect(mock?.instruments[0]).toMatchObject({ unit: 'm/s', zeroPointMps: 250, errorMps: 2.5, count: 48 });
    expect(mock?.companions).toEqual([
      {
        periodDays: 41.6,
        eccentricity: 0.35,
        argPeriastronStarDeg: 128,
        timePeriastronBjdTdb: 2460412.83,
        semiAmplitudeMps: 38.4,
      },
    ]);
    expect([mock?.slopeMpsPerYear, mock?.epochBjdTdb]).toEqual([-4.2, 2460450.5]); // epoch: middle of from and to
  });

  it('is made from bare tables and options', () => {
    const bare = caseFromTables(['data/vellamo.csv', 'b.csv'], { starMass: '0.94 +- 0.03' });
    expect(bare).toMatchObject({
      path: null,
      target: 'vellamo',
      companions: 'auto',
      star: { massSolar: { value: 0.94, sigma: 0.03 } },
    });
    expect(bare.tables.map((table) => table.path)).toEqual(['data/vellamo.csv', 'b.csv']);
    expect(() => caseFromTables(['a.csv'], { starMass: '-1' })).toThrow(UsageError);
    expect(() => caseFromTables(['a.csv'], { starTemperature: '5000 m/s' })).toThrow(UsageError);
  });

  it('is read from a file; a missing one is said with a suggestion', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'case-'));
    try {
      await writeFile(join(folder, 'vellamo.yaml'), 'target: Vellamo\ntables: [north.csv]\n');
      expect((await readCase(join(folder, 'vellamo.yaml'))).tables[0]!.path).toBe(join(folder, 'north.csv'));
      await expect(readCase(join(folder, 'velamo.yaml'))).rejects.toMatchObject({
        issues: [{ code: 'missing-file', hint: expect.stringContaining('vellamo.yaml') as string }],
      });
    } finally {
      await rm(folder, { recursive: true });
    }
  });

  it('holds its instruments against those of the tables', () => {
    const velocities = combineTables([read('2459000.5 1 1\n2459001.5 2 1\n', {}, 'north.csv')]);
    const named = (name: string): ReturnType<typeof caseOf> =>
      caseOf(`target: x\ntables: [north.csv]\ninstruments:\n  ${name}: { jitter: 1 m/s }\n`);
    const issueOf = (theCase: ReturnType<typeof caseOf>): InputIssue =>
      issuesOf(() => {
        checkInstrumentChoices(theCase, velocities);
      })[0]!;
    expect(() => {
      checkInstrumentChoices(named('north'), velocities);
    }).not.toThrow();
    // The name stands in the fourth line of the text, behind two blanks.
    const unknown = { code: 'unknown-instrument', line: 4, column: 3, field: 'instruments.nort' };
    expect(issueOf(named('nort'))).toMatchObject({ ...unknown, hint: 'did you mean "north"?' });
    // Options of the command line make a changed copy of the case.
    expect(issueOf({ ...named('nort'), drift: 'none' })).toMatchObject(unknown);
    expect(issueOf(named('harbour'))).toMatchObject({ line: 4, hint: 'allowed here: north' });
  });
});

describe('bad cases: every problem at once, each with line, column and key', () => {
  it('lists them all in the order of the file', () => {
    const issues = caseIssues(`target: Vellamo
star: { mass: -1 M_sun, radious: 3, temperature: 5480 +- 60 m/s }
tabels: [a]
tables: [north.csv]
companions:
  - period: 41.9 .. 41.2 d
    eccentricity: 1.03
    letter: A
drift: liner
instruments:
  north: { jitter: -1 m/s }
search:
  shortest-period: 10 d
  longest-period: 2 d
`);
    expect(brief(issues)).toEqual([
      '2:15 bad-value star.mass',
      '2:25 unknown-key star.radious',
      '2:50 bad-value star.temperature',
      '3:1 unknown-key tabels',
      '6:13 bad-value companions[0].period',
      '7:19 bad-value companions[0].eccentricity',
      '8:13 bad-value companions[0].letter',
      '9:8 bad-value drift',
      '11:20 bad-value instruments.north.jitter',
      '14:19 bad-value search.longest-period',
    ]);
    expect(issues[1]!.hint).toBe('did you mean "radius"?');
    expect(issues[3]!.hint).toBe('did you mean "tables"?');
    expect(issues[5]!.message).toContain('below 1');
    expect(issues[7]!.hint).toBe('did you mean "linear"?');
  });

  it.each([
    ['', 'empty-file'],
    ['# nothing\n', 'empty-file'],
    ['- a\n', 'bad-value'],
    ['just words\n', 'bad-value'],
    ['target: x\n', 'bad-value'], // no table
    ['tables: [a.csv]\n', 'missing-key'], // no target
    ['target: x\ntarget: y\n', 'yaml'],
    ['target: "x\n', 'yaml'],
    ['target: x\0\n', 'binary-file'],
    ['target: x\ntables:\n', 'bad-value'],
    ['target: x\ntables: [a]\ncompanions: many\n', 'bad-value'],
    ['target: x\ntables: [a]\ncompanions: -1\n', 'bad-value'],
    ['target: x\ntables: [a]\ncompanions: []\n', 'bad-value'],
    ['target: x\ntables: [a]\ncompanions: [{ letter: c }, { letter: c }]\n', 'bad-value'],
    ['target: x\ntables: [a]\ncompanions: [{ eccentricity: 0.2, circular: true }]\n', 'bad-value'],
    [
      'target: x\ntables: [a]\ncompanions: [{ time-of-periastron: 2459000, time-of-inferior-conjunction: 2459001 }]\n',
      'bad-value',
    ],
    ['target: x\ntables: [a]\nstar: { mass: .nan }\n', 'bad-value'],
    ['target: x\ntables: [{ file: a, time: noon }]\n', 'bad-value'],
    ['target: x\ntables: [a]\n__proto__: { a: 1 }\n', 'unknown-key'],
    ['target: *y\n', 'yaml-aliases'],
    ['['.repeat(100_000), 'too-deep'],
    ['- '.repeat(100_000), 'too-deep'],
    [Array.from({ length: 1000 }, (_, level) => `${' '.repeat(level)}a:`).join('\n'), 'too-deep'],
    ['target: x\n'.repeat(200_000), 'too-large'],
  ])('case %#', (text, code) => {
    const codes = caseIssues(text).map((issue) => issue.code);
    expect(new Set(codes)).toEqual(new Set([code]));
  });

  it('refuses a file that multiplies itself by aliases', () => {
    const level = (name: string, of: string): string =>
      `${name}: &${name} [${Array.from({ length: 9 }, () => `*${of}`).join(', ')}]\n`;
    const bomb =
      'a: &a [x, x, x, x, x, x, x, x, x]\n' +
      level('b', 'a') +
      level('c', 'b') +
      level('d', 'c') +
      level('e', 'd');
    expect(brief(caseIssues(bomb)).map((text) => text.split(' ')[1])).toEqual(['yaml-aliases']);
  });

  it('refuses simulated tables that would be written elsewhere', () => {
    const issues = caseIssues(
      'target: x\nmock: { site: {}, position: {}, instruments: [{ table: ../../etc/x }] }\n',
    );
    expect(issues.find((issue) => issue.field === 'mock.instruments[0].table')?.message).toContain(
      'plain file name',
    );
    expect(issues.filter((issue) => issue.code === 'missing-key').map((issue) => issue.field)).toContain(
      'mock.site.latitude',
    );
  });
});
