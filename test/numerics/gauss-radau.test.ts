import { describe, expect, it } from 'vitest';
import { GaussRadau } from '../../src/numerics/gauss-radau.js';
import type { SecondOrderSystem } from '../../src/numerics/gauss-radau.js';
import { END_POSITION_WEIGHTS, END_VELOCITY_WEIGHTS, NODES } from '../../src/numerics/radau-tables.js';
import { solveInPlace } from '../../src/numerics/gauss-elimination.js';
import { Stormer } from '../../src/numerics/stormer.js';
import { SpatialPull } from '../../src/orbit/interaction/pull.js';
import { expectWithin } from '../support/expect-within.js';

const kepler: SecondOrderSystem = {
  componentCount: 2,
  groupSize: 2,
  accelerations(positions, out) {
    const [x, y] = positions as unknown as [number, number];
    const weight = -((x * x + y * y) ** -1.5);
    out[0] = weight * x;
    out[1] = weight * y;
  },
};

function revolve(e: number, turns: number, tolerance: number): GaussRadau {
  const motion = new GaussRadau(kepler, tolerance);
  motion.start(0, Float64Array.of(1 - e, 0), Float64Array.of(0, Math.sqrt((1 + e) / (1 - e))), 0.05);
  const end = 2 * Math.PI * turns;
  while (end - motion.time > 1e-12 * Math.abs(end))
    expect(motion.advance(Math.min(1, end - motion.time))).toBe(true);
  return motion;
}

describe('Radau nodes', () => {
  it('integrate every power up to the fourteenth exactly', () => {
    for (let power = 0; power <= 14; power++) {
      const sum = NODES.reduce((total, s, j) => total + END_VELOCITY_WEIGHTS[j]! * s ** power, 0);
      expectWithin(sum, 1 / (power + 1), { abs: 2e-15, unit: '1', why: 'rounding' });
      const twice = NODES.reduce((total, s, j) => total + END_POSITION_WEIGHTS[j]! * s ** power, 0);
      if (power <= 13)
        expectWithin(twice, 1 / ((power + 1) * (power + 2)), { abs: 2e-15, unit: '1', why: 'rounding' });
    }
  });
});

describe('GaussRadau', () => {
  it.each([0, 0.1, 0.5, 0.9])('returns to periastron after 50 revolutions, e = %f', (e) => {
    const { positions, velocities } = revolve(e, 50, 1e-4);
    const energy =
      0.5 * (velocities[0]! ** 2 + velocities[1]! ** 2) - 1 / Math.hypot(positions[0]!, positions[1]!);
    const bound = e < 0.8 ? 1e-12 : 1e-11;
    expectWithin(energy, -0.5, {
      abs: bound,
      unit: '1',
      why: 'measured 7e-14, 6e-12 at e = 0.9 after three times as many',
    });
    const spin = positions[0]! * velocities[1]! - positions[1]! * velocities[0]!;
    expectWithin(spin, Math.sqrt(1 - e * e), { abs: 1e-12, unit: '1', why: 'rounding and the step control' });
    expectWithin(Math.atan2(positions[1]!, positions[0]!), 0, {
      abs: 1e-6 * (e < 0.8 ? 0.01 : 1),
      unit: 'rad',
      why: 'measured 3e-10, 2e-7 at e = 0.9',
    });
  });

  it('runs back to where it came from', () => {
    const there = revolve(0.3, 3.3, 1e-5);
    const back = new GaussRadau(kepler, 1e-5);
    back.start(there.time, there.positions, there.velocities, -0.05);
    while (back.time > 1e-12) back.advance(Math.min(1, back.time));
    expectWithin(back.positions[0]!, 0.7, { abs: 1e-13, unit: '1', why: 'rounding' });
    expectWithin(back.positions[1]!, 0, { abs: 1e-12, unit: '1', why: 'rounding' });
  });

  it('conserves energy and angular momentum of three companions about a star that is pulled', () => {
    const gms = Float64Array.of(1e-3, 5e-4, 2e-3);
    const motion = new GaussRadau(new SpatialPull(1, gms), 1e-5);
    const positions = Float64Array.of(1, 0, 0.05, 0, 1.7, 0, -2.9, 0.1, 0);
    const velocities = Float64Array.of(0, 1, 0.02, -0.75, 0, 0.03, 0, -0.6, 0.01);
    motion.start(0, positions, velocities, 0.05);
    const before = conserved(1, gms, positions, velocities);
    while (motion.time < 600) expect(motion.advance(1)).toBe(true);
    const after = conserved(1, gms, motion.positions, motion.velocities);
    after.forEach((value, k) => {
      expectWithin(value, before[k]!, {
        abs: 1e-15,
        unit: '1',
        why: 'energy is 2e-3; rounding over 100 revolutions',
      });
    });
  });

  it('says when bodies meet', () => {
    const motion = new GaussRadau(kepler, 1e-4);
    motion.start(0, Float64Array.of(1, 0), Float64Array.of(0, 0), 0.05);
    let steps = 0;
    while (motion.advance(0.5) && steps < 10_000) steps++;
    expect(steps).toBeLessThan(10_000);
  });
});

