import { describe, expect, it } from 'vitest';
import { choleskyInPlace } from '../../../src/numerics/linear-algebra.js';
import { RandomStream } from '../../../src/numerics/random.js';
import { DUAL_AVERAGING, DualAveraging } from '../../../src/numerics/sampling/dual-averaging.js';
import { RunningCovariance, shrinkTowards } from '../../../src/numerics/sampling/running-covariance.js';
import { planWarmup } from '../../../src/numerics/sampling/warmup-plan.js';
import { expectWithin } from '../../support/expect-within.js';
import { identity, randomCovariance } from './densities.js';

describe('dual averaging', () => {
  it('uses the constants of Hoffman & Gelman 2014 (JMLR 15, 1593), section 3.2: gamma 0.05, t0 10, kappa 0.75, mu = ln(10 first step)', () => {
    expect(DUAL_AVERAGING).toEqual({ gamma: 0.05, t0: 10, kappa: 0.75, startFactor: 10 });
  });

  it('is the recursion of their equation 6, whose shortfall is a weighted sum that can be written out', () => {
    const random = RandomStream.fromSeed(5);
    const target = 0.8;
    const first = 0.3;
    const tuner = new DualAveraging(target, first);
    const acceptances: number[] = [];
    let logMean = 0;
    for (let m = 1; m <= 60; m++) {
      acceptances.push(random.uniform());
      tuner.update(acceptances.at(-1)!);
      // H_m of the paper telescopes to sum_i (target - a_i)·w_i with w_i = prod over later updates: here 1/(m + t0) for each,
      // because (1 - 1/(m + 10)) = (m - 1 + 10)/(m + 10).
      const shortfall = acceptances.reduce((sum, a) => sum + (target - a), 0) / (m + 10);
      const logStep = Math.log(10 * first) - (Math.sqrt(m) / 0.05) * shortfall;
      logMean = m ** -0.75 * logStep + (1 - m ** -0.75) * logMean;
      const bound = { rel: 1e-10, unit: '1', why: 'rounding of at most 60 updates' };
      expectWithin(tuner.step, Math.exp(logStep), bound);
      expectWithin(tuner.meanStep, Math.exp(logMean), bound);
    }
  });

  it('finds the step whose mean acceptance is the target: exp(-step^2) = 0.8 at step 0.4724, from far off on both sides', () => {
    const wanted = Math.sqrt(-Math.log(0.8));
    for (const first of [1e-4, 30]) {
      const random = RandomStream.fromSeed(6);
      const tuner = new DualAveraging(0.8, first);
      for (let m = 0; m < 3000; m++) {
        const noise = 0.1 * random.normal();
        tuner.update(Math.min(1, Math.max(0, Math.exp(-(tuner.step ** 2)) + noise)));
      }
      expectWithin(tuner.meanStep, wanted, {
        rel: 0.05,
        unit: '1',
        why: 'noise of 0.1 in the acceptance over 3000 updates; measured 0.01',
      });
    }
  });
});

describe('warm-up plan', () => {
  it('keeps its windows between opening and closing, ascending, each but the last twice the one before', () => {
    for (let draws = 0; draws <= 2000; draws++) {
      const { opening, windowEnds } = planWarmup(draws);
      if (draws < 35) expect(windowEnds).toEqual([]);
      if (draws >= 40) expect(windowEnds.length).toBeGreaterThan(0);
      const edges = [opening - 1, ...windowEnds];
      const lengths = windowEnds.map((end, k) => end - edges[k]!);
      lengths.slice(0, -1).forEach((length, k) => {
        expect(length).toBe(25 * 2 ** k);
      });
      if (lengths.length > 0) {
        expect(lengths.at(-1)!).toBeGreaterThanOrEqual(25 * 2 ** (lengths.length - 1));
        // What is left settles the step size.
        expect(draws - 1 - windowEnds.at(-1)!).toBe(Math.ceil(0.15 * draws));
      }
    }
  });
});

describe('running covariance', () => {
  it('equals the two-pass formula, also for epochs of 2459000 days (5 coordinates, 60 draws)', () => {
    const n = 5;
    const random = RandomStream.fromSeed(7);
    const offsets = [0, 2459000.5, -3, 1e-3, 40];
    const rows = Array.from({ length: 60 }, () => {
      const common = random.normal();
      return offsets.map((offset, j) => offset + (common + (j + 1) * random.normal()));
    });
    const moments = new RunningCovariance(n);
    moments.add(Float64Array.of(9, 9, 9, 9, 9));
    moments.clear();
    for (const row of rows) moments.add(Float64Array.from(row));
    const covariance = moments.covariance();
    // Offsets are subtracted first: exact to the last place of the epochs (5e-10 d).
    const centred = rows.map((row) => row.map((value, j) => value - offsets[j]!));
    const means = offsets.map((_, j) => centred.reduce((sum, row) => sum + row[j]! / 60, 0));
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) {
        const expected = centred.reduce(
          (sum, row) => sum + ((row[i]! - means[i]!) * (row[j]! - means[j]!)) / 59,
          0,
        );
        expectWithin(covariance[i * n + j]!, expected, {
          abs: 3e-8,
          unit: '1',
          why: 'rounding of epochs, 5e-10, times departures up to 15',
        });
      }
    }
  });

  it('shrinks correlations, not variances, and keeps a covariance of too few draws positive definite', () => {
    const n = 8;
    const random = RandomStream.fromSeed(8);
    const guess = randomCovariance(n, 100, random);
    const moments = new RunningCovariance(n);
    for (let k = 0; k < 4; k++) moments.add(Float64Array.from({ length: n }, () => random.normal()));
    const sample = moments.covariance();
    const shrunk = sample.slice();
    shrinkTowards(shrunk, guess, n, 4, n);
    for (let i = 0; i < n; i++) {
      expectWithin(shrunk[i * n + i]!, sample[i * n + i]!, { rel: 1e-12, unit: '1', why: 'rounding' });
      for (let j = 0; j < i; j++) {
        const correlation = (matrix: Float64Array): number =>
          matrix[i * n + j]! / Math.sqrt(matrix[i * n + i]! * matrix[j * n + j]!);
        const expected = (4 * correlation(sample) + n * correlation(guess)) / (4 + n);
        expectWithin(correlation(shrunk), expected, { abs: 1e-12, unit: '1', why: 'rounding' });
        expect(shrunk[j * n + i]).toBe(shrunk[i * n + j]);
      }
    }
    expect(choleskyInPlace(sample.slice(), n)).toBe(false);
    expect(choleskyInPlace(shrunk, n)).toBe(true);
  });

  it('takes the variance of a coordinate that never moved from the guess', () => {
    const stuck = Float64Array.of(2, 0, 0, 0);
    shrinkTowards(stuck, identity(2, 5), 2, 100, 2);
    expectWithin(stuck[3]!, 5, { rel: 1e-14, unit: '1', why: 'rounding' });
    expect(choleskyInPlace(stuck, 2)).toBe(true);
  });
});
