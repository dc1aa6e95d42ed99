/** Dips whose time is roughly known, and dips in a single night. */
import { describe, expect, it } from 'vitest';
import { dipOfEphemeris, dipOfNight } from '../../../src/solving/joint/event-dips.js';
import { findKnownDip, type DipRun } from '../../../src/solving/joint/known-dip.js';
import { expectWithin } from '../../support/expect-within.js';
import { seeded } from './recipes.js';
import { cadence, START_BJD, tableOf } from './simulate.js';

const SIGMA = 1.2e-3;
const DURATION = 0.11;
const DEPTH = 0.009;

/** Slopes of a fifth of the duration: not the shape that is searched with. */
function dip(offset: number): number {
  const inside = 0.5 * DURATION - Math.abs(offset);
  return inside <= 0 ? 0 : DEPTH * Math.min(1, inside / (0.2 * DURATION));
}

const airmassAt = (time: number): number => 1.05 + 9 * (time + 0.07) ** 2;

/** A night of five hours around time 0, on a slope and behind air. */
function night(seed: number, middle: number, share = 1): DipRun {
  const random = seeded(seed);
  const timesDays = Float64Array.from({ length: 150 }, (_, i) => -0.1 + 0.0014 * i);
  return {
    timesDays,
    flux: timesDays.map(
      (time) =>
        (1 + 0.03 * time - 0.05 * airmassAt(time)) * (1 - share * dip(time - middle)) +
        SIGMA * random.normal(),
    ),
    sigmas: new Float64Array(150).fill(SIGMA),
    airmass: timesDays.map(airmassAt),
    midTimeDays: 0,
  };
}

describe('a dip whose time is roughly known', () => {
  it('is found under a slope and airmass, with its middle, duration and depth', () => {
    for (const [seed, middle] of [[1, 0], [2, 0.018], [3, -0.025]] as const) {
      const found = findKnownDip([night(seed, middle)], 0.05, 0.2)!;
      expectWithin(found.midTimeDays, middle, { abs: DURATION / 8, unit: 'd', why: 'steps of an eighth of the duration' });
      expectWithin(found.durationDays, DURATION, { rel: 0.3, unit: 'd', why: 'steps of 20 %; slopes of another share' });
      expectWithin(found.depth, DEPTH * 0.95, { rel: 0.25, unit: '1', why: 'the baseline takes part of a long dip' });
      expect(found.gain).toBeGreaterThan(100);
    }
  }); // prettier-ignore

  it('is found in several nights together that hardly show it by themselves', () => {
    const runs = Array.from({ length: 6 }, (_, i) => night(10 + i, 0.01, 0.25));
    const together = findKnownDip(runs, 0.05, 0.2)!;
    expect(together.events).toBe(6);
    expect(together.gain).toBeGreaterThan(40);
    expectWithin(together.midTimeDays, 0.01, { abs: DURATION / 6, unit: 'd', why: 'steps of an eighth' });
    expectWithin(together.depth, 0.25 * DEPTH, { rel: 0.4, unit: '1', why: 'signal to noise of about ten' });
  });

  it('is not seen in noise: the gain stays below what is believed', () => {
    let largest = 0;
    for (let seed = 100; seed < 160; seed++)
      largest = Math.max(largest, findKnownDip([night(seed, 0, 0)], 0.05, 0.2)?.gain ?? 0);
    // 60 nights with some 30 independent trials each; the thresholds are 30 and 40.
    expect(largest).toBeLessThan(30);
  });

  it('needs points', () => {
    const whole = night(1, 0);
    const few = {
      ...whole,
      timesDays: whole.timesDays.slice(0, 6),
      flux: whole.flux.slice(0, 6),
      sigmas: whole.sigmas.slice(0, 6),
      airmass: null,
    };
    expect(findKnownDip([few], 0.05, 0.2)).toBeNull();
  });
});

describe('dips of tables', () => {
  const middle = START_BJD + 0.42;
  const table = (name: string, around: number, share: number, seed: number) => {
    const random = seeded(seed);
    const timesBjdTdb = cadence(around - 0.11, around + 0.13, 0.0015);
    return tableOf(
      { name, timesBjdTdb, sigma: SIGMA, companions: [], airmass: (time) => airmassAt(time - around) },
      timesBjdTdb.map(
        (time) => (1 - 0.04 * airmassAt(time - around)) * (1 - share * dip(time - around)) + SIGMA * random.normal(),
      ),
    );
  };
  const known = { periodDays: 2.9, midTimeDays: 0.42 - 5 * 2.9 + 0.01, midTimeSigmaDays: 0.006, periodSigmaDays: 0.001 };

  it('are found at the times of an ephemeris that is off by a tenth of a duration', () => {
    const found = dipOfEphemeris([table('one', middle, 1, 1), table('two', middle + 2.9 * 3, 1, 2)], START_BJD, known)!;
    expect(found.events).toBe(2);
    expectWithin(found.depth, DEPTH, { rel: 0.25, unit: '1', why: 'shape and baseline' });
  });

  it('are not found where there is noise, or no event', () => {
    for (let seed = 20; seed < 35; seed++)
      expect(dipOfEphemeris([table('one', middle, 0, seed)], START_BJD, known)).toBeNull();
    expect(dipOfEphemeris([table('one', middle + 1.4, 1, 3)], START_BJD, known)).toBeNull();
  });

  it('of a single night are found wherever they lie', () => {
    const found = dipOfNight(table('one', middle, 1, 4), START_BJD)!;
    expectWithin(found.midTimeDays, 0.42, { abs: DURATION / 8, unit: 'd', why: 'steps of an eighth' });
    expect(found.gain).toBeGreaterThan(100);
  });
}); // prettier-ignore
