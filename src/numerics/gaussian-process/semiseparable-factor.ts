/**
 * The covariance of a sum of damped oscillators plus a diagonal, N = L·D·L^T, in a time that grows with the number of points
 * [ForemanMackey2017]. L is unit lower triangular with L_nm = u·Φ_n···Φ_(m+1)·W_m below the diagonal, where Φ_n carries the
 * state over the gap before point n (see oscillator-terms.ts), u = (a, s) and v = (1, 0) of each term:
 *
 *   S_n = Φ_n·(S_(n-1) + D_(n-1)·W_(n-1)·W_(n-1)^T)·Φ_n^T,   D_n = N_nn - u·S_n·u,   W_n = (v - S_n·u)/D_n.
 *
 * Only gaps enter, never times, so that nothing grows over long data. Φ is worked out once per different gap.
 */
import {
  areDecaying,
  COSINE_WEIGHT,
  DECAY_RATE,
  SINE_WEIGHT,
  SQUARED_FREQUENCY,
  TERM_SIZE,
  writeTransition,
} from './oscillator-terms.js';

export class SemiseparableFactor {
  readonly pointCount: number;
  readonly termCount: number;
  /** The different gaps between neighbouring times, in order of appearance. */
  readonly gaps: Float64Array;
  /** Per point, which of `gaps` lies before it (0 for the first point, where it is not used). */
  readonly gapOf: Int32Array;
  /** p and q of each term for each different gap: (gaps, terms, 2). */
  readonly transitions: Float64Array;
  /** a and s of each term: (terms, 2). */
  readonly weights: Float64Array;
  /** δ = w - c² of each term. */
  readonly deltas: Float64Array;
  /** c of each term. */
  readonly decays: Float64Array;
  /** S_n as 2x2 blocks, one per pair of terms (k, l >= k): (points, pairs, 4). */
  readonly states: Float64Array;
  /** W_n: (points, terms, 2). */
  readonly gains: Float64Array;
  /** D_n. */
  readonly pivots: Float64Array;
  readonly #carried: Float64Array;

  /**
   * @param times - ascending, repetitions allowed, any unit; copied
   * @throws RangeError when the times are not finite and ascending, or there is no time or no term
   */
  constructor(times: Float64Array, termCount: number) {
    const n = times.length;
    if (n === 0 || !(termCount >= 1))
      throw new RangeError(`a process needs times and terms, not ${n} and ${termCount}`);
    this.pointCount = n;
    this.termCount = termCount;
    this.gapOf = new Int32Array(n);
    const numbers = new Map<number, number>();
    for (let i = 1; i < n; i++) {
      const gap = times[i]! - times[i - 1]!;
      if (!(gap >= 0 && gap < Infinity))
        throw new RangeError(`times must be finite and ascending; ${times[i]} follows ${times[i - 1]}`);
      let number = numbers.get(gap);
      if (number === undefined) numbers.set(gap, (number = numbers.size));
      this.gapOf[i] = number;
    }
    this.gaps = Float64Array.from(numbers.keys());
    this.transitions = new Float64Array(this.gaps.length * termCount * 2);
    this.weights = new Float64Array(2 * termCount);
    this.deltas = new Float64Array(termCount);
    this.decays = new Float64Array(termCount);
    this.states = new Float64Array(n * termCount * (termCount + 1) * 2);
    this.gains = new Float64Array(n * termCount * 2);
    this.pivots = new Float64Array(n);
    this.#carried = new Float64Array(2 * termCount);
  }

  /**
   * @param terms - (terms, TERM_SIZE); read
   * @param diagonal - what is added to the diagonal, per point; read
   * @returns false when a term does not decay or a pivot is not positive; the factor is then half overwritten
   */
  factor(terms: Float64Array, diagonal: Float64Array): boolean {
    if (!areDecaying(terms, this.termCount)) return false;
    const { transitions, gaps, weights, deltas, decays, termCount } = this;
    let variance = 0;
    for (let k = 0; k < termCount; k++) {
      const at = k * TERM_SIZE;
      const c = terms[at + DECAY_RATE]!;
      const w = terms[at + SQUARED_FREQUENCY]!;
      weights[2 * k] = terms[at + COSINE_WEIGHT]!;
      weights[2 * k + 1] = terms[at + SINE_WEIGHT]!;
      variance += weights[2 * k]!;
      decays[k] = c;
      deltas[k] = w - c * c;
      for (let g = 0; g < gaps.length; g++)
        writeTransition(transitions, 2 * (g * termCount + k), c, w, gaps[g]!);
    }
    return this.#decompose(variance, diagonal);
  }

