import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputDataError } from '../../src/errors.js';
import { quickNumber } from '../../src/observations/quick-number.js';
import { brief, notice } from './helpers.js';
import { anyIssues, curveText, readAny, readCurve, wiggle } from './photometry-helpers.js';

const codes = (text: string, declared: Parameters<typeof anyIssues>[1] = {}): string[] =>
  anyIssues(text, declared).map((issue) => issue.code);

describe('bad light curves: clear words, file and line', () => {
  it('names line, place and label of each bad cell', () => {
    const text = 'BJD_TDB,flux,flux_err\n2459000.5,abc,0.001\n2459000.6,1.01,-0.001\n2459000.7,1,0\n2459000.8,inf,0.001\n2459000.9,1\n2020-01-01,1,0.001\n2459001.1,1.02,0.001\n'; // prettier-ignore
    expect(brief(anyIssues(text))).toEqual([
      '2:11 not-a-number flux',
      '3:16 non-positive-error flux_err',
      '4:13 non-positive-error flux_err',
      '5:11 not-finite flux',
      '6:- ragged-row -',
      '7:1 not-a-number BJD_TDB',
    ]);
    expect(anyIssues(text).every((issue) => issue.file === 'harbour.csv')).toBe(true);
  });

  it('asks for the unit when a flux looks like magnitudes', () => {
    const cells = (row: number): number[] => [12.3 + wiggle(row), 0.001];
    const text = curveText({ cells });
    expect(codes(text)).toEqual(['looks-like-magnitudes']);
    expect(anyIssues(text)[0]!.hint).toContain('mag');
    expect(codes(text, { lightCurve: { fluxUnit: 'relative' } })).toEqual(['looks-like-magnitudes']);
    expect(readCurve(text, { lightCurve: { fluxUnit: 'counts' } }).fluxUnit).toBe('counts');
    expect(readCurve(text, { lightCurve: { fluxUnit: 'mag' } }).fluxUnit).toBe('magnitude');
  });

  it('refuses magnitudes that are none', () => {
    expect(codes(curveText({ header: 'BJD_TDB,mag,err\n', cells: (row) => [1e5 + row, 200] }))).toEqual(['not-magnitudes']); // prettier-ignore
  });

  it('refuses a flux around zero', () => {
    const cells = (row: number): number[] => [wiggle(row), 1e-4];
    expect(codes(curveText({ cells }))).toEqual(['not-normalisable']);
    expect(anyIssues(curveText({ cells }))[0]!.hint).toContain('ppm');
  });

  it('says when every row is flagged, or left without numbers', () => {
    const header = 'BJD_TDB,flux,flux_err,quality\n';
    const [all] = anyIssues(curveText({ header, cells: (row) => [1 + wiggle(row), 2e-4, 16] }));
    expect([all!.code, all!.message]).toEqual([
      'no-rows-left',
      expect.stringContaining('every row is flagged'),
    ]);
    expect(codes(curveText({ header, cells: () => ['NaN', 'NaN', 0] }))).toEqual(['no-rows-left']);
  });

  it.each([
    ['ppm errors beside counts', 1e6, 200],
    ['relative errors beside counts', 1e6, 2e-4],
    ['errors 1000 times too small', 1, 2e-7],
    ['errors 1000 times too large', 1, 0.2],
  ])('notices errors in another unit: %s', (_, level, error) => {
    const table = readCurve(curveText({ cells: (row) => [level * (1 + wiggle(row)), error] }));
    const found = notice(table, 'error-unit');
    // 200 counts of 10^6 are the scatter of these rows: no notice there.
    expect(found !== undefined).toBe(error !== 200);
  });

  it('cannot take errors from too few rows, or from rows that repeat', () => {
    expect(codes('BJD_TDB,flux\n2459000.5,1\n2459000.6,1.01\n')).toEqual(['errors-missing']);
    expect(codes(curveText({ header: 'BJD_TDB,flux\n', cells: () => [1] }))).toEqual(['errors-missing']);
  });

  it('refuses several bands in one table', () => {
    const header = 'BJD_TDB,flux,flux_err,band\n';
    const cells = (row: number): (number | string)[] => [1 + wiggle(row), 2e-4, row % 2 === 0 ? 'R' : 'I'];
    expect(codes(curveText({ header, cells }))).toEqual(['several-bands']);
  });

  it('names a regressor that the table does not have, and the one that was meant', () => {
    const header = 'BJD_TDB,flux,flux_err,airmass\n';
    const text = curveText({ header, cells: (row) => [1 + wiggle(row), 2e-4, 1 + 0.01 * row] });
    const [issue] = anyIssues(text, { lightCurve: { baseline: ['airmas'] } });
    expect([issue!.code, issue!.hint]).toEqual(['unknown-regressor', 'did you mean "airmass"?']);
  });

  it('asks what a table holds rather than guess', () => {
    expect(codes(curveText({ header: '', step: 3 }))).toEqual(['content-unclear']); // near 1, or km/s
    expect(codes(curveText({ header: '', cells: (row) => [12 + wiggle(row), 0.002] }))).toEqual([
      'content-unclear',
    ]);
    expect(codes('alpha,beta,gamma\n2459000.5,1,2\n2459001.5,2,2\n')).toEqual(['content-unclear']);
    expect(codes('BJD,RV,e_RV,flux,e_flux\n2459000.5,1,2,3,4\n')).toEqual(['content-unclear']);
    expect(anyIssues('alpha,beta,gamma\n2459000.5,1,2\n')[0]!.hint).toContain('--holds');
  });

  it('refuses columns that such a table does not have, and says when a choice is not used', () => {
    expect(codes(curveText(), { holds: 'light curve', columns: { cycle: '1' } })).toEqual(['column-meaning']);
    const velocities = readAny('BJD,RV,err\n2459000.5,1,2\n2459001.5,3,4\n', {
      lightCurve: { exposureDays: 0.001 },
    });
    expect(notice(velocities, 'choice-not-used')?.message).toContain('exposure');
  });

  it('names mistyped dates, jumps, and rows without light', () => {
    const dates = 'BJD_TDB,flux,err\n2459000.5,1,0.1\n9000.6,1,0.1\n2459000.7,1.01,0.1\n';
    expect(brief(anyIssues(dates))).toEqual(['3:- impossible-span time']);
    const jump = readCurve('BJD_TDB,flux,err\n2455000.5,1,0.1\n2459000.6,1.01,0.1\n2459000.7,0.99,0.1\n');
    expect(notice(jump, 'time-jump')?.lines).toEqual([3]);
    const dark = readCurve(curveText({ cells: (row) => [row === 5 ? 0 : 1 + wiggle(row), 2e-4] }));
    expect(notice(dark, 'outlier')?.lines).toEqual([7]);
  });

  it('counts what it does not name', () => {
    const many = anyIssues(curveText({ rows: 5000, cells: () => ['x', 0.001] }));
    expect(many).toHaveLength(30);
    const negative = anyIssues(curveText({ rows: 5000, cells: (row) => [1 + wiggle(row), -1] }));
    expect(negative.map((issue) => issue.message)).toContain(
      '4970 further rows have an error of zero or below',
    );
    const text = `${curveText({ rows: 500 })}${'only,two\n'.repeat(2000)}`;
    expect(anyIssues(text).some((issue) => issue.code === 'not-a-table')).toBe(true);
  });

  it('reads a table of 300000 rows, more than a table of velocities may have', () => {
    const table = readCurve(curveText({ rows: 300_000, step: 1e-3 }));
    expect([table.used, table.lines.at(-1)]).toEqual([300_000, 300_001]);
  });
});