/** Energy and angular momentum in the frame of the barycentre, from state relative to the star, per unit of G. */
function conserved(starGm: number, gms: Float64Array, x: Float64Array, v: Float64Array): number[] {
  const count = gms.length;
  const total = gms.reduce((sum, gm) => sum + gm, starGm);
  const mean = [0, 1, 2].map((axis) => gms.reduce((sum, gm, i) => sum + gm * v[3 * i + axis]!, 0) / total);
  const centre = [0, 1, 2].map((axis) => gms.reduce((sum, gm, i) => sum + gm * x[3 * i + axis]!, 0) / total);
  let energy = 0.5 * starGm * mean.reduce((sum, m) => sum + m * m, 0);
  const spin = [0, 0, 0];
  const turn = (gm: number, r: number[], u: number[]): void => {
    for (let a = 0; a < 3; a++)
      spin[a]! += gm * (r[(a + 1) % 3]! * u[(a + 2) % 3]! - r[(a + 2) % 3]! * u[(a + 1) % 3]!);
  };
  turn(
    starGm,
    centre.map((c) => -c),
    mean.map((m) => -m),
  );
  for (let i = 0; i < count; i++) {
    const r = [0, 1, 2].map((axis) => x[3 * i + axis]! - centre[axis]!);
    const u = [0, 1, 2].map((axis) => v[3 * i + axis]! - mean[axis]!);
    turn(gms[i]!, r, u);
    energy += 0.5 * gms[i]! * u.reduce((sum, c) => sum + c * c, 0);
    energy -= (starGm * gms[i]!) / Math.hypot(x[3 * i]!, x[3 * i + 1]!, x[3 * i + 2]!);
    for (let j = 0; j < i; j++) {
      const distance = Math.hypot(...[0, 1, 2].map((axis) => x[3 * i + axis]! - x[3 * j + axis]!));
      energy -= (gms[i]! * gms[j]!) / distance;
    }
  }
  return [energy, ...spin];
}

describe('Stormer', () => {
  it('keeps the phase of a circular orbit over 100 revolutions', () => {
    const motion = new Stormer(kepler);
    const step = (2 * Math.PI) / 80;
    expect(motion.start(0, Float64Array.of(1, 0), Float64Array.of(0, 1), step)).toBe(true);
    for (let n = 0; n < 8000; n++) motion.advance();
    expectWithin(Math.atan2(motion.positions[1]!, motion.positions[0]!), 0, {
      abs: 1e-7,
      unit: 'rad',
      why: 'measured 2e-9',
    });
    const polynomial = new Float64Array(10);
    motion.polynomial(1, polynomial);
    const at = (s: number): number => polynomial.reduceRight((sum, c) => sum * s + c, 0);
    expectWithin(at(-1), motion.previous[1]!, { abs: 1e-13, unit: '1', why: 'passes through both ends' });
    expectWithin(at(-0.4), Math.sin(motion.time - 0.4 * step), {
      abs: 1e-8,
      unit: '1',
      why: 'phase as above',
    });
  });
});

describe('solveInPlace', () => {
  it('solves a system that needs pivoting, and refuses a singular one', () => {
    const b = Float64Array.of(5, 10, 6, 18);
    // 0 2 1 | 2 0 3: rows chosen so that the first pivot is zero; solution (1, 2) and (3, 4) by hand.
    expect(solveInPlace(Float64Array.of(0, 2, 3, 1), Float64Array.of(4, 8, 5, 13), 2, 2)).toBe(true);
    const x = Float64Array.of(4, 8, 5, 13);
    solveInPlace(Float64Array.of(0, 2, 3, 1), x, 2, 2);
    expect(Array.from(x)).toEqual([1, 3, 2, 4]);
    expect(solveInPlace(Float64Array.of(1, 2, 2, 4), b, 2, 2)).toBe(false);
  });
});
