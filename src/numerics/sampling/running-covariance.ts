/** Covariance of draws that come one by one, and its marriage with a first guess. */

/** Mean and sums of products, updated so that epochs like 2459000.5 keep their digits (Welford 1962, Technometrics 4, 419). */
export class RunningCovariance {
  count = 0;
  private readonly size: number;
  private readonly mean: Float64Array;
  private readonly products: Float64Array;
  private readonly departure: Float64Array;

  constructor(size: number) {
    this.size = size;
    this.mean = new Float64Array(size);
    this.products = new Float64Array(size * size);
    this.departure = new Float64Array(size);
  }

  clear(): void {
    this.count = 0;
    this.mean.fill(0);
    this.products.fill(0);
  }

  /** @param position - length `size`; read only */
  add(position: Float64Array): void {
    const { size, mean, products, departure } = this;
    this.count++;
    for (let i = 0; i < size; i++) {
      departure[i] = position[i]! - mean[i]!;
      mean[i]! += departure[i]! / this.count;
    }
    for (let i = 0; i < size; i++) {
      const after = position[i]! - mean[i]!;
      for (let j = 0; j <= i; j++) products[i * size + j]! += after * departure[j]!;
    }
  }

  /** Mean of the draws, a fresh array. */
  centre(): Float64Array {
    return this.mean.slice();
  }

  /** Sample covariance (divisor count - 1), size·size row-major, a fresh array. Needs two draws. */
  covariance(): Float64Array {
    const { size, products } = this;
    const result = new Float64Array(size * size);
    for (let i = 0; i < size; i++) {
      for (let j = 0; j <= i; j++) {
        const value = products[i * size + j]! / (this.count - 1);
        result[i * size + j] = value;
        result[j * size + i] = value;
      }
    }
    return result;
  }
}

/**
 * Pulls a sample covariance towards the correlations of a guess: the guess, brought to the sample's variances,
 * counts as `guessWeight` draws beside the sample's `count`. Variances need few draws, correlations many, so only
 * those are borrowed; a guess of the wrong scale does no harm. A variance of zero (a chain that did not move) is
 * taken from the guess.
 *
 * @param sample - size·size, row-major; overwritten with the result, positive definite whenever the guess is
 */
export function shrinkTowards(
  sample: Float64Array,
  guess: Float64Array,
  size: number,
  count: number,
  guessWeight: number,
): void {
  const scale = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    const guessed = guess[i * size + i]!;
    const variance = sample[i * size + i]!;
    scale[i] = variance > 0 ? Math.sqrt(variance / guessed) : 1;
  }
  const share = guessWeight / (count + guessWeight);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < size; j++) {
      const target = scale[i]! * scale[j]! * guess[i * size + j]!;
      const own = i === j && !(sample[i * size + i]! > 0) ? target : sample[i * size + j]!;
      sample[i * size + j] = (1 - share) * own + share * target;
    }
  }
}
