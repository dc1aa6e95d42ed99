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

// Correlated noise, and linear parameters integrated out
export { DampedOscillatorProcess } from './gaussian-process/damped-oscillator-process.js';
export {
  drivenOscillator,
  exponentialNoise,
  matern32,
  recurrentNoise,
  smoothNoise,
  sumOfKernels,
} from './gaussian-process/kernels.js';
export type { CovarianceKernel } from './gaussian-process/kernels.js';
export { covarianceAt, TERM_SIZE, writeOscillation } from './gaussian-process/oscillator-terms.js';
export { MarginalKernelLikelihood } from './marginal-kernel.js';
export { MarginalLinearLikelihood, MarginalProcessLikelihood } from './marginal-linear.js';
export type { LinearNuisance, MarginalLikelihood } from './marginal-linear.js';

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
