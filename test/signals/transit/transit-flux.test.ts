import { describe, expect, it } from 'vitest';
import { starLight, transitFlux } from '../../../src/signals/transit/transit-flux.js';
import grid from '../../reference/transit/flux-grid.json' with { type: 'json' };
import { expectWithin } from '../../support/expect-within.js';

const LAWS = [
  [0, 0],
  [0.4, 0.3],
  [1, 0],
  [0.2, 0.7],
  [0.5, -0.2],
] as const;

function flux(z: number, k: number, u1: number, u2: number): Float64Array {
  const out = new Float64Array(5);
  transitFlux(z, k, u1, u2, out);
  return out;
}

describe('flux', () => {
  it('1002 places: contacts, z = 0, z = k, k = 1 and their neighbours, k > 1', () => {
    expect(grid.rows).toHaveLength(1002);
    for (const [k, z, u1, u2, loss] of grid.rows as [number, number, number, number, number][])
      expectWithin(1 - flux(z, k, u1, u2)[0]!, loss, {
        abs: 6e-16,
        unit: "of the star's light",
        why: '30-digit quadrature; rounding, measured 4.5e-16',
      });
  });

  it('a small planet in the middle: the integral is elementary', () => {
    const [k, u1, u2] = [0.1, 0.4, 0.3];
    // int_0^k 2 r [1 - u1 (1 - mu) - u2 (1 - mu)^2] dr / (1 - u1/3 - u2/6), 30 digits
    expectWithin(1 - flux(0, k, u1, u2)[0]!, 0.012232601848527548, {
      rel: 1e-13,
      unit: '1',
      why: 'closed form',
    });
  });

  it('total coverage leaves nothing and nothing changes', () => {
    for (const [u1, u2] of LAWS) {
      const [value, ...derivatives] = flux(0.2, 1.3, u1, u2);
      expectWithin(value!, 0, { abs: 4e-16, unit: '1', why: 'rounding' });
      for (const derivative of derivatives)
        expectWithin(derivative, 0, { abs: 4e-16, unit: '1', why: 'rounding' });
    }
  });

  it('nothing covered: exactly 1 and no change', () => {
    for (const [u1, u2] of LAWS)
      expect(Array.from(flux(1.2, 0.2, u1, u2)).map(Math.abs)).toEqual([1, 0, 0, 0, 0]);
  });

  it('what is not a number stays visible', () => {
    expect(flux(NaN, 0.1, 0.4, 0.3)[0]).toBeNaN();
    expect(flux(0.5, NaN, 0.4, 0.3)[0]).toBeNaN();
    expect(flux(0.5, 0.1, NaN, 0.3)[0]).toBeNaN();
  });

  it('a uniform disc never loses more than the area of the other', () => {
    for (let i = 0; i <= 1000; i++) {
      const value = flux((1.2 * i) / 1000, 0.17, 0, 0)[0]!;
      expect(value).toBeGreaterThanOrEqual(1 - 0.17 * 0.17 - 1e-15);
      expect(value).toBeLessThanOrEqual(1);
    }
  });
});

describe('partial derivatives', () => {
  /** Central differences at h and h/2, extrapolated. */
  function quotient(place: readonly number[], which: number, step: number): number {
    const central = (h: number): number => {
      const [above, below] = [h, -h].map((shift) => {
        const moved = [...place] as [number, number, number, number];
        moved[which]! += shift;
        return flux(...moved)[0]!;
      });
      return (above! - below!) / (2 * h);
    };
    return (4 * central(step / 2) - central(step)) / 3;
  }

  it('agree with difference quotients away from the contacts', () => {
    let tried = 0;
    for (const [u1, u2] of LAWS) {
      for (const k of [0.02, 0.1, 0.45, 0.8, 1, 1.7]) {
        for (let i = 1; i < 60; i++) {
          const z = ((1 + k) * i) / 60;
          const distance = Math.min(Math.abs(z - Math.abs(1 - k)), Math.abs(z - 1 - k), k, z);
          if (distance < 0.01) continue;
          tried++;
          const got = flux(z, k, u1, u2);
          for (let which = 0; which < 4; which++)
            expectWithin(got[1 + which]!, quotient([z, k, u1, u2], which, 2e-3 * distance), {
              abs: 1e-9,
              unit: '1',
              why: `error of the quotient, ${['z', 'k', 'u1', 'u2'][which]!} at z = ${z}, k = ${k}, u = ${u1}, ${u2}`,
            });
        }
      }
    }
    expect(tried).toBeGreaterThan(1000);
  });

  it('beside a contact, where quotients fail, follow the square root that theory gives', () => {
    // Just inside the first contact the uniform lens grows as (4/3) sqrt(2 k / (1 + k)) delta^1.5 for a unit star.
    for (const k of [0.05, 0.3, 2]) {
      for (const delta of [1e-6, 1e-10]) {
        const growth = 2 * Math.sqrt((2 * k) / (1 + k)) * Math.sqrt(delta);
        expectWithin(flux(1 + k - delta, k, 0, 0)[1]!, growth / Math.PI, {
          rel: 1e-5,
          unit: '1',
          why: 'two parabolas of curvature 1 and 1/k; next order delta / k, and the rounding of 1 + k - delta',
        });
      }
    }
  });
});

it('the light of the whole disc', () => {
  expect(starLight(0, 0)).toBe(Math.PI);
  expectWithin(starLight(0.4, 0.3), Math.PI * (1 - 0.4 / 3 - 0.05), {
    rel: 1e-15,
    unit: '1',
    why: 'definition',
  });
});
