import { describe, expect, test } from 'vitest';
import { ModelDomainError, UsageError } from '../../src/errors.js';
import type { MockPhotometry } from '../../src/observations/mock-types.js';
import { simulateObservations } from '../../src/planning/mock.js';
import { expectWithin } from '../support/expect-within.js';
import {
  columnsOf,
  IMPACT,
  make,
  meanOf,
  MID_TIMES,
  MID_TRANSIT,
  NIGHT,
  numbersOf,
  PERIOD,
  plan,
  RATIO,
  SURVEY,
} from './photometry-plan.js';

describe('mid-times', () => {
  const [table] = make({ midTimes: [MID_TIMES] });
  const times = numbersOf(table!, 'BJD_TDB');
  const errors = numbersOf(table!, 'error (d)');
  const cycles = numbersOf(table!, 'cycle');

  test('scatter about the transits as their errors say, each transit once, cycles counted', () => {
    const first = Math.round((times[0]! - MID_TRANSIT) / PERIOD);
    const pulls = times.map((time, i) => (time - MID_TRANSIT - (first + cycles[i]!) * PERIOD) / errors[i]!);
    const n = pulls.length;
    const why = 'four standard errors';
    expectWithin(meanOf(pulls), 0, { abs: 4 / Math.sqrt(n), unit: '1', why });
    expectWithin(meanOf(pulls.map((pull) => pull * pull)), 1, { abs: 4 * Math.sqrt(2 / n), unit: '1', why });
    expect(cycles[0]).toBe(0);
    expect(new Set(cycles).size).toBe(300);
    expect([...times].sort((a, b) => a - b)).toEqual(times);
  });

  test('name their sources in cells that no comma or quote breaks', () => {
    const sources = new Set(columnsOf(table!).get('source'));
    expect(sources).toEqual(new Set(['the pier', 'the old red boat']));
  });

  test('more than there are transits are refused', () => {
    const few = { ...MID_TIMES, fromBjdTdb: 2460400 };
    expect(() => make({ midTimes: [few] })).toThrow(/only 31 transits/);
  });
});

describe('the plan', () => {
  test('the same seed gives the same bytes, another one other noise; tables do not depend on one another', () => {
    const all = make({ lightCurves: [SURVEY, NIGHT], midTimes: [MID_TIMES] }, 7);
    expect(make({ lightCurves: [SURVEY, NIGHT], midTimes: [MID_TIMES] }, 7)).toEqual(all);
    expect(make({ midTimes: [MID_TIMES] }, 7)[0]).toEqual(all[2]);
    expect(make({ lightCurves: [{ ...SURVEY, noise: 2e-4 }, NIGHT] }, 7)[1]).toEqual(all[1]);
    expect(make({ lightCurves: [SURVEY] }, 8)[0]!.text).not.toBe(all[0]!.text.replace('seed 7', 'seed 8'));
    expect(all.map(({ holds, rows }) => [holds, rows > 0])).toEqual([
      ['light curve', true],
      ['light curve', true],
      ['mid-times', true],
    ]);
  });

  test('an inclination does what its impact parameter does', () => {
    const axis = Math.cbrt((1.3271244e20 * (PERIOD * 86400) ** 2) / (4 * Math.PI ** 2)) / 6.957e8;
    const deg = (Math.acos(IMPACT / axis) * 180) / Math.PI;
    const tilted = plan({ lightCurves: [SURVEY] });
    const companions = tilted.companions.map((companion) => ({
      ...companion,
      transit: { radiusRatio: RATIO, path: { kind: 'inclination' as const, deg } },
    }));
    expect(simulateObservations({ ...tilted, companions }, 1)).toEqual(make({ lightCurves: [SURVEY] }));
  });

  test.each<[string, Partial<MockPhotometry>, RegExp]>([
    [
      'a band without limb darkening',
      { lightCurves: [{ ...SURVEY, band: 'blue' }] },
      /"blue" has no limb darkening/,
    ],
    ['no star', { lightCurves: [SURVEY], star: null }, /mass and the radius/],
    [
      'two tables of one name',
      { lightCurves: [SURVEY, { ...NIGHT, table: 'Survey.csv' }] },
      /already writes/,
    ],
    [
      'a folder in a name',
      { midTimes: [{ ...MID_TIMES, table: '../times.csv' }] },
      /cannot be the file name/,
    ],
    ['a companion that does not transit', { lightCurves: [{ ...NIGHT, companion: 3 }] }, /does not transit/],
    [
      'a gap that leaves nothing',
      { lightCurves: [{ ...SURVEY, gaps: [{ afterDays: 0, lengthDays: 50 }] }] },
      /leave nothing/,
    ],
  ])('%s is refused in words', (_, photometry, words) => {
    expect(() => make(photometry)).toThrow(UsageError);
    expect(() => make(photometry)).toThrow(words);
  });

  test('a companion that would touch its star is refused', () => {
    const giant = { star: { massSolar: 1, radiusSolar: 12 }, lightCurves: [SURVEY] };
    expect(() => make(giant)).toThrow(ModelDomainError);
    expect(() => make({ lightCurves: [{ ...SURVEY, exposureDays: 1 }] })).toThrow(ModelDomainError);
  });
});
