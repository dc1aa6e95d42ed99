/** Nonlinear least squares (Levenberg-Marquardt) that says why it stopped. */
import { DampedStepEngine } from './damped-step.js';

export interface LeastSquaresProblem {
  readonly parameterCount: number;
  readonly residualCount: number;
  /**
   * Writes the weighted residuals (observed - model)/sigma and, when `jacobian` is given, d residual_i / d parameter_j at
   * i·parameterCount + j. Returns false outside the model's domain: a step that leads there is not taken.
   */
  evaluate(parameters: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): boolean;
}

export interface LeastSquaresOptions {
  /** Steps tried, whether taken or not. Default 200. */
  readonly maxIterations?: number;
  /** Stops when an undamped step promises less than this part of chi-square. Default 1e-16. */
  readonly relativeChange?: number;
  /** Stops when no Jacobian column makes a cosine above this with the residuals. Default 1e-13. */
  readonly gradient?: number;
}

interface FitPoint {
  /** Fresh array, never modified afterwards. */
  readonly parameters: Float64Array;
  readonly chiSquare: number;
  /** Steps tried, whether taken or not. */
  readonly iterations: number;
}

/**
 * - `converged`: `chi2-change`, an undamped step promised to lower chi-square by no more than relativeChange · chi-square (or
 *   by less than 1e-13 of it with no further fall in sight, which is rounding); `step-size`, no step lowers chi-square and
 *   the undamped one is below 1e-6 of each parameter or of its uncertainty, or 1e-9 of the errors; `gradient`, see the option.
 * - `iteration-limit`: maxIterations steps were tried, or no step lowers chi-square although the derivatives promise that
 *   one does (then they are wrong, see checkJacobian, or the model jumps); the best point so far is given.
 * - `failed`: `non-finite-model`, the start is outside the model's domain; `singular-curvature`, the residuals at the
 *   final point do not determine every parameter (a column of zeros, or columns dependent to rounding).
 */
export type FitOutcome =
  | (FitPoint & { readonly status: 'converged'; readonly reason: 'chi2-change' | 'step-size' | 'gradient' })
  | (FitPoint & { readonly status: 'iteration-limit' })
  | (FitPoint & { readonly status: 'failed'; readonly reason: 'singular-curvature' | 'non-finite-model' });

const FIRST_DAMPING = 1e-3;
/** Of a unit diagonal: below rounding, hence an undamped step, but enough for a decomposition to go through. */
const LEAST_DAMPING = 1e-15;
/** Where raising the damping starts from after an undamped step failed. */
const LEAST_USEFUL_DAMPING = 1e-12;
const MOST_DAMPING = 1e12;
/** Relative changes of chi-square below this are taken for rounding. */
const ROUNDING = 1e-13;
/** Least factor on the damping after a good step. */
const DAMPING_DECREASE = 0.2;
/** While a step promises more than this part of chi-square, its bending is measured (one more evaluation of the residuals). */
const BENDING_MATTERS = 1e-6;
const MOST_BENDING = 0.75;
/** Changes below this part of a parameter are lost to rounding. */
const SMALLEST_RELATIVE_STEP = 2e-16;

/**
 * Minimises the sum of squared residuals from `start`.
 *
 * @param problem - residuals and their analytic derivatives
 * @param start - length parameterCount, inside the model's domain; not modified
 * @returns where it stopped and why; deterministic; never throws for numerical reasons
 *
 * Accuracy: see test/reference/nist/digits.md (27 certified problems, two starts each).
 * Method: Levenberg-Marquardt in coordinates of unit curvature, damping controlled by the gain ratio (Nielsen 1999,
 * report IMM-REP-1999-05, Technical University of Denmark, cited from memory), steps bent to second order while they are long.
 */
