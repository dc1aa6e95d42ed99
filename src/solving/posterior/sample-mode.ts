/** Samples one mode of the posterior until every element has converged or the limit is reached. */
import { bulkEss, ebfmi, rankNormalisedRHat, tailEss } from '../../numerics/sampling/diagnostics.js';
import { bridgeEvidence } from '../../numerics/sampling/bridge.js';
import { RandomStream } from '../../numerics/random.js';
import type { ChainOutput } from './chain-job.js';
import type { ChainRecipe } from './chain-job.js';
import type { ChainPool } from './chain-pool.js';
import type { PosteriorRecord } from '../types.js';
import type { SampledDensity } from './sampled-density.js';
import { curvatureOfDensity } from './density-curvature.js';

/** What "converged" means, and how far sampling goes to get there. */
export const CONVERGENCE = {
  chains: 4,
  largestRHat: 1.01,
  smallestEss: 400,
  warmup: 300,
  batch: 1000,
  /** Draws per chain at which sampling stops unconverged. */
  limit: 10_000,
} as const;

export interface ModeSample<D extends SampledDensity> {
  readonly density: D;
  /** Positions of each chain, row-major (draws, size). */
  readonly chains: readonly Float64Array[];
  readonly logDensities: readonly Float64Array[];
  readonly drawsPerChain: number;
  readonly rHatMax: number;
  readonly bulkEssMin: number;
  readonly tailEssMin: number;
  readonly ebfmiMin: number;
  readonly divergences: number;
  readonly converged: boolean;
  /** The user stopped the sampling before it had converged. */
  readonly interrupted: boolean;
  readonly logEvidence: number;
  readonly logEvidenceError: number;
}

export interface ModeOptions {
  readonly seed: number;
  /** First random stream; every chain takes the next. */
  readonly stream: number;
  readonly limit: number;
  readonly isStopped: () => boolean;
  /** Share of the way to the required sample size, 0..1. */
  readonly onProgress: (share: number) => void;
}

interface Judgement {
  readonly rHatMax: number;
  readonly bulkEssMin: number;
  readonly tailEssMin: number;
}

function judge(density: SampledDensity, chains: readonly Float64Array[]): Judgement {
  const { size } = density;
  const perChain = chains.map((positions) => {
    const draws = positions.length / size;
    const rows = Array.from({ length: draws }, (_, d) =>
      density.judged(positions.subarray(d * size, (d + 1) * size)),
    );
    const width = rows[0]?.length ?? 0;
    return Array.from({ length: width }, (_, k) => Float64Array.from(rows, (row) => row[k]!));
  });
  let rHatMax = 1;
  let bulkEssMin = Infinity;
  let tailEssMin = Infinity;
  const width = perChain[0]?.length ?? 0;
  for (let k = 0; k < width; k++) {
    const series = perChain.map((columns) => columns[k]!);
    const first = series[0]![0]!;
    if (series.every((chain) => chain.every((value) => value === first))) continue; // fixed by the case
    rHatMax = Math.max(rHatMax, rankNormalisedRHat(series));
    bulkEssMin = Math.min(bulkEssMin, bulkEss(series));
    tailEssMin = Math.min(tailEssMin, tailEss(series));
  }
  return { rHatMax, bulkEssMin, tailEssMin };
}

function joined(parts: readonly Float64Array[]): Float64Array {
  const all = new Float64Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    all.set(part, at);
    at += part.length;
  }
  return all;
}

/** Marginal likelihood of a mode from its draws, folded onto one mirror image of the jitters. */
function evidenceFromDraws(
  density: SampledDensity,
  chains: readonly Float64Array[],
  random: RandomStream,
): { readonly logEvidence: number; readonly standardError: number } {
  const { size } = density;
  const all = joined(chains);
  for (let at = 0; at < all.length; at += size) all.set(density.fold(all.subarray(at, at + size)), at);
  return bridgeEvidence(density.folded, all, { random });
}

/**
 * @param recipe - what the threads make the density from
 * @param density - the same density, for use in this thread
 * @param position - where the chains start: the maximum of the mode
 */
export async function sampleMode<D extends SampledDensity>(
  pool: ChainPool,
  recipe: ChainRecipe['density'],
  density: D,
  position: Float64Array,
  options: ModeOptions,
): Promise<ModeSample<D>> {
  const covariance = curvatureOfDensity(density, position);
  await pool.start(
    Array.from({ length: CONVERGENCE.chains }, (_, chain) => ({
      density: recipe,
      start: position,
      covariance,
      warmup: CONVERGENCE.warmup,
      seed: options.seed,
      stream: options.stream + chain,
    })),
  );
  options.onProgress(0);
  const outputs: ChainOutput[][] = Array.from({ length: CONVERGENCE.chains }, () => []);
  let judgement: Judgement = { rHatMax: Infinity, bulkEssMin: 0, tailEssMin: 0 };
  let chains: Float64Array[] = [];
  let draws = 0;
  let converged = false;
  let interrupted = false;
  while (!converged && draws < options.limit) {
    if (options.isStopped() && draws > 0) {
      interrupted = true;
      break;
    }
    const count = Math.min(CONVERGENCE.batch, options.limit - draws);
    const batch = await pool.draw(count);
    batch.forEach((output, chain) => outputs[chain]!.push(output));
    draws += count;
    chains = outputs.map((parts) => joined(parts.map((part) => part.positions)));
    judgement = judge(density, chains);
    const ess = Math.min(judgement.bulkEssMin, judgement.tailEssMin);
    converged = judgement.rHatMax < CONVERGENCE.largestRHat && ess > CONVERGENCE.smallestEss;
    options.onProgress(Math.min(1, Math.max(ess / CONVERGENCE.smallestEss, draws / options.limit)));
  }
  const energies = outputs.map((parts) => joined(parts.map((part) => part.energies)));
  const evidence = evidenceFromDraws(
    density,
    chains,
    RandomStream.fromSeed(options.seed, options.stream + 500),
  );
  return {
    density,
    chains,
    logDensities: outputs.map((parts) => joined(parts.map((part) => part.logDensities))),
    drawsPerChain: draws,
    ...judgement,
    ebfmiMin: Math.min(...energies.map((energy) => ebfmi(energy))),
    divergences: outputs.flat().reduce((sum, part) => sum + part.divergences, 0),
    converged,
    interrupted,
    logEvidence: evidence.logEvidence,
    logEvidenceError: evidence.standardError,
  };
}

/** What every record of a sampled posterior says of its reported mode. */
export function samplingRecord(
  sample: ModeSample<SampledDensity>,
): Omit<PosteriorRecord, 'modes' | 'priors'> {
  return {
    method: 'no-U-turn Hamiltonian Monte Carlo (Hoffman & Gelman 2014), dense metric',
    chains: CONVERGENCE.chains,
    draws: CONVERGENCE.chains * sample.drawsPerChain,
    warmup: CONVERGENCE.warmup,
    rHatMax: sample.rHatMax,
    bulkEssMin: sample.bulkEssMin,
    tailEssMin: sample.tailEssMin,
    ebfmiMin: sample.ebfmiMin,
    divergences: sample.divergences,
    status: sample.interrupted ? 'interrupted' : sample.converged ? 'converged' : 'draw-limit',
    logEvidence: sample.logEvidence,
    logEvidenceError: sample.logEvidenceError,
  };
}
