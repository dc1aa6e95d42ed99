import { describe, expect, it } from 'vitest';
import { expectWithin } from '../support/expect-within.js';
import { brief, notice } from './helpers.js';
import { anyIssues, readAny, readMidTimes } from './photometry-helpers.js';

const rows = [
  [-3, 2458991.12345, 0.0004],
  [0, 2459000.51234, 0.0005],
  [1, 2459003.64197, 0.0006],
  [7, 2459022.41975, 0.0003],
] as const;
const asText = (separator: string): string => rows.map((row) => row.join(separator)).join('\n');

describe('tables of mid-times', () => {
  it.each([
    'cycle,Tmid,err',
    'epoch,BJD_TDB,sigma',
    'E,T0 (BJD_TDB),e_T0',
    'N,mid-transit time,uncertainty',
    'Epoch,t_0,err_t0',
    'orbit,BJD_TDB,BJD_err',
    'transit number,time (BJD_TDB),error (d)',
  ])('knows %s', (header) => {
    const table = readMidTimes(`${header}\n${asText(',')}\n`);
    expect(table.columns.map((column) => column.meaning)).toEqual(['cycle', 'time', 'error']);
    expect([...table.cycles!]).toEqual([-3, 0, 1, 7]);
    expect([...table.timesBjdTdb]).toEqual(rows.map((row) => row[1]));
    expect([...table.sigmasDays]).toEqual(rows.map((row) => row[2]));
    expect([...table.isOccultation]).toEqual([0, 0, 0, 0]);
  });

  it('says that a column of companions is not used', () => {
    const table = readMidTimes('BJD_TDB,err,companion\n2459000.5,0.001,b\n2459003.5,0.001,c\n');
    expect(notice(table, 'companion-column')?.message).toContain('"companion"');
    expect(notice(readMidTimes('BJD_TDB,err\n2459000.5,0.001\n'), 'companion-column')).toBeUndefined();
  });

  it('does without cycles, and takes the scale from the list of columns', () => {
    const comments = '# Col 1: time of mid-transit in BJD_TDB days\n# Col 2: error in days\n';
    const table = readMidTimes(
      `${comments}t_0 err_t0 O-C\n2459000.51234 0.0005 1.5\n2459003.64197 0.0006 -2\n`,
    );
    expect([table.cycles, table.timeScale]).toEqual([null, 'BJD_TDB']);
    expect(table.columns.map((column) => column.meaning)).toEqual(['time', 'error', 'kept']);
    expect(readMidTimes('BJD_TDB,err,ref\n2459000.51234,0.0005,a\n').sources).toEqual(['a']);
  });

  it.each([
    ['Tmid,err (min)', 1.44, 0.001],
    ['Tmid,err (s)', 86.4, 0.001],
    ['Tmid,err_min', 1.44, 0.001],
    ['Tmid,err [h]', 0.024, 0.001],
    ['Tmid,err', 0.001, 0.001],
  ])('reads errors in the unit of the header %s', (header, written, days) => {
    const table = readMidTimes(`${header}\n2459000.5,${written}\n2459003.5,${written}\n`);
    expectWithin(table.sigmasDays[0]!, days, { rel: 1e-14, unit: 'd', why: 'a rounding' });
  });

  it('reads errors in the declared unit', () => {
    const table = readMidTimes('Tmid,err\n2459000.5,1.44\n2459003.5,1.44\n', { errorUnit: 'min' });
    expectWithin(table.sigmasDays[1]!, 0.001, { rel: 1e-14, unit: 'd', why: 'a rounding' });
  });

  it('knows occultations, sources and flags', () => {
    const text =
      'Tmid,err,kind,source,flag\n2459000.5,0.001,transit,Pier A,0\n2459002.1,0.002,occ,"Pier, B",0\n2459003.5,0.001,TRA,x,1\n';
    const table = readMidTimes(text);
    expect([...table.isOccultation]).toEqual([0, 1]);
    expect(table.sources).toEqual(['Pier A', 'Pier, B']);
    expect(notice(table, 'flagged-rows')?.lines).toEqual([4]);
    const declared = readMidTimes('Tmid,err\n2459000.5,0.001\n', {
      midTimes: { kind: 'occultation', companion: 'c' },
    });
    expect([[...declared.isOccultation], declared.companion]).toEqual([[1], 'c']);
    expect(readMidTimes('Tmid,err\n2459000.5,0.001\n', { instrument: 'pier' }).sources).toEqual(['pier']);
  });

  it('recognises a headerless table by whole numbers that count along with the dates', () => {
    const table = readMidTimes(`${asText('  ')}\n`);
    expect([...table.cycles!]).toEqual([-3, 0, 1, 7]);
    expect(notice(table, 'headerless')?.message).toContain('count along');
    const turned = rows.map(([cycle, time, error]) => [time, error, cycle, 0.3].join(' ')).join('\n');
    expect([...readMidTimes(turned).cycles!]).toEqual([-3, 0, 1, 7]);
    const bare = readMidTimes('2459000.51234 0.0005\n2459003.64197 0.0006\n');
    expect([bare.cycles, [...bare.sigmasDays]]).toEqual([null, [0.0005, 0.0006]]);
  });

  it('adds the days that the header leaves out', () => {
    const table = readMidTimes('Tmid (BJD_TDB - 2450000),err\n9000.5,0.001\n');
    expect([table.timesBjdTdb[0], table.timeOffsetDays]).toEqual([2459000.5, 2450000]);
    const named = readMidTimes('BJD_TDB - 2450000,err,cycle\n9000.5,0.001,3\n');
    expect([named.timesBjdTdb[0], named.cycles![0]]).toEqual([2459000.5, 3]);
  });

  it('leaves velocities with an epoch column to the reader of velocities', () => {
    expect(readAny('epoch,RV,err\n2459000.5,1,2\n2459001.5,3,4\n').content).toBe('velocities');
  });

  it('names repeated times of one kind with their lines', () => {
    const text =
      'Tmid,err,kind\n2459000.5,0.001,t\n2459000.5,0.002,o\n2459003.5,0.001,t\n2459000.5,0.002,t\n';
    expect(notice(readMidTimes(text), 'repeated-time')?.lines).toEqual([5]);
  });
});

