import { describe, expect, it } from 'vitest';
import { readTimeLabel, timeLabelsIn } from '../../src/observations/time-label.js';
import { asBjdTdb, timeScaleError, toBjdTdb, worstTimeScale } from '../../src/observations/time-scale.js';
import { TIME_SCALES, type BjdTdb } from '../../src/observations/types.js';
import { expectWithin } from '../support/expect-within.js';
import { notice, read, tableIssues } from './helpers.js';

describe('names of dates', () => {
  // Offsets: MJD = JD - 2400000.5 (IAU 1997 Resolution B1); the others are written in the label itself.
  it.each([
    ['BJD_TDB', 'BJD_TDB', null],
    ['BJD (TDB)', 'BJD_TDB', null],
    ['bjdtdb', 'BJD_TDB', null],
    ['BJD_TDB - 2457000', 'BJD_TDB', 2457000],
    ['BJD_TDB−2,450,000', 'BJD_TDB', 2450000],
    ['BJD(TDB)-2450000', 'BJD_TDB', 2450000],
    ['BJD_TDB [d]', 'BJD_TDB', null],
    ['time (BJD_TDB - 2454833)', 'BJD_TDB', 2454833],
    ['BJD', 'BJD', null],
    ['BJD_UTC', 'BJD_UTC', null],
    ['HJD (2450000+)', 'HJD', 2450000],
    ['HJD_TT', 'HJD_TT', null],
    ['HJD UTC', 'HJD_UTC', null],
    ['JD', 'JD', null],
    ['Julian date', 'JD', null],
    ['JD_UTC-2400000', 'JD_UTC', 2400000],
    ['MJD', 'JD', 2400000.5],
    ['BMJD_TDB', 'BJD_TDB', 2400000.5],
    ['rjd', 'JD', 2400000],
    ['Barycentric Julian Date', 'BJD', null],
    ['time', 'unknown', null],
    ['t', 'unknown', null],
    ['date-obs', 'unknown', null],
  ])('%s', (label, scale, offsetDays) => {
    expect(readTimeLabel(label)).toEqual({ scale, offsetDays });
  });

  it.each(['RV', 'e_BJD', 'BJD err', 'exptime_s', 'S index', 'target', '', 'utc'])(
    '%s is no date',
    (label) => {
      expect(readTimeLabel(label)).toBeNull();
    },
  );

  it('finds dates in a sentence', () => {
    expect(timeLabelsIn('time is BJD_TDB - 2454833, exposure 58.85 s')).toEqual([
      { scale: 'BJD_TDB', offsetDays: 2454833 },
    ]);
    expect(timeLabelsIn('JD = Julian date in days').every((label) => label.scale === 'JD')).toBe(true);
    expect(timeLabelsIn('the adjusted set')).toEqual([]);
  });
});

