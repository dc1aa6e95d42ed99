import { describe, expect, it } from 'vitest';
import { read, notice, tableIssues } from './helpers.js';

const rows = '2459000.5,1,2\n2459001.5,3,4\n';

describe('recognition of columns', () => {
  it.each([
    ['BJD', 'RV', 'e_RV'],
    ['time', 'vrad', 'sigma'],
    ['t', 'vel', 'err'],
    ['JDB', 'velocity', 'uncertainty'],
    ['HJD', 'radial velocity', 'sigma'],
    ['date', 'vel', 'sig'],
    ['bjd_tdb', 'rv', 'RV_err'],
    ['HJD_UTC', 'Vel', 'error'],
    ['BJD-TDB', 'rv_mps', 'rv_err_mps'],
    ['JD (UTC)', 'RV [m/s]', 'sigma_RV [m/s]'],
  ])('knows %s, %s, %s', (time, velocity, error) => {
    const table = read(`${time},${velocity},${error}\n${rows}`);
    expect(table.columns.map((column) => column.meaning)).toEqual(['time', 'velocity', 'velocity-error']);
  });

  it.each(['instrument', 'inst', 'tel', 'telescope', 'spectrograph', 'set', 'dataset'])(
    'knows the instrument column %s',
    (label) => {
      const table = read(`RV,BJD,${label},err\n1,2459000.5,south,2\n3,2459001.5,north,4\n`);
      expect(table.instruments).toEqual(['south', 'north']);
    },
  );

  it('prefers the error that belongs to the velocity, and the better time, and says which', () => {
    const table = read('JD_UTC,BJD_TDB,err,RV,e_RV\n2459000.4,2459000.5,9,1,2\n2459001.4,2459001.5,9,3,4\n');
    expect([...table.sigmasMps]).toEqual([2, 4]);
    expect(table.timeScale).toBe('BJD_TDB');
    expect(table.timesBjdTdb[0]).toBe(2459000.5);
    expect(table.notices.filter((one) => one.code === 'several-columns')).toHaveLength(2);
  });

  it('does not guess between equal labels', () => {
    const issues = tableIssues('BJD,RV,RV,err\n2459000.5,1,2,3\n');
    expect(issues.map((issue) => issue.code)).toEqual(['ambiguous-column']);
    expect(issues[0]!.hint).toContain('--columns velocity=2');
  });

  it('takes columns named by label (any case) or position', () => {
    const table = read(`alpha,beta,gamma\n${rows}`, {
      columns: { time: 'Alpha', velocity: '3', 'velocity-error': 'beta' },
    });
    expect([...table.velocitiesMps]).toEqual([2, 4]);
    expect([...table.sigmasMps]).toEqual([1, 3]);
    expect(table.columns.every((column) => column.known === '--columns')).toBe(true);
    const bare = read(rows, { columns: { time: '1', velocity: '3', 'velocity-error': '2' } });
    expect([...bare.velocitiesMps]).toEqual([2, 4]);
  });

  it('reports every column that does not exist or is named twice, together', () => {
    const issues = tableIssues(`alpha,beta,gamma\n${rows}`, {
      columns: { time: 'alpa', velocity: '9', 'velocity-error': 'gamma', quality: 'gamma' },
    });
    expect(issues.map((issue) => [issue.code, issue.hint])).toEqual([
      ['no-such-column', 'did you mean "alpha"?'],
      ['no-such-column', 'give a position from 1 to 3'],
      ['column-twice', ''],
    ]);
  });

  it('lists all missing columns with the labels found', () => {
    const issues = tableIssues('BJD,flux,airmass\n2459000.5,1,2\n');
    expect(issues.map((issue) => `${issue.code} ${issue.field ?? ''}`)).toEqual([
      'missing-column velocity',
      'missing-column velocity-error',
    ]);
    expect(issues[0]!.message).toContain('"BJD", "flux", "airmass"');
  });

  it('asks for names when a headerless table has two, four or five columns of numbers', () => {
    for (const row of ['2459000.5 1', '2459000.5 1 2 3', '2459000.5 1 2 3 4']) {
      expect(tableIssues(`${row}\n${row}\n`).map((issue) => issue.code)).toEqual(['columns-unknown']);
    }
  });

  it('leaves out flagged rows unread, and lists them', () => {
    const table = read(
      'BJD_TDB,RV,err,flag\n2459000.5,1,2,0\n2459001.5,NaN,-4,1\n2459002.5,5,6,\n2459003.5,7,8,2\n',
    );
    expect([...table.velocitiesMps]).toEqual([1, 5]);
    expect([table.rows, table.used]).toEqual([4, 2]);
    expect(notice(table, 'flagged-rows')?.lines).toEqual([3, 5]);
  });

  it('reads a column called use the other way round', () => {
    const table = read('BJD_TDB,RV,err,use\n2459000.5,1,2,1\n2459001.5,3,4,0\n');
    expect([...table.velocitiesMps]).toEqual([1]);
    expect(notice(table, 'flagged-rows')).toMatchObject({
      lines: [3],
      message: expect.stringContaining('zero in the column of rows to use') as string,
    });
  });

  it('keeps a quality column of words and says that nothing was left out', () => {
    const table = read('BJD_TDB,RV,err,quality\n2459000.5,1,2,good\n2459001.5,3,4,poor\n');
    expect(table.used).toBe(2);
    expect(notice(table, 'quality-not-used')).toBeDefined();
    expect(table.kept.get('quality')).toEqual(['good', 'poor']);
  });

  it('says when every row is flagged', () => {
    expect(tableIssues('BJD_TDB,RV,err,q\n2459000.5,1,2,1\n').map((issue) => issue.code)).toEqual([
      'no-rows-left',
    ]);
  });

  it('names the instrument after the file, or as declared', () => {
    expect(read(`BJD,RV,err\n${rows}`, {}, 'data/far-north.v2.csv').instruments).toEqual(['far-north.v2']);
    expect(read(`BJD,RV,err\n${rows}`, { instrument: 'Harbour' }).instruments).toEqual(['Harbour']);
    const both = read('BJD,RV,err,inst\n2459000.5,1,2,a\n2459001.5,1,2,b\n', { instrument: 'Harbour' });
    expect(both.instruments).toEqual(['Harbour']);
    expect(notice(both, 'instrument-declared')).toBeDefined();
  });
});
