import { describe, expect, it } from 'vitest';
import { MOST_CYCLES_DRAWN, sampleCompanions, sampleModel } from '../../../src/dossier/charts/model-curve.js';
import { evaluateVelocity } from '../../../src/signals/evaluate-velocity.js';
import {
  highlyEccentric,
  hotCircular,
  manyInstruments,
  threeCompanions,
} from '../../support/solved-cases.js';

/** Largest distance of a polyline from the model on a grid of `n` times, in units of the model's range. */
function worstMiss(
  line: { timesBjdTdb: Float64Array; velocitiesMps: Float64Array },
  model: (times: Float64Array) => Float64Array,
  n: number,
): number {
  const { timesBjdTdb: t, velocitiesMps: v } = line;
  const [from, to] = [t[0]!, t[t.length - 1]!];
  const grid = Float64Array.from({ length: n }, (_, i) => from + ((to - from) * i) / (n - 1));
  const truth = model(grid);
  let [worst, low, high, k] = [0, Infinity, -Infinity, 0];
  grid.forEach((time, i) => {
    while (k < t.length - 2 && t[k + 1]! < time) k += 1;
    const fraction = (time - t[k]!) / (t[k + 1]! - t[k]!);
    worst = Math.max(worst, Math.abs(v[k]! + fraction * (v[k + 1]! - v[k]!) - truth[i]!));
    low = Math.min(low, truth[i]!);
    high = Math.max(high, truth[i]!);
  });
  return worst / (high - low);
}

describe('sampleCompanions', () => {
  it('stays within 0.03 % of the range of an orbit of e = 0.93, with few samples', () => {
    const { best } = highlyEccentric();
    const period = best.companions[0]!.periodDays;
    const start = best.companions[0]!.timePeriastronBjdTdb - 0.9 * period;
    const line = sampleCompanions(best, [0], false, start, start + 2.2 * period);
    const miss = worstMiss(line, (times) => evaluateVelocity(best, times), 200_001);
    expect(miss).toBeLessThan(3e-4); // measured 8.3e-5
    expect(line.timesBjdTdb.length).toBeLessThan(1000);
  });
  it('does the same for three companions with a drift', () => {
    const { best } = threeCompanions();
    const line = sampleCompanions(best, [0, 1, 2], true, best.epochBjdTdb - 300, best.epochBjdTdb + 300);
    expect(worstMiss(line, (times) => evaluateVelocity(best, times), 100_001)).toBeLessThan(3e-4);
  });
  it('gives ascending times that begin and end where asked', () => {
    const { best } = hotCircular();
    const line = sampleCompanions(best, [0], false, best.epochBjdTdb, best.epochBjdTdb + 10);
    expect(line.timesBjdTdb[0]).toBe(best.epochBjdTdb);
    expect(line.timesBjdTdb.at(-1)).toBe(best.epochBjdTdb + 10);
    line.timesBjdTdb.forEach((time, i) => {
      if (i > 0) expect(time).toBeGreaterThan(line.timesBjdTdb[i - 1]!);
    });
  });
});

describe('sampleModel', () => {
  it('makes a band of a companion with too many cycles, which holds the model and is no wider than it must be', () => {
    const { best } = manyInstruments();
    const [from, to] = [best.epochBjdTdb - 1500, best.epochBjdTdb + 1500];
    expect((to - from) / best.companions[0]!.periodDays).toBeGreaterThan(MOST_CYCLES_DRAWN);
    const band = sampleModel(best, from, to);
    expect(band.bandOf).toEqual([0]);
    const n = 300_001;
    const grid = Float64Array.from({ length: n }, (_, i) => from + ((to - from) * i) / (n - 1));
    const truth = evaluateVelocity(best, grid);
    let [k, nearestTop, nearestBottom] = [0, Infinity, Infinity];
    const slack = 0.05; // m/s; straight pieces may cut 3e-4 of a range of 84 m/s
    grid.forEach((time, i) => {
      while (k < band.timesBjdTdb.length - 2 && band.timesBjdTdb[k + 1]! < time) k += 1;
      const f = (time - band.timesBjdTdb[k]!) / (band.timesBjdTdb[k + 1]! - band.timesBjdTdb[k]!);
      const top = band.highMps[k]! + f * (band.highMps[k + 1]! - band.highMps[k]!);
      const bottom = band.lowMps[k]! + f * (band.lowMps[k + 1]! - band.lowMps[k]!);
      nearestTop = Math.min(nearestTop, top - truth[i]!);
      nearestBottom = Math.min(nearestBottom, truth[i]! - bottom);
    });
    expect(nearestTop).toBeGreaterThan(-slack);
    expect(nearestBottom).toBeGreaterThan(-slack);
    expect(nearestTop).toBeLessThan(slack);
    expect(nearestBottom).toBeLessThan(slack);
  });
  it('draws a line where the cycles can be told apart', () => {
    const { best } = highlyEccentric();
    const line = sampleModel(best, best.epochBjdTdb - 1000, best.epochBjdTdb + 1000);
    expect(line.bandOf).toEqual([]);
    expect(line.lowMps).toEqual(line.highMps);
  });
});
