import { describe, test } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { quasiPeriodic, redNoise } from '../../src/planning/mock-noise.js';
import { expectWithin } from '../support/expect-within.js';
import { meanOf } from './photometry-plan.js';

describe('noise and variability', () => {
  const days = Float64Array.from({ length: 4000 }, (_, i) => i * 0.25);

  test('red noise has its size and forgets exponentially', () => {
    const noise = redNoise({ size: 3, timeDays: 1 }, days, RandomStream.fromSeed(4));
    const product = (lag: number): number =>
      meanOf(Array.from(noise.subarray(lag), (value, i) => value * noise[i]!));
    // variance of the mean of n squares with memory rho: 2/n (1 + rho^2)/(1 - rho^2), rho = e^-0.25
    const tolerance = 4 * 9 * Math.sqrt((2 / days.length) * ((1 + Math.exp(-0.5)) / (1 - Math.exp(-0.5))));
    const why = 'four standard errors';
    expectWithin(product(0), 9, { abs: tolerance, unit: '1', why });
    expectWithin(product(4), 9 * Math.exp(-1), { abs: tolerance, unit: '1', why });
    expectWithin(product(40), 0, { abs: tolerance, unit: '1', why });
  });

  test('variability has its size over many stars, and its period comes back', () => {
    const wanted = { size: 2, periodDays: 10, lifetimeDays: 60 };
    const stars = Array.from({ length: 60 }, (_, star) =>
      quasiPeriodic(wanted, days.subarray(0, 400), RandomStream.fromSeed(100 + star)),
    );
    const product = (lag: number): number =>
      meanOf(stars.flatMap((star) => Array.from(star.subarray(lag), (value, i) => value * star[i]!)));
    const memory = (lagDays: number): number => {
      const decay = Math.exp(-(lagDays ** 2) / (2 * 60 ** 2));
      const tone = (2 * Math.PI * lagDays) / 10;
      return 4 * decay * (0.75 * Math.cos(tone) + 0.25 * Math.cos(2 * tone));
    };
    // each star of 100 d carries about three independent squares
    const why = 'four standard errors of 60 stars';
    for (const lag of [0, 20, 40])
      // 0, 5 and 10 d
      expectWithin(product(lag), memory(lag * 0.25), {
        abs: (4 * 4 * Math.SQRT2) / Math.sqrt(180),
        unit: '1',
        why,
      });
  });
});
