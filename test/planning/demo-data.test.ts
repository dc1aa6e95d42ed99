import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { readCase } from '../../src/observations/case-reader.js';
import { readTables } from '../../src/observations/table-reader.js';
import { simulateObservations } from '../../src/planning/mock.js';

const inFolder = (file: string): string =>
  fileURLToPath(new URL(`../../data-samples/${file}`, import.meta.url));

describe('the demonstration data', () => {
  test.each(['vellamo.yaml', 'kaksonen.yaml'])(
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
});
