/**
 * Derivatives of -½·ln det N + ½·Σ_k α_k^T·N·α_k (α_k held fixed) by the numbers of the terms and by the diagonal: with
 * α = N^-1·r this is the gradient of the Gaussian likelihood of r. The determinant is differentiated by going back through
 * the factorisation [ForemanMackey2018]; the quadratic forms, whose α are at hand, need no factor but only the products of
 * the terms with α, summed forwards and backwards.
 *
 * Everything is collected as derivatives by p and q of each different gap and turned into derivatives by c and w at the end.
 */
import type { SemiseparableFactor } from './semiseparable-factor.js';
import {
  COSINE_WEIGHT,
  DECAY_RATE,
  SINE_WEIGHT,
  SQUARED_FREQUENCY,
  TERM_SIZE,
  transitionSlope,
} from './oscillator-terms.js';

export class SemiseparableGradient {
  /** By the numbers of the terms: (terms, TERM_SIZE). */
  readonly byTerm: Float64Array;
  /** By the diagonal, per point. */
  readonly byDiagonal: Float64Array;
  readonly #factor: SemiseparableFactor;
  /** By p and q of each different gap, like `transitions` of the factor. */
  readonly #byTransition: Float64Array;
  /** By δ where it stands in Φ beside p and q. */
  readonly #byDelta: Float64Array;
  readonly #byWeight: Float64Array;
  /** By S_n, carried from point to point; blocks like `states` of the factor. */
  readonly #byState: Float64Array;
  /** That times W, and the derivative by S_n·u. */
  readonly #pulled: Float64Array;
  readonly #byProduct: Float64Array;
  /** Forward sums Φ_n·(F_(n-1) + v·α_(n-1)): (points, terms, 2). */
  readonly #forward: Float64Array;
  readonly #backward: Float64Array;
  #byVariance = 0;

  constructor(factor: SemiseparableFactor) {
    const { pointCount, termCount } = factor;
    this.#factor = factor;
    this.byTerm = new Float64Array(termCount * TERM_SIZE);
    this.byDiagonal = new Float64Array(pointCount);
    this.#byTransition = new Float64Array(factor.transitions.length);
    this.#byDelta = new Float64Array(termCount);
    this.#byWeight = new Float64Array(2 * termCount);
    this.#byState = new Float64Array(termCount * (termCount + 1) * 2);
    this.#pulled = new Float64Array(2 * termCount);
    this.#byProduct = new Float64Array(2 * termCount);
    this.#forward = new Float64Array(2 * termCount * pointCount);
    this.#backward = new Float64Array(2 * termCount);
  }

  /** Starts afresh with the derivatives of -½·ln det N for the factor as it stands. */
  startFromDeterminant(): void {
    const { pointCount } = this.#factor;
    this.#byTransition.fill(0);
    this.#byDelta.fill(0);
    this.#byWeight.fill(0);
    this.#byState.fill(0);
    this.#byVariance = 0;
    for (let n = pointCount - 1; n >= 0; n--) {
      this.#backThroughGain(n);
      if (n > 0) this.#backThroughPassage(n);
    }
  }

