import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { OrbitElements } from '../../src/orbit/elements.js';
import { makeBackground, type LinearBackground } from '../../src/solving/linear-background.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { scanShapes, type ShapeStart } from '../../src/solving/shape-scan.js';
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, denseFit, scatteredTimes, simulated } from './helpers.js';

const EPOCH = 2459000.5;

/** cos nu and sin nu of a start at the times, Kepler's equation by bisection. */
function shapeOf(start: ShapeStart, timesDays: Float64Array): [Float64Array, Float64Array] {
  const e = start.eccentricity;
  const nu = timesDays.map((t) => {
    const turns = start.meanAnomalyAtEpochRad / (2 * Math.PI) + start.frequencyPerDay * t;
    const mean = 2 * Math.PI * (turns - Math.round(turns));
    let [low, high] = [-Math.PI, Math.PI];
    for (let step = 0; step < 60; step++) {
      const middle = 0.5 * (low + high);
      if (middle - e * Math.sin(middle) > mean) high = middle;
      else low = middle;
    }
    return 2 * Math.atan2(Math.sqrt(1 + e) * Math.sin(low / 2), Math.sqrt(1 - e) * Math.cos(low / 2));
  });
  return [nu.map(Math.cos), nu.map(Math.sin)];
}

interface Scene {
  readonly background: LinearBackground;
  readonly columns: readonly Float64Array[];
  readonly data: Float64Array;
  readonly instrumentOf: Uint16Array;
}

function scene(seed: number, instruments: number, drift: boolean, periodDays = 130): Scene {
  const random = RandomStream.fromSeed(seed);
  const orbit: OrbitElements = { periodDays, eccentricity: 0.8, argPeriastronStarRad: 1, timePeriastronBjdTdb: EPOCH + 40, semiAmplitudeMps: 50 }; // prettier-ignore
  const set = simulated(random, {
    times: scatteredTimes(random, 50, 500),
    companions: [orbit],
    sigmaMps: 8,
    zeroPointsMps: [0, 90, -20].slice(0, instruments),
    slopeMpsPerDay: drift ? 0.1 : 0,
  });
  const times = set.timesBjdTdb.map((t) => t - EPOCH - 250);
  const weights = set.sigmasMps.map((sigma, i) => (1 + (i % 3)) / sigma ** 2);
  const columns = Array.from({ length: instruments }, (_, g) =>
    times.map((_, i) => (set.instrumentOf[i] === g ? 1 : 0)),
  );
  if (drift) columns.push(times);
  return {
    background: makeBackground(times, set.velocitiesMps, weights, columns),
    columns,
    data: set.velocitiesMps,
    instrumentOf: set.instrumentOf,
  };
}

const setting = (instrumentOf: Uint16Array): Parameters<typeof scanShapes>[1] => ({
  lowestFrequencyPerDay: 1 / 750,
  highestFrequencyPerDay: 0.2,
  spanDays: 500,
  instrumentOf,
  starts: 12,
});

