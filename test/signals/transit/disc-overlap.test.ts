import { describe, expect, it } from 'vitest';
import { OVERLAP_MOMENTS, overlapArea, overlapMoments } from '../../../src/signals/transit/disc-overlap.js';
import reference from '../../reference/transit/moments.json' with { type: 'json' };
import { expectWithin } from '../../support/expect-within.js';

const ROWS = reference.rows;
const NAMES = reference.columns.slice(2);

function moments(z: number, k: number): Float64Array {
  const out = new Float64Array(OVERLAP_MOMENTS);
  overlapMoments(z, k, out);
  return out;
}

function scatter(seed: number): () => number {
  let state = seed;
  return () => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
}

describe('moments of the overlap against 50-digit quadrature over rings', () => {
  it.each(NAMES.map((name, column) => [name, column] as const))('%s', (name, column) => {
    expect(ROWS.length).toBeGreaterThan(200);
    for (const row of ROWS) {
      const [k, z] = [row[0]!, row[1]!];
      const want = row[2 + column]!;
      expectWithin(moments(z, k)[column]!, want, {
        abs: (column < 3 ? 2e-15 : 4e-15) * (1 + Math.abs(want)) * Math.max(1, k * k),
        unit: '1',
        why: `rounding, ${name} at k = ${k}, z = ${z}; test/reference/transit/generate.py`,
      });
    }
  });

  it('the area alone is the same', () => {
    const out = new Float64Array(3);
    for (const row of ROWS) {
      overlapArea(row[1]!, row[0]!, out);
      [2, 5, 8].forEach((column, i) => {
        expectWithin(out[i]!, row[column]!, {
          abs: 4e-15 * (1 + Math.abs(row[column]!)),
          unit: '1',
          why: 'rounding; test/reference/transit/generate.py',
        });
      });
    }
  });
});

describe('exact places', () => {
  it('apart, and in contact from outside: nothing', () => {
    for (const k of [1e-6, 0.1, 1, 3]) {
      for (const z of [1 + k, 1.5 + k, 1e6]) expect(moments(z, k).every((value) => value === 0)).toBe(true);
    }
    expect(moments(0.3, 0).every((value) => value === 0)).toBe(true);
  });

  it('a larger disc hides everything: pi, 2 pi / 3, pi / 2, whatever the small changes', () => {
    for (const [z, k] of [
      [0, 1],
      [0, 2],
      [0.5, 1.5],
      [1, 3],
    ] as const)
      expect(Array.from(moments(z, k))).toEqual([
        Math.PI,
        (2 / 3) * Math.PI,
        0.5 * Math.PI,
        ...new Array<number>(6).fill(0),
      ]);
  });

  it('concentric: closed forms', () => {
    for (const k of [1e-4, 0.1, 0.7, 0.999999]) {
      const mu = Math.sqrt((1 - k) * (1 + k));
      const got = moments(0, k);
      const rounding = { abs: 2e-15, unit: '1', why: 'elementary integral' };
      expectWithin(got[0]!, Math.PI * k * k, rounding);
      expectWithin(got[1]!, ((2 * Math.PI) / 3) * (1 - mu ** 3), rounding);
      expectWithin(got[2]!, (Math.PI / 2) * k ** 4, rounding);
      for (const column of [3, 4, 5]) expectWithin(got[column]!, 0, rounding);
      expectWithin(got[6]!, 2 * Math.PI * k, { ...rounding, abs: 4e-15 });
      expectWithin(got[7]!, 2 * Math.PI * k * mu, { ...rounding, abs: 4e-15 });
      expectWithin(got[8]!, 2 * Math.PI * k ** 3, { ...rounding, abs: 4e-15 });
    }
  });

  it('values and derivatives are continuous through contacts and where the limb crosses the centre', () => {
    for (const k of [0.05, 0.3, 0.5, 0.75, 1, 1.4]) {
      for (const place of [Math.abs(1 - k), k, 1 + k]) {
        if (place === 0) continue;
        const at = moments(place, k);
        for (const shift of [-1e-13, 1e-13]) {
          const near = moments(place + shift, k);
          at.forEach((value, column) => {
            expectWithin(near[column]!, value, {
              abs: 1e-5,
              unit: '1',
              why: 'the steepest change beside a contact is a square root: (1e-13)^0.5 times a factor of a few',
            });
          });
        }
      }
    }
  });
});

describe('laws', () => {
  it('scaling: the area of two discs does not depend on which of them is the unit', () => {
    const next = scatter(4711);
    const [one, other] = [new Float64Array(3), new Float64Array(3)];
    for (let i = 0; i < 2000; i++) {
      const k = 0.01 + 3 * next();
      const z = (1 + k) * 1.1 * next();
      overlapArea(z, k, one);
      overlapArea(z / k, 1 / k, other);
      expectWithin(one[0]!, k * k * other[0]!, {
        abs: 2e-14 * (1 + k * k),
        unit: '1',
        why: 'rounding of z / k',
      });
    }
  });

  it('0 <= r^2 moment, mu moment <= area, and mu + r^2 >= 1 on the disc bounds them from below', () => {
    const next = scatter(99);
    let worst = -Infinity;
    for (let i = 0; i < 20_000; i++) {
      const k = Math.exp(Math.log(1e-3) + next() * Math.log(4000));
      const z = (1 + k) * next();
      const [area, root, square] = moments(z, k) as unknown as [number, number, number];
      const excess = Math.max(root - area, square - area, -root, -square, area - root - square);
      worst = Math.max(worst, excess / (1 + area));
    }
    expect(worst).toBeLessThan(4e-15 * 16); // rounding, which grows as k^2, k up to 4
  });
});
