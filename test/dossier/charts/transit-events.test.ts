import { describe, expect, it } from 'vitest';
import { makeCloud } from '../../../src/dossier/charts/density-cloud.js';
import { ephemerisSigma } from '../../../src/dossier/charts/mid-times-chart.js';
import { parityDepth } from '../../../src/dossier/charts/odd-even-chart.js';
import { placeStretches, stretchesOf } from '../../../src/dossier/charts/time-stretches.js';
import { binTransit, curveAt, joined, shownEvents } from '../../../src/dossier/charts/transit-events.js';
import type { ShownEvent } from '../../../src/dossier/charts/transit-events.js';
import { expectWithin } from '../../support/expect-within.js';
import { makePhotometrySolved } from '../../support/photometry-fixture.js';
import { randomSource } from '../../support/solved-fixture.js';

const event = (hours: number[], flux: number[], model: number[], sigma = 1e-3): ShownEvent => ({
  table: 't',
  band: 'r',
  cycle: 0,
  midTimeBjdTdb: 0,
  hours: Float64Array.from(hours),
  flux: Float64Array.from(flux),
  model: Float64Array.from(model),
  sigmas: Float64Array.from(hours, () => sigma),
});

describe('transits as charts show them', () => {
  const solved = makePhotometrySolved({ companions: 2, cadenceMinutes: 6 });
  it('leave every residual as it is: flux less model is flux over baseline less transit', () => {
    const { fitted } = solved.photometry!;
    for (const one of shownEvents(solved, 'c')) {
      const table = fitted.find(({ name }) => name === one.table)!;
      one.hours.forEach((hours, i) => {
        const time = one.midTimeBjdTdb + hours / 24;
        let row = 0;
        for (let k = 1; k < table.timesBjdTdb.length; k += 1)
          if (Math.abs(table.timesBjdTdb[k]! - time) < Math.abs(table.timesBjdTdb[row]! - time)) row = k;
        const want = table.flux[row]! / table.baseline[row]! - table.transit[row]!;
        expectWithin(one.flux[i]! - one.model[i]!, want, { abs: 1e-12, unit: '1', why: 'rounding' });
      });
    }
  });
  it('are counted once for each table and cycle, in the order of cycles', () => {
    const events = shownEvents(solved, 'b');
    const cycles = events.map(({ cycle }) => cycle);
    expect(cycles).toEqual([...cycles].sort((one, other) => one - other));
    expect(new Set(events.map(({ table, cycle }) => `${table} ${cycle}`)).size).toBe(events.length);
    expect(cycles).toEqual(expect.arrayContaining([0, 1, 2, 12, 19]));
  });
  it('of an unknown companion are none', () => {
    expect(shownEvents(solved, 'z')).toEqual([]);
  });
});

it('a dense curve is joined by lines and is 1 beyond its ends', () => {
  const curve = { letter: 'b', band: 'r', hoursFromMidTransit: Float64Array.of(-1, 0, 2), flux: Float64Array.of(1, 0.9, 0.98) }; // prettier-ignore
  expect(curveAt(curve, -0.5)).toBeCloseTo(0.95, 14);
  expect(curveAt(curve, 1)).toBeCloseTo(0.94, 14);
  expect(curveAt(curve, 2)).toBeCloseTo(0.98, 14);
  expect([curveAt(curve, -1.01), curveAt(curve, 2.01)]).toEqual([1, 1]);
});

describe('bins', () => {
  it('hold the weighted means of the residuals by their definition', () => {
    const random = randomSource(3);
    const hours = Array.from({ length: 300 }, () => 4 * random.uniform() - 2);
    const points = event(hours, hours.map(() => 1 + 1e-3 * random.gauss()), hours.map(() => 1)); // prettier-ignore
    const bins = binTransit(points, 2, 8);
    expect(bins).toHaveLength(8);
    expect(bins.reduce((sum, { count }) => sum + count, 0)).toBe(300);
    bins.forEach((bin, index) => {
      const own = hours.flatMap((value, i) =>
        Math.floor((value + 2) / 0.5) === index ? [points.flux[i]! - 1] : [],
      );
      const mean = own.reduce((sum, value) => sum + value, 0) / own.length;
      expectWithin(bin.residual, mean, { abs: 1e-15, unit: '1', why: 'rounding' });
      expect(bin.sigma).toBeGreaterThanOrEqual(1e-3 / Math.sqrt(own.length) - 1e-12);
    });
  });
});

