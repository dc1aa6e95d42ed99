import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { VelocitySet } from '../../src/observations/types.js';
import { solveCase } from '../../src/solving/solve-case.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated } from './helpers.js';

/** One velocity moved by `shiftMps`. */
function withOutlier(set: VelocitySet, row: number, shiftMps: number): VelocitySet {
  return { ...set, velocitiesMps: set.velocitiesMps.map((v, i) => (i === row ? v + shiftMps : v)) };
}

describe('one wrong velocity', () => {
  it('is no companion, and is named with its line', () => {
    for (let seed = 500; seed < 506; seed++) {
      const random = RandomStream.fromSeed(seed);
      const noise = simulated(random, {
        times: scatteredTimes(random, 50, 690),
        companions: [],
        sigmaMps: 3,
      });
      const { record } = solveCase(BARE_CASE, withOutlier(noise, 10 + (seed % 7), 100), OPTIONS);
      expect(record.companions).toHaveLength(0);
      const warning = record.warnings.find(({ code }) => code === 'outlier');
      expect(warning?.message).toContain(`vellamo.csv:${noise.lines[10 + (seed % 7)]!}:`);
    }
  });

  it('leaves every eccentricity of a solution below 1, whatever else it spoils', () => {
    for (const shift of [30, 60, 150, 300, 600]) {
      const random = RandomStream.fromSeed(510);
      const set = simulated(random, {
        times: scatteredTimes(random, 60, 900),
        companions: [
          { periodDays: 33.3, eccentricity: 0.2, argPeriastronStarRad: 1, timePeriastronBjdTdb: 2459010, semiAmplitudeMps: 25 },
        ],
        sigmaMps: 3,
      }); // prettier-ignore
      const { companions } = solveCase(BARE_CASE, withOutlier(set, 20, shift), OPTIONS).record;
      for (const { elements } of companions) expect(elements.eccentricity.value!).toBeLessThan(0.985);
      // Up to ten times the noise the true orbit stays what is found.
      if (shift === 30) expect(companions[0]!.elements.period.value!).toBeCloseTo(33.3, 0);
    }
  });

  it('does not keep an orbit from being found whose swing several nights saw', () => {
    const random = RandomStream.fromSeed(520);
    const set = simulated(random, {
      times: scatteredTimes(random, 70, 800),
      companions: [
        { periodDays: 90, eccentricity: 0.85, argPeriastronStarRad: 2, timePeriastronBjdTdb: 2459030, semiAmplitudeMps: 80 },
      ],
      sigmaMps: 3,
    }); // prettier-ignore
    const { companions } = solveCase(BARE_CASE, set, OPTIONS).record;
    expect(companions).toHaveLength(1);
    expect(companions[0]!.elements.eccentricity.value!).toBeGreaterThan(0.7);
  });
});
