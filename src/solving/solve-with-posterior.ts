/** The main job with a posterior: what was settled, then sampled mode by mode. */
import type { Case, VelocitySet } from '../observations/types.js';
import { describeSolution } from './describe-solution.js';
import { samplePosterior, type PosteriorSample } from './posterior/sample-posterior.js';
import { settleCase } from './settle.js';
import { sampleAround } from './uncertainties.js';
import type { SolveOptions } from './solve-case.js';
import type { Solved } from './types.js';

export interface PosteriorSolveOptions extends SolveOptions {
  /** Worker threads for the chains; 0 keeps everything in this thread. The draws do not depend on it. */
  readonly threads: number;
  /** Most draws per chain. */
  readonly drawLimit: number;
  /** Stops the sampling early; the result so far is then marked as interrupted. */
  readonly signal?: AbortSignal;
}

/**
 * Solution with uncertainties from the posterior (with `quick`, from the curvature).
 *
 * @throws InputDataError when there are too few velocities or no span to search
 */
export async function solveWithPosterior(
  theCase: Case,
  velocities: VelocitySet,
  options: PosteriorSolveOptions,
): Promise<Solved> {
  const progress = options.onProgress ?? ((): void => undefined);
  const settled = settleCase(theCase, velocities, (stage, fraction) => {
    progress(stage, options.quick ? fraction : 0.4 * fraction);
  });
  const { problem, point } = settled.best.fit;
  let posterior: PosteriorSample | null = null;
  if (!options.quick) {
    posterior = await samplePosterior(settled, theCase, velocities, {
      seed: options.seed,
      threads: options.threads,
      limit: options.drawLimit,
      isStopped: () => options.signal?.aborted === true,
      onProgress: (share) => {
        progress('sampling', 0.4 + 0.55 * share);
      },
    });
  }
  const final = posterior === null ? settled : { ...settled, best: posterior.best, rivals: posterior.rivals };
  const sampled =
    posterior === null
      ? sampleAround(problem, point, theCase, options.seed)
      : posterior.sampledFor(theCase, options.seed);
  return describeSolution(theCase, velocities, final, sampled, options, posterior);
}
