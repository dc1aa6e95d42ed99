import { describe, expect, it } from 'vitest';
import { expectWithin } from '../support/expect-within.js';
import { notice } from './helpers.js';
import { curveText, readCurve, wiggle } from './photometry-helpers.js';

const rounding = { abs: 1e-12, unit: 'relative flux', why: 'a few roundings' };

describe('from the file to relative flux', () => {
  it('divides counts by their median and says so', () => {
    const cells = (row: number): number[] => [1e6 * (1 + wiggle(row)), 200];
    const table = readCurve(curveText({ cells }));
    expect([table.fluxUnit, table.sigmasKnown]).toEqual(['counts', 'column']);
    expect(notice(table, 'normalised')?.message).toContain('median');
    // wiggle has as many rows at 0 and 1e-4 in its middle: the median of the whole is 1.00005.
    expectWithin(table.normalisation, 1000050, {
      abs: 1e-6,
      unit: 'counts',
      why: 'rounding of the sum of two counts',
    });
    expectWithin(table.flux[1]!, 1.0003 / 1.00005, rounding);
    expectWithin(table.sigmas[0]!, 2e-4 / 1.00005, rounding);
  });

  it('turns magnitudes into flux with errors of 0.921 sigma F', () => {
    const magnitudes = [12, 12, 12, 12 + 2.5 * Math.log10(2), 12 - 2.5 * Math.log10(1.5)];
    const table = readCurve(curveText({ header: 'BJD_TDB,mag,err\n', rows: 5, cells: (row) => [magnitudes[row]!, 0.01] })); // prettier-ignore
    for (const [row, flux] of [1, 1, 1, 0.5, 1.5].entries()) {
      expectWithin(table.flux[row]!, flux, rounding);
      expectWithin(table.sigmas[row]!, 0.9210340371976184 * 0.01 * flux, rounding); // 0.4 ln 10
    }
    expect([table.normalisation, table.fluxUnit]).toEqual([12, 'magnitude']);
  });

  it('reads differential magnitudes and mmag', () => {
    const milli = readCurve(curveText({ header: 'BJD_TDB,dmag (mmag),err (mmag)\n', rows: 3, cells: (row) => [[-1, 0, 1][row]!, 1] })); // prettier-ignore
    expectWithin(milli.flux[2]!, 10 ** -0.0004, rounding);
    expectWithin(milli.sigmas[1]!, 0.000921034037197618, rounding);
  });

  it.each([
    ['flux_err (ppm)', 200],
    ['flux_err (%)', 0.02],
    ['flux_err (mmag)', 0.2 / 0.921034037197618],
    ['flux_err (relative)', 2e-4],
  ])('reads errors of counts in %s', (label, error) => {
    const cells = (row: number): number[] => [5e5 * (1 + wiggle(row)), error];
    const table = readCurve(curveText({ header: `BJD_TDB,flux (e-/s),${label}\n`, cells }));
    expectWithin(table.sigmas[0]!, 2e-4, { rel: 1e-12, unit: 'relative flux', why: 'a few roundings' });
  });

  it('reads deviations in ppm', () => {
    const table = readCurve(curveText({ header: 'BJD_TDB,flux (ppm),err (ppm)\n', rows: 3, cells: (row) => [[-500, 0, 250][row]!, 100] })); // prettier-ignore
    expect([...table.flux].map((flux) => Number(flux.toFixed(9)))).toEqual([0.9995, 1, 1.00025]);
    expectWithin(table.sigmas[0]!, 1e-4, rounding);
  });

  it('takes the scatter from row to row where there are no errors', () => {
    // Alternating by 2 s: every difference is 2 s, so the robust scatter is 1.4826 * 2 s / sqrt 2.
    const table = readCurve(curveText({ header: 'BJD_TDB,flux\n', cells: (row) => [row % 2 === 0 ? 0.9995 : 1.0005] })); // prettier-ignore
    expect(table.sigmasKnown).toBe('scatter');
    expectWithin(table.sigmas[7]!, (1.4826 * 0.001) / Math.SQRT2, { rel: 1e-9, unit: 'relative flux', why: 'rounding of differences near 1' }); // prettier-ignore
    expect(notice(table, 'errors-from-scatter')?.message).toContain('1048 ppm');
  });

  it('sorts by time, keeps the line of each row, and counts the steps back', () => {
    const text = 'BJD_TDB,flux,err\n2459000.7,1.003,0.001\n2459000.5,1.001,0.001\n2459000.6,1.002,0.001\n';
    const table = readCurve(text);
    expect([...table.lines]).toEqual([3, 4, 2]);
    expect([...table.timesBjdTdb]).toEqual([2459000.5, 2459000.6, 2459000.7]);
    expect(notice(table, 'unsorted')).toBeDefined();
  });

  it('leaves flagged rows out, skips gaps, and counts both', () => {
    const text = 'BJD_TDB,flux,err,quality\n2459000.5,1.001,0.001,0\n2459000.6,NaN,NaN,0\n2459000.7,1.002,0.001,128\n2459000.8,,,0\n2459000.9,1,0.001,0\n2459000.95,abc,0.001,4\n'; // prettier-ignore
    const table = readCurve(text);
    expect([table.rows, table.used]).toEqual([6, 2]);
    expect(notice(table, 'flagged-rows')?.lines).toEqual([4, 7]);
    expect(notice(table, 'gap-rows')?.lines).toEqual([3, 5]);
  });

  it('knows a column of rows to use', () => {
    const table = readCurve(
      'BJD_TDB,flux,err,use\n2459000.5,1,0.1,1\n2459000.6,1,0.1,0\n2459000.7,1.1,0.1,1\n',
    );
    expect([...table.lines]).toEqual([2, 4]);
  });

  it.each(['quality', 'flag', 'image_quality', 'dq_flag', 'quality flag'])(
    'obeys the flags of %s',
    (label) => {
      const text = `BJD_TDB,flux,err,${label}\n2459000.5,1,0.1,0\n2459000.6,1.2,0.1,64\n2459000.7,1.1,0.1,0\n`;
      expect([...readCurve(text).lines]).toEqual([2, 4]);
    },
  );

  it('takes the scatter where the column of errors is empty', () => {
    const table = readCurve(curveText({ cells: (row) => [1 + wiggle(row), ''] }));
    expect([table.sigmasKnown, notice(table, 'errors-empty') !== undefined]).toEqual(['scatter', true]);
  });

  it('names repeated times with their lines', () => {
    const table = readCurve('BJD_TDB,flux,err\n2459000.5,1,0.1\n2459000.6,1,0.1\n2459000.6,1.01,0.1\n');
    expect(notice(table, 'repeated-time')?.lines).toEqual([4]);
  });
});
