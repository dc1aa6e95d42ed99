/** Draws of masses and eccentricities of interacting companions: sampled, or from the curvature at the best fit. */
import { choleskyInPlace, invertSymmetricPositive } from '../../numerics/linear-algebra.js';
import { RandomStream } from '../../numerics/random.js';
import { adaptiveImportance } from '../../numerics/sampling/adaptive-importance.js';
import type { ProposalSeed } from '../../numerics/sampling/adaptive-importance.js';
import { InteractionDensity } from './interaction-density.js';
import { COORDINATES, LARGEST_ECCENTRICITY } from './interaction-model.js';
import type { InteractionModel } from './interaction-model.js';
import { curvatureAt } from './interaction-search.js';
import type { InteractionSolution } from './interaction-search.js';
import type { InteractionPosterior } from './interaction-types.js';

const CURVATURE_DRAWS = 2000;
const RESAMPLED = 2000;
const GOAL = 1200;
/** Streams of the seed: one for the proposals, one for what is drawn given them. */
const PROPOSAL_STREAM = 0;
const RESAMPLING_STREAM = 1;

export interface InteractionDraws {
  /** Equally weighted; coordinates of the model. With `posterior`, some points stand several times in a row. */
  readonly points: readonly Float64Array[];
  readonly posterior: InteractionPosterior | null;
  /** Why there are no draws. */
  readonly why: string | null;
}

/** Draws from the normal distribution that the curvature at the solution stands for, within the model's domain. */
export function drawsOfCurvature(
  model: InteractionModel,
  solution: InteractionSolution,
  eccentricityScale: number,
  seed: number,
): InteractionDraws {
  const { size } = model;
  const curvature = curvatureAt(model, solution.point, solution.jittersDays, eccentricityScale);
  const factor = curvature === null ? null : invertSymmetricPositive(curvature, size);
  if (factor === null || !choleskyInPlace(factor, size))
    return {
      points: [],
      posterior: null,
      why: 'the curvature at the best fit is singular: the times do not determine every mass and eccentricity',
    };
  const random = RandomStream.fromSeed(seed, PROPOSAL_STREAM);
  const points: Float64Array[] = [];
  const normal = new Float64Array(size);
  for (let tries = 0; points.length < CURVATURE_DRAWS && tries < 4 * CURVATURE_DRAWS; tries++) {
    for (let j = 0; j < size; j++) normal[j] = random.normal();
    const point = solution.point.slice();
    for (let i = 0; i < size; i++)
      for (let j = 0; j <= i; j++) point[i]! += factor[i * size + j]! * normal[j]!;
    if (isInside(point)) points.push(point);
  }
  return { points, posterior: null, why: null };
}

function isInside(point: Float64Array): boolean {
  for (let c = 0; c < point.length; c += COORDINATES) {
    if (Math.hypot(point[c + 1]!, point[c + 2]!) > LARGEST_ECCENTRICITY) return false;
  }
  return true;
}

/**
 * Draws from the posterior, by importance sampling that starts from every solution found.
 *
 * @param mostDraws - evaluations of the density, at most
 */
export function drawsOfPosterior(
  model: InteractionModel,
  solutions: readonly InteractionSolution[],
  eccentricityScale: number,
  mostDraws: number,
  seed: number,
  onProgress: (share: number) => void,
): InteractionDraws {
  const seeds = solutions.map((solution) => seedAt(model, solution, eccentricityScale));
  model.anchorAt(solutions[0]!.point);
  const density = new InteractionDensity(model, eccentricityScale);
  const sampled = adaptiveImportance(
    (point) => density.logDensity(point),
    seeds,
    RandomStream.fromSeed(seed, PROPOSAL_STREAM),
    {
      mostDraws,
      goal: GOAL,
      onRound: (draws, effective) => {
        onProgress(Math.min(1, Math.max(draws / mostDraws, effective / GOAL)));
      },
    },
  );
  const posterior: InteractionPosterior = {
    draws: sampled.points.length,
    effectiveDraws: sampled.effective,
    largestWeight: sampled.largestWeight,
    status: sampled.status,
  };
  if (!(sampled.effective > 1))
    return { points: [], posterior, why: 'no draw of the sampler fell where the times allow it' };
  // Systematic resampling: each point as often as its weight says, to within one.
  const points: Float64Array[] = [];
  const offset = RandomStream.fromSeed(seed, RESAMPLING_STREAM).uniform();
  let sum = 0;
  sampled.points.forEach((point, i) => {
    sum += sampled.weights[i]!;
    while (points.length + offset < sum * RESAMPLED && points.length < RESAMPLED) points.push(point);
  });
  return { points, posterior, why: null };
}

/** Covariance from the curvature, with the mass priors' own (a standard deviation of 1 in ln mass); wide where singular. */
function seedAt(
  model: InteractionModel,
  solution: InteractionSolution,
  eccentricityScale: number,
): ProposalSeed {
  const { size } = model;
  const curvature = curvatureAt(model, solution.point, solution.jittersDays, eccentricityScale);
  if (curvature !== null) for (let c = 0; c < size; c += COORDINATES) curvature[c * size + c]! += 1;
  const covariance = curvature === null ? null : invertSymmetricPositive(curvature, size);
  if (covariance !== null) return { centre: solution.point, covariance };
  const wide = new Float64Array(size * size);
  for (let j = 0; j < size; j++)
    wide[j * size + j] = j % COORDINATES === 0 ? 0.25 : (0.3 * eccentricityScale) ** 2;
  return { centre: solution.point, covariance: wide };
}
