import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { Case } from '../../src/observations/types.js';
import { solveCase } from '../../src/solving/solve-case.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated } from './helpers.js';

/** A case that fixes the jitter of the first instrument at nothing. */
function withoutJitter(name: string): Case {
  return {
    ...BARE_CASE,
    instruments: { [name]: { zeroPointMps: null, jitterMps: { kind: 'fixed', value: 0 } } },
  };
}

describe('a jitter that the case states', () => {
  it('does not turn scatter into companions, however far the errors are too small', () => {
    for (let seed = 400; seed < 406; seed++) {
      const random = RandomStream.fromSeed(seed);
      // Errors of 2 m/s, true scatter of 6.
      const noise = simulated(random, {
        times: scatteredTimes(random, 60, 600),
        companions: [],
        sigmaMps: 2,
        noise: 3,
      });
      const { record } = solveCase(withoutJitter(noise.instruments[0]!), noise, OPTIONS);
      expect(record.companions).toHaveLength(0);
      expect(record.warnings.map((warning) => warning.code)).toContain('scatter-exceeds-noise');
    }
  });

  it('leaves a plain signal found, its false-alarm probability near that with the jitter free', () => {
    const random = RandomStream.fromSeed(410);
    const set = simulated(random, {
      times: scatteredTimes(random, 50, 400),
      companions: [
        { periodDays: 38, eccentricity: 0, argPeriastronStarRad: Math.PI / 2, timePeriastronBjdTdb: 2459010, semiAmplitudeMps: 10 },
      ],
      sigmaMps: 2,
    }); // prettier-ignore
    const free = solveCase(BARE_CASE, set, OPTIONS).record.companions;
    const stated = solveCase(withoutJitter(set.instruments[0]!), set, OPTIONS).record.companions;
    expect(free).toHaveLength(1);
    expect(stated).toHaveLength(1);
    const ratio =
      Math.log(stated[0]!.evidence.falseAlarmProbability) / Math.log(free[0]!.evidence.falseAlarmProbability);
    // Errors are right here: both count the same residuals against nearly the same noise.
    expect(ratio).toBeGreaterThan(0.9);
    expect(ratio).toBeLessThan(1.1);
  });
});

describe('circular orbits that were asked for', () => {
  it('come with a warning when a harmonic may be the eccentricity', () => {
    const random = RandomStream.fromSeed(420);
    const set = simulated(random, {
      times: scatteredTimes(random, 90, 900),
      companions: [
        { periodDays: 41.6, eccentricity: 0.4, argPeriastronStarRad: 2.2, timePeriastronBjdTdb: 2459012, semiAmplitudeMps: 40 },
      ],
      sigmaMps: 2,
    }); // prettier-ignore
    const { record } = solveCase({ ...BARE_CASE, circular: true }, set, OPTIONS);
    expect(record.companions.length).toBeGreaterThan(1);
    expect(record.warnings.map((warning) => warning.code)).toContain('harmonic-period');
  });
});
