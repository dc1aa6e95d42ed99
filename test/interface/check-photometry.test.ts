/** `check` on light curves and mid-times, and what commands for velocities say of them. All tables are invented. */
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { parseCommandLine } from '../../src/cli/command-line.js';
import { readObservations, readVelocities, requestedCase } from '../../src/cli/inputs.js';
import { InputDataError } from '../../src/errors.js';
import { curveText, wiggle } from '../observations/photometry-helpers.js';
import { listeningTerminal, tugline } from './listening-terminal.js';

let place: string;
const at = (name: string): string => join(place, name);

/** 400 rows, a minute apart, in counts, a pause of 2.4 d in the middle, one dip of 1 %. */
const SURVEY = curveText({
  header: '# exposure 58 s\nBJD_TDB - 2457000,flux (e-/s),flux_err (e-/s),quality,x\n',
  start: 2000.5,
  rows: 400,
  cells: (row) => [
    (5e5 * (1 + wiggle(row) - (row > 100 && row < 120 ? 0.01 : 0))).toFixed(2),
    '100.0',
    row === 7 ? 16 : 0,
    (500 + 0.01 * (row % 11)).toFixed(2),
  ],
}).replace(/^(\d{4}\.\d{8})/gm, (time) => (Number(time) < 2000.64 ? time : (Number(time) + 2.4).toFixed(8)));
const TIMES = 'cycle,Tmid (BJD_TDB),err (min),source\n0,2459000.5123,0.5,Pier\n4,2459013.0345,0.7,Quay\n9,2459028.6872,0.4,Pier\n'; // prettier-ignore
const VELOCITIES = 'BJD_TDB,RV (m/s),e_RV (m/s)\n2459010.25,10.5,2\n2459050.75,-3.25,2.5\n2459091.5,3,3\n';

beforeAll(async () => {
  place = await mkdtemp(join(tmpdir(), 'tugline-photometry-'));
  await writeFile(at('survey.csv'), SURVEY);
  await writeFile(at('times.csv'), TIMES);
  await writeFile(at('north.csv'), VELOCITIES);
  await writeFile(at('bare.csv'), curveText({ header: '', cells: (row) => [12 + wiggle(row), 0.002] }));
  await writeFile(
    at('vellamo.yaml'),
    `target: Vellamo
tables:
  - north.csv
  - { file: survey.csv, band: R, baseline: [ x ], noise: correlated, dilution: 2 +- 1 % }
  - { file: times.csv, companion: b }
bands: { R: { u1: 0.35 +- 0.05 } }
`,
  );
});
afterAll(async () => {
  await rm(place, { recursive: true, force: true });
});

describe('tugline check', () => {
  it('shows what a light curve was understood as, in 80 columns', async () => {
    const { exitCode, stdout } = await tugline(['check', at('survey.csv')]);
    expect(exitCode).toBe(0);
    for (const part of [
      '400 rows, 1 left out, a light curve',
      '2457000 d added to the numbers in the file',
      'median step 60 s',
      '2.4 d from 2459000.64',
      '58 s, from the comments',
      'counts, divided by the median',
      'median 200 ppm', // 100 of 500 000
      'regressors  x',
      'auto; noise white',
    ])
      expect(stdout).toContain(part);
    expect(stdout).toMatch(/all from -10\d{3} ppm to/); // the dip
    const long = stdout.split('\n').slice(1).filter((line) => line.length > 110); // prettier-ignore
    expect(long).toEqual([]);
  });

  it('shows mid-times', async () => {
    const { stdout } = await tugline(['check', at('times.csv')]);
    for (const part of [
      '3 rows, mid-times',
      '3 transits, 0 occultations',
      'median 30 s; 24 to 42 s',
      '0 to 9',
      'Pier, Quay',
    ])
      // prettier-ignore
      expect(stdout).toContain(part);
  });

  it('gives the three kinds as JSON, as the case declares them', async () => {
    const { exitCode, stdout } = await tugline(['check', at('vellamo.yaml'), '--json']);
    expect(exitCode).toBe(0);
    const { tables } = JSON.parse(stdout) as { tables: Record<string, unknown>[] };
    expect(tables.map((table) => table['content'])).toEqual(['velocities', 'light curve', 'mid-times']);
    expect(tables[1]).toMatchObject({
      band: 'R', baseline: ['x'], noise: 'correlated', dilution: { value: 0.02, sigma: 0.01 },
      exposureKnown: 'header', fluxUnit: 'counts', regressors: ['x'], used: 399, name: 'survey',
    }); // prettier-ignore
    expect(tables[2]).toMatchObject({
      transits: 3,
      cycles: { first: 0, last: 9 },
      companion: 'b',
      sources: 2,
    });
  });

  it('asks what an unclear table holds, and takes the answer', async () => {
    const asked = await tugline(['check', at('bare.csv')]);
    expect([asked.exitCode, asked.stderr.includes('--holds')]).toEqual([2, true]);
    const told = await tugline(['check', at('bare.csv'), '--holds', 'light-curve', '--unit', 'mag', '--exposure', '20 s', '--band', 'R']); // prettier-ignore
    expect(told.exitCode).toBe(0);
    for (const part of ['from magnitudes', '20 s, as declared', 'band        R'])
      expect(told.stdout).toContain(part);
    expect((await tugline(['check', at('bare.csv'), '--holds', 'spectra'])).stderr).toContain('light curve');
    expect((await tugline(['check', at('bare.csv'), '--exposure', '20'])).stderr).toContain('write the unit');
  });
});

describe('reading the tables of a command', () => {
  it('refuses light curves and mid-times where only velocities are read', async () => {
    const request = await parseCommandLine(['check', at('vellamo.yaml')]);
    if (request.kind !== 'run') throw new Error('expected a command');
    const { terminal } = listeningTerminal();
    const theCase = await requestedCase(request.given);
    const failure = await readVelocities(theCase, request.given, terminal).catch((error: unknown) => error);
    if (!(failure instanceof InputDataError)) throw new Error('expected an InputDataError');
    expect(
      failure.issues.map((issue) => [issue.code, issue.message.includes('reads velocities only')]),
    ).toEqual([
      ['not-velocities', true],
      ['not-velocities', true],
    ]);
  });

  it('gathers all kinds, and notes what is to be known of each', async () => {
    const request = await parseCommandLine(['check', at('vellamo.yaml')]);
    if (request.kind !== 'run') throw new Error('expected a command');
    const { terminal, err } = listeningTerminal();
    const observations = await readObservations(await requestedCase(request.given), request.given, terminal);
    expect([observations.velocities?.count, observations.lightCurves.length, observations.midTimes.length]).toEqual([3, 1, 1]); // prettier-ignore
    expect(err.join('')).toMatch(/note: .*survey\.csv: left out as flagged/);
  });
});
