import { describe, expect, it } from 'vitest';
import { NonuniformTransform } from '../../src/numerics/nonuniform-fft.js';
import { RandomStream } from '../../src/numerics/random.js';
import { expectWithin } from '../support/expect-within.js';

const bound = (sum: number): { abs: number; unit: string; why: string } => ({
  abs: 1e-10 * sum,
  unit: 'unit of the amplitudes',
  why: 'the file promises 1e-10 of the sum of the absolute amplitudes; measured 6e-11 at worst',
});

interface Sums {
  readonly re: number;
  readonly im: number;
}

/** The definition, term by term; the angle is reduced in whole turns so that it is exact to rounding of f x. */
function directSum(x: Float64Array, amplitudes: Float64Array, frequency: number): Sums {
  let re = 0;
  let im = 0;
  for (let i = 0; i < x.length; i++) {
    const turns = frequency * x[i]!;
    const angle = 2 * Math.PI * (turns - Math.round(turns));
    re += amplitudes[i]! * Math.cos(angle);
    im += amplitudes[i]! * Math.sin(angle);
  }
  return { re, im };
}

const sumOfAbsolutes = (values: Float64Array): number =>
  values.reduce((sum, value) => sum + Math.abs(value), 0);

function compare(
  start: number,
  step: number,
  count: number,
  x: Float64Array,
  amplitudes: Float64Array,
): void {
  const re = new Float64Array(count).fill(NaN);
  const im = new Float64Array(count).fill(NaN);
  new NonuniformTransform(start, step, count).transform(x, amplitudes, re, im);
  const limit = bound(sumOfAbsolutes(amplitudes));
  for (let j = 0; j < count; j += Math.max(1, Math.floor(count / 61))) {
    const want = directSum(x, amplitudes, start + j * step);
    expectWithin(re[j]!, want.re, limit);
    expectWithin(im[j]!, want.im, limit);
  }
  const last = directSum(x, amplitudes, start + (count - 1) * step);
  expectWithin(re[count - 1]!, last.re, limit);
  expectWithin(im[count - 1]!, last.im, limit);
}

function points(random: RandomStream, n: number, halfWidth: number): { x: Float64Array; a: Float64Array } {
  return {
    x: Float64Array.from({ length: n }, () => random.uniformBetween(-halfWidth, halfWidth)),
    a: Float64Array.from({ length: n }, () => random.normal()),
  };
}

describe('NonuniformTransform against sums taken term by term', () => {
  for (const count of [1, 2, 5, 51, 52, 64, 103, 819, 1000, 4096, 20000]) {
    it(`grid of ${count} frequencies, 1 to 1000 points`, () => {
      const random = RandomStream.fromSeed(11, count);
      for (const n of [1, 7, 100, 1000]) {
        const { x, a } = points(random, n, 500);
        compare(0.0007, 1 / 10000, count, x, a);
        compare(-0.3, 0.00213, count, x, a);
      }
    });
  }

  it('many points, for which the frequencies stay in one block', () => {
    const random = RandomStream.fromSeed(17);
    const { x, a } = points(random, 6000, 500);
    compare(0.0007, 1 / 10000, 30000, x, a);
  });

  it('points far from the origin (40 000 d at frequencies up to 2/d)', () => {
    const random = RandomStream.fromSeed(12);
    const { x, a } = points(random, 100, 10);
    for (const shift of [-40000.5, 38123.25]) {
      compare(
        1e-4,
        1e-4,
        20000,
        x.map((value) => value + shift),
        a,
      );
    }
  });

  it('points on, and half way between, the cells of its own grid; repeated points', () => {
    const step = 1 / 1024;
    for (const count of [64, 100]) {
      const x = Float64Array.from([0, 0, 8, 4, -4, 512, 511.5, 1024, 0.5, 1023.999999999]);
      compare(
        0,
        step,
        count,
        x,
        Float64Array.from(x, (_, i) => 1 - 0.3 * i),
      );
    }
  });

  it('one plan serves many sets, and the order of calls leaves no trace', () => {
    const random = RandomStream.fromSeed(13);
    const plan = new NonuniformTransform(0.01, 0.003, 500);
    const first = points(random, 40, 100);
    const second = points(random, 90, 100);
    const many = points(random, 6000, 100);
    const run = ({ x, a }: typeof first): Float64Array => {
      const re = new Float64Array(500);
      plan.transform(x, a, re, new Float64Array(500));
      return re;
    };
    const before = run(first);
    run(second);
    run(many);
    expect(run(first)).toEqual(before);
  });

  it('is linear, and no point or zero amplitudes give zero', () => {
    const random = RandomStream.fromSeed(14);
    const { x, a } = points(random, 30, 50);
    const other = a.map(() => random.normal());
    const plan = new NonuniformTransform(0, 0.01, 200);
    const run = (amplitudes: Float64Array, at: Float64Array = x): Float64Array => {
      const re = new Float64Array(200).fill(NaN);
      plan.transform(at, amplitudes, re, new Float64Array(200));
      return re;
    };
    const left = run(a);
    const right = run(other);
    const both = run(a.map((value, i) => 2 * value - 3 * other[i]!));
    both.forEach((value, j) => {
      expectWithin(value, 2 * left[j]! - 3 * right[j]!, {
        abs: 1e-11,
        unit: 'unit of the amplitudes',
        why: 'measured 1.4e-12: rounding of a sum of some hundred terms',
      });
    });
    expect(run(a.map(() => 0)).every((value) => value === 0)).toBe(true);
    expect(run(new Float64Array(0), new Float64Array(0)).every((value) => value === 0)).toBe(true);
  });
});