describe('quickNumber', () => {
  it('is the number that the language reads, or NaN', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.nat(12), (value, digits) => {
        for (const text of [String(value), value.toExponential(digits), value.toFixed(Math.min(digits, 9))]) {
          const quick = quickNumber(`<${text}>`, 1, 1 + text.length);
          if (!Number.isNaN(quick)) expect(quick).toBe(Number(text));
        }
      }),
      { seed: 7, numRuns: 2000 },
    );
  });

  it.each(['12.5', '-3', '+.5', '2459000.12345678', '1e-3', '1.5D+03', '007', '120.52893910', '0.000', '-0'])(
    'reads %s',
    (text) => {
      expect(quickNumber(text, 0, text.length)).toBe(Number(text.replace('D', 'e')));
    },
  );

  it.each([
    '',
    '-',
    '.',
    'abc',
    '1,5',
    '1.2.3',
    '1e',
    '1e1.5',
    '0x10',
    '1 2',
    'NaN',
    '12345678901234567890',
    '1e400',
  ])('leaves "%s" to a closer look', (text) => {
    expect(quickNumber(text, 0, text.length)).toBeNaN();
  });
});

describe('whatever a file holds', () => {
  const cell = fc.oneof(
    { weight: 4, arbitrary: fc.double({ noNaN: true }).map(String) },
    { weight: 3, arbitrary: fc.integer({ min: 2459000, max: 2459100 }).map(String) },
    fc.string({ maxLength: 6 }),
    fc.constantFrom('', 'NaN', '1,5', '"', '#', '"a;b"', '\u0000', '\u001b[2J', '-', 'transit', '1D5'),
  );
  const label = fc.constantFrom('BJD_TDB', 'flux', 'mag', 'err', 'flux (ppm)', 'cycle', 'Tmid', 'quality', 'exposure', 'band', 'kind', 'airmass', 'O-C', 'RV', '(', ''); // prettier-ignore
  const text = fc
    .tuple(
      fc.array(label, { maxLength: 6 }),
      fc.array(fc.array(cell, { maxLength: 6 }), { maxLength: 12 }),
      fc.constantFrom(',', ';', '\t', ' '),
    ) // prettier-ignore
    .map(([head, rows, separator]) => [head, ...rows].map((cells) => cells.join(separator)).join('\n'));

  it('it is a table or a list of problems, never anything else', () => {
    const holds = fc.constantFrom(
      undefined,
      'velocities' as const,
      'light curve' as const,
      'mid-times' as const,
    );
    fc.assert(
      fc.property(text, holds, (content, declared) => {
        try {
          const table = readAny(content, declared === undefined ? {} : { holds: declared });
          expect(table.used).toBe(table.timesBjdTdb.length);
          expect(table.used).toBeGreaterThan(0);
          if (table.content === 'light curve') {
            expect([...table.flux, ...table.sigmas].every(Number.isFinite)).toBe(true);
            expect(table.sigmas.every((sigma) => sigma > 0)).toBe(true);
          }
        } catch (error) {
          if (!(error instanceof InputDataError)) throw error;
          expect(error.issues.length).toBeGreaterThan(0);
        }
      }),
      { seed: 11, numRuns: 1000 },
    );
  });
});