describe('depth of odd and even transits', () => {
  it('gives back a stretched dip, and the error of a mean', () => {
    const model = Array.from({ length: 400 }, (_, i) => (i % 2 === 0 ? 0.99 : 1));
    const random = randomSource(8);
    const flux = model.map((value) => 1 - 1.3 * (1 - value) + 1e-3 * random.gauss());
    const { factor, factorSigma } = parityDepth([event(model.map((_, i) => i), flux, model)])!; // prettier-ignore
    // 200 points of 1e-3 in a dip of 0.01: 0.1 / sqrt(200).
    expectWithin(factorSigma, 0.1 / Math.sqrt(200), { rel: 0.12, unit: '1', why: 'scatter of chi-square of 200 points, 10 %' }); // prettier-ignore
    expectWithin(factor, 1.3, { abs: 4 * factorSigma, unit: '1', why: 'four standard errors' });
  });
  it('is not there where no point lies in the dip', () => {
    expect(parityDepth([event([1, 2], [1, 1], [1, 1])])).toBeNull();
    expect(parityDepth([])).toBeNull();
  });
});

describe('the error of an ephemeris between its data', () => {
  it('is exact for a linear ephemeris: the root of a parabola', () => {
    const cycles = Int32Array.of(-620, -300, -41, 0, 12, 700);
    const sigma = (cycle: number): number => Math.hypot(0.12, 0.0006 * (cycle - 33));
    const at = ephemerisSigma(cycles, Float64Array.from(cycles, sigma));
    for (const cycle of [-700, -100, 33, 400, 900])
      expectWithin(at(cycle), sigma(cycle), { rel: 1e-9, unit: 'min', why: 'rounding of the elimination' });
  });
  it.each([[[5]], [[5, 9]], [[5, 5]]])('does without a parabola for cycles %j', (cycles) => {
    const at = ephemerisSigma(
      cycles,
      Float64Array.from(cycles, () => 0.3),
    );
    for (const cycle of [-50, 5, 80]) expect(at(cycle)).toBeCloseTo(0.3, 12);
  });
});

describe('a time axis with gaps cut out', () => {
  it('keeps short gaps and cuts long ones', () => {
    const days = (from: number, to: number): number[] => Array.from({ length: 200 }, (_, i) => from + ((to - from) * i) / 199); // prettier-ignore
    const found = stretchesOf(Float64Array.from([...days(0, 13), ...days(14.5, 27), ...days(400, 427)]));
    expect(found).toEqual([{ low: 0, high: 27 }, { low: 400, high: 427 }]); // prettier-ignore
    expect(stretchesOf(Float64Array.from(days(0, 27)))).toEqual([{ low: 0, high: 27 }]);
    expect(stretchesOf(Float64Array.of(3))).toEqual([{ low: 3, high: 3 }]);
  });
  it('fills the width with stretches that do not overlap', () => {
    const placed = placeStretches([{ low: 0, high: 27 }, { low: 400, high: 401 }], { left: 50, top: 0, width: 600, height: 10 }, 9); // prettier-ignore
    const [one, other] = placed.map(({ box }) => box);
    expect(one!.left).toBe(50);
    expectWithin(other!.left, one!.left + one!.width + 9, { abs: 1e-9, unit: 'px', why: 'rounding' });
    expectWithin(other!.left + other!.width, 650, { abs: 1e-9, unit: 'px', why: 'rounding' });
  });
});

describe('a crowd of points', () => {
  it('loses no point that lies alone, and covers nothing else', () => {
    const box = { left: 10, top: 5, width: 100, height: 40 };
    const x = Float64Array.of(10.5, 50.2, 50.4, 109.9, 300);
    const y = Float64Array.of(5.5, 20.1, 20.9, 44.5, 20);
    const strokes = makeCloud(x, y, box).levels.flatMap((level) =>
      Array.from({ length: level.length / 3 }, (_, i) => Array.from(level.subarray(3 * i, 3 * i + 3))),
    );
    expect(strokes.sort((one, other) => one[0]! - other[0]!)).toEqual([
      [10.5, 5, 6],
      [50.5, 20, 21],
      [109.5, 44, 45],
    ]);
  });
  it('draws denser cells at higher levels', () => {
    const x = Float64Array.from({ length: 1000 }, (_, i) => (i < 900 ? 20.5 : 30.5 + (i % 50)));
    const { levels } = makeCloud(x, x.map(() => 20.5), { left: 10, top: 5, width: 100, height: 40 }); // prettier-ignore
    expect(Array.from(levels.at(-1)!)).toEqual([20.5, 20, 21]);
    expect(levels.slice(0, -1).reduce((sum, level) => sum + level.length / 3, 0)).toBe(50);
  });
});

it('points of several transits are joined in their order', () => {
  const all = joined([event([1], [0.9], [1]), event([2, 3], [0.8, 0.7], [1, 1])]);
  expect(Array.from(all.hours)).toEqual([1, 2, 3]);
  expect(Array.from(all.flux)).toEqual([0.9, 0.8, 0.7]);
});
