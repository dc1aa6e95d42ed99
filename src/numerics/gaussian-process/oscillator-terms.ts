/**
 * Terms of a stationary covariance, each a damped oscillator k(τ) = exp(-cτ)·(a·cos dτ + b·sin dτ), τ >= 0. They are kept as
 * (a, s, c, w) with s = b·d and w = c² + d²: k is then smooth in all four numbers right through d = 0 into d² < 0, where
 * the oscillation has turned into two decays. With C = cos dτ and S = sin(dτ)/d, both functions of δ = d² = w - c²,
 *
 *   k(τ) = exp(-cτ)·(a·C + s·S) = (a, s)·Φ(τ)·(1, 0)^T,   Φ(τ) = [[p, -δq], [q, p]],   p = exp(-cτ)·C,   q = exp(-cτ)·S,
 *
 * and Φ(τ₁ + τ₂) = Φ(τ₁)·Φ(τ₂): the two-component state of a term is carried from time to time by Φ.
 */

/** Numbers per term in an array of terms. */
export const TERM_SIZE = 4;
export const COSINE_WEIGHT = 0; // a, variance of the term
export const SINE_WEIGHT = 1; // s = b·d, variance per unit of time
export const DECAY_RATE = 2; // c, per unit of time
export const SQUARED_FREQUENCY = 3; // w = c² + d², per unit of time squared

/** Writes exp(-cτ)·(a·cos dτ + b·sin dτ) as the term `index`; d = 0 is an exponential (b is then without effect). */
export function writeOscillation(
  terms: Float64Array,
  index: number,
  oscillation: { readonly a: number; readonly b: number; readonly c: number; readonly d: number },
): void {
  const { a, b, c, d } = oscillation;
  const at = index * TERM_SIZE;
  terms[at + COSINE_WEIGHT] = a;
  terms[at + SINE_WEIGHT] = b * d;
  terms[at + DECAY_RATE] = c;
  terms[at + SQUARED_FREQUENCY] = c * c + d * d;
}

/**
 * Whether the terms are finite and decay: c > 0 and w > 0. They make a covariance at whatever times if each has |s| <= a·c, when
 * no power spectrum is negative anywhere; but a sum may be one without that, so it is left to the matrix to be positive.
 */
export function areDecaying(terms: Float64Array, count: number): boolean {
  for (let k = 0; k < count; k++) {
    const at = k * TERM_SIZE;
    if (!(terms[at + DECAY_RATE]! > 0 && terms[at + SQUARED_FREQUENCY]! > 0)) return false;
    let sum = 0;
    for (let j = 0; j < TERM_SIZE; j++) sum += Math.abs(terms[at + j]!);
    if (!(sum < Infinity)) return false;
  }
  return true;
}

/**
 * p and q of one term after the lag τ >= 0, to pq[at] and pq[at + 1]. Nothing overflows: in the overdamped case the slow
 * decay is factored out, with its rate from w/(c + √-δ), where nothing cancels.
 */
export function writeTransition(pq: Float64Array, at: number, c: number, w: number, lag: number): void {
  const delta = w - c * c;
  if (delta < 0) {
    const split = Math.sqrt(-delta);
    const slow = Math.exp((-w / (c + split)) * lag);
    const difference = Math.expm1(-2 * split * lag);
    pq[at] = slow * (1 + 0.5 * difference);
    pq[at + 1] = (-0.5 * slow * difference) / split;
    return;
  }
  const envelope = Math.exp(-c * lag);
  if (delta === 0) {
    pq[at] = envelope;
    pq[at + 1] = envelope * lag;
    return;
  }
  const d = Math.sqrt(delta);
  pq[at] = envelope * Math.cos(d * lag);
  pq[at + 1] = (envelope * Math.sin(d * lag)) / d;
}

/** Below this |δ|τ² the quotient in `transitionSlope` loses digits and its series, cut below 1e-14, takes over. */
const SERIES_BELOW = 0.25;

/** ∂q/∂δ at fixed c, given p and q at this lag; ∂p/∂δ is -τq/2 and c only enters through the factor exp(-cτ). */
export function transitionSlope(p: number, q: number, c: number, delta: number, lag: number): number {
  const x = delta * lag * lag;
  if (Math.abs(x) >= SERIES_BELOW) return (lag * p - q) / (2 * delta);
  const series =
    -1 / 6 + x * (1 / 60 - x * (1 / 1680 - x * (1 / 90720 - x * (1 / 7983360 - x / 1037836800))));
  return Math.exp(-c * lag) * lag * lag * lag * series;
}

const scratch = new Float64Array(2);

/** The covariance at a lag (of either sign) of all terms together. */
export function covarianceAt(terms: Float64Array, count: number, lag: number): number {
  let sum = 0;
  for (let k = 0; k < count; k++) {
    const at = k * TERM_SIZE;
    writeTransition(scratch, 0, terms[at + DECAY_RATE]!, terms[at + SQUARED_FREQUENCY]!, Math.abs(lag));
    sum += terms[at + COSINE_WEIGHT]! * scratch[0]! + terms[at + SINE_WEIGHT]! * scratch[1]!;
  }
  return sum;
}
