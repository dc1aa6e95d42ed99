import { describe, expect, it } from 'vitest';
import type { Block, Dial, PriorUse } from '../../../src/solving/joint/block.js';
import { dialBlock } from '../../../src/solving/joint/block.js';
import { blocksOf } from '../../../src/solving/joint/blocks-of.js';
import {
  gaussianDial,
  logarithmicDial,
  mirroredDial,
  positiveGaussianDial,
  rangeDial,
  scatterDial,
  statedDial,
  uniformDial,
} from '../../../src/solving/joint/dials.js';
import { LOG_PERIOD, NaturalIndex } from '../../../src/solving/joint/natural.js';
import { shapeBlock, triangleBlock } from '../../../src/solving/joint/pair-blocks.js';
import { expectWithin } from '../../support/expect-within.js';
import { companion, curve, naturalPoint, recipe, seeded, stated, velocities } from './recipes.js';

interface Kind {
  readonly name: string;
  readonly dial: (use: PriorUse) => Dial;
  /** Values within reach, and where u runs for the integral of the prior. */
  readonly values: readonly number[];
  readonly from: number;
  readonly to: number;
  /** Prior probability up to a value, where it has a closed form. */
  readonly share: (value: number) => number;
}

/** Normal distribution from -8 sigma by Simpson's rule. */
function normalShare(x: number): number {
  const n = 2000;
  const step = (x + 8) / n;
  let sum = 0;
  for (let i = 0; i <= n; i++)
    sum += (i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2) * Math.exp(-0.5 * (-8 + i * step) ** 2);
  return (sum * step) / 3 / Math.sqrt(2 * Math.PI);
}

const KINDS: readonly Kind[] = [
  {
    name: 'uniform',
    dial: () => uniformDial(-2, 5),
    values: [-1.9, 0, 3.3],
    from: -2,
    to: 5,
    share: (value) => (value + 2) / 7,
  },
  {
    name: 'Gaussian',
    dial: () => gaussianDial(3, 0.4),
    values: [2, 3, 3.7],
    from: -1,
    to: 7,
    share: (value) => normalShare((value - 3) / 0.4),
  },
  {
    name: 'log-uniform',
    dial: (use) => logarithmicDial(1e-3, 2, 0, use),
    values: [2e-3, 0.1, 1.9],
    from: Math.log(1e-3),
    to: Math.log(2),
    share: (value) => Math.log(value / 1e-3) / Math.log(2000),
  },
  {
    name: 'density 1/(value + scale)',
    dial: (use) => logarithmicDial(1e-4, 50, 0.7, use),
    values: [1e-3, 0.7, 20],
    from: -40,
    to: Math.log(50),
    share: (value) => Math.log1p(value / 0.7) / Math.log1p(50 / 0.7),
  },
  {
    name: 'Gaussian of a positive number',
    dial: (use) => positiveGaussianDial(2, 0.2, use),
    values: [1.5, 2, 2.6],
    from: -5,
    to: 2,
    share: (value) => normalShare((value - 2) / 0.2),
  },
  {
    name: 'range',
    dial: (use) => rangeDial(4, 9, use),
    values: [4.2, 6, 8.8],
    from: -20,
    to: 20,
    share: (value) => (value - 4) / 5,
  },
  {
    name: 'extra scatter',
    dial: () => scatterDial(0.3, 60),
    values: [0.2, 1, 40],
    from: 0,
    to: Math.asinh(200),
    share: (value) => Math.asinh(value / 0.3) / Math.asinh(200),
  },
  {
    name: 'impact parameter',
    dial: (use) => mirroredDial(1, use),
    values: [0.02, 0.5, 0.98],
    from: 0,
    to: 9e3,
    share: (value) => value,
  },
];

/** By the midpoint rule in t with u = from + (to - from) t^2 (3 - 2 t), which is gentle at the ends. */
function integral(density: (u: number) => number, from: number, to: number): number {
  const n = 200_000;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    const t = (i + 0.5) / n;
    const u = from + (to - from) * t * t * (3 - 2 * t);
    sum += (density(u) * (to - from) * 6 * t * (1 - t)) / n;
  }
  return sum;
}

