/** Gain in ln L with the noise level free, which false-alarm probabilities are about, also where the case states a jitter. */
import type { PlannedFit } from './explorer.js';
import { chiSquareOf, residualsOf } from './residuals.js';

/**
 * ln L gained over `base`. With all jitters refitted that is the difference of the two; where the case states one, the noise
 * may be far from what is stated, and n/2 ln(chi2_base/chi2) with one common scale of the noise takes its place.
 */
export function gainWithNoiseFree(base: PlannedFit, planned: PlannedFit | null): number {
  if (planned === null) return 0;
  const { problem, point, logLikelihood } = planned.fit;
  if (!problem.structure.jitters.some((jitter) => jitter.isStated))
    return logLikelihood - base.fit.logLikelihood;
  const n = problem.data.velocitiesMps.length;
  return 0.5 * n * Math.log(chiSquareAt(base, point.jittersMps) / chiSquareAt(planned, point.jittersMps));
}

function chiSquareAt({ fit }: PlannedFit, jittersMps: Float64Array): number {
  const residuals = residualsOf(fit);
  return residuals === null ? Infinity : chiSquareOf(residuals, fit.problem.data, jittersMps);
}
