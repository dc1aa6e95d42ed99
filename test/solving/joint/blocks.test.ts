import { describe, expect, it } from 'vitest';
import { dialBlock, type Block } from '../../../src/solving/joint/block.js';
import { blocksOf } from '../../../src/solving/joint/blocks-of.js';
import { gaussianDial } from '../../../src/solving/joint/dials.js';
import { LOG_PERIOD, NaturalIndex } from '../../../src/solving/joint/natural.js';
import { shapeBlock, triangleBlock } from '../../../src/solving/joint/pair-blocks.js';
import { expectWithin } from '../../support/expect-within.js';
import { integral } from './midpoint-rule.js';
import { companion, curve, naturalPoint, recipe, seeded, stated, velocities } from './recipes.js';

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