describe('a dial', () => {
  for (const { name, dial, values, from, to, share } of KINDS) {
    it(`${name}: comes back to the value it was set to`, () => {
      for (const use of ['all', 'stated'] as const)
        for (const value of values) {
          const own = dial(use);
          expectWithin(own.value(own.position(value)), value, {
            rel: 1e-13,
            unit: '1',
            why: 'rounding of exp, ln and roots',
          });
        }
    });

    it(`${name}: has the slopes of difference quotients, of value and of prior`, () => {
      for (const use of ['all', 'stated'] as const) {
        const own = dial(use);
        for (const value of values) {
          const u = own.position(value);
          const step = 1e-5;
          const bound = { rel: 1e-7, unit: '1', why: 'central difference of step 1e-5' };
          expectWithin(own.slope(u), (own.value(u + step) - own.value(u - step)) / (2 * step), bound);
          const byPrior = (own.logPrior(u + step) - own.logPrior(u - step)) / (2 * step);
          expectWithin(own.logPriorSlope(u), byPrior, { abs: 1e-6 * (1 + Math.abs(byPrior)), unit: '1', why: 'the same' }); // prettier-ignore
        }
      }
    });

    it(`${name}: its prior integrates to its normalisation, and up to each value to the stated distribution`, () => {
      const own = dial('all');
      const density = (u: number): number => Math.exp(own.logPrior(u));
      const whole = Math.exp(own.logNormalisation);
      const bound = { abs: 2e-5, unit: '1', why: 'midpoint rule with 200 000 points; ends cut at 1e-9' };
      expectWithin(integral(density, from, to) / whole, 1, bound);
      for (const value of values)
        expectWithin(integral(density, from, own.position(value)) / whole, share(value), bound);
    });
  }

  it('is not to be had for a number that is fixed', () => {
    expect(statedDial({ kind: 'fixed', value: 3 }, true, 'all')).toBeNull();
  });

  it('starts clear of the ends of a range, where its map is flat', () => {
    const own = rangeDial(0, 1, 'all');
    for (const value of [-3, 0, 1e-9, 1, 7]) {
      const inside = own.value(own.position(value));
      expect(inside).toBeGreaterThan(0.01);
      expect(inside).toBeLessThan(0.99);
    }
  });

  it('ends at its walls', () => {
    expect(uniformDial(0, 1).logPrior(1.0001)).toBe(-Infinity);
    expect(logarithmicDial(1, 10, 0, 'stated').logPrior(Math.log(0.99))).toBe(-Infinity);
    expect(logarithmicDial(1, 10, 2, 'stated').logPrior(Math.log(10.1))).toBe(-Infinity);
    expect(scatterDial(1, 5).logPrior(Math.asinh(5.01))).toBe(-Infinity);
    expect(rangeDial(0, 1, 'all').logPrior(25)).toBe(-Infinity);
  });

  it('mirrored: says the same on either side of 0', () => {
    for (const own of [scatterDial(0.3, 60), mirroredDial(1, 'all')])
      for (const u of [0.1, 1, 4]) {
        expect(Math.abs(own.value(-u))).toBe(Math.abs(own.value(u)));
        expect(own.logPrior(-u)).toBe(own.logPrior(u));
      }
  });
});

const seen = new Float64Array(2);
function readBlock(block: Block, u: readonly number[]): number {
  return block.read(Float64Array.from(u), 0, seen);
}

describe('the plane of eccentricity and argument of periastron', () => {
  const block = shapeBlock(0, 'all');

  it('comes back to the shape it was set to', () => {
    for (const e of [1e-5, 0.1, 0.6, 0.95])
      for (const omega of [-2.5, 0, 1.2, 3]) {
        const natural = Float64Array.of(e * Math.cos(omega), e * Math.sin(omega));
        const position = new Float64Array(2);
        block.write(natural, position, 0);
        readBlock(block, Array.from(position));
        for (const j of [0, 1])
          expectWithin(seen[j]!, natural[j]!, { abs: 1e-15, unit: '1', why: 'rounding' });
      }
  });

  it('is uniform in e and in omega: its density over rings integrates to e, over all to pi', () => {
    // In polar coordinates of the plane: e = s^2/(1 + s^2), read off the block itself.
    const mass = (upTo: number): number =>
      integral((s) => 2 * Math.PI * s * Math.exp(readBlock(block, [s * 0.6, s * 0.8])), 0, upTo);
    for (const e of [0.1, 0.5, 0.9]) {
      const s = Math.sqrt(e / (1 - e));
      readBlock(block, [s * 0.6, s * 0.8]);
      expectWithin(Math.hypot(seen[0]!, seen[1]!), e, { abs: 1e-14, unit: '1', why: 'rounding' });
      const share = mass(s) / Math.exp(block.logNormalisation);
      expectWithin(share, e, { abs: 1e-8, unit: '1', why: 'midpoint rule' });
    }
  });
});

