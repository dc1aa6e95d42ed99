/** Minimum of a smooth function with known gradient, for a few dozen parameters. */

/** Value at `parameters`; writes the gradient, length p. +Infinity or NaN says "outside the domain" (the gradient is then ignored). */
export type ValueAndGradient = (parameters: Float64Array, gradient: Float64Array) => number;

export interface SmoothOptions {
  /** Default 200. */
  readonly maxIterations?: number;
  /** Converged when g^T H^-1 g / 2, the decrease still in sight, is below this part of max(1, |value|). Default 1e-12. */
  readonly relativeDecrease?: number;
  /** Typical change per parameter (e.g. its uncertainty): the first metric. Default 1 each. */
  readonly scale?: Float64Array;
}

export interface SmoothMinimum {
  readonly parameters: Float64Array;
  readonly value: number;
  /** Euclidean length of the gradient in units of `scale`. */
  readonly gradientNorm: number;
  /** `converged`: decrease in sight below the limit; `no-descent`: the line search found nothing lower (rounding, or a wrong gradient). */
  readonly status: 'converged' | 'no-descent' | 'iteration-limit' | 'non-finite-start';
  readonly iterations: number;
}

/**
 * Quasi-Newton minimisation: BFGS with the inverse curvature kept, line search by bracketing and cubic steps to the weak
 * Wolfe conditions, restart along the gradient when the metric has gone bad.
 *
 * @param start - length p, inside the domain; not modified
 * Deterministic; the value returned is never above the one at `start`.
 */
export function minimiseSmooth(
  valueAndGradient: ValueAndGradient,
  start: Float64Array,
  options: SmoothOptions = {},
): SmoothMinimum {
  const p = start.length;
  const limit = options.maxIterations ?? 200;
  const relativeDecrease = options.relativeDecrease ?? 1e-12;
  const scale = options.scale ?? new Float64Array(p).fill(1);
  let parameters: Float64Array = start.slice();
  let gradient: Float64Array = new Float64Array(p);
  let value = valueAndGradient(parameters, gradient);
  const finish = (status: SmoothMinimum['status'], iterations: number): SmoothMinimum => {
    let square = 0;
    for (let j = 0; j < p; j++) square += (gradient[j]! * scale[j]!) ** 2;
    return { parameters, value, gradientNorm: Math.sqrt(square), status, iterations };
  };
  if (!Number.isFinite(value) || !gradient.every(Number.isFinite)) return finish('non-finite-start', 0);

  const metric = new Float64Array(p * p);
  const direction = new Float64Array(p);
  const gradientChange = new Float64Array(p);
  const metricTimesChange = new Float64Array(p);
  let isFresh: boolean = resetMetric(metric, scale);
  for (let iteration = 0; iteration < limit; iteration++) {
    let slope = descend(metric, gradient, direction);
    if (!(slope < 0)) {
      if (slope === 0) return finish('converged', iteration);
      isFresh = resetMetric(metric, scale);
      slope = descend(metric, gradient, direction);
      if (!(slope < 0)) return finish('converged', iteration);
    }
    if (-0.5 * slope <= relativeDecrease * Math.max(1, Math.abs(value)) && !isFresh)
      return finish('converged', iteration);
    const first = isFresh ? Math.min(1, 1 / Math.sqrt(-slope)) : 1;
    const found = searchLine(valueAndGradient, parameters, direction, value, slope, first);
    if (found === null) {
      if (isFresh) return finish('no-descent', iteration);
      isFresh = resetMetric(metric, scale);
      continue;
    }
    let product = 0;
    for (let j = 0; j < p; j++) {
      gradientChange[j] = found.gradient[j]! - gradient[j]!;
      product += gradientChange[j]! * direction[j]! * found.step;
    }
    ({ parameters, gradient, value } = found);
    if (product > 0) {
      if (isFresh) rescaleMetric(metric, gradientChange, product);
      updateMetric(metric, direction, found.step, gradientChange, metricTimesChange, product);
      isFresh = false;
    }
  }
  return finish('iteration-limit', limit);
}

