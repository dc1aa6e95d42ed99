import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';

import { dossierFiles } from '../../src/dossier/dossier-files.js';
import { elementsTable } from '../../src/dossier/elements-table.js';
import { solutionJson, stableJson } from '../../src/dossier/json.js';
import { modelGrid, modelTable } from '../../src/dossier/model-table.js';
import { residualsTable } from '../../src/dossier/residuals-table.js';
import type { Solved } from '../../src/solving/types.js';
import { solvedFixture } from '../support/solved-record-fixture.js';

type Row = Record<string, string>;

function rowsOf(text: string): Row[] {
  return parse(text, { columns: true });
}

describe('elements.csv', () => {
  it('holds every number of the record as the same double, with unit and reason', () => {
    const solved = solvedFixture();
    const rows = new Map(rowsOf(elementsTable(solved.record)).map((row) => [row['name'], row]));
    const period = rows.get('companions.b.period')!;
    expect(Number(period['value'])).toBe(41.6321);
    expect(Number(period['lower'])).toBe(solved.record.companions[0]!.elements.period.lower);
    expect(period['unit']).toBe('d');
    expect(rows.get('companions.b.mass')).toMatchObject({ value: '', note: 'the inclination is not known' });
    expect(rows.get('drift.curvature')).toMatchObject({ value: '0', note: 'fixed' });
    expect(rows.has('instruments.south.jitter')).toBe(true);
  });
});

describe('residuals.csv', () => {
  it('gives back the velocities, and model plus residual is the velocity', () => {
    const rows = rowsOf(residualsTable(solvedFixture()));
    expect(rows.map((row) => row['velocity_mps'])).toEqual(['10.5', '-3.25', '46309.2', '1']);
    for (const row of rows) {
      const sum = Number(row['model_mps']) + Number(row['residual_mps']);
      // Three numbers rounded to 1e-6 m/s each.
      expect(Math.abs(sum - Number(row['velocity_mps']))).toBeLessThan(2e-6);
    }
    expect(rows.map((row) => row['line'])).toEqual(['2', '3', '4', '9']);
    expect(rows[0]).toMatchObject({ instrument: 'north', file: 'north.csv' });
  });

  it('disarms instruments and files that a spreadsheet would run', () => {
    const rows = rowsOf(residualsTable(solvedFixture({ names: ['=cmd()', '@x'], path: '+a,"b".csv' })));
    expect(rows[0]).toMatchObject({ instrument: "'=cmd()", file: '\'+a,"b".csv' });
  });
});

/** Kepler's equation by bisection and the definition of the velocity: slow, and independent of the program's solver. */
function velocityByBisection(orbit: Solved['best']['companions'][number], time: number): number {
  const { eccentricity: e } = orbit;
  const revolutions = (time - orbit.timePeriastronBjdTdb) / orbit.periodDays;
  const mean = 2 * Math.PI * (revolutions - Math.floor(revolutions));
  let [low, high] = [0, 2 * Math.PI];
  for (let step = 0; step < 80; step += 1) {
    const middle = (low + high) / 2;
    if (middle - e * Math.sin(middle) > mean) high = middle;
    else low = middle;
  }
  const anomaly = 2 * Math.atan2(Math.sqrt(1 + e) * Math.sin(low / 2), Math.sqrt(1 - e) * Math.cos(low / 2));
  const { argPeriastronStarRad: omega } = orbit;
  return orbit.semiAmplitudeMps * (Math.cos(anomaly + omega) + e * Math.cos(omega));
}