describe('the triangle of limb darkening', () => {
  const block = triangleBlock(0, 'all');

  it('comes back to the coefficients it was set to', () => {
    for (const [u1, u2] of [[0.4, 0.25], [0.1, 0.5], [0.9, -0.3], [0.02, 0.3]] as const) {
      const position = new Float64Array(2);
      block.write(Float64Array.of(u1, u2), position, 0);
      readBlock(block, Array.from(position));
      expectWithin(seen[0]!, u1, { abs: 1e-14, unit: '1', why: 'rounding' });
      expectWithin(seen[1]!, u2, { abs: 1e-14, unit: '1', why: 'rounding' });
    }
  }); // prettier-ignore

  it('has a prior of volume one', () => {
    const n = 400;
    let sum = 0;
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++) {
        const a = -19.9 + (39.8 * (i + 0.5)) / n;
        const b = -19.9 + (39.8 * (j + 0.5)) / n;
        sum += Math.exp(readBlock(block, [a, b])) * (39.8 / n) ** 2;
      }
    expectWithin(sum, 1, {
      abs: 1e-6,
      unit: '1',
      why: 'logistic densities by the midpoint rule; ends cut at 1e-9',
    });
  });

  it('is uniform over all pairs that darken everywhere towards the limb and leave light there', () => {
    // The physical pairs are u1 > 0, u1 + u2 < 1, u1 + 2 u2 > 0 [Kipping2013]: a triangle with corners (0, 0), (2, -1), (0, 1).
    const random = seeded(11);
    const draws = 40_000;
    const cells = 4;
    const counts = new Map<string, number>();
    for (let d = 0; d < draws; d++) {
      const logit = (): number => {
        const q = random.uniform();
        return Math.log(q / (1 - q));
      };
      readBlock(block, [logit(), logit()]);
      const [u1, u2] = [seen[0]!, seen[1]!];
      expect(u1 >= 0 && u1 + u2 <= 1 && u1 + 2 * u2 >= -1e-12, `${u1}, ${u2}`).toBe(true);
      // Affine coordinates of the triangle, cut into 16 triangles of one area.
      const x = cells * (0.5 * u1);
      const y = cells * (u2 + 0.5 * u1);
      const corner = x - Math.floor(x) + (y - Math.floor(y)) > 1 ? 'upper' : 'lower';
      const key = `${Math.floor(x)},${Math.floor(y)},${corner}`;
      counts.set(key, (counts.get(key) ?? 0) + 1);
    }
    const expected = draws / cells ** 2;
    expect(counts.size).toBe(cells ** 2);
    const chiSquare = [...counts.values()].reduce(
      (sum, count) => sum + (count - expected) ** 2 / expected,
      0,
    );
    // chi-square with 15 degrees of freedom exceeds 37.7 once in a thousand (tables of the distribution).
    expect(chiSquare).toBeLessThan(37.7);
  });
});

describe('the blocks of a recipe', () => {
  const of = recipe({
    curves: [curve(seeded(1))],
    velocities: velocities(seeded(2)),
    drift: 1,
    companions: [
      companion(0, { circular: false, pulls: true }),
      companion(1, { circular: false, pulls: true, transits: false }),
    ],
  });

  it('bring every natural parameter back that is not fixed', () => {
    const index = new NaturalIndex(of);
    const blocks = blocksOf(of, index, 'all');
    const size = blocks.reduce((sum, block) => sum + block.size, 0);
    const wanted = naturalPoint(of);
    const position = new Float64Array(size);
    const got = new Float64Array(index.size);
    let at = 0;
    for (const block of blocks) {
      block.write(wanted, position, at);
      block.read(position, at, got);
      at += block.size;
    }
    const fixed = new Set([
      index.companion(1) + 5,
      index.companion(1) + 6,
      index.occultationDepth(0, 0),
      index.occultationDepth(1, 0),
      index.dilution(0),
      index.correlatedNoise(0),
      index.correlatedNoise(0) + 1,
      index.drift + 1,
    ]);
    wanted.forEach((value, j) => {
      if (!fixed.has(j))
        expectWithin(got[j]!, value, { abs: 1e-12 * (1 + Math.abs(value)), unit: '1', why: 'rounding' });
    });
    expect(size).toBe(index.size - fixed.size);
  });

  it('know the volume of the prior of a stated period', () => {
    const choice = stated({ period: { kind: 'prior', value: 3.3, sigma: 0.01 } });
    const own = recipe({ midTimes: [], companions: [companion(0, { transits: false, choice })] });
    const [block] = blocksOf(own, new NaturalIndex(own), 'all');
    const natural = new Float64Array(20);
    const density = (u: number): number => Math.exp(block!.read(Float64Array.of(u), 0, natural));
    const whole = integral(density, Math.log(3.2), Math.log(3.4));
    expectWithin(whole / Math.exp(block!.logNormalisation), 1, {
      abs: 1e-4,
      unit: '1',
      why: 'ln P instead of P: second order of sigma/P, 9e-6',
    });
    expect(natural[LOG_PERIOD]).toBeGreaterThan(0);
  });

  it('leave a dial to the coordinate that it stands at', () => {
    const block = dialBlock(gaussianDial(1, 2), 1);
    const natural = new Float64Array(2);
    block.read(Float64Array.of(9, 4), 1, natural);
    expect(Array.from(natural)).toEqual([0, 4]);
    const gradient = new Float64Array(2);
    block.pull(Float64Array.of(9, 4), 1, Float64Array.of(0, 7), gradient);
    expect(Array.from(gradient)).toEqual([0, 7 - 3 / 4]);
  });
});
