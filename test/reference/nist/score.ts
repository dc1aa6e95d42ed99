import { minimiseLeastSquares } from '../../../src/numerics/least-squares.js';
import type { FitOutcome } from '../../../src/numerics/least-squares.js';
import { invertSymmetricPositive } from '../../../src/numerics/linear-algebra.js';
import type { CertifiedSet } from './read-set.js';

export interface Score {
  readonly outcome: FitOutcome;
  /** Matching digits (log relative error) of the worst parameter; certified values have 11. */
  readonly parameterDigits: number;
  readonly sumOfSquaresDigits: number;
  readonly deviationDigits: number;
}

export function matchingDigits(found: number, certified: number): number {
  if (found === certified) return 11;
  const digits = -Math.log10(Math.abs(found - certified) / Math.abs(certified));
  return Math.min(11, Math.max(0, digits));
}

export function worstDigits(found: Float64Array, certified: Float64Array): number {
  return found.reduce((worst, value, j) => Math.min(worst, matchingDigits(value, certified[j]!)), 11);
}

/** Fits one set from one of its two starts, with default options, and counts digits. */
export function scoreSet(set: CertifiedSet, start: 0 | 1): Score {
  const outcome = minimiseLeastSquares(set.problem, set.starts[start], { maxIterations: 2000 });
  return {
    outcome,
    parameterDigits: worstDigits(outcome.parameters, set.parameters),
    sumOfSquaresDigits: matchingDigits(outcome.chiSquare, set.residualSumOfSquares),
    deviationDigits: worstDigits(standardDeviationsAt(set, outcome), set.standardDeviations),
  };
}

/** Square roots of the diagonal of (J^T J)^-1 · RSS / dof. */
function standardDeviationsAt(set: CertifiedSet, outcome: FitOutcome): Float64Array {
  const { parameterCount: p, residualCount: n } = set.problem;
  const jacobian = new Float64Array(n * p);
  set.problem.evaluate(outcome.parameters, new Float64Array(n), jacobian);
  const curvature = new Float64Array(p * p);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < p; j++) {
      for (let k = 0; k < p; k++) curvature[j * p + k]! += jacobian[i * p + j]! * jacobian[i * p + k]!;
    }
  }
  const covariance = invertSymmetricPositive(curvature, p);
  const variance = outcome.chiSquare / (n - p);
  return Float64Array.from({ length: p }, (_, j) => Math.sqrt((covariance?.[j * p + j] ?? NaN) * variance));
}
