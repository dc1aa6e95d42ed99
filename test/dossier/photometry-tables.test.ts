import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';

import { dossierFiles } from '../../src/dossier/dossier-files.js';
import { elementsTable } from '../../src/dossier/elements-table.js';
import { lightCurveTable } from '../../src/dossier/light-curve-table.js';
import { midTimesTable } from '../../src/dossier/mid-times-table.js';
import { makePhotometrySolved } from '../support/photometry-fixture.js';
import { solvedFixture } from '../support/solved-record-fixture.js';

type Row = Record<string, string>;

function rowsOf(text: string): Row[] {
  return parse(text, { columns: true });
}

const together = makePhotometrySolved({ companions: 2, cadenceMinutes: 10 });
const lightOnly = makePhotometrySolved({ velocities: false, cadenceMinutes: 10 });

describe('light-curve.csv', () => {
  const rows = rowsOf(lightCurveTable(together.photometry!));

  it('has one row per point of the fit, and baseline times transit plus residual is the flux', () => {
    const points = together.photometry!.fitted.reduce((sum, { flux }) => sum + flux.length, 0);
    expect(rows).toHaveLength(points);
    for (const row of rows) {
      const model = Number(row['baseline']) * Number(row['transit_model']);
      // Four numbers rounded to 1e-9.
      expect(Math.abs(model + Number(row['residual']) - Number(row['flux']))).toBeLessThan(2.1e-9);
    }
  });

  it('keeps the times to the last bit and names table, band and cycles', () => {
    const first = together.photometry!.fitted[0]!;
    expect(Number(rows[0]!['time_days'])).toBe(first.timesBjdTdb[0]);
    expect(rows[0]).toMatchObject({ table: 'Moor survey', band: 'wide', cycle: 'b 0' });
    expect(rows.at(-1)).toMatchObject({ table: 'Lake dome', band: 'i' });
    const shared = rows.find((row) => row['cycle']!.includes(';'));
    expect(shared!['cycle']).toMatch(/^[bc] \d+; [bc] \d+$/);
  });

  it('disarms names that a spreadsheet would run', () => {
    const hostile = makePhotometrySolved({ names: ['=1+1', '@x', '-y', '+z'], bands: ['=b', 'r', 'i'], cadenceMinutes: 30 }); // prettier-ignore
    expect(rowsOf(lightCurveTable(hostile.photometry!))[0]).toMatchObject({ table: "'=1+1", band: "'=b" });
    expect(rowsOf(midTimesTable(hostile.photometry!))[0]).toMatchObject({ source: "'+z" });
  });
});

describe('mid-times.csv', () => {
  const rows = rowsOf(midTimesTable(together.photometry!));

  it('has one row per mid-time, transits and occultations told apart', () => {
    const times = together.photometry!.midTimes;
    expect(rows).toHaveLength(times.reduce((sum, { cycles }) => sum + cycles.length, 0));
    expect(rows.filter((row) => row['kind'] === 'occultation')).toHaveLength(6);
    expect(rows[0]).toMatchObject({ companion: 'b', cycle: '-620', kind: 'transit', source: 'old records' });
    expect(Number(rows[0]!['time_days'])).toBe(times[0]!.timesBjdTdb[0]);
    expect(Number(rows[0]!['o_minus_c_min'])).toBeCloseTo(times[0]!.oMinusCMinutes[0]!, 6);
  });
});

describe('elements.csv', () => {
  it('has the elements of transits and what belongs to bands, light curves and events', () => {
    const rows = new Map(rowsOf(elementsTable(together.record)).map((row) => [row['name'], row]));
    expect(Number(rows.get('companions.b.radiusRatio')!['value'])).toBe(0.095);
    expect(rows.get('companions.c.midTransitDepth')!['unit']).toBe('ppm');
    expect(Number(rows.get('photometry.bands.r.u1')!['value'])).toBe(0.45);
    expect(rows.has('photometry.lightCurves.Lake dome.correlatedNoise.timescale')).toBe(true);
    expect(rows.has('photometry.events.b.Hill telescope.12.midTime')).toBe(true);
    expect(rows.get('photometry.starDensity')!['unit']).toBe('g/cm3');
    expect(rows.has('drift.slope')).toBe(true);
  });

  it('has no drift without velocities, and says why an amplitude is missing', () => {
    const rows = new Map(rowsOf(elementsTable(lightOnly.record)).map((row) => [row['name'], row]));
    expect(rows.has('drift.slope')).toBe(false);
    expect(rows.get('companions.b.semiAmplitude')).toMatchObject({
      value: '',
      note: 'there are no velocities',
    });
  });
});

describe('the files of a dossier', () => {
  const facts = () => ({
    date: '2030-01-01T00:00:00.000Z',
    durationSeconds: 1,
    machine: { system: 'linux', architecture: 'x64', processors: 2 },
  });
  const names = (solved: Parameters<typeof dossierFiles>[0]): string[] =>
    dossierFiles(solved, [], facts).map(({ name }) => name);

  it('follow what was observed', () => {
    expect(names(together)).toEqual(expect.arrayContaining(['residuals.csv', 'model.csv', 'light-curve.csv', 'mid-times.csv'])); // prettier-ignore
    expect(names(lightOnly)).not.toContain('residuals.csv');
    expect(names(lightOnly)).not.toContain('model.csv');
    expect(names(lightOnly)).toContain('light-curve.csv');
    expect(names(solvedFixture())).toEqual(['solution.json', 'elements.csv', 'residuals.csv', 'model.csv', 'report.md', 'run.json']); // prettier-ignore
  });
});