  /** From the derivatives by S_n + D_n·W_n·W_n^T to those by S_n, through W_n and D_n. */
  #backThroughGain(n: number): void {
    const { termCount, weights, states, gains, pivots } = this.#factor;
    const byState = this.#byState;
    const byWeight = this.#byWeight;
    const byProduct = this.#byProduct;
    const pulled = this.#pulled;
    const width = 2 * termCount;
    const here = n * width;
    pulled.fill(0);
    for (let k = 0, at = 0; k < width; k += 2) {
      for (let l = k; l < width; l += 2, at += 4) {
        const b00 = byState[at]!;
        const b01 = byState[at + 1]!;
        const b10 = byState[at + 2]!;
        const b11 = byState[at + 3]!;
        pulled[k]! += b00 * gains[here + l]! + b01 * gains[here + l + 1]!;
        pulled[k + 1]! += b10 * gains[here + l]! + b11 * gains[here + l + 1]!;
        if (l > k) {
          pulled[l]! += b00 * gains[here + k]! + b10 * gains[here + k + 1]!;
          pulled[l + 1]! += b01 * gains[here + k]! + b11 * gains[here + k + 1]!;
        }
      }
    }
    const pivot = pivots[n]!;
    let byPivot = -0.5 / pivot;
    for (let j = 0; j < width; j++) byPivot -= gains[here + j]! * pulled[j]!;
    this.byDiagonal[n] = byPivot;
    this.#byVariance += byPivot;
    for (let j = 0; j < width; j++) {
      byProduct[j] = -2 * pulled[j]! - weights[j]! * byPivot;
      // S_n·u = v - D_n·W_n, with v = (1, 0) of each term
      byWeight[j]! -= byPivot * (1 - (j & 1) - pivot * gains[here + j]!);
    }
    let at = n * termCount * (termCount + 1) * 2;
    for (let k = 0, to = 0; k < width; k += 2) {
      const h0 = byProduct[k]!;
      const h1 = byProduct[k + 1]!;
      const u0 = weights[k]!;
      const u1 = weights[k + 1]!;
      for (let l = k; l < width; l += 2, at += 4, to += 4) {
        const g0 = byProduct[l]!;
        const g1 = byProduct[l + 1]!;
        const w0 = weights[l]!;
        const w1 = weights[l + 1]!;
        byState[to]! += 0.5 * (h0 * w0 + u0 * g0);
        byState[to + 1]! += 0.5 * (h0 * w1 + u0 * g1);
        byState[to + 2]! += 0.5 * (h1 * w0 + u1 * g0);
        byState[to + 3]! += 0.5 * (h1 * w1 + u1 * g1);
        const s00 = states[at]!;
        const s01 = states[at + 1]!;
        const s10 = states[at + 2]!;
        const s11 = states[at + 3]!;
        byWeight[l]! += s00 * h0 + s10 * h1;
        byWeight[l + 1]! += s01 * h0 + s11 * h1;
        if (l > k) {
          byWeight[k]! += s00 * g0 + s01 * g1;
          byWeight[k + 1]! += s10 * g0 + s11 * g1;
        }
      }
    }
  }

  /** From the derivatives by S_n = Φ·T·Φ^T to those by T = S_(n-1) + D·W·W^T, collecting those by Φ = Φ_n. */
  #backThroughPassage(n: number): void {
    const { termCount, gapOf, transitions, deltas, states, gains, pivots } = this.#factor;
    const byState = this.#byState;
    const byTransition = this.#byTransition;
    const byDelta = this.#byDelta;
    const width = 2 * termCount;
    const before = (n - 1) * width;
    const passage = gapOf[n]! * width;
    const pivot = pivots[n - 1]!;
    let from = (n - 1) * termCount * (termCount + 1) * 2;
    for (let k = 0, at = 0; k < termCount; k++) {
      const pk = transitions[passage + 2 * k]!;
      const qk = transitions[passage + 2 * k + 1]!;
      const rk = -deltas[k]! * qk;
      const wk0 = gains[before + 2 * k]! * pivot;
      const wk1 = gains[before + 2 * k + 1]! * pivot;
      for (let l = k; l < termCount; l++, at += 4, from += 4) {
        const wl0 = gains[before + 2 * l]!;
        const wl1 = gains[before + 2 * l + 1]!;
        const t00 = states[from]! + wk0 * wl0;
        const t01 = states[from + 1]! + wk0 * wl1;
        const t10 = states[from + 2]! + wk1 * wl0;
        const t11 = states[from + 3]! + wk1 * wl1;
        const pl = transitions[passage + 2 * l]!;
        const ql = transitions[passage + 2 * l + 1]!;
        const rl = -deltas[l]! * ql;
        const b00 = byState[at]!;
        const b01 = byState[at + 1]!;
        const b10 = byState[at + 2]!;
        const b11 = byState[at + 3]!;
        // X = B·Φ_l; the derivative by Φ_k gets 2·X·T^T
        const x00 = b00 * pl + b01 * ql;
        const x01 = b00 * rl + b01 * pl;
        const x10 = b10 * pl + b11 * ql;
        const x11 = b10 * rl + b11 * pl;
        const f01 = x00 * t10 + x01 * t11;
        byTransition[passage + 2 * k]! += 2 * (x00 * t00 + x01 * t01 + x10 * t10 + x11 * t11);
        byTransition[passage + 2 * k + 1]! += 2 * (x10 * t00 + x11 * t01 - deltas[k]! * f01);
        byDelta[k]! -= 2 * qk * f01;
        if (l > k) {
          // Y = Φ_k^T·B; the derivative by Φ_l gets 2·Y^T·T
          const y00 = pk * b00 + qk * b10;
          const y01 = pk * b01 + qk * b11;
          const y10 = rk * b00 + pk * b10;
          const y11 = rk * b01 + pk * b11;
          const g01 = y00 * t01 + y10 * t11;
          byTransition[passage + 2 * l]! += 2 * (y00 * t00 + y10 * t10 + y01 * t01 + y11 * t11);
          byTransition[passage + 2 * l + 1]! += 2 * (y01 * t00 + y11 * t10 - deltas[l]! * g01);
          byDelta[l]! -= 2 * ql * g01;
        }
        byState[at] = pk * x00 + qk * x10;
        byState[at + 1] = pk * x01 + qk * x11;
        byState[at + 2] = rk * x00 + pk * x10;
        byState[at + 3] = rk * x01 + pk * x11;
      }
    }
  }

  /** Adds the derivatives of ½·α^T·N·α. */
  addQuadratic(alpha: Float64Array): void {
    const { pointCount, termCount, gapOf, transitions, weights, deltas } = this.#factor;
    const { byDiagonal } = this;
    const byTransition = this.#byTransition;
    const byDelta = this.#byDelta;
    const byWeight = this.#byWeight;
    const forward = this.#forward;
    const backward = this.#backward;
    const width = 2 * termCount;
    for (let j = 0; j < width; j++) forward[j] = 0;
    for (let n = 1; n < pointCount; n++) {
      const before = (n - 1) * width;
      const here = n * width;
      const passage = gapOf[n]! * width;
      const previous = alpha[n - 1]!;
      for (let k = 0, j = 0; k < termCount; k++, j += 2) {
        const p = transitions[passage + j]!;
        const q = transitions[passage + j + 1]!;
        const first = forward[before + j]! + previous;
        const second = forward[before + j + 1]!;
        forward[here + j] = p * first - deltas[k]! * q * second;
        forward[here + j + 1] = q * first + p * second;
      }
    }
    backward.fill(0);
    let squares = 0;
    for (let n = pointCount - 1; n >= 0; n--) {
      const value = alpha[n]!;
      const half = 0.5 * value * value;
      squares += half;
      byDiagonal[n]! += half;
      if (n === 0) break;
      const here = n * width;
      const before = here - width;
      const passage = gapOf[n]! * width;
      const previous = alpha[n - 1]!;
      for (let k = 0, j = 0; k < termCount; k++, j += 2) {
        const p = transitions[passage + j]!;
        const q = transitions[passage + j + 1]!;
        const r0 = backward[j]! + weights[j]! * value;
        const r1 = backward[j + 1]! + weights[j + 1]! * value;
        const f0 = forward[before + j]! + previous;
        const f1 = forward[before + j + 1]!;
        byWeight[j]! += value * forward[here + j]!;
        byWeight[j + 1]! += value * forward[here + j + 1]!;
        byTransition[passage + j]! += r0 * f0 + r1 * f1;
        byTransition[passage + j + 1]! += r1 * f0 - deltas[k]! * r0 * f1;
        byDelta[k]! -= q * r0 * f1;
        backward[j] = p * r0 + q * r1;
        backward[j + 1] = p * r1 - deltas[k]! * q * r0;
      }
    }
    this.#byVariance += squares;
  }

  /** Turns what was collected into `byTerm`. */
  finish(): void {
    const { termCount, gaps, transitions, deltas, decays } = this.#factor;
    const { byTerm } = this;
    for (let k = 0; k < termCount; k++) {
      const at = k * TERM_SIZE;
      const c = decays[k]!;
      const delta = deltas[k]!;
      let byDecay = 0;
      let byDelta = this.#byDelta[k]!;
      for (let g = 0; g < gaps.length; g++) {
        const j = 2 * (g * termCount + k);
        const lag = gaps[g]!;
        const p = transitions[j]!;
        const q = transitions[j + 1]!;
        const byP = this.#byTransition[j]!;
        const byQ = this.#byTransition[j + 1]!;
        byDecay -= lag * (byP * p + byQ * q);
        byDelta += byQ * transitionSlope(p, q, c, delta, lag) - 0.5 * byP * lag * q;
      }
      byTerm[at + COSINE_WEIGHT] = this.#byWeight[2 * k]! + this.#byVariance;
      byTerm[at + SINE_WEIGHT] = this.#byWeight[2 * k + 1]!;
      byTerm[at + DECAY_RATE] = byDecay - 2 * c * byDelta;
      byTerm[at + SQUARED_FREQUENCY] = byDelta;
    }
  }
}