describe('bad mid-times: every problem with its place', () => {
  it('names cycles that are not whole, errors <= 0, errors of days, and missing cells', () => {
    const text = 'cycle,Tmid,err\n1.5,2459000.5,0.001\n2,2459003.5,0\n3,2459006.5,-0.1\n4,2459009.5,2\n5,,0.001\n6,x,0.001\n'; // prettier-ignore
    expect(brief(anyIssues(text))).toEqual([
      '2:- cycle-not-whole cycle',
      '3:13 non-positive-error err',
      '4:13 non-positive-error err',
      '5:- error-too-large err',
      '6:- missing-value -',
      '7:3 not-a-number Tmid',
    ]);
  });

  it('asks whether the errors are minutes', () => {
    const issues = anyIssues('Tmid,err\n2459000.5,1.5\n2459003.5,1.2\n');
    expect(issues[0]!.hint).toContain('error-unit: min');
    expect(notice(readMidTimes('Tmid,err\n2459000.5,0.4\n2459003.5,0.5\n'), 'error-unit')).toBeDefined();
    expect(brief(anyIssues('Tmid,err (mag)\n2459000.5,0.1\n'))).toEqual(['-:- unknown-unit err (mag)']);
  });

  it('refuses an unknown kind, a table of flags only, and mistyped dates', () => {
    expect(brief(anyIssues('Tmid,err,kind\n2459000.5,0.001,sunset\n'))).toEqual(['2:- unknown-kind kind']);
    expect(brief(anyIssues('Tmid,err,flag\n2459000.5,0.001,1\n'))).toEqual(['-:- no-rows-left -']);
    expect(brief(anyIssues('Tmid,err\n2459000.5,0.001\n9003.5,0.001\n2459006.5,0.001\n'))).toEqual([
      '3:- impossible-span time',
    ]);
  });

  it('says which column is missing when mid-times are declared', () => {
    expect(brief(anyIssues('alpha,Tmid\n1,2459000.5\n', { holds: 'mid-times' }))).toEqual([
      '-:- missing-column error',
    ]);
  });
});