  #decompose(variance: number, diagonal: Float64Array): boolean {
    const { pointCount, termCount, gapOf, transitions, weights, deltas, states, gains, pivots } = this;
    const product = this.#carried; // S_n·u
    const width = 2 * termCount;
    const stateSize = termCount * (termCount + 1) * 2;
    for (let n = 0; n < pointCount; n++) {
      product.fill(0);
      if (n > 0) {
        const before = (n - 1) * width;
        const pivot = pivots[n - 1]!;
        const passage = gapOf[n]! * width;
        let from = (n - 1) * stateSize;
        let to = n * stateSize;
        for (let k = 0; k < termCount; k++) {
          const pk = transitions[passage + 2 * k]!;
          const qk = transitions[passage + 2 * k + 1]!;
          const rk = -deltas[k]! * qk;
          const wk0 = gains[before + 2 * k]! * pivot;
          const wk1 = gains[before + 2 * k + 1]! * pivot;
          for (let l = k; l < termCount; l++, from += 4, to += 4) {
            const wl0 = gains[before + 2 * l]!;
            const wl1 = gains[before + 2 * l + 1]!;
            const t00 = states[from]! + wk0 * wl0;
            const t01 = states[from + 1]! + wk0 * wl1;
            const t10 = states[from + 2]! + wk1 * wl0;
            const t11 = states[from + 3]! + wk1 * wl1;
            const h00 = pk * t00 + rk * t10;
            const h01 = pk * t01 + rk * t11;
            const h10 = qk * t00 + pk * t10;
            const h11 = qk * t01 + pk * t11;
            const pl = transitions[passage + 2 * l]!;
            const ql = transitions[passage + 2 * l + 1]!;
            const rl = -deltas[l]! * ql;
            const s00 = h00 * pl + h01 * rl;
            const s01 = h00 * ql + h01 * pl;
            const s10 = h10 * pl + h11 * rl;
            const s11 = h10 * ql + h11 * pl;
            states[to] = s00;
            states[to + 1] = s01;
            states[to + 2] = s10;
            states[to + 3] = s11;
            product[2 * k]! += s00 * weights[2 * l]! + s01 * weights[2 * l + 1]!;
            product[2 * k + 1]! += s10 * weights[2 * l]! + s11 * weights[2 * l + 1]!;
            if (l > k) {
              product[2 * l]! += s00 * weights[2 * k]! + s10 * weights[2 * k + 1]!;
              product[2 * l + 1]! += s01 * weights[2 * k]! + s11 * weights[2 * k + 1]!;
            }
          }
        }
      }
      let pivot = variance + diagonal[n]!;
      for (let j = 0; j < width; j++) pivot -= weights[j]! * product[j]!;
      if (!(pivot > 0 && pivot < Infinity)) return false;
      pivots[n] = pivot;
      const inverse = 1 / pivot;
      for (let k = 0; k < width; k += 2) {
        gains[n * width + k] = (1 - product[k]!) * inverse;
        gains[n * width + k + 1] = -product[k + 1]! * inverse;
      }
    }
    return true;
  }

  /** ln det N. */
  logDeterminant(): number {
    const { pivots } = this;
    let sum = 0;
    let product = 1;
    for (let n = 0; n < pivots.length; n++) {
      product *= pivots[n]!;
      // Far enough from the ends of the range that one more factor does no harm.
      if (product < 1e-100 || product > 1e100) {
        sum += Math.log(product);
        product = 1;
      }
    }
    return sum + Math.log(product);
  }

  /** out = L^-1·vector; `out` may be `vector`. */
  applyInverseLower(vector: Float64Array, out: Float64Array): void {
    const { pointCount, termCount, gapOf, transitions, weights, deltas, gains } = this;
    const state = this.#carried;
    const width = 2 * termCount;
    state.fill(0);
    out[0] = vector[0]!;
    for (let n = 1; n < pointCount; n++) {
      const before = (n - 1) * width;
      const passage = gapOf[n]! * width;
      const previous = out[n - 1]!;
      let value = vector[n]!;
      for (let k = 0, j = 0; k < termCount; k++, j += 2) {
        const p = transitions[passage + j]!;
        const q = transitions[passage + j + 1]!;
        const first = state[j]! + gains[before + j]! * previous;
        const second = state[j + 1]! + gains[before + j + 1]! * previous;
        const one = p * first - deltas[k]! * q * second;
        const two = q * first + p * second;
        state[j] = one;
        state[j + 1] = two;
        value -= weights[j]! * one + weights[j + 1]! * two;
      }
      out[n] = value;
    }
  }

  /** out = L·vector; `out` may be `vector`. */
  applyLower(vector: Float64Array, out: Float64Array): void {
    const { pointCount, termCount, gapOf, transitions, weights, deltas, gains } = this;
    const state = this.#carried;
    const width = 2 * termCount;
    state.fill(0);
    let previous = vector[0]!;
    out[0] = previous;
    for (let n = 1; n < pointCount; n++) {
      const before = (n - 1) * width;
      const passage = gapOf[n]! * width;
      const given = vector[n]!;
      let value = given;
      for (let k = 0, j = 0; k < termCount; k++, j += 2) {
        const p = transitions[passage + j]!;
        const q = transitions[passage + j + 1]!;
        const first = state[j]! + gains[before + j]! * previous;
        const second = state[j + 1]! + gains[before + j + 1]! * previous;
        state[j] = p * first - deltas[k]! * q * second;
        state[j + 1] = q * first + p * second;
        value += weights[j]! * state[j]! + weights[j + 1]! * state[j + 1]!;
      }
      previous = given;
      out[n] = value;
    }
  }

  /** out = L^-T·vector; `out` may be `vector`. */
  applyInverseUpper(vector: Float64Array, out: Float64Array): void {
    const { pointCount, termCount, gapOf, transitions, weights, deltas, gains } = this;
    const state = this.#carried;
    const width = 2 * termCount;
    state.fill(0);
    out[pointCount - 1] = vector[pointCount - 1]!;
    for (let n = pointCount - 2; n >= 0; n--) {
      const passage = gapOf[n + 1]! * width;
      const next = out[n + 1]!;
      let value = vector[n]!;
      for (let k = 0, j = 0; k < termCount; k++, j += 2) {
        const p = transitions[passage + j]!;
        const q = transitions[passage + j + 1]!;
        const first = state[j]! + weights[j]! * next;
        const second = state[j + 1]! + weights[j + 1]! * next;
        const one = p * first + q * second;
        const two = p * second - deltas[k]! * q * first;
        state[j] = one;
        state[j + 1] = two;
        value -= gains[n * width + j]! * one + gains[n * width + j + 1]! * two;
      }
      out[n] = value;
    }
  }
}