describe('scanShapes', () => {
  for (const instruments of [1, 3]) {
    it(`with zero points alone in the background its power is the exact one of a dense solve, ${instruments} instruments`, () => {
      const { background, columns, data, instrumentOf } = scene(5, instruments, false);
      const alone = denseFit(columns, data, background.weights).chiSquare;
      for (const start of scanShapes(background, setting(instrumentOf))) {
        const full = denseFit(
          [...columns, ...shapeOf(start, background.timesDays)],
          data,
          background.weights,
        );
        // The scan reads cos nu and sin nu from a table of 4096 or 16384 phases.
        expectWithin(start.power, 1 - full.chiSquare / alone, {
          abs: 0.02,
          unit: '1',
          why: 'the swing at e = 0.97 is some 1e-3 revolutions wide, a cell of the table 6e-5',
        });
        if (instruments === 1) {
          expectWithin(start.cosAmplitude, full.solution.at(-2)!, {
            abs: 1e-6,
            unit: 'm/s',
            why: 'the same solve',
          });
          expectWithin(start.sinAmplitude, full.solution.at(-1)!, {
            abs: 1e-6,
            unit: 'm/s',
            why: 'the same solve',
          });
        }
      }
    });
  }

  it('with a drift in the background it never overrates a shape', () => {
    for (const seed of [6, 7]) {
      const { background, columns, data, instrumentOf } = scene(seed, 2, true);
      const alone = denseFit(columns, data, background.weights).chiSquare;
      for (const start of scanShapes(background, setting(instrumentOf))) {
        const full = denseFit(
          [...columns, ...shapeOf(start, background.timesDays)],
          data,
          background.weights,
        );
        expect(start.power).toBeLessThan(1 - full.chiSquare / alone + 0.02);
        expect(start.power).toBeGreaterThan(0);
      }
    }
  });

  it('puts the true period among its strongest starts; starts come strongest first, in distinct cells', () => {
    const { background, instrumentOf } = scene(8, 2, false);
    const starts = scanShapes(background, setting(instrumentOf));
    expect(starts[0]!.power).toBeGreaterThan(0.6);
    expect(starts.slice(0, 3).some((start) => Math.abs(start.frequencyPerDay - 1 / 130) < 1 / 500)).toBe(
      true,
    );
    const powers = starts.map(({ power }) => power);
    expect(powers).toEqual([...powers].sort((a, b) => b - a));
    const cells = starts.map((start) => Math.round((start.frequencyPerDay - 1 / 750) * 500));
    expect(new Set(cells).size).toBe(cells.length);
  });

  it('reaches short periods', () => {
    const { background, instrumentOf } = scene(9, 1, false, 9.4);
    const [first] = scanShapes(background, setting(instrumentOf));
    expect(Math.abs(first!.frequencyPerDay - 1 / 9.4)).toBeLessThan(1 / 500);
    expect(first!.power).toBeGreaterThan(0.6);
  });

  it('has nothing to say about fewer than six points or velocities that are all explained', () => {
    const times = Float64Array.of(1, 2, 4, 7, 11);
    const ones = new Float64Array(5).fill(1);
    const few = makeBackground(times, Float64Array.of(1, 3, 2, 5, 4), ones, [ones]);
    expect(scanShapes(few, { ...setting(new Uint16Array(5)), spanDays: 10 })).toEqual([]);
    const flat = makeBackground(Float64Array.from({ length: 9 }, (_, i) => i), new Float64Array(9), new Float64Array(9).fill(1), [new Float64Array(9).fill(1)]); // prettier-ignore
    expect(scanShapes(flat, { ...setting(new Uint16Array(9)), spanDays: 8 })).toEqual([]);
  });
});

describe('an orbit of e = 0.93 of which one periastron passage was observed', () => {
  for (const omega of [0.4, 2.6, 5.1]) {
    it(`is found from noiseless velocities, omega ${omega} rad`, () => {
      const random = RandomStream.fromSeed(40);
      const orbit: OrbitElements = { periodDays: 480, eccentricity: 0.93, argPeriastronStarRad: omega, timePeriastronBjdTdb: EPOCH + 320, semiAmplitudeMps: 300 }; // prettier-ignore
      const times = scatteredTimes(random, 60, 640).filter((t) => t < EPOCH + 316 || t > EPOCH + 324);
      const passage = [-2.2, -0.8, 0.1, 0.9, 2.4, 4.1].map((days) => EPOCH + 320 + days);
      const set = simulated(random, { times: Float64Array.from([...times, ...passage]).sort(), companions: [orbit], sigmaMps: 1, noise: 0 }); // prettier-ignore
      const { explorer, epochBjdTdb } = explorerFor(BARE_CASE, set);
      const found = explorer.portable(findCompanions(explorer, () => undefined).best).companions;
      expect(found).toHaveLength(1);
      expectWithin(found[0]!.eccentricity, 0.93, { abs: 1e-5, unit: '1', why: 'velocities are exact' });
      expectWithin(found[0]!.periodDays, 480, { abs: 1e-2, unit: 'd', why: 'velocities are exact' });
      expectWithin(found[0]!.semiAmplitudeMps, 300, { abs: 1e-2, unit: 'm/s', why: 'velocities are exact' });
      const turns = (found[0]!.timePeriastronDays - (EPOCH + 320 - epochBjdTdb)) / 480;
      expectWithin(turns - Math.round(turns), 0, {
        abs: 1e-5,
        unit: 'revolutions',
        why: 'velocities are exact',
      });
    });
  }
});
