import { describe, expect, it } from 'vitest';
import { eventsWithin, windowsOf, type Ephemeris } from '../../../src/solving/joint/curve-windows.js';
import { carriedTo } from '../../../src/solving/joint/carry-natural.js';
import { NaturalIndex } from '../../../src/solving/joint/natural.js';
import { prepareCurve } from '../../../src/solving/joint/prepare-curve.js';
import { expectWithin } from '../../support/expect-within.js';
import { curve, naturalPoint, recipe, seeded } from './recipes.js';
import { cadence, START_BJD, tableOf } from './simulate.js';

const EPHEMERIS: Ephemeris = {
  letter: 'b',
  periodDays: 4,
  midTimeDays: 1,
  durationDays: 0.1,
  depth: 0.01,
  occultationLagDays: null,
};

function steps(from: number, to: number, step: number): Float64Array {
  return Float64Array.from({ length: Math.floor((to - from) / step) + 1 }, (_, i) => from + i * step);
}

describe('events within a span', () => {
  it('are those of the ephemeris, with their cycles, in order', () => {
    const events = eventsWithin([EPHEMERIS, { ...EPHEMERIS, letter: 'c', periodDays: 7, midTimeDays: 2.5 }], -4, 10);
    expect(events.map(({ letter, cycle, midTimeDays }) => [letter, cycle + 0, midTimeDays])).toEqual([
      ['b', -1, -3],
      ['b', 0, 1],
      ['c', 0, 2.5],
      ['b', 1, 5],
      ['b', 2, 9],
      ['c', 1, 9.5],
    ]);
  }); // prettier-ignore

  it('are one where the period is unknown', () => {
    expect(eventsWithin([{ ...EPHEMERIS, periodDays: null }], -100, 100)).toHaveLength(1);
    expect(eventsWithin([{ ...EPHEMERIS, periodDays: null }], 2, 100)).toHaveLength(0);
  });

  it('include occultations where these are fitted', () => {
    const events = eventsWithin([{ ...EPHEMERIS, occultationLagDays: 1.9 }], 0, 4);
    expect(events.map(({ midTimeDays }) => midTimeDays)).toEqual([1, 2.9]);
  });
});

describe('the points of a fit', () => {
  it('are those within 1.5 durations of an event, one run per event', () => {
    const times = steps(0, 12, 0.01);
    const windows = windowsOf(times, [EPHEMERIS]);
    expect(windows).toHaveLength(3);
    windows.forEach(({ start, end }, w) => {
      const middle = 1 + 4 * w;
      times.forEach((time, i) => {
        const isNear = Math.abs(time - middle) < 0.15 - 1e-9;
        const isFar = Math.abs(time - middle) > 0.15 + 1e-9;
        if (isNear) expect(i >= start && i < end, `${time}`).toBe(true);
        if (isFar) expect(i >= start && i < end, `${time}`).toBe(false);
      });
    });
  });

  it('of neighbouring events of two companions are one run with both', () => {
    const windows = windowsOf(steps(0, 3, 0.01), [
      EPHEMERIS,
      { ...EPHEMERIS, letter: 'c', midTimeDays: 1.2 },
    ]);
    expect(windows).toHaveLength(1);
    expect(windows[0]!.events.map(({ letter }) => letter)).toEqual(['b', 'c']);
  });

  it('are the whole night where the table is one', () => {
    const times = steps(0.8, 1.3, 0.004);
    expect(windowsOf(times, [EPHEMERIS])).toMatchObject([{ start: 0, end: times.length }]);
    expect(windowsOf(steps(2, 2.5, 0.004), [EPHEMERIS])).toEqual([]);
  });

  it('of half-hour exposures and a transit of one hour still are enough', () => {
    const hour = { ...EPHEMERIS, durationDays: 1 / 24 };
    const windows = windowsOf(steps(0.003, 24, 0.5 / 24), [hour]);
    expect(windows).toHaveLength(6);
    for (const { start, end } of windows) expect(end - start).toBeGreaterThanOrEqual(8);
  });

  it('leave out events with too few of them', () => {
    const times = steps(0, 12, 0.01).filter((time) => Math.abs(time - 5) > 0.13);
    expect(windowsOf(times, [EPHEMERIS]).map(({ events }) => events[0]!.cycle + 0)).toEqual([0, 2]);
  });
});