function resetMetric(metric: Float64Array, scale: Float64Array): true {
  const p = scale.length;
  metric.fill(0);
  for (let j = 0; j < p; j++) metric[j * p + j] = scale[j]! ** 2;
  return true;
}

/** direction = -metric · gradient; returns the slope along it. */
function descend(metric: Float64Array, gradient: Float64Array, direction: Float64Array): number {
  const p = gradient.length;
  let slope = 0;
  for (let i = 0; i < p; i++) {
    let sum = 0;
    for (let j = 0; j < p; j++) sum -= metric[i * p + j]! * gradient[j]!;
    direction[i] = sum;
    slope += sum * gradient[i]!;
  }
  return slope;
}

/** Before the first update the metric takes the size of the curvature just seen. */
function rescaleMetric(metric: Float64Array, change: Float64Array, product: number): void {
  const p = change.length;
  let square = 0;
  for (let j = 0; j < p; j++) square += change[j]! ** 2 * metric[j * p + j]!;
  const factor = product / square;
  if (!Number.isFinite(factor) || factor <= 0) return;
  for (let j = 0; j < p; j++) metric[j * p + j]! *= factor;
}

/** The BFGS update of the inverse curvature with s = step · direction, y = change, product = s·y > 0. */
function updateMetric(
  metric: Float64Array,
  direction: Float64Array,
  step: number,
  change: Float64Array,
  metricTimesChange: Float64Array,
  product: number,
): void {
  const p = change.length;
  let curvature = 0;
  for (let i = 0; i < p; i++) {
    let sum = 0;
    for (let j = 0; j < p; j++) sum += metric[i * p + j]! * change[j]!;
    metricTimesChange[i] = sum;
    curvature += sum * change[i]!;
  }
  const weight = (1 + curvature / product) / product;
  for (let i = 0; i < p; i++) {
    const si = step * direction[i]!;
    for (let j = 0; j <= i; j++) {
      const sj = step * direction[j]!;
      const element =
        metric[i * p + j]! +
        weight * si * sj -
        (metricTimesChange[i]! * sj + si * metricTimesChange[j]!) / product;
      metric[i * p + j] = element;
      metric[j * p + i] = element;
    }
  }
}

interface LinePoint {
  readonly step: number;
  readonly parameters: Float64Array;
  readonly gradient: Float64Array;
  readonly value: number;
}

const SUFFICIENT_DECREASE = 1e-4;
const SLOPE_REDUCTION = 0.9;

/** A step along `direction` that meets the weak Wolfe conditions, or at least lowers the value; null when nothing does. */
function searchLine(
  valueAndGradient: ValueAndGradient,
  origin: Float64Array,
  direction: Float64Array,
  value: number,
  slope: number,
  firstStep: number,
): LinePoint | null {
  let lower = 0;
  let upper = Infinity;
  let step = firstStep;
  let best: LinePoint | null = null;
  for (let attempt = 0; attempt < 50; attempt++) {
    const parameters = origin.map((x, j) => x + step * direction[j]!);
    const gradient = new Float64Array(origin.length);
    const found = valueAndGradient(parameters, gradient);
    let slopeThere = 0;
    for (let j = 0; j < origin.length; j++) slopeThere += gradient[j]! * direction[j]!;
    const isUsable = Number.isFinite(found) && Number.isFinite(slopeThere);
    if (isUsable && found < (best?.value ?? value)) best = { step, parameters, gradient, value: found };
    if (!isUsable || found > value + SUFFICIENT_DECREASE * step * slope) {
      upper = step;
      // Minimum of the parabola through value and slope at the origin and the value here, kept off the ends.
      const parabola = isUsable ? (-slope * step * step) / (2 * (found - value - slope * step)) : 0;
      step =
        lower === 0 && isUsable ? Math.min(0.5 * step, Math.max(0.05 * step, parabola)) : (lower + upper) / 2;
    } else if (slopeThere < SLOPE_REDUCTION * slope) {
      lower = step;
      step = upper === Infinity ? 3 * step : (lower + upper) / 2;
    } else {
      return best;
    }
    if (upper - lower <= 1e-15 * upper) break;
  }
  return best;
}
