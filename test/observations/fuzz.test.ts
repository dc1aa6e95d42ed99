import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputDataError } from '../../src/errors.js';
import { combineTables, describeTable } from '../../src/observations/index.js';
import { caseOf, read } from './helpers.js';

/** Runs `work`; anything thrown but an InputDataError with at least one problem is a defect. */
function onlyInputErrors<T>(work: () => T): T | null {
  try {
    return work();
  } catch (error) {
    if (
      error instanceof InputDataError &&
      error.issues.length > 0 &&
      error.issues.every((issue) => issue.message !== '')
    )
      return null;
    throw error;
  }
}

const number = fc.oneof(
  fc.double(),
  fc.integer({ min: 2458000, max: 2460000 }),
  fc.double({ min: -1e4, max: 1e4, noNaN: true }),
);
const cell = fc.oneof(
  { weight: 6, arbitrary: number.map(String) },
  fc.string({ maxLength: 6 }),
  fc.constantFrom(
    '',
    'NaN',
    '-',
    '1,5',
    '"',
    '#',
    '"a;b"',
    '\u0000',
    '\u001b[2J',
    '<script>',
    '../',
    '1D5',
    '−3',
  ),
);
const label = fc.oneof(
  fc.constantFrom(
    'BJD',
    'BJD_TDB - 2450000',
    'RV',
    'RV (km/s)',
    'e_RV',
    'err',
    'inst',
    'flag',
    'use',
    'MJD',
    't',
    '(',
    '-',
    '2450000',
  ),
  fc.string({ maxLength: 8 }),
);
const tableText = fc
  .tuple(
    fc.constantFrom(',', ';', '\t', ' ', '  '),
    fc.option(fc.array(label, { maxLength: 6 })),
    fc.array(fc.array(cell, { minLength: 1, maxLength: 6 }), { maxLength: 12 }),
    fc.constantFrom('\n', '\r\n', '\r'),
    fc.option(fc.string({ maxLength: 30 })),
  )
  .map(([separator, header, rows, end, comment]) =>
    [
      ...(comment === null ? [] : [`# ${comment}`]),
      ...(header === null ? [] : [header.join(separator)]),
      ...rows.map((row) => row.join(separator)),
    ].join(end),
  );

describe('any text', () => {
  it('is a table or a list of problems, never anything else', () => {
    fc.assert(
      fc.property(
        fc.oneof(
          { weight: 4, arbitrary: tableText },
          fc.string({ maxLength: 300 }),
          fc.string({ unit: 'binary', maxLength: 200 }),
        ),
        (text) => {
          const table = onlyInputErrors(() => read(text));
          if (table === null) return;
          for (const values of [table.timesBjdTdb, table.velocitiesMps, table.sigmasMps]) {
            expect(values).toHaveLength(table.used);
            expect(values.every(Number.isFinite)).toBe(true);
          }
          expect(table.sigmasMps.every((sigma) => sigma > 0)).toBe(true);
          expect(table.instrumentOf.every((index) => index < table.instruments.length)).toBe(true);
          expect(describeTable(table).used).toBe(table.used);
          const set = onlyInputErrors(() => combineTables([table]));
          if (set !== null)
            expect(set.timesBjdTdb.every((time, row) => row === 0 || time >= set.timesBjdTdb[row - 1]!)).toBe(
              true,
            );
        },
      ),
      { seed: 1729, numRuns: 500 },
    );
  });

  it('a well-formed table is always read, whatever its separator, unit and order of columns', () => {
    const rows = fc.array(
      fc.tuple(
        fc.integer({ min: 0, max: 5000 }),
        fc.integer({ min: -9000, max: 9000 }),
        fc.integer({ min: 1, max: 99 }),
      ),
      { minLength: 1, maxLength: 15 },
    );
    fc.assert(
      fc.property(
        rows,
        fc.constantFrom(',', ';', '\t', '   '),
        fc.constantFrom('m/s', 'km/s'),
        fc.shuffledSubarray([0, 1, 2], { minLength: 3 }),
        (values, separator, unit, order) => {
          const labels = ['BJD_TDB', `RV(${unit})`, `e_RV(${unit})`];
          const cells = values.map(([t, v, e]) => [String(2455000.25 + t), `${v}.5`, `${e}.25`]);
          const text = [labels, ...cells]
            .map((row) => order.map((index) => row[index]!).join(separator))
            .join('\n');
          const table = read(text);
          const factor = unit === 'km/s' ? 1000 : 1;
          expect([...table.timesBjdTdb]).toEqual(values.map(([t]) => 2455000.25 + t));
          expect([...table.velocitiesMps]).toEqual(values.map(([, v]) => Number(`${v}.5`) * factor));
          expect([...table.sigmasMps]).toEqual(values.map(([, , e]) => (e + 0.25) * factor));
        },
      ),
      { seed: 4104, numRuns: 200 },
    );
  });

  it('is a case or a list of problems, never anything else', () => {
    const scalar = fc.oneof(
      fc.string({ maxLength: 12 }), fc.integer(), fc.double(), fc.boolean(), fc.constant(null),
      fc.constantFrom('auto', '1 .. 2 d', '0.9 +- 0.1', '0.9 ± 0.1 M_sun', 'BJD_TDB', 'north.csv', '../x', '*a', '&a', '-1'),
    ); // prettier-ignore
    const key = fc.constantFrom(
      'target',
      'star',
      'mass',
      'tables',
      'file',
      'columns',
      'companions',
      'period',
      'eccentricity',
      'letter',
      'drift',
      'circular',
      'instruments',
      'north',
      'search',
      'mock',
      'site',
      '__proto__',
      'constructor',
      'x',
    );
    const { tree } = fc.letrec((tie) => ({
      tree: fc.oneof(
        { maxDepth: 4 },
        scalar,
        fc.array(tie('tree'), { maxLength: 4 }),
        fc.dictionary(key, tie('tree'), { maxKeys: 6 }),
      ),
    }));
    const json = fc
      .record(
        { target: tree, tables: tree, companions: tree, star: tree, mock: tree, instruments: tree },
        { requiredKeys: [] },
      )
      .map((value) => JSON.stringify(value));
    const loose = fc.array(fc.tuple(fc.nat({ max: 4 }), key, fc.oneof(scalar.map(String), fc.constantFrom('', '[', '{', '|', '>', '!!set', '- a'))), { maxLength: 12 })
      .map((lines) => lines.map(([indent, name, value]) => `${' '.repeat(indent)}${name}: ${value}`).join('\n')); // prettier-ignore
    fc.assert(
      fc.property(
        fc.oneof(json, loose, fc.string({ maxLength: 200 }), fc.string({ unit: 'binary', maxLength: 100 })),
        (text) => {
          const read1 = onlyInputErrors(() => caseOf(text));
          if (read1 !== null) expect(read1.target).not.toBe('');
        },
      ),
      { seed: 271828, numRuns: 500 },
    );
  });
});