describe('a light curve prepared for the fit', () => {
  /** 12 events of 0.1 d at a cadence of a minute: 432 points each. A gap lies in the first one. */
  const STEP = 1 / 1440;
  const inGap = (time: number): boolean => Math.abs(time - START_BJD - 1.0151) < 0.004;
  const times = cadence(START_BJD, START_BJD + 48, STEP).filter((time) => !inGap(time));
  const table = tableOf(
    {
      name: 'survey',
      timesBjdTdb: times,
      sigma: 1e-3,
      exposureDays: STEP / 2,
      companions: [],
      airmass: (time) => 1 + 0.1 * Math.sin(time),
    },
    times.map((time) => 1 + 1e-3 * (time - START_BJD)),
  );
  const prepared = prepareCurve(table, START_BJD, [{ ...EPHEMERIS, durationDays: 0.2 }], 0, ['time', 'airmass'])!;
  const { data, averaged, windows } = prepared;

  it('averages neighbours where there are many points', () => {
    expect(averaged).toBeGreaterThan(1);
    // An average of n equal steps s, each an exposure x long, spreads like one exposure of root (s^2 (n^2 - 1) + x^2):
    // the variance of a uniform distribution is a twelfth of its squared width, that of n points s^2 (n^2 - 1)/12.
    expectWithin(data.exposureDays, Math.sqrt(STEP ** 2 * (averaged ** 2 - 1) + (STEP / 2) ** 2), {
      rel: 1e-6,
      unit: 'd',
      why: 'dates of seven digits before the point',
    });
    expect(data.exposureDays).toBeLessThan(0.2 / 40 + STEP);
  });

  it('keeps weight, mean and error of what it averages', () => {
    // Flux is a straight line in time, so that means of both lie on it.
    data.timesDays.forEach((time, i) => {
      expectWithin(data.flux[i]!, 1 + 1e-3 * time, { abs: 1e-12, unit: '1', why: 'rounding of dates' });
      expectWithin(data.sigmas[i]!, 1e-3 / Math.sqrt(data.averaged[i]!), { rel: 1e-12, unit: '1', why: 'equal weights' });
    });
    const used = windows.reduce((sum, { start, end }) => {
      for (let i = start; i < end; i++) sum += data.averaged[i]!;
      return sum;
    }, 0);
    const inside = times.filter((time) => {
      const phase = (time - START_BJD - 1) / 4;
      return Math.abs(phase - Math.round(phase)) * 4 < 0.3;
    });
    expect(Math.abs(used - inside.length)).toBeLessThanOrEqual(2 * windows.length);
  }); // prettier-ignore

  it('never averages across a gap', () => {
    // The table is a grid of steps with a hole: an average that spans the hole would have its middle in it.
    const hole = times.findIndex((time, i) => time - times[i - 1]! > 3 * STEP);
    const [before, after] = [times[hole - 1]! - START_BJD, times[hole]! - START_BJD];
    expect(after - before).toBeGreaterThan(3 * STEP);
    data.timesDays.forEach((middle) => {
      expect(middle > before + 1e-9 && middle < after - 1e-9, `${middle}`).toBe(false);
    });
    expect(data.averaged.some((count) => count < averaged)).toBe(true);
  });

  it('centres and scales the terms of the baseline in every run of points', () => {
    for (const { start, end, columns, design } of data.segments) {
      expect(columns).toBe(3);
      const rows = end - start;
      for (let j = 0; j < columns; j++) {
        const own = Array.from({ length: rows }, (_, i) => design[i * columns + j]!);
        const mean = own.reduce((sum, value) => sum + value, 0) / rows;
        const square = own.reduce((sum, value) => sum + (value - mean) ** 2, 0) / rows;
        if (j === 0) expect(own.every((value) => value === 1)).toBe(true);
        else {
          expect(Math.abs(mean)).toBeLessThan(1e-9);
          expectWithin(square, 1, { rel: 2 / rows, unit: '1', why: 'n or n - 1' });
        }
      }
    }
  });

  it('says which points they are', () => {
    expect(prepared.selection).toMatch(/of \d+ points: those within 1.5 durations of an event \(12 runs\), averaged by/);
  });

  it('is none where no event falls into the table', () => {
    expect(prepareCurve(table, START_BJD, [{ ...EPHEMERIS, periodDays: null, midTimeDays: -9 }], 0, [])).toBeNull();
  });
}); // prettier-ignore

describe('natural parameters carried to another recipe', () => {
  const one = curve(seeded(1));
  const bands = [{ name: 'V', u1: null, u2: null }, { name: 'R', u1: null, u2: null }];
  const both = recipe({ curves: [{ ...one, name: 'a' }, { ...one, name: 'b', band: 1 }], bands });
  const only = recipe({ curves: [{ ...one, name: 'b' }], bands: [bands[1]!] });

  it('follow their band and table when another table drops out', () => {
    const from = new NaturalIndex(both);
    const to = new NaturalIndex(only);
    const natural = naturalPoint(both);
    natural[from.band(1)] = 0.77;
    natural[from.curveJitter(1)] = 3e-3;
    natural[from.occultationDepth(0, 1)] = 5e-4;
    const carried = carriedTo(natural, both, only);
    expect(carried[to.band(0)]).toBe(0.77);
    expect(carried[to.curveJitter(0)]).toBe(3e-3);
    expect(carried[to.occultationDepth(0, 0)]).toBe(5e-4);
    expect(carried[to.logStarDensity]).toBe(natural[from.logStarDensity]);
  });

  it('begin anew for a table that comes in', () => {
    const to = new NaturalIndex(both);
    const carried = carriedTo(naturalPoint(only), only, both);
    expect(carried[to.curveJitter(0)]).toBe(0.5 * one.typicalSigma);
    expect(carried[to.band(1)]).toBe(naturalPoint(only)[new NaturalIndex(only).band(0)]);
    expect(carried.every(Number.isFinite)).toBe(true);
  });
}); // prettier-ignore
