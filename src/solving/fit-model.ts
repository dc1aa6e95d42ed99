/**
 * Maximum of the log-density of one model from one start: least squares for the orbit at the present jitters, maximum
 * likelihood for the jitters at the present orbit, in turn until neither moves.
 */
import { minimiseLeastSquares } from '../numerics/least-squares.js';
import { updateJitters } from './jitter.js';
import type { VelocityProblem } from './problem.js';
import type { ModelPoint } from './model-structure.js';

export interface ModelFit {
  readonly problem: VelocityProblem;
  readonly point: ModelPoint;
  readonly logDensity: number;
  readonly logLikelihood: number;
  /** k ln n - 2 ln L with k counting jitters. */
  readonly bic: number;
  readonly status: 'converged' | 'iteration-limit' | 'failed';
  /** The inequality that ended the fit, with its numbers. */
  readonly reason: string;
}

export interface FitEffort {
  /** Turns of (orbit, jitters). */
  readonly rounds: number;
  /** Steps of least squares per turn. */
  readonly steps: number;
  /** Relative change of chi-square at which least squares stops. */
  readonly relativeChange: number;
  /** The fit has converged when a whole turn gains less than this in log-density. */
  readonly gain: number;
}

/** For judging many starts. */
export const ROUGH: FitEffort = { rounds: 4, steps: 30, relativeChange: 1e-4, gain: 1e-2 };
/** For what is compared and reported. */
export const THOROUGH: FitEffort = { rounds: 60, steps: 200, relativeChange: 1e-12, gain: 1e-9 };

/**
 * @param start - read, not modified
 * @returns the best point found; `failed` when the model could not be evaluated at the start
 */
export function fitModel(problem: VelocityProblem, start: ModelPoint, effort: FitEffort): ModelFit {
  const n = problem.data.velocitiesMps.length;
  let parameters = Float64Array.from(start.parameters);
  const jittersMps = Float64Array.from(start.jittersMps);
  const residuals = new Float64Array(n);
  let value = -Infinity;
  let status: ModelFit['status'] = 'iteration-limit';
  let reason = `${effort.rounds} turns did not settle`;
  for (let round = 0; round < effort.rounds; round++) {
    problem.setJitters(jittersMps);
    const outcome = minimiseLeastSquares(problem, parameters, {
      maxIterations: effort.steps,
      relativeChange: effort.relativeChange,
    });
    if (outcome.status === 'failed' && outcome.reason === 'non-finite-model') {
      status = 'failed';
      reason = 'the model has no finite value at the start';
      break;
    }
    parameters = Float64Array.from(outcome.parameters);
    const prediction = problem.predictionAt(parameters);
    if (prediction === null) {
      status = 'failed';
      reason = 'the fit left the domain of the model';
      break;
    }
    for (let i = 0; i < n; i++) residuals[i] = problem.data.velocitiesMps[i]! - prediction[i]!;
    updateJitters(problem.data, residuals, problem.structure.jitters, jittersMps);
    const next = problem.logDensity({ parameters, jittersMps });
    const gained = next - value;
    value = next;
    if (gained < effort.gain && round > 0) {
      status = outcome.status === 'failed' ? 'failed' : 'converged';
      reason =
        outcome.status === 'failed'
          ? `least squares stopped: ${outcome.reason}`
          : `a turn of orbit and jitters gained ${gained.toExponential(1)} in ln L, limit ${effort.gain.toExponential(0)}`;
      break;
    }
  }
  const point = { parameters, jittersMps };
  const logLikelihood = problem.logLikelihood(point);
  return {
    problem,
    point,
    logDensity: problem.logDensity(point),
    logLikelihood,
    bic: problem.freeCount * Math.log(n) - 2 * logLikelihood,
    status: Number.isFinite(logLikelihood) ? status : 'failed',
    reason,
  };
}
