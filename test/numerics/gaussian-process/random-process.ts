/** Random processes of damped oscillators on ragged times, each beside its dense matrix. */
import { expect } from 'vitest';
import { DampedOscillatorProcess } from '../../../src/numerics/gaussian-process/damped-oscillator-process.js';
import { TERM_SIZE, writeOscillation } from '../../../src/numerics/gaussian-process/oscillator-terms.js';
import { RandomStream } from '../../../src/numerics/random.js';
import { DenseProcess, oscillationAt, type Oscillation } from './dense.js';

/** Terms that are covariances, from fast and strongly damped to slow and weakly damped. */
function randomOscillations(random: RandomStream, count: number): Oscillation[] {
  return Array.from({ length: count }, () => {
    const a = Math.exp(random.normal());
    const c = Math.exp(2 * random.normal() - 1);
    const d = Math.exp(2 * random.normal());
    return { a, c, d, b: ((2 * random.uniform() - 1) * a * c) / d };
  });
}

export function termsOf(oscillations: readonly Oscillation[]): Float64Array {
  const terms = new Float64Array(oscillations.length * TERM_SIZE);
  oscillations.forEach((oscillation, k) => {
    writeOscillation(terms, k, oscillation);
  });
  return terms;
}

/** Unequal spacing with gaps of 0, 1e-6 and 1000 among usual ones. */
function raggedTimes(random: RandomStream, n: number): Float64Array {
  const times = new Float64Array(n);
  times[0] = -3;
  for (let i = 1; i < n; i++) {
    const kind = Math.floor(7 * random.uniform());
    times[i] =
      times[i - 1]! +
      (kind === 0 ? 1e-6 : kind === 1 ? 1000 : kind === 2 && i % 2 === 0 ? 0 : random.uniform());
  }
  return times;
}

export function randomCase(seed: number): {
  times: Float64Array;
  diagonal: Float64Array;
  residuals: Float64Array;
  oscillations: Oscillation[];
  terms: Float64Array;
  dense: DenseProcess;
  process: DampedOscillatorProcess;
} {
  const random = RandomStream.fromSeed(seed);
  const n = 2 + Math.floor(58 * random.uniform());
  const times = raggedTimes(random, n);
  const diagonal = Float64Array.from({ length: n }, () => Math.exp(random.normal() - 3));
  const residuals = Float64Array.from({ length: n }, () => random.normal());
  const oscillations = randomOscillations(random, 1 + (seed % 3));
  const terms = termsOf(oscillations);
  const dense = new DenseProcess(times, diagonal, (lag) =>
    oscillations.reduce((sum, oscillation) => sum + oscillationAt(oscillation, lag), 0),
  );
  const process = new DampedOscillatorProcess(times, oscillations.length);
  expect(process.factor(terms, diagonal)).toBe(true);
  return { times, diagonal, residuals, oscillations, terms, dense, process };
}

export const SEEDS = Array.from({ length: 40 }, (_, i) => i + 1);
