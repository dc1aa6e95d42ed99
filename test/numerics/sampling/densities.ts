/** Densities with known integrals and moments, and ways to draw from them, for the tests of the sampler. */
import { readFileSync } from 'node:fs';
import { RandomStream } from '../../../src/numerics/random.js';
import { NutsChain, type ChainDraws, type SmoothDensity } from '../../../src/numerics/sampling/index.js';
import { invertSymmetricPositive } from '../../../src/numerics/linear-algebra.js';

/** To be given its shape by the caller, who knows the file. */
export function readReference(name: string): unknown {
  return JSON.parse(readFileSync(new URL(`../../reference/sampling/${name}`, import.meta.url), 'utf8'));
}

export function identity(size: number, diagonal = 1): Float64Array {
  return Float64Array.from({ length: size * size }, (_, k) => (k % (size + 1) === 0 ? diagonal : 0));
}

/** A density from a formula of plain arrays: value and gradient. */
export function densityOf(
  size: number,
  formula: (q: Float64Array) => readonly [number, readonly number[] | Float64Array],
): SmoothDensity {
  return {
    size,
    evaluate(position, gradient) {
      const [value, slope] = formula(position);
      gradient.set(slope);
      return value;
    },
  };
}

/** Normal with the given mean and covariance, unnormalised: its integral is sqrt(det 2 pi C). */
export function gaussian(mean: Float64Array, covariance: Float64Array): SmoothDensity {
  const n = mean.length;
  const precision = invertSymmetricPositive(covariance, n)!;
  return densityOf(n, (q) => {
    const slope = new Float64Array(n);
    let value = 0;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) slope[i]! -= precision[i * n + j]! * (q[j]! - mean[j]!);
      value += 0.5 * slope[i]! * (q[i]! - mean[i]!);
    }
    return [value, slope];
  });
}

/** A random symmetric positive definite matrix with axes that differ up to `stretch` in length. */
export function randomCovariance(size: number, stretch: number, random: RandomStream): Float64Array {
  const factor = Float64Array.from({ length: size * size }, () => random.normal() / Math.sqrt(size));
  const covariance = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < size; j++) {
      let sum = i === j ? 0.1 : 0;
      for (let k = 0; k < size; k++) sum += factor[i * size + k]! * factor[j * size + k]!;
      covariance[i * size + j] = sum * stretch ** ((i + j) / (2 * size) - 0.5);
    }
  }
  return covariance;
}

export interface RunOptions {
  readonly chains: number;
  readonly draws: number;
  readonly warmup: number;
  readonly seed: number;
  readonly covariance?: Float64Array;
  readonly start?: (chain: number) => readonly number[];
  readonly targetAcceptance?: number;
}

/** Several chains of one density, each from its own stream. */
export function run(density: SmoothDensity, options: RunOptions): ChainDraws[] {
  return Array.from({ length: options.chains }, (_, chain) => {
    const settings = {
      start: Float64Array.from(options.start?.(chain) ?? new Float64Array(density.size)),
      covariance: options.covariance ?? identity(density.size),
      warmup: options.warmup,
    };
    const { targetAcceptance } = options;
    const sampler = new NutsChain(
      density,
      targetAcceptance === undefined ? settings : { ...settings, targetAcceptance },
      RandomStream.fromSeed(options.seed, chain),
    );
    sampler.warmUp();
    return sampler.draw(options.draws);
  });
}

/** A function of the position along each chain. */
export function along(
  draws: readonly ChainDraws[],
  size: number,
  of: (q: Float64Array) => number,
): Float64Array[] {
  return draws.map((chain) =>
    Float64Array.from({ length: chain.logDensities.length }, (_, k) =>
      of(chain.positions.subarray(k * size, (k + 1) * size)),
    ),
  );
}

/** Positions of all chains, one after another. */
export function pooledPositions(draws: readonly ChainDraws[]): Float64Array {
  const all = new Float64Array(draws.reduce((sum, chain) => sum + chain.positions.length, 0));
  let filled = 0;
  for (const chain of draws) {
    all.set(chain.positions, filled);
    filled += chain.positions.length;
  }
  return all;
}

export function divergences(draws: readonly ChainDraws[]): number {
  return draws.reduce((sum, chain) => sum + chain.divergent.reduce((inner, flag) => inner + flag, 0), 0);
}
