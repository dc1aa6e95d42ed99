import { describe, expect, it } from 'vitest';
import { notice, read } from './helpers.js';

/** The same three invented rows in every format: the numbers are those written here, so they need no other source. */
const NUMBERS = [
  [2459000.25, -12.5, 1.5],
  [2459003.5, 20.25, 2],
  [2459009.75, 7, 1.25],
] as const;
const written = (separator: string, header: string): string =>
  [header, ...NUMBERS.map((row) => row.join(separator))].join('\n') + '\n';

function expectTheRows(text: string, delimiter: string): void {
  const table = read(text);
  expect(table.delimiter).toBe(delimiter);
  expect([...table.timesBjdTdb]).toEqual(NUMBERS.map((row) => row[0]));
  expect([...table.velocitiesMps]).toEqual(NUMBERS.map((row) => row[1]));
  expect([...table.sigmasMps]).toEqual(NUMBERS.map((row) => row[2]));
}

describe('table formats', () => {
  it('reads comma, semicolon, tab and blank separated tables alike', () => {
    expectTheRows(written(',', 'BJD_TDB,RV (m/s),e_RV (m/s)'), 'comma');
    expectTheRows(written(';', 'BJD_TDB;RV (m/s);e_RV (m/s)'), 'semicolon');
    expectTheRows(written('\t', 'BJD_TDB\tRV (m/s)\te_RV (m/s)'), 'tab');
    expectTheRows(written('   ', 'BJD_TDB  RV(m/s)   e_RV(m/s)'), 'blanks');
  });

  it('takes runs of tabs and tabs mixed with blanks as blanks', () => {
    expectTheRows(written('\t\t', 'BJD_TDB\t\tRV(m/s)\t\te_RV(m/s)'), 'blanks');
    expectTheRows(written(' \t ', 'BJD_TDB RV(m/s) e_RV(m/s)'), 'blanks');
  });

  it('does not mind a byte order mark, CRLF or CR line ends, blank lines and a missing last line end', () => {
    const text = written(',', 'BJD_TDB,RV (m/s),e_RV (m/s)');
    expectTheRows('\ufeff' + text.replaceAll('\n', '\r\n'), 'comma');
    expectTheRows(text.replaceAll('\n', '\r'), 'comma');
    expectTheRows(text.replaceAll('\n', '\n\n').trimEnd(), 'comma');
  });

  it('reads quoted labels and cells, with separators and line breaks inside', () => {
    const table = read(
      '"BJD_TDB","RV, corrected","RV (m/s)",err,note\n2459000.5,1,2,3,"a, ""b""\nc"\n2459001.5,4,5,6,d\n',
    );
    expect([...table.velocitiesMps]).toEqual([2, 5]);
    expect(table.kept.get('note')).toEqual(['a, "b"\nc', 'd']);
    expect([...table.lines]).toEqual([2, 4]); // the quoted cell spans lines 2 and 3
  });

  it('rejoins labels of a blank-separated header that hold blanks', () => {
    const table = read('BJD_TDB - 2450000   RV (km/s)   e_RV (m/s)\n9000.25 -1.5 3\n9001.25 2.5 4\n');
    expect(table.columns.map((column) => column.label)).toEqual([
      'BJD_TDB - 2450000',
      'RV (km/s)',
      'e_RV (m/s)',
    ]);
    expect([...table.timesBjdTdb]).toEqual([2459000.25, 2459001.25]);
    expect([...table.velocitiesMps]).toEqual([-1500, 2500]);
    expect([...table.sigmasMps]).toEqual([3, 4]);
  });

  it('skips comments, whole lines and behind a row, and keeps the line numbers of the file', () => {
    const table = read('# one\nBJD_TDB RV err\n# two\n2459000.5 1 2 # cloudy\n\n2459001.5 3 4\n');
    expect([...table.lines]).toEqual([4, 6]);
    expect(read('BJD_TDB,RV,err\n2459000.5,1,2 # cloudy\n2459001.5,3,4\n').used).toBe(2);
  });

  it('finds the header in the last comment before the rows', () => {
    const table = read(
      '# made for a test\n# BJD(TDB)-2450000 RV err tel\n9000.5 1 2 north\n9001.5 3 4 south\n',
    );
    expect(table.instruments).toEqual(['north', 'south']);
    expect(table.timeOffsetDays).toBe(2450000);
    expect(table.columns[0]!.known).toBe('header in a comment');
  });

  it('skips a line of units and a ruled line, and takes the units', () => {
    const table = read(
      'BJD_TDB\tRV\te_RV\nd\tkm/s\tkm/s\n-------\t---\t---\n2459000.5\t-46.5\t0.25\n2459001.5\t-46\t0.25\n',
    );
    expect([...table.velocitiesMps]).toEqual([-46500, -46000]);
    expect([...table.sigmasMps]).toEqual([250, 250]);
  });

  it('reads a headerless table of three numbers by position, says so, and takes a fourth column of text as instrument', () => {
    const three = read('2459000.5 -33258.25 9.0\n2459001.5 -33225.5 7.0\n');
    expect(notice(three, 'headerless')?.message).toContain(
      'columns 1, 2, 3 were read as time, velocity and error',
    );
    expect([...three.velocitiesMps]).toEqual([-33258.25, -33225.5]);
    const four = read('2459000.5 -3 9.0 NORTH\n2459001.5 -2 7.0 SOUTH\n2459002.5 -1 7.0 NORTH\n');
    expect(four.instruments).toEqual(['NORTH', 'SOUTH']);
    expect([...four.instrumentOf]).toEqual([0, 1, 0]);
  });

  it('does not take commas in a note for separators', () => {
    const table = read('BJD_TDB RV err note\n2459000.5 1 2 a,b\n2459001.5 3 4 c,d\n2459002.5 3 4 e,f\n');
    expect(table.delimiter).toBe('blanks');
    expect(table.kept.get('note')).toEqual(['a,b', 'c,d', 'e,f']);
  });

  it('keeps further columns as text by label, and lets an empty last column go', () => {
    const table = read('BJD_TDB,RV,err,span,\n2459000.5,1,2,n/a,\n2459001.5,3,4,-8,\n');
    expect([...table.kept]).toEqual([['span', ['n/a', '-8']]]);
  });

  it('reads Fortran exponents', () => {
    expect([...read('2459000.5 1.5D+03 2.5d0\n2459001.5 -1.5E-01 1\n').velocitiesMps]).toEqual([1500, -0.15]);
  });
});
