/** Best fits of interacting companions from many starts. */
import { choleskyInPlace, choleskySolveInPlace } from '../../numerics/linear-algebra.js';
import { minimiseLeastSquares } from '../../numerics/least-squares.js';
import type { FitOutcome, LeastSquaresProblem } from '../../numerics/least-squares.js';
import { minimiseScalar } from '../../numerics/minimise-scalar.js';
import { interactionStarts } from './interaction-starts.js';
import { COORDINATES } from './interaction-model.js';
import type { InteractionModel } from './interaction-model.js';
import type { LineLikelihood } from './line-likelihood.js';

/** Fits whose density falls short of the best by more than this are dropped. */
const RIVAL_WITHIN = 12;
/** Two fits are one when masses agree to this part and eccentricities to this much. */
const SAME_LOG_MASS = 0.1;
const SAME_ECCENTRICITY = 0.01;
const EXPLORING_STEPS = 12;
const FINAL_STEPS = 40;
const MOST_FINISHED = 4;
/** Half-widths of the first fits that are finished: in units of ln density. */
const WORTH_FINISHING = 30;

export interface InteractionSolution {
  readonly point: Float64Array;
  /** Jitter of each table, days. */
  readonly jittersDays: Float64Array;
  /** ln likelihood (lines integrated out) plus ln prior of the eccentricities, up to a constant. */
  readonly logDensity: number;
  readonly outcome: FitOutcome;
}

/** Weighted residuals with the straight lines taken out, and one row per eccentricity component for its prior. */
class InteractionProblem implements LeastSquaresProblem {
  readonly parameterCount: number;
  readonly residualCount: number;
  private readonly model: InteractionModel;
  private readonly derivatives: readonly Float64Array[];
  private readonly column: readonly Float64Array[];
  private readonly jittersDays: Float64Array;
  private readonly scale: number;

  constructor(model: InteractionModel, jittersDays: Float64Array, eccentricityScale: number) {
    this.model = model;
    this.jittersDays = jittersDays;
    this.scale = eccentricityScale;
    this.parameterCount = model.size;
    const rows = model.observedDays.map((times) => times.length);
    this.residualCount = rows.reduce((sum, n) => sum + n, 0) + 2 * model.companionCount;
    this.derivatives = rows.map((n) => new Float64Array(n * model.size));
    this.column = rows.map((n) => new Float64Array(n));
  }

  evaluate(point: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): boolean {
    const { model, derivatives, column, scale } = this;
    const { size } = model;
    const isInside =
      jacobian === null ? model.predict(point) : model.predictWithDerivatives(point, derivatives);
    if (!isInside) return false;
    let row = 0;
    model.likelihoods.forEach((likelihood, t) => {
      const observed = model.observedDays[t]!;
      const predicted = model.predictedDays[t]!;
      const scratch = column[t]!;
      for (let i = 0; i < scratch.length; i++) scratch[i] = observed[i]! - predicted[i]!;
      likelihood.evaluate(scratch, this.jittersDays[t]!);
      for (let i = 0; i < scratch.length; i++)
        residuals[row + i] = likelihood.reduced[i]! * Math.sqrt(likelihood.weights[i]!);
      if (jacobian !== null) {
        for (let j = 0; j < size; j++) {
          for (let i = 0; i < scratch.length; i++) scratch[i] = derivatives[t]![i * size + j]!;
          likelihood.removeLine(scratch);
          for (let i = 0; i < scratch.length; i++)
            jacobian[(row + i) * size + j] = -scratch[i]! * Math.sqrt(likelihood.weights[i]!);
        }
      }
      row += scratch.length;
    });
    jacobian?.fill(0, row * size);
    for (let c = 0; c < model.companionCount; c++) {
      for (const j of [COORDINATES * c + 1, COORDINATES * c + 2]) {
        residuals[row] = -point[j]! / scale;
        if (jacobian !== null) jacobian[row * size + j] = -1 / scale;
        row++;
      }
    }
    return true;
  }
}

/** Jitters of most likelihood at the model's present predictions, days; and ln L summed over the tables. */
function bestJitters(model: InteractionModel): {
  readonly jittersDays: Float64Array;
  readonly logLikelihood: number;
} {
  return bestJittersOf(
    model.likelihoods,
    model.observedDays.map((times, t) => times.map((x, i) => x - model.predictedDays[t]![i]!)),
  );
}

/** The same for any residuals, one array per table. */
export function bestJittersOf(
  likelihoods: readonly LineLikelihood[],
  residuals: readonly Float64Array[],
): { readonly jittersDays: Float64Array; readonly logLikelihood: number } {
  const jittersDays = new Float64Array(likelihoods.length);
  let logLikelihood = 0;
  likelihoods.forEach((likelihood, t) => {
    const values = residuals[t]!;
    likelihood.evaluate(values, 0);
    const scatter = Math.sqrt(likelihood.reduced.reduce((sum, r) => sum + r * r, 0) / likelihood.count);
    const cost = (jitter: number): number => -likelihood.evaluate(values, jitter);
    const best = minimiseScalar(cost, 0, 3 * scatter + 1e-9, 1e-4 * scatter);
    const isZero = cost(0) <= best.value + 1e-9;
    jittersDays[t] = isZero ? 0 : best.position;
    logLikelihood -= isZero ? cost(0) : best.value;
  });
  return { jittersDays, logLikelihood };
}

