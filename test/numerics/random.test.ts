import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { erfc, logGamma, regularisedGammaQ } from '../../src/numerics/special-functions.js';

/** Probability of a chi-square at least as large, for observed counts against expected ones. */
function chiSquareProbability(observed: readonly number[], expected: readonly number[]): number {
  const chiSquare = observed.reduce((sum, count, k) => sum + (count - expected[k]!) ** 2 / expected[k]!, 0);
  return regularisedGammaQ((observed.length - 1) / 2, chiSquare / 2);
}

// Seeds are fixed, so a test either passes always or never; 1e-3 leaves room for the luck of a seed, not for a bias.
const LEAST_PROBABILITY = 1e-3;
const DRAWS = 100_000;

describe('RandomStream', () => {
  it('repeats itself for the same seed and stream, and only then', () => {
    const draw = (seed: number, stream?: number): number[] => {
      const random = RandomStream.fromSeed(seed, stream);
      return Array.from({ length: 5 }, () => random.uniform());
    };
    expect(draw(7, 2)).toEqual(draw(7, 2));
    expect(draw(7)).toEqual(draw(7, 0));
    const all = [0, 1, -1, 7, 8, 2 ** 32, 2 ** 53 - 1].flatMap((seed) => [
      ...draw(seed, 0),
      ...draw(seed, 1),
    ]);
    expect(new Set(all).size).toBe(all.length);
  });

  it('starts well: first draws of 4000 neighbouring seeds are uniform', () => {
    const bins = new Array<number>(20).fill(0);
    for (let seed = 0; seed < 4000; seed++) bins[Math.floor(20 * RandomStream.fromSeed(seed).uniform())]!++;
    expect(chiSquareProbability(bins, bins.map(() => 200))).toBeGreaterThan(LEAST_PROBABILITY); // prettier-ignore
  });

  it('fills pairs of uniform numbers evenly (100 cells), within and across streams', () => {
    const first = RandomStream.fromSeed(42, 0);
    const second = RandomStream.fromSeed(42, 1);
    for (const [a, b] of [
      [first, first],
      [first, second],
    ] as const) {
      // prettier-ignore
      const cells = new Array<number>(100).fill(0);
      for (let k = 0; k < DRAWS; k++)
        cells[10 * Math.floor(10 * a.uniform()) + Math.floor(10 * b.uniform())]!++;
      expect(chiSquareProbability(cells, cells.map(() => DRAWS / 100))).toBeGreaterThan(LEAST_PROBABILITY); // prettier-ignore
    }
  });

  it('draws normal numbers: counts between -3.5 and 3.5 as the error function says', () => {
    const random = RandomStream.fromSeed(5);
    const edges = Array.from({ length: 16 }, (_, k) => -3.75 + 0.5 * k);
    const tail = (z: number): number => 0.5 * erfc(z * Math.SQRT1_2);
    const expected = [
      DRAWS * tail(3.75),
      ...edges.slice(1).map((z, k) => DRAWS * (tail(edges[k]!) - tail(z))),
    ];
    expected.push(DRAWS * tail(3.75));
    const counts = expected.map(() => 0);
    for (let k = 0; k < DRAWS; k++) {
      const z = random.normal();
      counts[Math.min(16, Math.max(0, Math.ceil((z + 3.75) / 0.5)))]!++;
    }
    expect(chiSquareProbability(counts, expected)).toBeGreaterThan(LEAST_PROBABILITY);
  });

  // Both methods (below and above a mean of 30), and both sides of the switch.
  it.each([0.3, 4.7, 29.9, 30.1, 250, 40_000])('draws Poisson counts of mean %f', (mean) => {
    const random = RandomStream.fromSeed(6);
    const draws = 40_000;
    const width = Math.max(1, Math.floor(Math.sqrt(mean) / 2));
    const lowest = Math.max(0, Math.floor(mean - 3 * Math.sqrt(mean)));
    const binCount = Math.max(2, Math.floor((6 * Math.sqrt(mean)) / width) - 1);
    // The first bin holds everything below, the last everything above; exact probabilities by summing the density.
    const binOf = (count: number): number =>
      Math.min(binCount - 1, Math.max(0, Math.floor((count - lowest) / width)));
    const expected = new Array<number>(binCount).fill(0);
    for (let k = 0; k < mean + 40 * Math.sqrt(mean) + 40; k++) {
      expected[binOf(k)]! += draws * Math.exp(k * Math.log(mean) - mean - logGamma(k + 1));
    }
    const counts = expected.map(() => 0);
    for (let k = 0; k < draws; k++) counts[binOf(random.poisson(mean))]!++;
    expect(chiSquareProbability(counts, expected)).toBeGreaterThan(LEAST_PROBABILITY);
  });

  it('shuffles into every order equally often (24 orders of 4), keeping the elements', () => {
    const random = RandomStream.fromSeed(8);
    const orders = new Map<string, number>();
    for (let k = 0; k < 24_000; k++) {
      const array = Uint32Array.of(1, 2, 3, 4);
      random.shuffle(array);
      const key = array.join('');
      orders.set(key, (orders.get(key) ?? 0) + 1);
    }
    expect(orders.size).toBe(24);
    const counts = [...orders.values()];
    expect(chiSquareProbability(counts, counts.map(() => 1000))).toBeGreaterThan(LEAST_PROBABILITY); // prettier-ignore
  });

  it('keeps to its ranges', () => {
    const random = RandomStream.fromSeed(9);
    for (let k = 0; k < 10_000; k++) {
      const u = random.uniformBetween(-2, 3);
      expect(u >= -2 && u < 3).toBe(true);
      expect([0, 1, 2].includes(random.integerBelow(3))).toBe(true);
    }
    expect(random.poisson(0)).toBe(0);
  });

  it('refuses what it cannot do', () => {
    const random = RandomStream.fromSeed(1);
    for (const seed of [0.5, NaN, 2 ** 53]) expect(() => RandomStream.fromSeed(seed)).toThrow(RangeError);
    for (const index of [-1, 0.5]) expect(() => RandomStream.fromSeed(1, index)).toThrow(RangeError);
    for (const n of [0, NaN, 2 ** 33]) expect(() => random.integerBelow(n)).toThrow(RangeError);
    for (const mean of [-1, NaN, 1e10]) expect(() => random.poisson(mean)).toThrow(RangeError);
  });
});
