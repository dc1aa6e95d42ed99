/** Invented draws and their record, for tests of what is said about a posterior; no sampler is involved. */
import type { PosteriorColumn, PosteriorDraws, PosteriorRecord } from '../../src/solving/types.js';
import { randomSource } from './solved-fixture.js';

export function posteriorRecord(changes: Partial<PosteriorRecord> = {}): PosteriorRecord {
  return {
    method: 'NUTS',
    chains: 4,
    draws: 8000,
    warmup: 300,
    rHatMax: 1.0031,
    bulkEssMin: 2100.7,
    tailEssMin: 1900.2,
    ebfmiMin: 0.91,
    divergences: 0,
    status: 'converged',
    logEvidence: -300,
    logEvidenceError: 0.02,
    modes: [{ periods: [41.6321], logEvidence: -300, standardError: 0.02, weight: 1 }],
    priors: ['Priors: period log-uniform between 1 d and 900 d.'],
    ...changes,
  };
}

/** @param columns - values by key, chain after chain; all of one length, a multiple of `chains` */
export function drawsOf(columns: Readonly<Record<string, ArrayLike<number>>>, chains = 2): PosteriorDraws {
  const list = Object.entries(columns).map(([key, values]): PosteriorColumn => ({
    key,
    unit: '',
    values: Float64Array.from(values),
    cycle: 0,
  }));
  const total = list[0]!.values.length;
  return {
    chains,
    drawsPerChain: total / chains,
    columns: list,
    logDensity: Float64Array.from({ length: total }, (_, i) => -100 - i / 8),
  };
}

/** 0, 1/n, ... 1: its quantiles are the probabilities themselves. */
export function uniformGrid(intervals: number, scale = 1): Float64Array {
  return Float64Array.from({ length: intervals + 1 }, (_, i) => (scale * i) / intervals);
}

export function gaussians(count: number, seed: number): Float64Array {
  const random = randomSource(seed);
  return Float64Array.from({ length: count }, () => random.gauss());
}
