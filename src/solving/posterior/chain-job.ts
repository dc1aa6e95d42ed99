/** What a worker needs to run chains of one mode, and what it sends back. Plain data, so that it crosses threads. */
import type { Case } from '../../observations/types.js';
import type { VelocityData } from '../../signals/velocity-term.js';
import type { ModelPlan } from '../model-builder.js';
import { ModelBuilder } from '../model-builder.js';
import { NutsChain } from '../../numerics/sampling/nuts.js';
import { RandomStream } from '../../numerics/random.js';
import type { JointRecipe } from '../joint/joint-data.js';
import { JointDensity } from '../joint/joint-density.js';
import { PosteriorDensity } from './posterior-density.js';
import type { PriorScales } from './priors.js';
import type { SampledDensity } from './sampled-density.js';

/** Velocities alone. */
export interface DensityRecipe {
  readonly kind: 'velocities';
  readonly data: VelocityData;
  readonly instruments: readonly string[];
  readonly theCase: Case;
  readonly epochBjdTdb: number;
  readonly plan: ModelPlan;
  readonly scales: PriorScales;
}

export interface ChainRecipe {
  readonly density: DensityRecipe | JointRecipe;
  readonly start: Float64Array;
  /** First guess of the posterior covariance, row-major. */
  readonly covariance: Float64Array;
  readonly warmup: number;
  readonly seed: number;
  /** Which random stream of the seed: one per chain, whatever thread runs it. */
  readonly stream: number;
}

/** Draws of one chain, in order; positions row-major (draws, size). */
export interface ChainOutput {
  readonly positions: Float64Array;
  readonly logDensities: Float64Array;
  readonly energies: Float64Array;
  readonly divergences: number;
}

function sampledDensity(recipe: DensityRecipe | JointRecipe): SampledDensity {
  return recipe.kind === 'joint' ? new JointDensity(recipe, 'all') : densityOf(recipe);
}

export function densityOf(recipe: DensityRecipe): PosteriorDensity {
  const builder = new ModelBuilder(recipe.data, recipe.instruments, recipe.theCase, recipe.epochBjdTdb);
  return new PosteriorDensity(builder.problem(recipe.plan), recipe.plan, recipe.scales);
}

/** One chain that can be asked for more draws. */
export class ChainRunner {
  readonly #chain: NutsChain;

  constructor(recipe: ChainRecipe) {
    const density = sampledDensity(recipe.density);
    const { start, covariance, warmup } = recipe;
    this.#chain = new NutsChain(
      density,
      { start, covariance, warmup },
      RandomStream.fromSeed(recipe.seed, recipe.stream),
    );
    this.#chain.warmUp();
  }

  draw(count: number): ChainOutput {
    const { positions, logDensities, energies, divergent } = this.#chain.draw(count);
    return { positions, logDensities, energies, divergences: divergent.reduce((sum, flag) => sum + flag, 0) };
  }
}
