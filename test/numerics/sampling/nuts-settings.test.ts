import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { NutsChain, type SmoothDensity } from '../../../src/numerics/sampling/index.js';
import { densityOf, gaussian, identity, randomCovariance } from './densities.js';

describe('NutsChain as a tool', () => {
  const n = 4;
  const covariance = randomCovariance(n, 50, RandomStream.fromSeed(30));
  const density = gaussian(Float64Array.of(1, 2, 3, 4), covariance);
  const settings = { start: new Float64Array(n), covariance: identity(n), warmup: 500 };

  it('gives the same draws for the same seed, in one piece or in two, and others for another stream', () => {
    const chain = (stream: number): NutsChain =>
      new NutsChain(density, settings, RandomStream.fromSeed(31, stream));
    const whole = chain(0).draw(60);
    const parts = chain(0);
    const first = parts.draw(25);
    const second = parts.draw(35);
    expect([...first.positions, ...second.positions]).toEqual([...whole.positions]);
    expect([...first.energies, ...second.energies]).toEqual([...whole.energies]);
    expect(chain(1).draw(60).positions).not.toEqual(whole.positions);
  });

  it('returns ln density of the positions it returns, and counts every call', () => {
    let calls = 0;
    const counted: SmoothDensity = {
      size: n,
      evaluate(position, gradient) {
        calls++;
        return density.evaluate(position, gradient);
      },
    };
    const chain = new NutsChain(counted, settings, RandomStream.fromSeed(32));
    const draws = chain.draw(200);
    expect(chain.gradientEvaluations).toBe(calls);
    const unused = new Float64Array(n);
    draws.logDensities.forEach((value, k) => {
      expect(density.evaluate(draws.positions.slice(k * n, (k + 1) * n), unused)).toBe(value);
      expect(draws.energies[k]!).toBeGreaterThanOrEqual(-value);
      expect(draws.acceptance[k]! >= 0 && draws.acceptance[k]! <= 1).toBe(true);
    });
  });

  it('learns the covariance: diagonal and correlations within 4 errors of 300 draws, however wrong the scale of the guess', () => {
    for (const scale of [1e-6, 1, 1e6]) {
      const chain = new NutsChain(
        density,
        { ...settings, covariance: identity(n, scale) },
        RandomStream.fromSeed(33),
      );
      chain.warmUp();
      const learnt = chain.covariance;
      for (let i = 0; i < n; i++) {
        for (let j = 0; j <= i; j++) {
          const size = Math.sqrt(covariance[i * n + i]! * covariance[j * n + j]!);
          expect(Math.abs(learnt[i * n + j]! - covariance[i * n + j]!)).toBeLessThan(0.35 * size);
        }
      }
    }
  });

  it('brings the acceptance to the target or up to 0.2 above it (averaging the steps errs on the short side)', () => {
    for (const targetAcceptance of [0.6, 0.85, 0.95]) {
      const chain = new NutsChain(density, { ...settings, targetAcceptance }, RandomStream.fromSeed(34));
      const { acceptance } = chain.draw(2000);
      const mean = acceptance.reduce((sum, a) => sum + a / 2000, 0);
      expect(mean).toBeGreaterThan(targetAcceptance - 0.03);
      expect(mean).toBeLessThan(targetAcceptance + 0.2);
    }
  });

  it('never exceeds the depth allowed', () => {
    const chain = new NutsChain(
      density,
      { ...settings, warmup: 0, covariance: identity(n, 1e-4), maximumDepth: 3 },
      RandomStream.fromSeed(35),
    );
    chain.warmUp();
    const before = chain.gradientEvaluations;
    const { depths } = chain.draw(100);
    expect(Math.max(...depths)).toBe(3);
    expect(chain.gradientEvaluations - before).toBeLessThanOrEqual(700);
  });

  it('refuses what cannot work, saying what was found and what is allowed', () => {
    const make = (changes: object): (() => NutsChain) => {
      return () => new NutsChain(density, { ...settings, ...changes }, RandomStream.fromSeed(1));
    };
    expect(make({ start: new Float64Array(3) })).toThrow(/start of 3 numbers does not fit .* 4 coordinates/);
    expect(make({ start: Float64Array.of(NaN, 0, 0, 0) })).toThrow(/cannot start where ln density is NaN/);
    expect(make({ covariance: new Float64Array(16) })).toThrow(/not positive definite/);
    expect(make({ warmup: -1 })).toThrow(/-1 draws was asked for; allowed is a whole number >= 0/);
    expect(make({ targetAcceptance: 1 })).toThrow(/1 is outside \(0, 1\)/);
    expect(make({ maximumDepth: 0 })).toThrow(/0 is outside 1 .. 20/);
    expect(() => make({})().draw(-1)).toThrow(/-1 draws were asked for/);
  });

  it('stops when no step is short enough: a density with a jump at its start', () => {
    const edge = densityOf(1, ([x]) => [x === 0 ? 1e6 : 0, [0]]);
    const chain = new NutsChain(
      edge,
      { start: new Float64Array(1), covariance: identity(1), warmup: 100 },
      RandomStream.fromSeed(36),
    );
    expect(() => {
      chain.warmUp();
    }).toThrow(/no step of the sampler is short enough/);
  });
});
