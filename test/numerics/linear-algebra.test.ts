import { describe, expect, it } from 'vitest';
import {
  choleskyInPlace,
  choleskySolveInPlace,
  invertSymmetricPositive,
  orthonormalise,
  symmetricEigen,
} from '../../src/numerics/linear-algebra.js';
import { RandomStream } from '../../src/numerics/random.js';

function randomMatrix(random: RandomStream, length: number): Float64Array {
  return Float64Array.from({ length }, () => random.normal());
}

/** B·B^T + n·I: positive definite and well conditioned. */
function positiveMatrix(random: RandomStream, n: number): Float64Array {
  const b = randomMatrix(random, n * n);
  return product(b, transpose(b, n), n).map((value, at) => value + (at % (n + 1) === 0 ? n : 0));
}

function product(a: Float64Array, b: Float64Array, n: number): Float64Array {
  return Float64Array.from({ length: n * n }, (_, at) => {
    let sum = 0;
    for (let k = 0; k < n; k++) sum += a[Math.floor(at / n) * n + k]! * b[k * n + (at % n)]!;
    return sum;
  });
}

function transpose(a: Float64Array, n: number): Float64Array {
  return a.map((_, at) => a[(at % n) * n + Math.floor(at / n)]!);
}

function largestDifference(a: Float64Array, b: Float64Array): number {
  return a.reduce((worst, value, at) => Math.max(worst, Math.abs(value - b[at]!)), 0);
}

const identity = (n: number): Float64Array =>
  Float64Array.from({ length: n * n }, (_, at) => (at % (n + 1) === 0 ? 1 : 0));

/** Hilbert matrix 1/(i + j + 1): notoriously near singular, its inverse consists of known whole numbers. */
const hilbert = (n: number): Float64Array =>
  Float64Array.from({ length: n * n }, (_, at) => 1 / (Math.floor(at / n) + (at % n) + 1));

describe('Cholesky', () => {
  it('gives factors whose product is the matrix, and solutions that satisfy the system, n = 1 .. 25', () => {
    const random = RandomStream.fromSeed(1);
    for (let n = 1; n <= 25; n++) {
      const a = positiveMatrix(random, n);
      const l = a.slice();
      expect(choleskyInPlace(l, n)).toBe(true);
      expect(largestDifference(product(l, transpose(l, n), n), a)).toBeLessThan(1e-13 * n);
      const x = randomMatrix(random, n);
      const b = Float64Array.from({ length: n }, (_, i) => x.reduce((sum, value, j) => sum + a[i * n + j]! * value, 0)); // prettier-ignore
      choleskySolveInPlace(l, n, b);
      expect(largestDifference(b, x)).toBeLessThan(1e-12);
    }
  });

  it('refuses what is not positive definite', () => {
    expect(choleskyInPlace(Float64Array.of(1, 2, 2, 1), 2)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(0), 1)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(NaN), 1)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(Infinity), 1)).toBe(false);
  });
});

describe('invertSymmetricPositive', () => {
  it('inverts whatever the units: diagonal from 1e-24 to 1e24', () => {
    const random = RandomStream.fromSeed(2);
    const n = 7;
    const plain = positiveMatrix(random, n);
    const scaled = plain.map((value, at) => value * 10 ** (4 * (Math.floor(at / n) + (at % n)) - 24));
    const inverse = invertSymmetricPositive(scaled, n)!;
    const rescaled = inverse.map((value, at) => value * 10 ** (4 * (Math.floor(at / n) + (at % n)) - 24));
    expect(largestDifference(product(plain, rescaled, n), identity(n))).toBeLessThan(1e-13);
    expect(inverse).toEqual(transpose(inverse, n));
  });

  it('gives the whole numbers of the inverse 4 x 4 Hilbert matrix (scipy.linalg.invhilbert(4))', () => {
    const inverse = invertSymmetricPositive(hilbert(4), 4)!;
    const expected = [
      16, -120, 240, -140, -120, 1200, -2700, 1680, 240, -2700, 6480, -4200, -140, 1680, -4200, 2800,
    ];
    for (let at = 0; at < 16; at++) expect(Math.abs(inverse[at]! / expected[at]! - 1)).toBeLessThan(1e-11);
  });

  it('returns null for a singular matrix, and does not touch its argument', () => {
    const singular = Float64Array.of(1, 1, 1, 1);
    expect(invertSymmetricPositive(singular, 2)).toBeNull();
    expect(singular).toEqual(Float64Array.of(1, 1, 1, 1));
    expect(invertSymmetricPositive(Float64Array.of(-1), 1)).toBeNull();
  });
});

