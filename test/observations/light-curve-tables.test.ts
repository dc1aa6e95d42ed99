import { describe, expect, it } from 'vitest';
import { expectWithin } from '../support/expect-within.js';
import { notice } from './helpers.js';
import { anyIssues, curveText, readAny, readCurve, wiggle } from './photometry-helpers.js';

const SECOND = 1 / 86_400;

describe('recognition of light curves', () => {
  it.each([
    ['BJD_TDB,flux,flux_err', 'flux', 'error'],
    ['time,relative flux,err', 'flux', 'error'],
    ['BJD,normalized_flux,sigma', 'flux', 'error'],
    ['HJD_UTC,rel_flux,uncertainty', 'flux', 'error'],
    ['t,Flux (e-/s),e_Flux (e-/s)', 'flux', 'error'],
    ['HJD,mag V,merr', 'magnitude', 'error'],
    ['BJD,Vmag,magerr', 'magnitude', 'error'],
  ])('knows %s', (header, value, error) => {
    const table = readCurve(curveText({ header: `${header}\n` }));
    expect(table.columns.map((column) => column.meaning)).toEqual(['time', value, error]);
    expect(table.used).toBe(60);
  });

  it.each(['mag', 'dmag', 'Delta mag', 'V_mag', 'magnitude', 'diff. mag', 'm (mag)', 'r-mag'])(
    'knows the magnitudes %s',
    (label) => {
      const table = readCurve(curveText({ header: `BJD_TDB,${label},err\n` }));
      expect(table.fluxUnit).toBe('magnitude');
    },
  );

  it('reads a header in a comment, with the offset of the dates in its label', () => {
    const header = '# BJD(TDB)-2450000 flux err airmass sky dx frame\n';
    const cells = (row: number): (number | string)[] =>
      [1 + wiggle(row), 2e-4, 1.1 + 0.01 * row, 500 + (row % 7), 0.1 * (row % 3), `FR${1000 + row}`]; // prettier-ignore
    const table = readCurve(curveText({ header, separator: ' ', start: 6518.25, cells }));
    expect(table.timesBjdTdb[0]).toBe(2456518.25);
    expect([table.timeScale, table.timeOffsetDays]).toEqual(['BJD_TDB', 2450000]);
    expect([...table.regressors.keys()]).toEqual(['airmass', 'sky', 'dx']);
    expect(table.columns.map((column) => column.meaning)).toEqual(['time', 'flux', 'error', 'regressor', 'regressor', 'regressor', 'kept']); // prettier-ignore
  });

  it('takes time scale, offset and exposure from a comment', () => {
    const header = '# time is BJD_TDB - 2454833, exposure 58.85 s, counts\ntime,flux,err\n';
    const table = readCurve(curveText({ header, start: 120.5 }));
    expect([table.timeScale, table.timesBjdTdb[0]]).toEqual(['BJD_TDB', 2454953.5]);
    expect(table.exposureKnown).toBe('header');
    expectWithin(table.exposureDays, 58.85 * SECOND, { abs: 1e-15, unit: 'd', why: 'one division' });
  });

  it('reads comma, semicolon, tab and blank separated rows alike, and any line end', () => {
    const header = 'BJD_TDB,flux,flux_err\n';
    const wanted = readCurve(curveText());
    for (const separator of [';', '\t', ' ', '   ']) {
      const table = readCurve(curveText({ header: header.replaceAll(',', separator), separator }));
      expect([...table.flux]).toEqual([...wanted.flux]);
    }
    for (const end of ['\r\n', '\r']) {
      const table = readCurve(`\ufeff${curveText().replaceAll('\n', end)}`);
      expect([...table.flux]).toEqual([...wanted.flux]);
      expect(table.lines[0]).toBe(2);
    }
  });

  it('understands quotation marks, trailing comments and empty last cells', () => {
    const text = 'BJD_TDB,flux,flux_err,note\n2459000.5,1.0001,0.0002,"a, b"\n2459000.6,1.0002,0.0002,c # cloudy\n2459000.7,1.0,2e-4,d,\n'; // prettier-ignore
    const table = readCurve(text);
    expect([...table.lines]).toEqual([2, 3, 4]);
  });

  it('reads a headerless table near 1 with close rows as a light curve and says why', () => {
    const table = readCurve(curveText({ header: '' }));
    expect(notice(table, 'headerless')?.message).toContain('numbers near 1');
    expect(table.columns.map((column) => column.known)).toEqual(['magnitude', 'magnitude', 'magnitude']);
    const four = readCurve(
      curveText({ header: '', cells: (row) => [1 + wiggle(row), 2e-4, 1 + 0.01 * row] }),
    );
    expect([...four.regressors.keys()]).toEqual(['column 4']);
    const bare = readCurve(curveText({ header: '', cells: (row) => [1 + wiggle(row)] }));
    expect(bare.sigmasKnown).toBe('scatter');
  });

  it('leaves headerless velocities to the reader of velocities', () => {
    expect(readAny('2459000.5,46.309,0.002\n2459003.5,46.219,0.002\n').content).toBe('velocities');
    expect(readAny('2459000.5,-33258,9\n2459001.5,-33225,9\n').content).toBe('velocities');
    // Whole numbers on a line by chance: two rows always lie on one.
    expect(readAny('2459000.5,1,0.5\n2459001.5,3,0.5\n').content).toBe('velocities');
  });

  it('keeps a table of velocities what it is when a flux or magnitude stands beside them', () => {
    expect(readAny('BJD,RV,e_RV,flux\n2459000.5,1,2,3\n2459001.5,3,4,5\n').content).toBe('velocities');
    expect(readAny('BJD,RV,e_RV,Vmag\n2459000.5,1,2,3\n2459001.5,3,4,5\n').content).toBe('velocities');
  });

  it('takes any flux where there is only one, and asks where there are two', () => {
    const header = 'time (BJD_TDB),aperture_flux,aperture_flux_err,bkg_flux\n';
    const cells = (row: number): number[] => [1 + wiggle(row), 2e-4, 0.1 * row];
    expect(readCurve(curveText({ header, cells })).columns.map((column) => column.meaning)).toEqual(['time', 'flux', 'error', 'regressor']); // prettier-ignore
    const two = curveText({
      header: 'time (BJD_TDB),small_flux,wide_flux\n',
      cells: (row) => [1 + wiggle(row), 1],
    });
    expect(anyIssues(two).map((issue) => issue.code)).toEqual(['ambiguous-column']);
  });

  it('obeys a declaration', () => {
    const far = curveText({ header: '', step: 1 });
    expect(readCurve(far, { holds: 'light curve' }).used).toBe(60);
    expect(readAny(curveText({ header: '' }), { holds: 'velocities' }).content).toBe('velocities');
    const named = readCurve(curveText({ header: 'alpha,beta,gamma\n' }), {
      columns: { time: 'alpha', flux: '2', error: 'Gamma' },
    });
    expect(named.columns.every((column) => column.known === '--columns')).toBe(true);
  });
});

