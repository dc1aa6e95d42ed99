import { describe, expect, it } from 'vitest';
import {
  durationRange,
  centralDurationDays,
  longestDurationDays,
  shortestDurationDays,
} from '../../../src/solving/dips/duration-range.js';
import {
  errorScale,
  markOutliers,
  redNoiseFactor,
  usualSpacingDays,
} from '../../../src/solving/dips/noise.js';
import { searchFalseAlarm, trialsFalseAlarm } from '../../../src/solving/dips/false-alarm.js';
import { expectWithin } from '../../support/expect-within.js';
import { lightCurve } from './simulate.js';

const long = { spanDays: 400, stepDays: 0.02, sigma: 1e-3, seed: 5, dips: [] };

describe('noise', () => {
  it('scales stated errors to the scatter from point to point', () => {
    const data = lightCurve(long);
    const scale = errorScale(
      data.flux,
      data.sigmas.map((sigma) => 2 * sigma),
    );
    // Median absolute deviation of 20 000 differences: 0.8 % (correlated neighbours included).
    expectWithin(scale, 0.5, {
      abs: 0.015,
      unit: '1',
      why: 'errors stated twice too large; three standard errors',
    });
  });

  it('gives 1 for white noise and the closed form for damped red noise [Pont2006]', () => {
    const white = lightCurve(long);
    const weights = white.sigmas.map((sigma) => 1 / (sigma * sigma));
    const of = (flux: Float64Array): number =>
      redNoiseFactor({ timesDays: white.timesDays, values: flux.map((f) => f - 1), weights }, 0.4);
    expectWithin(of(white.flux), 1, { abs: 0.08, unit: '1', why: '1000 bins: 2 %' });
    const red = lightCurve({ ...long, red: { sigma: 5e-4, scaleDays: 0.3 } });
    // Variance of a mean of 20 points with correlation exp(-lag/0.3): 0.25/20 (1 + 2 sum (1 - k/20) exp(-0.02 k/0.3)).
    let sum = 1;
    for (let k = 1; k < 20; k++) sum += 2 * (1 - k / 20) * Math.exp((-0.02 * k) / 0.3);
    expectWithin(of(red.flux), Math.sqrt(1 + 0.25 * sum), {
      rel: 0.07,
      unit: '1',
      why: '1000 correlated bins: 2.5 %',
    });
  });

  it('leaves out high points and lone low ones, but not a run of low ones', () => {
    const values = Float64Array.of(0, 0.5, 9, -0.3, -9, 0.2, -9, -8, -9, 0);
    const marked = new Uint8Array(10);
    markOutliers(values, new Float64Array(10).fill(1), 'left out', marked);
    // The scatter of these ten is large, so nothing is an outlier; among many quiet ones they are.
    const quiet = Float64Array.from({ length: 200 }, (_, i) => (i % 2 === 0 ? 0.6 : -0.6));
    quiet.set(values, 100);
    const all = new Uint8Array(200);
    markOutliers(quiet, new Float64Array(200).fill(1), 'left out', all);
    expect(Array.from(all.subarray(100, 110))).toEqual([0, 0, 1, 0, 1, 0, 0, 0, 0, 0]);
    markOutliers(quiet, new Float64Array(200).fill(1), 'kept', all);
    expect(Array.from(all.subarray(100, 110))).toEqual([0, 0, 1, 0, 0, 0, 0, 0, 0, 0]);
  });

  it('knows the usual spacing', () => {
    expect(usualSpacingDays(Float64Array.of(0, 1, 2, 9, 10))).toBe(1);
    expect(usualSpacingDays(Float64Array.of(4))).toBeNaN();
  });
});

describe('durations', () => {
  it('are those of published densities: HD 209458, a/R 8.76, 1.0235 g/cm3', () => {
    // a/R and P of Torres, Winn, Holman 2008, ApJ 677, 1324; T = P/(pi a/R).
    expectWithin(centralDurationDays(3.52474859, 1.0235), 3.52474859 / (Math.PI * 8.76), {
      rel: 1e-3, unit: 'd', why: 'four digits of the density',
    }); // prettier-ignore
  });

  it('an Earth crosses the Sun in 13 hours', () => {
    expectWithin(24 * centralDurationDays(365.25, 1.40978), 12.98, {
      abs: 0.05,
      unit: 'h',
      why: '2 R_sun at 29.78 km/s',
    });
  });

  it('grow with the cube root of the period, within the spacing of the data and a share of the period', () => {
    const range = durationRange(1.4, 0.001);
    expectWithin(longestDurationDays(range, 8) / longestDurationDays(range, 1), 2, {
      rel: 1e-12,
      unit: '1',
      why: 'the law',
    });
    expect(shortestDurationDays(range, 10)).toBeLessThan(longestDurationDays(range, 10));
    expect(shortestDurationDays(durationRange(1.4, 0.2), 10)).toBe(0.2);
    expect(longestDurationDays(durationRange(null, 0.001), 0.3)).toBeLessThanOrEqual(0.15 * 0.3 + 1e-12);
  });
});

describe('false-alarm probabilities', () => {
  it('fall with the signal, grow with the search, and stay probabilities', () => {
    expect(searchFalseAlarm(0, 1e5)).toBe(1);
    expect(searchFalseAlarm(7, 1e5)).toBeLessThan(searchFalseAlarm(6, 1e5));
    expect(searchFalseAlarm(7, 1e6)).toBeGreaterThan(searchFalseAlarm(7, 1e5));
    expect(searchFalseAlarm(60, 1e9)).toBe(0);
  });

  it('of independent trials is 1 - (1 - p)^n', () => {
    // Normal tail at 3: 0.001349898031630095 (30-digit value of erfc(3/sqrt 2)/2).
    expectWithin(trialsFalseAlarm(3, 100), 1 - (1 - 0.001349898031630095) ** 100, {
      rel: 1e-10,
      unit: '1',
      why: 'rounding',
    });
  });
});
