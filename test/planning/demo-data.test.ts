import { readdirSync, readFileSync, statSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { readAnyTable } from '../../src/observations/any-table.js';
import { readCase } from '../../src/observations/case-reader.js';
import { readTables } from '../../src/observations/table-reader.js';
import { simulateObservations } from '../../src/planning/mock.js';
import { expectWithin } from '../support/expect-within.js';

const inFolder = (file: string): string =>
  fileURLToPath(new URL(`../../data-samples/${file}`, import.meta.url));

describe('the demonstration data', () => {
  test.each(['vellamo.yaml', 'kaksonen.yaml', 'lainehtar.yaml'])(
    '%s: the tables are what mock makes of it with seed 1, byte for byte',
    async (file) => {
      const { mock, tables } = await readCase(inFolder(file));
      const made = simulateObservations(mock!, 1, file);
      expect(made.map(({ fileName }) => inFolder(fileName))).toEqual(tables.map(({ path }) => path));
      for (const { fileName, text } of made) expect(text).toBe(readFileSync(inFolder(fileName), 'utf8'));
    },
  );

  test.each(['vellamo.yaml', 'kaksonen.yaml'])(
    '%s: the tables are read as what they are, without a notice',
    async (file) => {
      const { mock, tables } = await readCase(inFolder(file));
      const read = await readTables(tables);
      for (const [index, table] of read.entries()) {
        const { name, unit, count, zeroPointMps } = mock!.instruments[index]!;
        expect(table).toMatchObject({
          used: count,
          timeScale: 'BJD_TDB',
          timeOffsetDays: 0,
          velocityUnit: unit,
        });
        expect(table.instruments).toEqual([name]);
        expect(table.notices).toEqual([]);
        // no companion of the samples moves its star by more than 60 m/s
        for (const velocity of table.velocitiesMps)
          expect(Math.abs(velocity - zeroPointMps)).toBeLessThan(100);
      }
    },
  );

  test('lainehtar.yaml: velocities, light curves and mid-times are read as what they are', async () => {
    const { mock, tables } = await readCase(inFolder('lainehtar.yaml'));
    const read = await Promise.all(tables.map(readAnyTable));
    expect(read.map(({ content }) => content)).toEqual([
      'velocities', 'velocities', 'light curve', 'light curve', 'light curve', 'mid-times',
    ]); // prettier-ignore
    const notices = read.map((table) => table.notices.map(({ code }) => code));
    expect(notices).toEqual([[], [], ['flagged-rows', 'normalised'], [], [], []]);
    const curves = read.filter((table) => table.content === 'light curve');
    for (const [index, curve] of curves.entries()) {
      const planned = mock!.photometry!.lightCurves[index]!;
      expect(curve).toMatchObject({ band: planned.band, exposureKnown: 'stated', timeScale: 'BJD_TDB' });
      expectWithin(curve.exposureDays, planned.exposureDays, { rel: 1e-12, unit: 'd', why: 'rounding' });
    }
    expect([...curves[1]!.regressors.keys()]).toEqual(['airmass', 'x', 'y', 'width']);
  });

  test('the samples are small', () => {
    const folder = inFolder('');
    const bytes = readdirSync(folder).reduce((sum, name) => sum + statSync(folder + name).size, 0);
    expect(bytes).toBeLessThan(1e6);
  });
});
