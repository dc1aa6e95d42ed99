// Randomness
export { RandomStream } from './random.js';

// Linear algebra
export {
  choleskyInPlace,
  choleskySolveInPlace,
  invertSymmetricPositive,
  orthonormalise,
  symmetricEigen,
} from './linear-algebra.js';
export type { SymmetricEigen } from './linear-algebra.js';

// Optimisation
export { minimiseLeastSquares } from './least-squares.js';
export type { FitOutcome, LeastSquaresOptions, LeastSquaresProblem } from './least-squares.js';
export { checkJacobian } from './jacobian-check.js';
export type { JacobianCheck } from './jacobian-check.js';
export { minimiseScalar, minimiseSmooth, nelderMead } from './minimise.js';
export type {
  NelderMeadOptions,
  NelderMeadResult,
  ScalarMinimum,
  SmoothMinimum,
  SmoothOptions,
  ValueAndGradient,
} from './minimise.js';

// Functions and transforms
export {
  erf,
  erfc,
  fSurvival,
  logGamma,
  normalQuantile,
  regularisedBeta,
  regularisedGammaQ,
} from './special-functions.js';
export { fftInPlace } from './fft.js';

// Summaries
export {
  mean,
  median,
  medianAbsoluteDeviation,
  quantile,
  quantileSorted,
  rootMeanSquare,
  standardDeviation,
  weightedMean,
} from './summary.js';