describe('how wrong a date may be', () => {
  // Light travel time of one au: 149597870700 m (IAU 2012 Resolution B2) / 299792458 m/s (SI) = 499.0048 s.
  const light = 149597870700 / 299792458;
  // TDB - UTC = 37 s (TAI - UTC since 2017, IERS Bulletin C 52) + 32.184 s (TT - TAI, IAU 1991 Recommendation IV).
  const clock = 37 + 32.184;
  // HJD against BJD: up to 4 s, Eastman et al. 2010, PASP 122, 935 (cited from memory).
  const sun = 4;
  it.each([
    ['BJD_TDB', 0],
    ['BJD_UTC', clock],
    ['BJD', clock],
    ['HJD_TT', sun],
    ['HJD_UTC', sun + clock],
    ['HJD', sun + clock],
    ['JD_TT', light],
    ['JD_UTC', light + clock],
    ['JD', light + clock],
    ['unknown', light + clock],
  ] as const)('%s: at most %d s', (scale, seconds) => {
    expectWithin(timeScaleError(scale).maximumSeconds, seconds, {
      abs: 0.001,
      unit: 's',
      why: 'the au in light seconds is kept to 3 decimals',
    });
    expect(timeScaleError(scale).sentence).not.toBe('');
  });

  it('covers every scale, and picks the worst of several', () => {
    expect(TIME_SCALES.every((scale) => Number.isFinite(timeScaleError(scale).maximumSeconds))).toBe(true);
    expect(worstTimeScale(['BJD_TDB', 'HJD_TT', 'BJD_UTC'])).toBe('BJD_UTC');
    expect(worstTimeScale([])).toBe('BJD_TDB');
    expect(worstTimeScale(['JD', 'unknown'])).toBe('unknown');
  });

  it('warns of every scale but BJD_TDB in the table', () => {
    expect(notice(read('BJD_TDB RV err\n2459000.5 1 2\n2459001.5 1 2\n'), 'time-scale')).toBeUndefined();
    expect(notice(read('JD RV err\n2459000.5 1 2\n2459001.5 1 2\n'), 'time-scale')?.message).toContain(
      '8.3 min',
    );
    expect(notice(read('HJD RV err\n2459000.5 1 2\n2459001.5 1 2\n'), 'time-scale')?.message).toContain(
      '69 s',
    );
  });

  it('gives dates back in a fresh array, and refuses what is not finite', () => {
    const dates = Float64Array.of(2459000.5);
    const converted = toBjdTdb('BJD_TDB', dates);
    expect(converted).toEqual(dates);
    expect(converted).not.toBe(dates);
    expect(() => asBjdTdb(NaN)).toThrow(RangeError);
  });

  it('lets only earned dates through where BJD_TDB is wanted', () => {
    const wants = (date: BjdTdb): number => date;
    expect(wants(asBjdTdb(2459000.5))).toBe(2459000.5);
    // @ts-expect-error a raw number is not a date in BJD_TDB
    expect(wants(2459000.5)).toBe(2459000.5);
  });
});

describe('offsets of dates', () => {
  it('adds what the header leaves out', () => {
    expect([...read('MJD RV err\n59000.25 1 2\n59001.25 1 2\n').timesBjdTdb]).toEqual([
      2459000.75, 2459001.75,
    ]);
    expect([...read('rjd RV err\n59000.25 1 2\n59001.25 1 2\n').timesBjdTdb]).toEqual([
      2459000.25, 2459001.25,
    ]);
  });

  it('takes scale and offset from a comment when the header says only t, and says so', () => {
    const table = read('# times are BJD_TDB - 2450000\nt RV err\n9000.25 1 2\n9001.25 1 2\n');
    expect(table.timeScale).toBe('BJD_TDB');
    expect([...table.timesBjdTdb]).toEqual([2459000.25, 2459001.25]);
    expect(notice(table, 'time-offset')?.lines).toEqual([1]);
    expect(notice(table, 'time-scale-from-comment')?.lines).toEqual([1]);
  });

  it('takes a declaration before all', () => {
    const table = read('JD RV err\n9000.25 1 2\n9001.25 1 2\n', {
      timeScale: 'BJD_TDB',
      timeOffsetDays: 2450000,
    });
    expect(table.timeScale).toBe('BJD_TDB');
    expect(table.timesBjdTdb[0]).toBe(2459000.25);
    expect(notice(table, 'time-scale-override')).toBeDefined();
  });

  it('does not guess an offset, but says that one is missing', () => {
    const table = read('BJD_TDB RV err\n59000.25 1 2\n59001.25 1 2\n');
    expect(table.timesBjdTdb[0]).toBe(59000.25);
    expect(notice(table, 'not-julian-dates')?.message).toContain('MJD');
  });

  it('refuses to add an offset to full dates', () => {
    expect(
      tableIssues('BJD-2450000 RV err\n2459000.5 1 2\n2459001.5 1 2\n').map((issue) => issue.code),
    ).toContain('time-offset-contradiction');
  });
});
