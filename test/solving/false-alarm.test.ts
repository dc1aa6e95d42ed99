import { describe, expect, it } from 'vitest';
import {
  powerAtFalseAlarm,
  powerOfGain,
  shapeFalseAlarm,
  sinusoidFalseAlarm,
  weightedVariance,
  type FalseAlarmSetting,
} from '../../src/solving/false-alarm.js';
import invented from '../reference/search/invented-velocities.json' with { type: 'json' };
import search from '../reference/search/search.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

const setting = (change: Partial<FalseAlarmSetting> = {}): FalseAlarmSetting => ({
  dataCount: 60,
  backgroundCount: 3,
  bandwidthPerDay: 2,
  timeVarianceDays2: 200 ** 2,
  ...change,
});

describe('false-alarm bound of a sinusoid', () => {
  it('matches search.json (mpmath): 30 and 500 data, one to six background parameters, from 1 to below 1e-300', () => {
    let tiniest = 1;
    for (const [dataCount, backgroundCount, bandwidthPerDay, power, want] of search.bounds) {
      const got = sinusoidFalseAlarm(power!, {
        dataCount: dataCount!,
        backgroundCount: backgroundCount!,
        bandwidthPerDay: bandwidthPerDay!,
        timeVarianceDays2: search.timeVarianceDays2,
      });
      if (want! > 0) tiniest = Math.min(tiniest, want!);
      expectWithin(got, want!, want! > 1e-307 ? { rel: 1e-11, unit: '1', why: 'powers of up to 250 amplify rounding' } : { abs: 1e-307, unit: '1', why: 'below the smallest normal double' }); // prettier-ignore
    }
    expect(tiniest).toBeLessThan(1e-200);
  });

  it('the weighted variance of the times matches search.json (numpy)', () => {
    const times = Float64Array.from(invented.rows, (row) => row[0]!);
    const weights = Float64Array.from(invented.rows, (row) => row[2]! ** -2);
    expectWithin(weightedVariance(times, weights), search.timeVarianceDays2, {
      rel: 1e-10,
      unit: 'd^2',
      why: 'dates of 2.458e6 d',
    });
  });

  it('falls with the power, rises with bandwidth and span, and stays within 0 and 1', () => {
    let before = 1;
    for (let power = 0; power <= 1; power += 1 / 512) {
      const here = sinusoidFalseAlarm(power, setting());
      expect(here).toBeGreaterThanOrEqual(0);
      expect(here).toBeLessThanOrEqual(before);
      expect(sinusoidFalseAlarm(power, setting({ bandwidthPerDay: 3 }))).toBeGreaterThanOrEqual(here);
      expect(sinusoidFalseAlarm(power, setting({ timeVarianceDays2: 300 ** 2 }))).toBeGreaterThanOrEqual(
        here,
      );
      expect(sinusoidFalseAlarm(power, setting({ backgroundCount: 8 }))).toBeGreaterThanOrEqual(here);
      before = here;
    }
    expect(sinusoidFalseAlarm(0, setting())).toBe(1);
    expect(sinusoidFalseAlarm(1, setting())).toBe(0);
    expect(sinusoidFalseAlarm(-0.1, setting())).toBe(1);
    expect(sinusoidFalseAlarm(1.1, setting())).toBe(0);
  });

  it('is 1 when no degree of freedom is left', () => {
    expect(sinusoidFalseAlarm(0.99, setting({ dataCount: 5, backgroundCount: 3 }))).toBe(1);
    expect(sinusoidFalseAlarm(0.99, setting({ dataCount: 5, backgroundCount: 7 }))).toBe(1);
  });

  it('powerAtFalseAlarm inverts it, from 0.5 to 1e-30', () => {
    for (const dataCount of [12, 60, 800]) {
      for (const probability of [0.5, 0.1, 0.01, 1e-3, 1e-9, 1e-30]) {
        const power = powerAtFalseAlarm(probability, setting({ dataCount }));
        expectWithin(sinusoidFalseAlarm(power, setting({ dataCount })), probability, {
          rel: (dataCount * Number.EPSILON) / (1 - power) + 1e-12,
          unit: '1',
          why: 'the neighbouring doubles of a power near 1 raise (1 - power) to the power of n/2',
        });
      }
    }
  });
});

describe('false-alarm probability of an eccentric shape', () => {
  it('falls with the gain, stays within 0 and 1, is larger than that of a sinusoid of the same gain', () => {
    let before = 1;
    for (let gain = 0; gain < 120; gain += 0.25) {
      const here = shapeFalseAlarm(gain, setting());
      expect(here).toBeLessThanOrEqual(before);
      expect(here).toBeGreaterThanOrEqual(0);
      before = here;
      if (gain > 8)
        expect(here).toBeGreaterThan(
          0.5 * sinusoidFalseAlarm(powerOfGain(gain, 60), setting({ backgroundCount: 0 })),
        );
    }
    expect(before).toBeGreaterThan(0);
    expect(shapeFalseAlarm(-3, setting())).toBe(1);
    expect(shapeFalseAlarm(NaN, setting())).toBe(1);
    expect(shapeFalseAlarm(50, setting({ dataCount: 8 }))).toBe(1);
  });

  it('powerOfGain undoes the gain of a sinusoid with the noise level refitted, -(n/2) ln(1 - power)', () => {
    for (const power of [1e-9, 0.1, 0.5, 0.99]) {
      expectWithin(powerOfGain(-0.5 * 37 * Math.log1p(-power), 37), power, {
        rel: 1e-12,
        unit: '1',
        why: 'one logarithm and one exponential',
      });
    }
    expect(powerOfGain(-1, 37)).toBe(0);
  });
});
