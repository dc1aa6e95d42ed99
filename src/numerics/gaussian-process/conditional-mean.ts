/** The mean of a process given data, at any times: Σ_n k(t - t_n)·α_n, with α = N^-1·(data - mean). */
import type { SemiseparableFactor } from './semiseparable-factor.js';
import {
  COSINE_WEIGHT,
  DECAY_RATE,
  SINE_WEIGHT,
  SQUARED_FREQUENCY,
  TERM_SIZE,
  writeTransition,
} from './oscillator-terms.js';

/**
 * States per point, (points, terms, 2): Σ_(m <= n) Φ(t_n - t_m)·v·α_m looking back, and Σ_(m >= n) Φ(t_m - t_n)^T·u·α_m
 * looking ahead.
 */
function accumulate(
  factor: SemiseparableFactor,
  alpha: Float64Array,
): { back: Float64Array; ahead: Float64Array } {
  const { pointCount, termCount, gapOf, transitions, weights, deltas } = factor;
  const width = 2 * termCount;
  const back = new Float64Array(pointCount * width);
  const ahead = new Float64Array(pointCount * width);
  for (let n = 0; n < pointCount; n++) {
    const mirrored = pointCount - 1 - n;
    for (let k = 0, j = 0; k < termCount; k++, j += 2) {
      const delta = deltas[k]!;
      back[n * width + j] = alpha[n]!;
      ahead[mirrored * width + j] = weights[j]! * alpha[mirrored]!;
      ahead[mirrored * width + j + 1] = weights[j + 1]! * alpha[mirrored]!;
      if (n === 0) continue;
      let at = gapOf[n]! * width + j;
      const [b0, b1] = [back[(n - 1) * width + j]!, back[(n - 1) * width + j + 1]!];
      back[n * width + j]! += transitions[at]! * b0 - delta * transitions[at + 1]! * b1;
      back[n * width + j + 1]! += transitions[at + 1]! * b0 + transitions[at]! * b1;
      at = gapOf[mirrored + 1]! * width + j;
      const [a0, a1] = [ahead[(mirrored + 1) * width + j]!, ahead[(mirrored + 1) * width + j + 1]!];
      ahead[mirrored * width + j]! += transitions[at]! * a0 + transitions[at + 1]! * a1;
      ahead[mirrored * width + j + 1]! += transitions[at]! * a1 - delta * transitions[at + 1]! * a0;
    }
  }
  return { back, ahead };
}

/** Number of `times` that are at or before `time`. */
function countUpTo(times: Float64Array, time: number): number {
  let low = 0;
  let high = times.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (times[middle]! <= time) low = middle + 1;
    else high = middle;
  }
  return low;
}

/**
 * @param terms - those of the factor, (terms, TERM_SIZE)
 * @param times - those of the factor
 * @param alpha - N^-1·(data - mean), per point
 * @param at - times in any order, before, between and after the data
 * @returns a fresh array, one value per element of `at`
 */
export function conditionalMean(
  factor: SemiseparableFactor,
  terms: Float64Array,
  times: Float64Array,
  alpha: Float64Array,
  at: Float64Array,
): Float64Array {
  const { back, ahead } = accumulate(factor, alpha);
  const width = 2 * factor.termCount;
  const pq = new Float64Array(2);
  return at.map((time) => {
    const next = countUpTo(times, time);
    let sum = 0;
    for (let k = 0, j = 0; k < factor.termCount; k++, j += 2) {
      const term = k * TERM_SIZE;
      const c = terms[term + DECAY_RATE]!;
      const w = terms[term + SQUARED_FREQUENCY]!;
      const delta = factor.deltas[k]!;
      if (next > 0) {
        writeTransition(pq, 0, c, w, time - times[next - 1]!);
        const [p, q] = [pq[0]!, pq[1]!];
        const [b0, b1] = [back[(next - 1) * width + j]!, back[(next - 1) * width + j + 1]!];
        sum +=
          terms[term + COSINE_WEIGHT]! * (p * b0 - delta * q * b1) +
          terms[term + SINE_WEIGHT]! * (q * b0 + p * b1);
      }
      if (next < times.length) {
        writeTransition(pq, 0, c, w, times[next]! - time);
        sum += pq[0]! * ahead[next * width + j]! + pq[1]! * ahead[next * width + j + 1]!;
      }
    }
    return sum;
  });
}