describe('model.csv', () => {
  it('covers the data, rises strictly in time, and its parts add up', () => {
    const solved = solvedFixture();
    const rows = rowsOf(modelTable(solved));
    const times = rows.map((row) => Number(row['time_days']));
    expect(times[0]!).toBeLessThan(2459910.25);
    expect(times.at(-1)!).toBeGreaterThan(2460400.125);
    for (let row = 1; row < times.length; row += 1) expect(times[row]!).toBeGreaterThan(times[row - 1]!);
    for (const row of rows) {
      const sum = Number(row['drift_mps']) + Number(row['companion_b_mps']);
      expect(Math.abs(sum - Number(row['model_mps']))).toBeLessThan(2e-4); // three numbers rounded to 1e-4 m/s
    }
  });

  it('agrees with the definition of the velocity, Kepler’s equation solved by bisection', () => {
    const solved = solvedFixture();
    const [orbit] = solved.best.companions;
    for (const row of rowsOf(modelTable(solved))) {
      const want = velocityByBisection(orbit!, Number(row['time_days']));
      expect(Math.abs(Number(row['companion_b_mps']) - want)).toBeLessThan(1e-4); // written to 1e-4 m/s
    }
  });

  it.each([0, 0.35, 0.93])('is fine enough to be joined by straight lines (e = %d)', (eccentricity) => {
    const base = solvedFixture();
    const orbit = { ...base.best.companions[0]!, eccentricity };
    const solved: Solved = { ...base, best: { ...base.best, companions: [orbit] } };
    const { timesBjdTdb } = modelGrid(solved);
    let worst = 0;
    for (let row = 1; row < timesBjdTdb.length; row += 1) {
      const [from, to] = [timesBjdTdb[row - 1]!, timesBjdTdb[row]!];
      const chord = (velocityByBisection(orbit, from) + velocityByBisection(orbit, to)) / 2;
      worst = Math.max(worst, Math.abs(velocityByBisection(orbit, (from + to) / 2) - chord));
    }
    expect(worst / orbit.semiAmplitudeMps).toBeLessThan(0.005); // half a percent of K is thinner than a line of a chart
  });

  it('stays bounded for periods far shorter than the span, and says so', () => {
    const base = solvedFixture();
    const orbit = { ...base.best.companions[0]!, periodDays: 0.3 };
    const grid = modelGrid({ ...base, best: { ...base.best, companions: [orbit] } });
    expect(grid.whole).toBe(false);
    expect(grid.timesBjdTdb.length).toBeLessThan(21_000);
    expect(modelGrid(base).whole).toBe(true);
  });
});

describe('solution.json', () => {
  it('reads back as the record, keys in their order', () => {
    const { record } = solvedFixture();
    const text = solutionJson(record);
    expect(JSON.parse(text)).toEqual(record);
    expect(
      text.startsWith('{\n  "schema": "tugline/solution",\n  "version": 1,\n  "target": "Vellamo"'),
    ).toBe(true);
    expect(text.endsWith('}\n')).toBe(true);
  });

  it('refuses a not-a-number instead of turning it into null', () => {
    expect(() => stableJson({ period: Number.NaN })).toThrow(/period is NaN/);
    expect(() => stableJson([{ rms: Number.POSITIVE_INFINITY }])).toThrow(/rms/);
  });

  it('writes typed arrays as lists', () => {
    expect(JSON.parse(stableJson({ times: Float64Array.from([1, 2]) }))).toEqual({ times: [1, 2] });
  });
});

describe('dossierFiles', () => {
  const chart = { name: 'velocities.png', bytes: Uint8Array.from([1, 2]), caption: 'velocities' };
  const facts = (date: string) => () => ({
    date,
    durationSeconds: 1,
    machine: { system: 'linux', architecture: 'x64', processors: 2 },
  });

  it('gives the same bytes for the same solution in every file but run.json', () => {
    const first = dossierFiles(solvedFixture(), [chart], facts('2030-01-01T00:00:00.000Z'));
    const second = dossierFiles(solvedFixture(), [chart], facts('2031-01-01T00:00:00.000Z'));
    const differing = first.filter(
      (file, index) => file.bytes.toString() !== second[index]!.bytes.toString(),
    );
    expect(differing.map((file) => file.name)).toEqual(['run.json']);
  });

  it('lists in run.json exactly what else is in the folder', () => {
    const files = dossierFiles(solvedFixture(), [chart], facts('2030-01-01T00:00:00.000Z'));
    const run = JSON.parse(String(files.find((file) => file.name === 'run.json')!.bytes)) as {
      files: string[];
    };
    expect([...run.files, 'run.json'].sort()).toEqual(files.map((file) => file.name).sort());
  });
});
