/** Likelihoods with correlated noise: time per point, against a dense matrix, and how it grows; linear parameters integrated out. */
import { DampedOscillatorProcess } from '../../src/numerics/gaussian-process/damped-oscillator-process.js';
import { drivenOscillator, smoothNoise } from '../../src/numerics/gaussian-process/kernels.js';
import { covarianceAt, TERM_SIZE } from '../../src/numerics/gaussian-process/oscillator-terms.js';
import { choleskyInPlace, choleskySolveInPlace } from '../../src/numerics/linear-algebra.js';
import { MarginalKernelLikelihood } from '../../src/numerics/marginal-kernel.js';
import { MarginalLinearLikelihood, type LinearNuisance } from '../../src/numerics/marginal-linear.js';
import { RandomStream } from '../../src/numerics/random.js';
import { callTimesMs, median, requireFinite, verdict } from './measure.js';

/** Calls that fill about this many points are timed together, so that a clock of microseconds will do. */
const POINTS_PER_ROUND = 50_000;
const ROUNDS = 21;

/** Median time of one call, ms. */
function timeMs(points: number, run: () => void): number {
  const calls = Math.max(1, Math.round(POINTS_PER_ROUND / points));
  const rounds = callTimesMs(ROUNDS, () => {
    for (let i = 0; i < calls; i++) run();
  });
  return median(rounds) / calls;
}

interface Series {
  readonly times: Float64Array;
  readonly diagonal: Float64Array;
  readonly residuals: Float64Array;
  readonly terms: Float64Array;
}

/** Times at which no two gaps are equal, so that nothing is saved by equal ones. */
function series(n: number): Series {
  const random = RandomStream.fromSeed(n);
  let time = 0;
  const terms = new Float64Array(TERM_SIZE);
  drivenOscillator.writeTerms(Float64Array.of(1, 2, 0.7), 0, terms, 0);
  return {
    times: Float64Array.from({ length: n }, () => (time += random.uniform())),
    diagonal: Float64Array.from({ length: n }, () => 0.1 + random.uniform()),
    residuals: Float64Array.from({ length: n }, () => random.normal()),
    terms,
  };
}

function processTimes(n: number): { valueMs: number; gradientMs: number } {
  const { times, diagonal, residuals, terms } = series(n);
  const process = new DampedOscillatorProcess(times, 1);
  const valueMs = timeMs(n, () => {
    process.factor(terms, diagonal);
    process.logLikelihood(residuals);
  });
  const gradientMs = timeMs(n, () => {
    process.factor(terms, diagonal);
    process.differentiate(residuals);
  });
  requireFinite('gradient of the process', process.byTerm);
  requireFinite('gradient of the process', process.byDiagonal);
  return { valueMs, gradientMs };
}

function denseMs(n: number): number {
  const { times, diagonal, residuals, terms } = series(n);
  const matrix = new Float64Array(n * n);
  const solved = new Float64Array(n);
  const took = callTimesMs(5, () => {
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < i; j++) matrix[i * n + j] = covarianceAt(terms, 1, times[i]! - times[j]!);
      matrix[i * n + i] = 1 + diagonal[i]!;
    }
    choleskyInPlace(matrix, n);
    solved.set(residuals);
    choleskySolveInPlace(matrix, n, solved);
  });
  requireFinite('dense solution', solved);
  return median(took);
}

function marginalLine(n: number, columns: number): string {
  const { times, residuals } = series(n);
  const nuisance: LinearNuisance = {
    rows: n,
    columns,
    design: Float64Array.from(
      { length: n * columns },
      (_, at) => (Math.floor(at / columns) / n - 0.5) ** (at % columns),
    ),
    priorMean: new Float64Array(columns),
    priorSigma: new Float64Array(columns).fill(1),
  };
  const data = residuals.map((value) => 1 + 1e-3 * value);
  const model = Float64Array.from({ length: n }, (_, i) => (i % 5 === 0 ? 0.99 : 1));
  const variances = new Float64Array(n).fill(1e-6);
  const white = new MarginalLinearLikelihood(data, nuisance);
  const coloured = new MarginalKernelLikelihood(times, data, nuisance, smoothNoise);
  coloured.parameters.set([1e-3, 3]);
  const whiteNs = (1e6 * timeMs(n, () => void white.evaluate(model, variances))) / n;
  const colouredNs = (1e6 * timeMs(n, () => void coloured.evaluate(model, variances))) / n;
  requireFinite('marginal likelihood', white.byModel);
  requireFinite('marginal likelihood', coloured.byModel);
  return (
    `gaussian-process ${columns} linear parameters integrated out, ${n} points, with gradient: white noise ` +
    `${whiteNs.toFixed(1)} ns a point, correlated noise ${colouredNs.toFixed(0)} ns a point`
  );
}

export function benchGaussianProcess(): string[] {
  const [small, large, fair] = [processTimes(10_000), processTimes(100_000), processTimes(500)];
  const dense = denseMs(500);
  const perPoint = (ms: number, n: number): string => ((1e6 * ms) / n).toFixed(0);
  return [
    `gaussian-process one oscillator, 100000 points: ${perPoint(large.valueMs, 1e5)} ns a point, with gradient ` +
      `${perPoint(large.gradientMs, 1e5)} ns a point (${large.gradientMs.toFixed(1)} ms)`,
    `gaussian-process ten times the points (10000 to 100000): ${verdict(large.gradientMs / small.gradientMs, 15, 'lower')}`,
    `gaussian-process 500 points: ${(1000 * fair.valueMs).toFixed(0)} us, dense matrix ${(1000 * dense).toFixed(0)} us, ` +
      `ratio ${verdict(dense / fair.valueMs, 50, 'higher')}`,
    marginalLine(300, 1),
    marginalLine(300, 3),
  ];
}