describe('symmetricEigen', () => {
  it('knows the second-difference matrix: values 2 - 2 cos(k pi / (n + 1))', () => {
    const n = 12;
    const a = Float64Array.from({ length: n * n }, (_, at) => {
      const distance = Math.abs(Math.floor(at / n) - (at % n));
      return distance === 0 ? 2 : distance === 1 ? -1 : 0;
    });
    const { values } = symmetricEigen(a, n);
    for (let k = 1; k <= n; k++) {
      expect(Math.abs(values[k - 1]! - (2 - 2 * Math.cos((k * Math.PI) / (n + 1))))).toBeLessThan(1e-14);
    }
  });

  it('gives orthonormal vectors that rebuild the matrix, values ascending', () => {
    const random = RandomStream.fromSeed(3);
    for (const n of [1, 2, 5, 20]) {
      const b = randomMatrix(random, n * n);
      const a = b.map((value, at) => value + transpose(b, n)[at]!);
      const { values, vectors } = symmetricEigen(a, n);
      expect(largestDifference(product(transpose(vectors, n), vectors, n), identity(n))).toBeLessThan(1e-13);
      const stretched = vectors.map((value, at) => value * values[at % n]!);
      expect(largestDifference(product(stretched, transpose(vectors, n), n), a)).toBeLessThan(1e-13 * n);
      expect(values.slice().sort()).toEqual(values);
    }
  });

  it('refuses a matrix that is not finite', () => {
    expect(() => symmetricEigen(Float64Array.of(1, NaN, NaN, 1), 2)).toThrow(RangeError);
  });
});

describe('orthonormalise', () => {
  const random = RandomStream.fromSeed(4);
  const n = 50;
  const weights = Float64Array.from({ length: n }, () => random.uniformBetween(0.1, 10));
  const dot = (a: Float64Array, b: Float64Array): number =>
    a.reduce((sum, value, i) => sum + weights[i]! * value * b[i]!, 0);
  const powers = Array.from({ length: 6 }, (_, k) =>
    Float64Array.from({ length: n }, (__, i) => (1 + i / n) ** k),
  );

  it('gives a weighted-orthonormal basis that spans the columns, ill-conditioned powers included', () => {
    const before = powers.map((column) => column.slice());
    const basis = orthonormalise(powers, weights);
    expect(basis.length).toBe(6);
    for (const [j, a] of basis.entries()) {
      for (const [k, b] of basis.entries())
        expect(Math.abs(dot(a, b) - (j === k ? 1 : 0))).toBeLessThan(1e-14);
    }
    for (const column of powers) {
      const rest = column.slice();
      for (const member of basis) {
        const part = dot(rest, member);
        for (let i = 0; i < n; i++) rest[i]! -= part * member[i]!;
      }
      expect(Math.sqrt(dot(rest, rest) / dot(column, column))).toBeLessThan(1e-13);
    }
    expect(powers).toEqual(before);
  });

  it('drops columns that add nothing', () => {
    const sum = powers[0]!.map((value, i) => 3 * value - powers[2]![i]!);
    const basis = orthonormalise(
      [powers[0]!, powers[2]!, sum, new Float64Array(n), powers[0]!, powers[1]!],
      weights,
    );
    expect(basis.length).toBe(3);
  });
});
