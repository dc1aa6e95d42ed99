import { describe, expect, it } from 'vitest';
import { combineTables, describeTable } from '../../src/observations/index.js';
import { issuesOf, notice, read } from './helpers.js';
import { expectWithin } from '../support/expect-within.js';

const north = (): ReturnType<typeof read> =>
  read('BJD_TDB,RV (m/s),err\n2459002.5,3,1\n2459000.5,1,1\n', {}, 'north.csv');
const south = (): ReturnType<typeof read> =>
  read('JD,RV (km/s),err\n2459001.5,0.002,0.001\n2459000.5,0.0015,0.001\n', {}, 'south.csv');

describe('combining tables', () => {
  it('sorts by time, stably, and keeps table, line and instrument of each row', () => {
    const set = combineTables([north(), south()]);
    expect(set.count).toBe(4);
    expect([...set.timesBjdTdb]).toEqual([2459000.5, 2459000.5, 2459001.5, 2459002.5]);
    expect([...set.velocitiesMps]).toEqual([1, 1.5, 2, 3]);
    expect([...set.tableOf]).toEqual([0, 1, 1, 0]);
    expect([...set.lines]).toEqual([3, 3, 2, 2]);
    expect([...set.instrumentOf].map((index) => set.instruments[index])).toEqual([
      'north',
      'south',
      'south',
      'north',
    ]);
  });

  it('refuses the same table twice: its velocities would count twice', () => {
    const again = { ...north(), path: 'copy.csv' };
    const issues = issuesOf(() => combineTables([north(), again]));
    expect(issues.map(({ code, file }) => [code, file])).toEqual([['same-table-twice', 'copy.csv']]);
  });

  it('carries the notices with their paths, and the worst time scale', () => {
    const set = combineTables([north(), south()]);
    expect(set.timeScale).toBe('JD');
    expect(set.notices.find((one) => one.code === 'time-scale')?.path).toBe('south.csv');
    expect(notice(set, 'mixed-time-scales')).toBeDefined();
  });

  it('merges instruments of one name and says which names are alike', () => {
    const again = read('BJD_TDB,RV (m/s),err\n2459005.5,3,1\n', { instrument: 'north' }, 'more.csv');
    const other = read('BJD_TDB,RV (m/s),err\n2459006.5,3,1\n', { instrument: 'North' }, 'other.csv');
    const set = combineTables([north(), again, other]);
    expect(set.instruments).toEqual(['north', 'North']);
    expect(notice(set, 'similar-instruments')).toBeDefined();
  });

  it('finds a measurement that stands in two tables', () => {
    const set = combineTables([north(), read('BJD_TDB,RV (m/s),err\n2459002.5,3,1\n', {}, 'copy.csv')]);
    expect(notice(set, 'repeated-row')?.message).toContain('north.csv:2 and copy.csv:2');
  });

  it('does not depend on the order of the tables, but for ties', () => {
    const one = combineTables([north(), south()]);
    const two = combineTables([south(), north()]);
    expect([...one.timesBjdTdb]).toEqual([...two.timesBjdTdb]);
    expect([...one.velocitiesMps].sort()).toEqual([...two.velocitiesMps].sort());
  });

  it('refuses one row, equal times, nothing, and dates that cannot be on one axis', () => {
    const single = read('2459000.5 1 1\n');
    expect(issuesOf(() => combineTables([single]))[0]).toMatchObject({ code: 'one-row', line: 1 });
    expect(issuesOf(() => combineTables([read('2459000.5 1 1\n2459000.5 2 1\n')]))[0]).toMatchObject({
      code: 'equal-times',
    });
    expect(issuesOf(() => combineTables([]))[0]).toMatchObject({ code: 'no-rows' });
    const short = read('59000.5 1 1\n', {}, 'short.csv');
    expect(issuesOf(() => combineTables([north(), short]))[0]?.message).toContain(
      '"short.csv" and "north.csv"',
    );
  });
});

describe('description of a table', () => {
  it('counts nights, gaps and instruments as a person would', () => {
    // two rows in one night, one the next, then a pause of 100 d: three nights, one gap
    const summary = describeTable(
      read('BJD_TDB,RV,err,inst\n2459000.7,5,1,a\n2459000.9,-5,3,b\n2459001.8,1,2,a\n2459101.8,9,4,a\n'),
    );
    expect(summary).toMatchObject({
      rows: 4,
      used: 4,
      nights: 3,
      lowestVelocityMps: -5,
      highestVelocityMps: 9,
      medianErrorMps: 2.5,
      timeErrorSeconds: 0,
    });
    expectWithin(summary.spanDays, 101.1, { abs: 1e-8, unit: 'd', why: 'a Julian date holds 5e-10 d' });
    expectWithin(summary.medianCadenceDays!, 0.9, { abs: 1e-8, unit: 'd', why: 'steps 0.2, 0.9, 100 d' });
    expect(summary.seasonGaps).toEqual([{ fromBjdTdb: 2459001.8, toBjdTdb: 2459101.8, days: 100 }]);
    expect(
      summary.instruments.map(({ name, count, medianVelocityMps }) => [name, count, medianVelocityMps]),
    ).toEqual([
      ['a', 3, 5],
      ['b', 1, -5],
    ]);
  });

  it('has no cadence for one row', () => {
    expect(describeTable(read('2459000.5 1 1\n')).medianCadenceDays).toBeNull();
  });
});
