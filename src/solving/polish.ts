/** Last steps to the maximum of the log-density, with orbit and jitters moving together. */
import { minimiseSmooth } from '../numerics/minimise.js';
import type { PlannedFit } from './explorer.js';
import { expectedInformation } from './curvature.js';
import type { ModelFit } from './fit-model.js';
import type { VelocityProblem } from './problem.js';
import type { ModelPoint } from './model-structure.js';

/** Largest gradient, in units of one uncertainty per parameter, at which the point counts as the maximum. */
const GRADIENT_LIMIT = 1e-3;

/** The point of a vector (parameters, free jitters); jitters are mirrored to be positive. */
export function pointOfVector(
  problem: VelocityProblem,
  vector: Float64Array,
  jittersMps: Float64Array,
): ModelPoint {
  const p = problem.parameterCount;
  const jitters = Float64Array.from(jittersMps);
  problem.freeJitters.forEach((instrument, index) => {
    jitters[instrument] = Math.abs(vector[p + index]!);
  });
  return { parameters: vector.slice(0, p), jittersMps: jitters };
}

export function vectorOfPoint(problem: VelocityProblem, point: ModelPoint): Float64Array {
  return Float64Array.from([
    ...point.parameters,
    ...problem.freeJitters.map((instrument) => point.jittersMps[instrument]!),
  ]);
}

/**
 * A quasi-Newton run on the log-density from the fit, in which all parameters move together; keeps whichever point is
 * higher and says how flat it is there.
 */
export function polish(planned: PlannedFit): PlannedFit {
  const { problem, point } = planned.fit;
  const information = expectedInformation(problem, point);
  const size = problem.freeCount;
  const scale = Float64Array.from({ length: size }, (_, j) => {
    const width = 1 / Math.sqrt(information[j * size + j]!);
    return Number.isFinite(width) && width > 0 ? width : 1;
  });
  const start = vectorOfPoint(problem, point);
  const target = (vector: Float64Array, gradient: Float64Array): number => {
    const here = pointOfVector(problem, vector, point.jittersMps);
    const jitterBounds = problem.freeJitters.every((instrument) => {
      const { lowMps, highMps } = problem.structure.jitters[instrument]!;
      return here.jittersMps[instrument]! >= lowMps && here.jittersMps[instrument]! <= highMps;
    });
    if (!jitterBounds || !problem.logDensityGradient(here, gradient)) return Infinity;
    for (let j = 0; j < size; j++) {
      const mirrored = j >= problem.parameterCount && vector[j]! < 0;
      gradient[j] = mirrored ? gradient[j]! : -gradient[j]!;
    }
    return -problem.logDensity(here);
  };
  const minimum = minimiseSmooth(target, start, { scale, maxIterations: 100 });
  const isHigher = -minimum.value > planned.fit.logDensity;
  const best = isHigher ? pointOfVector(problem, minimum.parameters, point.jittersMps) : point;
  const gradient = new Float64Array(size);
  problem.logDensityGradient(best, gradient);
  const steepest = gradient.reduce((worst, g, j) => Math.max(worst, Math.abs(g * scale[j]!)), 0);
  const logLikelihood = problem.logLikelihood(best);
  const atBound = problem.freeJitters.some((instrument) => {
    const { lowMps, highMps } = problem.structure.jitters[instrument]!;
    const s = best.jittersMps[instrument]!;
    return s > 0 && (s <= lowMps * (1 + 1e-9) || s >= highMps * (1 - 1e-9));
  });
  const flat = steepest <= GRADIENT_LIMIT || atBound;
  const fit: ModelFit = {
    ...planned.fit,
    point: best,
    logLikelihood,
    logDensity: problem.logDensity(best),
    bic: problem.freeCount * Math.log(problem.data.timesDays.length) - 2 * logLikelihood,
    status: planned.fit.status === 'failed' ? 'failed' : flat ? 'converged' : 'iteration-limit',
    reason: atBound
      ? 'a jitter lies at the bound that the case states; the rest is at its maximum'
      : `largest slope of ln L per uncertainty ${steepest.toExponential(1)}, limit ${GRADIENT_LIMIT.toExponential(0)}`,
  };
  return { plan: planned.plan, fit };
}
