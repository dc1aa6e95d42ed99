import { describe, expect, it } from 'vitest';
import { fftInPlace } from '../../src/numerics/fft.js';

/** Deterministic rough numbers in -1..1 (a multiplicative congruential generator; its quality does not matter here). */
function roughNumbers(length: number, seed: number): Float64Array {
  const values = new Float64Array(length);
  let state = seed;
  for (let i = 0; i < length; i++) {
    state = (state * 48271) % 2147483647;
    values[i] = (2 * state) / 2147483647 - 1;
  }
  return values;
}

/** One output element by the defining sum; the index product is reduced modulo n first, which keeps the angle exact. */
function directSum(re: Float64Array, im: Float64Array, k: number, sign: number): [number, number] {
  const n = re.length;
  let sumRe = 0;
  let sumIm = 0;
  for (let j = 0; j < n; j++) {
    const angle = (sign * 2 * Math.PI * ((j * k) % n)) / n;
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    sumRe += re[j]! * c - im[j]! * s;
    sumIm += re[j]! * s + im[j]! * c;
  }
  return [sumRe, sumIm];
}

function energy(re: Float64Array, im: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < re.length; i++) sum += re[i]! ** 2 + im[i]! ** 2;
  return sum;
}

describe('fftInPlace', () => {
  it.each([-1, 1] as const)('equals the direct sum at every frequency, sign %i, n = 16 .. 1024', (sign) => {
    for (let n = 16; n <= 1024; n *= 2) {
      const re = roughNumbers(n, 11 + n);
      const im = roughNumbers(n, 77 + n);
      const outRe = re.slice();
      const outIm = im.slice();
      fftInPlace(outRe, outIm, sign);
      const size = Math.sqrt(energy(re, im));
      for (let k = 0; k < n; k++) {
        const [sumRe, sumIm] = directSum(re, im, k, sign);
        // 1e-14 of the typical output size; measured below 1.5e-15 (rounding of the direct sum included).
        expect(Math.hypot(outRe[k]! - sumRe, outIm[k]! - sumIm) / size).toBeLessThan(1e-14);
      }
    }
  });

  it.each([17, 18, 19])('equals the direct sum at picked frequencies, n = 2^%i', (log2) => {
    const n = 2 ** log2;
    const re = roughNumbers(n, 5);
    const im = roughNumbers(n, 6);
    const outRe = re.slice();
    const outIm = im.slice();
    fftInPlace(outRe, outIm);
    const size = Math.sqrt(energy(re, im));
    for (const k of [0, 1, 2, 3, n / 4 + 1, n / 2, n / 2 + 5, 3 * (n / 4) - 1, n - 1]) {
      const [sumRe, sumIm] = directSum(re, im, k, -1);
      expect(Math.hypot(outRe[k]! - sumRe, outIm[k]! - sumIm) / size).toBeLessThan(2e-13);
    }
  });

  it('keeps energy (Parseval) and gives n times the input back, n = 2^4 .. 2^20', () => {
    for (let log2 = 4; log2 <= 20; log2++) {
      const n = 2 ** log2;
      const re = roughNumbers(n, 100 + log2);
      const im = roughNumbers(n, 200 + log2);
      const workRe = re.slice();
      const workIm = im.slice();
      fftInPlace(workRe, workIm);
      expect(Math.abs(energy(workRe, workIm) / (n * energy(re, im)) - 1)).toBeLessThan(1e-12);
      fftInPlace(workRe, workIm, 1);
      let worst = 0;
      for (let i = 0; i < n; i++) {
        worst = Math.max(worst, Math.abs(workRe[i]! / n - re[i]!), Math.abs(workIm[i]! / n - im[i]!));
      }
      expect(worst).toBeLessThan(5e-15);
    }
  });

  it('puts a pure oscillation exp(+2 pi i 5 j / n) into element 5 alone', () => {
    const n = 4096;
    const re = Float64Array.from({ length: n }, (_, j) => Math.cos((2 * Math.PI * 5 * j) / n));
    const im = Float64Array.from({ length: n }, (_, j) => Math.sin((2 * Math.PI * 5 * j) / n));
    fftInPlace(re, im);
    for (let k = 0; k < n; k++) {
      expect(Math.abs(re[k]! - (k === 5 ? n : 0))).toBeLessThan(1e-9);
      expect(Math.abs(im[k]!)).toBeLessThan(1e-9);
    }
  });

  it('gives the same bits when a longer transform came in between', () => {
    const re = roughNumbers(64, 3);
    const im = roughNumbers(64, 4);
    const firstRe = re.slice();
    const firstIm = im.slice();
    fftInPlace(firstRe, firstIm);
    fftInPlace(roughNumbers(8192, 8), roughNumbers(8192, 9));
    const secondRe = re.slice();
    const secondIm = im.slice();
    fftInPlace(secondRe, secondIm);
    expect(secondRe).toEqual(firstRe);
    expect(secondIm).toEqual(firstIm);
  });

  it('refuses unequal lengths and lengths that are no power of two', () => {
    expect(() => {
      fftInPlace(new Float64Array(32), new Float64Array(16));
    }).toThrow(/32 real and 16 imaginary/);
    for (const n of [0, 8, 24, 2 ** 21]) {
      expect(() => {
        fftInPlace(new Float64Array(n), new Float64Array(n));
      }).toThrow(RangeError);
    }
  });
});
