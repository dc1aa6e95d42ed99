import { describe, expect, it } from 'vitest';
import { choleskyInPlace } from '../../../src/numerics/linear-algebra.js';
import { RandomStream } from '../../../src/numerics/random.js';
import { copyPhasePoint, Flow, makePhasePoint } from '../../../src/numerics/sampling/flow.js';
import { expectWithin } from '../../support/expect-within.js';
import { densityOf, gaussian, identity, randomCovariance, readReference } from './densities.js';

const oscillator = readReference('leapfrog.json') as {
  source: string;
  step: number;
  trajectory: readonly (readonly [number, number])[];
  shadowEnergy: number;
};

describe('Flow', () => {
  it(`follows the harmonic oscillator (reference/sampling/leapfrog.json: ${oscillator.source})`, () => {
    const flow = new Flow(
      densityOf(1, (q) => [-0.5 * q[0]! ** 2, [-q[0]!]]),
      identity(1),
    );
    const point = makePhasePoint(1);
    point.position[0] = 1;
    flow.evaluate(point);
    const bound = { abs: 1e-13, unit: '1', why: 'ten steps of rounding; measured 2e-16' };
    for (const [q, p] of oscillator.trajectory) {
      flow.step(point, oscillator.step);
      expectWithin(point.position[0], q, bound);
      expectWithin(point.momentum[0]!, p, bound);
      const energy = 0.5 * point.momentum[0]! ** 2 + 0.5 * point.position[0] ** 2;
      expectWithin(point.energy, energy, bound);
      const shadow = energy - (oscillator.step * point.position[0]) ** 2 / 8;
      expectWithin(shadow, oscillator.shadowEnergy, bound);
    }
    expect(flow.evaluations).toBe(11);
  });

  it('is leapfrog with the inverse covariance as mass matrix, written out with that matrix (6 coordinates)', () => {
    const n = 6;
    const random = RandomStream.fromSeed(3);
    const density = gaussian(new Float64Array(n).fill(0.5), randomCovariance(n, 30, random));
    const metric = randomCovariance(n, 10, random);
    const factor = metric.slice();
    choleskyInPlace(factor, n);
    const point = makePhasePoint(n);
    const p = new Float64Array(n);
    for (let j = 0; j < n; j++) {
      point.position[j] = random.normal();
      p[j] = random.normal();
    }
    // The momentum in the density's coordinates is p; whitened it is L^T p.
    for (let j = 0; j < n; j++) for (let i = j; i < n; i++) point.momentum[j]! += factor[i * n + j]! * p[i]!;
    const flow = new Flow(density, metric);
    flow.evaluate(point);
    const q = point.position.slice();
    const gradient = new Float64Array(n);
    const step = 0.07;
    let energy = 0;
    for (let k = 0; k < 20; k++) {
      flow.step(point, step);
      density.evaluate(q, gradient);
      for (let j = 0; j < n; j++) p[j]! += (step / 2) * gradient[j]!;
      for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) q[i]! += step * metric[i * n + j]! * p[j]!;
      const value = density.evaluate(q, gradient);
      for (let j = 0; j < n; j++) p[j]! += (step / 2) * gradient[j]!;
      energy = -value;
      for (let i = 0; i < n; i++)
        for (let j = 0; j < n; j++) energy += 0.5 * p[i]! * metric[i * n + j]! * p[j]!;
    }
    const bound = { abs: 1e-11, unit: '1', why: 'numbers of order 1 to 10 over 20 steps; measured 3e-14' };
    for (let j = 0; j < n; j++) expectWithin(point.position[j]!, q[j]!, bound);
    expectWithin(point.energy, energy, bound);
  });

  it('comes back to where it started when the step is reversed', () => {
    const density = densityOf(2, (q) => [
      -(q[0]! ** 4) - (q[1]! - q[0]!) ** 2,
      [-4 * q[0]! ** 3 + 2 * (q[1]! - q[0]!), -2 * (q[1]! - q[0]!)],
    ]);
    const flow = new Flow(density, Float64Array.of(1, 0.4, 0.4, 2));
    const point = makePhasePoint(2);
    point.position.set([0.3, -0.8]);
    point.momentum.set([1.1, 0.2]);
    flow.evaluate(point);
    const start = makePhasePoint(2);
    copyPhasePoint(point, start);
    for (let k = 0; k < 50; k++) flow.step(point, 0.1);
    for (let k = 0; k < 50; k++) flow.step(point, -0.1);
    const bound = { abs: 1e-12, unit: '1', why: 'rounding of 100 steps; measured 1e-14' };
    for (let j = 0; j < 2; j++) {
      expectWithin(point.position[j]!, start.position[j]!, bound);
      expectWithin(point.momentum[j]!, start.momentum[j]!, bound);
      expectWithin(point.slope[j]!, start.slope[j]!, bound);
    }
    expectWithin(point.energy, start.energy, bound);
  });

  it('refuses a covariance that is not positive definite or does not fit, naming what is allowed', () => {
    const density = gaussian(new Float64Array(2), identity(2));
    expect(() => new Flow(density, Float64Array.of(1, 2, 2, 1))).toThrow(/not positive definite/);
    expect(() => new Flow(density, identity(3))).toThrow(/9 elements does not fit 2 coordinates/);
  });
});