export function minimiseLeastSquares(
  problem: LeastSquaresProblem,
  start: Float64Array,
  options: LeastSquaresOptions = {},
): FitOutcome {
  const maxIterations = options.maxIterations ?? 200;
  const relativeChange = options.relativeChange ?? 1e-16;
  const gradientLimit = options.gradient ?? 1e-13;
  const p = problem.parameterCount;
  const n = problem.residualCount;
  const engine = new DampedStepEngine(p, n);
  let parameters = start.slice();
  let trial = new Float64Array(p);
  let residuals = new Float64Array(n);
  let trialResiduals = new Float64Array(n);
  let jacobian = new Float64Array(n * p);
  let trialJacobian = new Float64Array(n * p);

  let iterations = 0;
  let chiSquare = chiSquareAt(problem, parameters, residuals, jacobian);
  if (!Number.isFinite(chiSquare) || !engine.moveTo(residuals, jacobian)) {
    return { status: 'failed', reason: 'non-finite-model', parameters, chiSquare, iterations };
  }
  const converged = (reason: 'chi2-change' | 'step-size' | 'gradient'): FitOutcome =>
    engine.isDetermined
      ? { status: 'converged', reason, parameters, chiSquare, iterations }
      : { status: 'failed', reason: 'singular-curvature', parameters, chiSquare, iterations };

  // No step, however short, lowers chi-square: the end when the undamped one is negligible too, else a contradiction.
  const stuck = (): FitOutcome =>
    engine.take(LEAST_DAMPING) && isNegligible(parameters, engine, chiSquare / n)
      ? converged('step-size')
      : { status: 'iteration-limit', parameters, chiSquare, iterations };

  let damping = FIRST_DAMPING;
  let growth = 2;
  let lastPromiseAtRounding = Infinity;
  /** Damping to return to when the undamped step that should confirm convergence leads astray. */
  let dampingBeforeConfirmation: number | null = null;
  while (largestCosine(engine.gradient, chiSquare) > gradientLimit) {
    if (iterations >= maxIterations) return { status: 'iteration-limit', parameters, chiSquare, iterations };
    iterations++;
    const undamped = damping <= LEAST_DAMPING;
    let trialChiSquare = Infinity;
    let promise = Infinity;
    let moved = true;
    if (engine.take(damping)) {
      promise = engine.predictedDecrease(damping);
      let isStraightEnough = true;
      if (promise > BENDING_MATTERS * chiSquare) {
        engine.probePoint(parameters, trial);
        isStraightEnough =
          Number.isFinite(chiSquareAt(problem, trial, trialResiduals, null)) &&
          engine.bend(residuals, jacobian, trialResiduals, damping) <= MOST_BENDING;
      }
      moved = setTrial(trial, parameters, engine);
      if (isStraightEnough) trialChiSquare = chiSquareAt(problem, trial, trialResiduals, trialJacobian);
    }
    const isSmall = promise <= relativeChange * chiSquare;
    // At rounding level chi-square cannot say which of two points is lower; a promise that keeps falling can.
    const isAtRounding = promise <= Math.max(relativeChange, ROUNDING) * chiSquare;
    const isStalled = isAtRounding && promise > 0.5 * lastPromiseAtRounding;
    if (isAtRounding) lastPromiseAtRounding = promise;
    const isTaken =
      trialChiSquare <= chiSquare * (isAtRounding ? 1 + ROUNDING : 1) && columnsAreFinite(trialJacobian);
    if (isTaken) {
      const gain = (chiSquare - trialChiSquare) / promise;
      [parameters, trial] = [trial, parameters];
      [residuals, trialResiduals] = [trialResiduals, residuals];
      [jacobian, trialJacobian] = [trialJacobian, jacobian];
      chiSquare = trialChiSquare;
      engine.moveTo(residuals, jacobian);
      if ((isSmall || isStalled) && undamped) return converged('chi2-change');
      if (!moved) return stuck();
      dampingBeforeConfirmation = null;
      if (isAtRounding) {
        dampingBeforeConfirmation = damping;
        damping = LEAST_DAMPING;
      } else {
        damping = Math.max(LEAST_DAMPING, damping * dampingFactor(gain, promise / chiSquare));
      }
      growth = 2;
    } else {
      if ((isSmall || isStalled) && undamped) return converged('chi2-change');
      if (!moved) return stuck();
      if (dampingBeforeConfirmation !== null) {
        damping = dampingBeforeConfirmation;
        dampingBeforeConfirmation = null;
      } else {
        damping = Math.max(LEAST_USEFUL_DAMPING, damping * growth);
        growth *= 2;
      }
      if (damping > MOST_DAMPING) return stuck();
    }
  }
  return converged('gradient');
}

/** After Nielsen 1999; near the end, where the linearised model has proved right, damping only holds up convergence. */
function dampingFactor(gain: number, relativePromise: number): number {
  if (Math.abs(gain - 1) < 0.1 && relativePromise < 0.1) return 0.01;
  return Math.max(DAMPING_DECREASE, 1 - (2 * gain - 1) ** 3);
}

function chiSquareAt(
  problem: LeastSquaresProblem,
  parameters: Float64Array,
  residuals: Float64Array,
  jacobian: Float64Array | null,
): number {
  if (!problem.evaluate(parameters, residuals, jacobian)) return Infinity;
  let sum = 0;
  for (let i = 0; i < residuals.length; i++) sum += residuals[i]! * residuals[i]!;
  return Number.isNaN(sum) ? Infinity : sum;
}

/** Writes the point that the engine's step leads to; false when it is the present one to rounding. */
function setTrial(trial: Float64Array, parameters: Float64Array, engine: DampedStepEngine): boolean {
  let moved = false;
  for (let j = 0; j < trial.length; j++) {
    const change = engine.scale[j]! * engine.step[j]!;
    trial[j] = parameters[j]! + change;
    if (Math.abs(change) > SMALLEST_RELATIVE_STEP * Math.abs(parameters[j]!)) moved = true;
  }
  return moved;
}

/**
 * Whether the engine's step is a small part of each parameter, of the least uncertainty that it can have, or of a
 * measurement error (the last for noise-free data, where a parameter that is zero has nothing else to be compared with).
 */
function isNegligible(parameters: Float64Array, engine: DampedStepEngine, variance: number): boolean {
  const smallComponent = Math.max(1e-6 * Math.sqrt(variance), 1e-9);
  return engine.step.every(
    (component, j) =>
      Math.abs(component) <= smallComponent ||
      Math.abs(engine.scale[j]! * component) <= 1e-6 * Math.abs(parameters[j]!),
  );
}

function largestCosine(gradient: Float64Array, chiSquare: number): number {
  if (chiSquare === 0) return 0;
  let largest = 0;
  for (let j = 0; j < gradient.length; j++) largest = Math.max(largest, Math.abs(gradient[j]!));
  return largest / Math.sqrt(chiSquare);
}

function columnsAreFinite(jacobian: Float64Array): boolean {
  let sum = 0;
  for (let i = 0; i < jacobian.length; i++) sum += jacobian[i]! * 0;
  return sum === 0;
}