describe('exposure, band, regressors', () => {
  it.each([
    ['exposure (s)', 90],
    ['exptime [min]', 1.5],
    ['exp', 90],
  ])('takes the exposure from its column %s', (label, value) => {
    const header = `BJD_TDB,flux,flux_err,${label}\n`;
    const table = readCurve(
      curveText({ header, step: 0.002, cells: (row) => [1 + wiggle(row), 2e-4, value] }),
    );
    expect(table.exposureKnown).toBe('column');
    expectWithin(table.exposureDays, 90 * SECOND, { abs: 1e-15, unit: 'd', why: 'a rounding' });
  });

  it('prefers what is stated; without any word the spacing stands for it, with a notice', () => {
    const stated = readCurve(curveText(), { lightCurve: { exposureDays: 30 * SECOND } });
    expect([stated.exposureKnown, stated.exposureDays]).toEqual(['stated', 30 * SECOND]);
    const spacing = readCurve(curveText());
    expect(spacing.exposureKnown).toBe('spacing');
    expectWithin(spacing.exposureDays, 60 * SECOND, {
      abs: 1e-8,
      unit: 'd',
      why: 'times are written with 8 decimals',
    });
    expect(notice(spacing, 'exposure-assumed')?.message).toContain('60 s');
    const alone = readCurve('BJD_TDB,flux,err\n2459000.5,1,0.1\n');
    expect([alone.exposureKnown, alone.exposureDays]).toEqual(['none', 0]);
    expect(notice(alone, 'exposure-unknown')).toBeDefined();
  });

  it('takes a point a night as instantaneous, not as exposed for a day', () => {
    const nightly = readCurve(curveText({ step: 0.9 }));
    expect([nightly.exposureKnown, nightly.exposureDays]).toEqual(['none', 0]);
    expect(notice(nightly, 'exposure-unknown')?.message).toContain('rows 0.9 d apart');
  });

  it('says that the flux is the same in every row', () => {
    expect(notice(readCurve(curveText({ cells: () => [1, 1e-3] })), 'constant-flux')).toBeDefined();
    expect(notice(readCurve(curveText()), 'constant-flux')).toBeUndefined();
  });

  it.each(['# exposure time: 30 s', '# 30 s exposures', '# exptime = 0.5 min', '# Exposure of 30 seconds'])(
    'finds the exposure in the comment %s',
    (comment) => {
      const table = readCurve(`${comment}\n${curveText()}`);
      expect(table.exposureKnown).toBe('header');
      expectWithin(table.exposureDays, 30 * SECOND, { abs: 1e-15, unit: 'd', why: 'a rounding' });
    },
  );

  it('does not choose between exposures, and says when one does not fit the rows', () => {
    const several = readCurve(`# exposure 30 s\n# exposure 60 s\n${curveText()}`);
    expect([several.exposureKnown, notice(several, 'exposure-assumed')?.message.includes('several')]).toEqual(['spacing', true]); // prettier-ignore
    expect(notice(readCurve(`# exposure 30 min\n${curveText()}`), 'exposure-too-long')).toBeDefined();
  });

  it('takes the band from the case, a column or a comment, else the name of the table', () => {
    expect(readCurve(curveText(), { lightCurve: { band: 'R' } }).band).toBe('R');
    const header = 'BJD_TDB,flux,flux_err,filter\n';
    expect(readCurve(curveText({ header, cells: (row) => [1 + wiggle(row), 2e-4, 'i'] })).band).toBe('i');
    expect(readCurve(`# filter: z\n${curveText()}`).band).toBe('z');
    const plain = readCurve(curveText(), {}, 'nights/pier-two.csv');
    expect([plain.name, plain.band]).toEqual(['pier-two', 'pier-two']);
    expect(readCurve(curveText(), { instrument: 'pier' }).name).toBe('pier');
  });

  it('offers columns of numbers as regressors, but not those with gaps, constants, errors or second fluxes', () => {
    const header = 'BJD_TDB,flux,flux_err,airmass,x,gain,e_x,raw flux,note\n';
    const cells = (row: number): (number | string)[] =>
      [1 + wiggle(row), 2e-4, 1 + 0.01 * row, row === 9 ? 'NaN' : row, 2, 0.1 * row, 5 + row, 'a']; // prettier-ignore
    const table = readCurve(curveText({ header, cells }));
    expect([...table.regressors.keys()]).toEqual(['airmass']);
    expect(notice(table, 'regressor-gaps')?.lines).toEqual([11]);
    expect(notice(table, 'regressor-constant')?.message).toContain('"gain"');
    expect(table.regressors.get('airmass')![59]).toBe(1 + 0.01 * 59);
  });

  it('understands the terms of a stated baseline', () => {
    const header = 'BJD_TDB,flux,flux_err,Air Mass\n';
    const text = curveText({ header, cells: (row) => [1 + wiggle(row), 2e-4, 1 + 0.01 * row] });
    const table = readCurve(text, { lightCurve: { baseline: ['time', 'air_mass', 'TIME^2', 'time'] } });
    expect(table.baseline).toEqual(['time', 'Air Mass', 'time^2']);
    expect(readCurve(text).baseline).toBe('auto');
    expect(readCurve(text, { lightCurve: { baseline: [] } }).baseline).toEqual([]);
  });
});
