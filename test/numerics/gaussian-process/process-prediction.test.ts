import { describe, it } from 'vitest';
import { covarianceAt } from '../../../src/numerics/gaussian-process/oscillator-terms.js';
import { RandomStream } from '../../../src/numerics/random.js';
import { expectWithin } from '../../support/expect-within.js';
import { randomCase, SEEDS } from './random-process.js';

describe('a process of damped oscillators', () => {
  it('predicts itself as the dense matrices do, at the data, between, before and after them', () => {
    for (const seed of SEEDS.slice(0, 20)) {
      const { times, diagonal, residuals, terms, dense, process } = randomCase(seed);
      const { n } = dense;
      const alpha = dense.solve(residuals);
      const mean = (t: number): number =>
        alpha.reduce(
          (sum, value, i) => sum + value * covarianceAt(terms, process.termCount, t - times[i]!),
          0,
        );
      const here = new Float64Array(n);
      const solved = new Float64Array(n);
      process.solve(residuals, solved);
      process.predictHere(residuals, solved, here);
      const scale =
        alpha.reduce((sum, value) => sum + Math.abs(value), 0) * covarianceAt(terms, process.termCount, 0);
      const bound = { abs: 1e-12 * scale, unit: '1', why: 'of the sum of the absolute contributions' };
      here.forEach((value, i) => {
        expectWithin(value, mean(times[i]!), bound);
      });
      const elsewhere = Float64Array.from([
        times[0]! - 2,
        times[n - 1]! + 0.3,
        times[n - 1]! + 1e5,
        ...times,
        ...times.map((t) => t + 0.21),
      ]);
      process.predict(solved, elsewhere).forEach((value, i) => {
        expectWithin(value, mean(elsewhere[i]!), bound);
      });
      const sigmas = new Float64Array(n);
      process.predictSigmaHere(sigmas);
      const inverse = dense.inverseDiagonal();
      sigmas.forEach((sigma, i) => {
        expectWithin(sigma ** 2, diagonal[i]! - diagonal[i]! ** 2 * inverse[i]!, {
          abs: 1e-11,
          unit: '1',
          why: 'variances are of order 1 here',
        });
      });
    }
  });

  it('colours unit noise with a root of its covariance, and whitens it back', () => {
    const { dense, process } = randomCase(8);
    const { n } = dense;
    const root = Array.from({ length: n }, (_, j) => {
      const column = new Float64Array(n);
      column[j] = 1;
      process.colour(column, column);
      return column;
    });
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++)
        expectWithin(
          root.reduce((sum, column) => sum + column[i]! * column[j]!, 0),
          dense.matrix[i * n + j]!,
          { abs: 1e-12, unit: '1', why: 'elements are of order 1; worst seen 2e-15' },
        );
    const random = RandomStream.fromSeed(3);
    const noise = Float64Array.from({ length: n }, () => random.normal());
    const back = new Float64Array(n);
    process.colour(noise, back);
    process.whiten(back, back);
    noise.forEach((value, i) => {
      expectWithin(back[i]!, value, { abs: 1e-11, unit: '1', why: 'round trip' });
    });
  });
});
