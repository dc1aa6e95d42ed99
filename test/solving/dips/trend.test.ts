import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { slowTrend } from '../../../src/solving/dips/trend.js';
import { lightCurve } from './simulate.js';

const WINDOW = 1.6;
const slow = (time: number): number => 0.01 * Math.sin((2 * Math.PI * time) / 9);
const base = { spanDays: 20, stepDays: 1 / 96, sigma: 2e-4, seed: 3, trend: slow };

function largest(values: Float64Array, rows: (index: number) => boolean): number {
  return values.reduce((top, value, i) => (rows(i) ? Math.max(top, Math.abs(value)) : top), 0);
}

describe('slowTrend', () => {
  it('follows a star that varies by 1 % in 9 d, to the noise of the window', () => {
    const data = lightCurve({ ...base, dips: [] });
    const trend = slowTrend(data.timesDays, data.flux, new Uint8Array(data.flux.length), WINDOW);
    const errors = trend.map((value, i) => value / (1 + slow(data.timesDays[i]!)) - 1);
    // 150 points a window, medians of narrow bins: 2e-4 sqrt(2.25 * 1.6/150) = 3e-5, at most 4 of it; more at the two ends.
    expect(largest(errors, (i) => i > 80 && i < errors.length - 80)).toBeLessThan(1.3e-4);
    expect(largest(errors, () => true)).toBeLessThan(4e-4);
  });

  it('does not eat a deep dip a fifth of the window long', () => {
    const dip = { periodDays: 4, midTimeDays: 1.7, durationDays: 0.32, depth: 0.008 };
    const data = lightCurve({ ...base, dips: [dip] });
    const trend = slowTrend(data.timesDays, data.flux, new Uint8Array(data.flux.length), WINDOW);
    const errors = trend.map((value, i) => value / (1 + slow(data.timesDays[i]!)) - 1);
    expect(largest(errors, (i) => i > 80 && i < errors.length - 80)).toBeLessThan(3e-4);
  });

  it('goes straight through what is masked, however deep', () => {
    const dip = { periodDays: 5, midTimeDays: 2.4, durationDays: 0.5, depth: 0.3 };
    const data = lightCurve({ ...base, dips: [dip] });
    const masked = Uint8Array.from(data.timesDays, (time) => {
      const turns = (time - 2.4) / 5;
      return Math.abs(turns - Math.round(turns)) * 5 < 0.27 ? 1 : 0;
    });
    const trend = slowTrend(data.timesDays, data.flux, masked, WINDOW);
    const errors = trend.map((value, i) => value / (1 + slow(data.timesDays[i]!)) - 1);
    // A parabola across a third of the window without points: 1e-4, at most 5 of it.
    expect(largest(errors, (i) => i > 80 && i < errors.length - 80)).toBeLessThan(5e-4);
  });

  it('starts afresh after a gap: a jump there does not reach across', () => {
    const jump = (time: number): number => (time > 10 ? 0.02 : 0);
    const data = lightCurve({
      ...base, dips: [], trend: jump, isObserved: (time) => time < 9.5 || time > 10.5,
    }); // prettier-ignore
    const trend = slowTrend(data.timesDays, data.flux, new Uint8Array(data.flux.length), WINDOW);
    const errors = trend.map((value, i) => value / (1 + jump(data.timesDays[i]!)) - 1);
    expect(largest(errors, () => true)).toBeLessThan(3e-4);
  });

  it('copes with a single point, with everything masked, and with equal times', () => {
    const one = slowTrend(Float64Array.of(3), Float64Array.of(1.2), new Uint8Array(1), WINDOW);
    expect([...one]).toEqual([1.2]);
    const flux = Float64Array.of(1, 2, 3);
    expect([...slowTrend(Float64Array.of(1, 2, 3), flux, Uint8Array.of(1, 1, 1), 9)]).toEqual([2, 2, 2]);
    expect([...slowTrend(Float64Array.of(1, 1, 1), flux, new Uint8Array(3), 9)]).toEqual([2, 2, 2]);
  });

  it('is finite for any spacing', () => {
    const random = RandomStream.fromSeed(8);
    for (let trial = 0; trial < 30; trial++) {
      const n = 1 + random.integerBelow(60);
      const times = Float64Array.from({ length: n }, () => random.uniformBetween(0, 30)).sort();
      const flux = times.map(() => 1 + 0.01 * random.normal());
      const masked = Uint8Array.from(times, () => random.integerBelow(2));
      const trend = slowTrend(times, flux, masked, random.uniformBetween(0.05, 40));
      expect(trend.every((value) => Number.isFinite(value))).toBe(true);
    }
  });
});
