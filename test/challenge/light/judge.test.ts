import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { expectWithin } from '../../support/expect-within.js';
import { areSameTransits, judge } from './judge.js';
import { LIGHT_KINDS } from './kinds.js';
import { foldedSignalToNoise, type LightRecipe, type Truth } from './simulate.js';

/** Ten transits, three days apart, of a tenth of a day. */
const TRUTH = {
  periodDays: 3,
  conjunctionBjdTdb: 2459001,
  durationDays: 0.1,
  seen: Array.from({ length: 10 }, (_, cycle) => 2459001 + 3 * cycle),
} as unknown as Truth;

describe('the same transits', () => {
  it('are those that keep within half a duration from the first to the last', () => {
    const at = (periodDays: number | null, midTimeBjdTdb: number): boolean =>
      areSameTransits({ periodDays, midTimeBjdTdb }, TRUTH);
    expect(at(3, 2459001)).toBe(true);
    expect(at(3, 2459001 + 3 * 7 + 0.04)).toBe(true);
    expect(at(3, 2459001.06)).toBe(false);
    expect(at(3 + 0.03 / 9, 2459001)).toBe(true);
    expect(at(3 + 0.06 / 9, 2459001)).toBe(false);
    // half and double the period hit transits, too, but not the same ones
    expect(at(1.5, 2459001)).toBe(false);
    expect(at(6, 2459001)).toBe(false);
    expect(at(null, 2459001)).toBe(false);
  });

  it('are counted once each; what belongs to nothing is a false claim', () => {
    const good = { periodDays: 3, midTimeBjdTdb: 2459004 };
    const strange = { periodDays: 1.7, midTimeBjdTdb: 2459004 };
    expect(judge([strange, good], [TRUTH])).toEqual({ matches: [1], falseClaims: 1 });
    expect(judge([], [TRUTH])).toEqual({ matches: [-1], falseClaims: 0 });
    expect(judge([strange], [])).toEqual({ matches: [], falseClaims: 1 });
  });
});

describe('simulated light curves', () => {
  it('have the signal-to-noise of the definition: a box of 1 %, 3 events of 16 points, errors of 1 %', () => {
    const loss = new Float64Array(300);
    for (const start of [20, 120, 220]) loss.fill(0.01, start, start + 16);
    const recipe = { sigma: 0.01, redNoise: null } as unknown as LightRecipe;
    const exact = { rel: 1e-12, unit: '1', why: 'rounding' };
    // 0.01 / (0.01 / sqrt 48)
    expectWithin(foldedSignalToNoise(loss, recipe), Math.sqrt(48), exact);
    // each event's depth has variance 0.01^2/16 + 0.005^2
    const red = { ...recipe, redNoise: { size: 0.005, timeDays: 1 } };
    expectWithin(foldedSignalToNoise(loss, red), 0.01 / Math.sqrt((0.01 ** 2 / 16 + 0.005 ** 2) / 3), exact);
  });

  it.each(LIGHT_KINDS)('$name: what is counted can be found', (kind) => {
    const { truth, observations } = kind.make(RandomStream.fromSeed(31));
    expect(truth).toHaveLength(kind.companions);
    for (const { signalToNoise, seen, radiusRatio } of truth) {
      expect(signalToNoise).toBeGreaterThan(8);
      expect(seen.length).toBeGreaterThanOrEqual(3);
      expect(radiusRatio).toBeGreaterThanOrEqual(0.02);
      expect(radiusRatio).toBeLessThanOrEqual(0.2);
    }
    const { timesBjdTdb, flux } = observations.lightCurves[0]!;
    expect(flux.every(Number.isFinite)).toBe(true);
    expect(timesBjdTdb.every((time, i) => i === 0 || time > timesBjdTdb[i - 1]!)).toBe(true);
  });
});