interface Linearised {
  /** J^T J of the weighted residuals, priors of the eccentricities included. */
  readonly curvature: Float64Array;
  /** J^T r. */
  readonly gradient: Float64Array;
}

function linearise(
  model: InteractionModel,
  point: Float64Array,
  jittersDays: Float64Array,
  eccentricityScale: number,
): Linearised | null {
  const problem = new InteractionProblem(model, jittersDays, eccentricityScale);
  const p = problem.parameterCount;
  const residuals = new Float64Array(problem.residualCount);
  const jacobian = new Float64Array(problem.residualCount * p);
  if (!problem.evaluate(point, residuals, jacobian)) return null;
  const curvature = new Float64Array(p * p);
  const gradient = new Float64Array(p);
  for (let row = 0; row < problem.residualCount; row++) {
    for (let a = 0; a < p; a++) {
      gradient[a]! += jacobian[row * p + a]! * residuals[row]!;
      for (let b = 0; b < p; b++) curvature[a * p + b]! += jacobian[row * p + a]! * jacobian[row * p + b]!;
    }
  }
  return { curvature, gradient };
}

/** Inverse of the covariance at a point: J^T J, priors of the eccentricities included; `null` outside the domain. */
export function curvatureAt(
  model: InteractionModel,
  point: Float64Array,
  jittersDays: Float64Array,
  eccentricityScale: number,
): Float64Array | null {
  return linearise(model, point, jittersDays, eccentricityScale)?.curvature ?? null;
}

/** By how much an undamped step promises to lower chi-square; Infinity where there is no such step. */
export function promisedDecrease(
  model: InteractionModel,
  point: Float64Array,
  jittersDays: Float64Array,
  eccentricityScale: number,
): number {
  const linearised = linearise(model, point, jittersDays, eccentricityScale);
  if (linearised === null) return Infinity;
  const { curvature, gradient } = linearised;
  const step = gradient.slice();
  if (!choleskyInPlace(curvature, step.length)) return Infinity;
  choleskySolveInPlace(curvature, step.length, step);
  return gradient.reduce((sum, g, j) => sum + g * step[j]!, 0);
}

/**
 * Distinct local maxima of likelihood times eccentricity prior, best first; empty when no start could be followed.
 *
 * @param eccentricityScale - width of the normal prior of each of e cos omega and e sin omega
 */
export function searchInteraction(
  model: InteractionModel,
  eccentricityScale: number,
  onProgress: (share: number) => void,
): InteractionSolution[] {
  const starts = interactionStarts(model);
  const explored: InteractionSolution[] = [];
  starts.forEach((start, at) => {
    const solution = settle(model, start, eccentricityScale, EXPLORING_STEPS, 1);
    if (solution !== null) explored.push(solution);
    onProgress((0.7 * (at + 1)) / starts.length);
  });
  const best = Math.max(...explored.map(({ logDensity }) => logDensity));
  const promising = distinct(explored.filter(({ logDensity }) => logDensity > best - WORTH_FINISHING)).slice(
    0,
    MOST_FINISHED,
  );
  const finished: InteractionSolution[] = [];
  promising.forEach(({ point }, at) => {
    const solution = settle(model, point, eccentricityScale, FINAL_STEPS, 4);
    if (solution !== null) finished.push(solution);
    onProgress(0.7 + (0.3 * (at + 1)) / promising.length);
  });
  const sorted = distinct(finished);
  return sorted.filter(({ logDensity }) => logDensity >= sorted[0]!.logDensity - RIVAL_WITHIN);
}

/** Least squares and jitters in turn. */
function settle(
  model: InteractionModel,
  start: Float64Array,
  eccentricityScale: number,
  maxIterations: number,
  rounds: number,
): InteractionSolution | null {
  if (!model.anchorAt(start)) return null;
  let { jittersDays } = bestJitters(model);
  let point = start;
  for (let round = 0; ; round++) {
    const outcome = minimiseLeastSquares(
      new InteractionProblem(model, jittersDays, eccentricityScale),
      point,
      {
        maxIterations,
        relativeChange: 1e-5,
      },
    );
    point = outcome.parameters;
    if (!model.anchorAt(point) && !model.predict(point)) return null;
    const next = bestJitters(model);
    const isSettled = next.jittersDays.every(
      (s, t) => Math.abs(s - jittersDays[t]!) <= 0.01 * jittersDays[t]!,
    );
    jittersDays = next.jittersDays;
    if (isSettled || round + 1 >= rounds) {
      const logDensity = next.logLikelihood + logEccentricityPrior(point, eccentricityScale);
      return Number.isFinite(logDensity) ? { point, jittersDays, logDensity, outcome } : null;
    }
  }
}

export function logEccentricityPrior(point: Float64Array, scale: number): number {
  let sum = 0;
  for (let c = 0; c < point.length; c += COORDINATES) sum += point[c + 1]! ** 2 + point[c + 2]! ** 2;
  return (-0.5 * sum) / scale ** 2;
}

function distinct(solutions: readonly InteractionSolution[]): InteractionSolution[] {
  const kept: InteractionSolution[] = [];
  for (const candidate of [...solutions].sort((a, b) => b.logDensity - a.logDensity)) {
    if (!kept.some(({ point }) => isSame(point, candidate.point))) kept.push(candidate);
  }
  return kept;
}

function isSame(a: Float64Array, b: Float64Array): boolean {
  return a.every(
    (value, i) => Math.abs(value - b[i]!) < (i % COORDINATES === 0 ? SAME_LOG_MASS : SAME_ECCENTRICITY),
  );
}
