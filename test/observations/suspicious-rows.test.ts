import { describe, expect, it } from 'vitest';
import { notice, read } from './helpers.js';

/** Twenty quiet rows of an invented star: times 3 d apart, velocities within 20 m/s, errors near 2 m/s. */
function quiet(
  change: (row: { t: number; v: number; e: number }, index: number) => string | null = () => null,
): string {
  const rows = Array.from({ length: 20 }, (_, index) => {
    const row = { t: 2459000.5 + 3 * index, v: 10 * Math.sin(index) + 30, e: 2 + 0.1 * (index % 3) };
    return change(row, index) ?? `${row.t},${row.v},${row.e}`;
  });
  return `BJD_TDB,RV (m/s),e_RV (m/s)\n${rows.join('\n')}\n`;
}
const CODES = [
  'repeated-row',
  'repeated-time',
  'unsorted',
  'time-jump',
  'mixed-units',
  'outlier',
  'odd-error',
  'similar-instruments',
];
const found = (text: string): string[] =>
  read(text)
    .notices.map((one) => one.code)
    .filter((code) => CODES.includes(code));

describe('suspicious rows (line 7 is row 5)', () => {
  it('finds nothing in quiet rows', () => {
    expect(found(quiet())).toEqual([]);
  });

  it.each([
    ['outlier', ({ t, e }: { t: number; e: number }) => `${t},40000,${e}`, [7]],
    [
      'mixed-units',
      ({ t, v, e }: { t: number; v: number; e: number }) => `${t},${v * 1000},${e * 1000}`,
      [7],
    ],
    ['odd-error', ({ t, v }: { t: number; v: number }) => `${t},${v},9000`, [7]],
    ['odd-error', ({ t, v }: { t: number; v: number }) => `${t},${v},0.0001`, [7]],
  ] as const)('finds one %s', (code, change, lines) => {
    const text = quiet((row, index) => (index === 5 ? change(row) : null));
    expect(found(text)).toEqual([code]);
    expect(notice(read(text), code)?.lines).toEqual(lines);
    expect(read(text).used).toBe(20); // said, not repaired
  });

  it('finds a date that is 1000 days off, as a jump and a step back', () => {
    const text = quiet(({ t, v, e }, index) => (index === 5 ? `${t + 1000},${v},${e}` : null));
    expect(notice(read(text), 'time-jump')?.lines).toEqual([7]);
    expect(notice(read(text), 'unsorted')?.lines).toEqual([8]);
  });

  it('finds repeated rows and repeated times', () => {
    const again = quiet(({ v, e }, index) =>
      index === 5 ? `2459012.5,${10 * Math.sin(4) + 30},2.1` : index === 6 ? `2459012.5,${v},${e}` : null,
    );
    expect(notice(read(again), 'repeated-row')?.lines).toEqual([7]);
    expect(notice(read(again), 'repeated-time')?.lines).toEqual([8]);
  });

  it('measures outliers by the scatter, not by the errors alone', () => {
    // The median deviation of 10 sin(i) is about 7 m/s, the scatter so about 10 m/s: 900 is 90 times that, 5000 is 500 times
    // (and 2400 times the error), 40000 is 4000 times.
    const with1 = (value: number): string =>
      quiet(({ t, e }, index) => (index === 5 ? `${t},${value},${e}` : null));
    expect(found(with1(900))).toEqual([]);
    expect(found(with1(5000))).toEqual([]);
    expect(found(with1(40000))).toEqual(['outlier']);
  });

  it('does not mix the rows of different instruments', () => {
    const text =
      'BJD_TDB,RV,err,inst\n' +
      Array.from({ length: 8 }, (_, i) => `${2459000 + i},${-33250 - i},9,a\n`).join('') +
      Array.from({ length: 8 }, (_, i) => `${2458000 + i},${5 + i},2,b\n`).join('');
    expect(found(text)).toEqual([]);
  });

  it('finds two instruments of which one is in km/s', () => {
    const text =
      'BJD_TDB,RV,err,inst\n' +
      Array.from(
        { length: 8 },
        (_, i) => `${2459000 + i},${-33250 - i},9,a\n${2459000.5 + i},${-33.25 - i / 1000},0.009,b\n`,
      ).join('');
    expect(notice(read(text), 'mixed-units')?.message).toContain('"a" and "b"');
  });

  it('finds one instrument under two names', () => {
    const text =
      'BJD_TDB,RV,err,inst\n2459000,1,1,North-2\n2459001,1,1,north 2\n2459002,1,1,NORTH_2\n2459003,1,1,north\n';
    expect(notice(read(text), 'similar-instruments')?.message).toContain('"North-2", "north 2", "NORTH_2"');
    expect(read(text).instruments).toHaveLength(4);
  });

  it('names at most 200 lines of one kind', () => {
    const table = read('2459000 1 1\n'.repeat(1000));
    expect(notice(table, 'repeated-row')?.lines).toHaveLength(200);
    expect(notice(table, 'repeated-row')?.message).toContain('999 rows');
  });
});
