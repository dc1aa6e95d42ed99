/** Reproducible random numbers: one seed, any number of streams that never overlap. */
import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plusFromState } from 'pure-rand/generator/xoroshiro128plus';
import { logGamma } from './special-functions.js';

type Generator = ReturnType<typeof xoroshiro128plusFromState>;

const MASK_64 = (1n << 64n) - 1n;
/** The generator's first numbers still show the structure of its state. */
const DISCARDED_DRAWS = 10;

/**
 * A stream of random numbers (xoroshiro128+). The same seed and stream index give the same numbers on every machine,
 * up to the last digits of Math.log and Math.sqrt in `normal` and `poisson`.
 */
export class RandomStream {
  private readonly generator: Generator;
  private spareNormal: number | null = null;

  private constructor(generator: Generator) {
    this.generator = generator;
  }

  /**
   * @param seed - any safe integer (negative too); near seeds give unrelated streams, since it is hashed (SplitMix64)
   * @param streamIndex - 0, 1, 2 ...: stream k starts 2^64·k numbers further on, so streams of a seed never meet
   * @throws RangeError for a seed or index that is not such an integer
   */
  static fromSeed(seed: number, streamIndex = 0): RandomStream {
    if (!Number.isSafeInteger(seed)) throw new RangeError(`seed ${seed} is not a whole number below 2^53`);
    if (!Number.isSafeInteger(streamIndex) || streamIndex < 0) {
      throw new RangeError(`stream index ${streamIndex} is not a whole number >= 0`);
    }
    const state: number[] = [];
    let counter = BigInt(seed) & MASK_64;
    for (let word = 0; word < 2; word++) {
      counter = (counter + 0x9e3779b97f4a7c15n) & MASK_64;
      let mixed = counter;
      mixed = ((mixed ^ (mixed >> 30n)) * 0xbf58476d1ce4e5b9n) & MASK_64;
      mixed = ((mixed ^ (mixed >> 27n)) * 0x94d049bb133111ebn) & MASK_64;
      mixed ^= mixed >> 31n;
      state.push(Number(BigInt.asIntN(32, mixed >> 32n)), Number(BigInt.asIntN(32, mixed)));
    }
    const generator = xoroshiro128plusFromState(state);
    for (let draw = 0; draw < DISCARDED_DRAWS; draw++) generator.next();
    for (let jump = 0; jump < streamIndex; jump++) generator.jump();
    return new RandomStream(generator);
  }

  /** Uniform in [0, 1), 53 random bits. */
  uniform(): number {
    return uniformFloat64(this.generator);
  }

  /** Uniform between a and b (b itself only by rounding). */
  uniformBetween(a: number, b: number): number {
    return a + (b - a) * this.uniform();
  }

  /** Normal with mean 0 and variance 1 (polar method, Marsaglia & Bray 1964, SIAM Review 6, 260, cited from memory). */
  normal(): number {
    if (this.spareNormal !== null) {
      const spare = this.spareNormal;
      this.spareNormal = null;
      return spare;
    }
    for (;;) {
      const x = 2 * this.uniform() - 1;
      const y = 2 * this.uniform() - 1;
      const square = x * x + y * y;
      if (square >= 1 || square === 0) continue;
      const factor = Math.sqrt((-2 * Math.log(square)) / square);
      this.spareNormal = y * factor;
      return x * factor;
    }
  }

  /** Whole number in 0 .. n-1, for 1 <= n <= 2^32 (uneven by less than 2^-21). */
  integerBelow(n: number): number {
    if (!(n >= 1 && n <= 2 ** 32)) throw new RangeError(`integerBelow(${n}): allowed is 1 .. 2^32`);
    return Math.floor(this.uniform() * n);
  }

  /** Puts the elements into random order, every order equally likely (Fisher & Yates). */
  shuffle(array: Uint32Array | Float64Array): void {
    for (let last = array.length - 1; last > 0; last--) {
      const other = this.integerBelow(last + 1);
      const moved = array[last]!;
      array[last] = array[other]!;
      array[other] = moved;
    }
  }

  /** Poisson count of the given mean, 0 <= mean <= 1e9 (products of uniforms below 30, else PTRS of Hörmann 1993). */
  poisson(mean: number): number {
    if (!(mean >= 0 && mean <= 1e9)) throw new RangeError(`poisson(${mean}): allowed is a mean of 0 .. 1e9`);
    return mean < 30 ? this.poissonByProducts(mean) : this.poissonByRejection(mean);
  }

  private poissonByProducts(mean: number): number {
    const limit = Math.exp(-mean);
    let product = this.uniform();
    let count = 0;
    while (product > limit) {
      product *= this.uniform();
      count++;
    }
    return count;
  }

  private poissonByRejection(mean: number): number {
    const b = 0.931 + 2.53 * Math.sqrt(mean);
    const a = -0.059 + 0.02483 * b;
    const inverseAlpha = 1.1239 + 1.1328 / (b - 3.4);
    const acceptedAtOnce = 0.9277 - 3.6224 / (b - 2);
    const logMean = Math.log(mean);
    for (;;) {
      const u = this.uniform() - 0.5;
      const v = this.uniform();
      const edge = 0.5 - Math.abs(u);
      const count = Math.floor(((2 * a) / edge + b) * u + mean + 0.43);
      if (edge >= 0.07 && v <= acceptedAtOnce) return count;
      if (count < 0 || (edge < 0.013 && v > edge)) continue;
      const logDensity = count * logMean - mean - logGamma(count + 1);
      if (Math.log((v * inverseAlpha) / (a / (edge * edge) + b)) <= logDensity) return count;
    }
  }
}
