/** Does the chain draw from the density, and does it say so when it does not? Bounds are in Monte-Carlo standard errors. */
import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import {
  bulkEss,
  ebfmi,
  NutsChain,
  rankNormalisedRHat,
  tailEss,
  type SmoothDensity,
} from '../../../src/numerics/sampling/index.js';
import { along, densityOf, divergences, gaussian, identity, randomCovariance, run } from './densities.js';
import { departure } from './monte-carlo.js';

/** Among hundreds of comparisons with seeded draws the largest departure is about 3; a bias shows as 10 and more. */
const FAR = 4.5;

describe('NutsChain draws from the density', () => {
  it('normal in 20 correlated coordinates, axes up to 30 times longer than others: every mean and covariance', () => {
    const n = 20;
    const random = RandomStream.fromSeed(20);
    const covariance = randomCovariance(n, 1000, random);
    const centre = Float64Array.from({ length: n }, () => 10 * random.normal());
    const draws = run(gaussian(centre, covariance), { chains: 4, draws: 2500, warmup: 400, seed: 21 });
    for (let i = 0; i < n; i++) {
      const values = along(draws, n, (q) => q[i]!);
      expect(Math.abs(departure(values, centre[i]!))).toBeLessThan(FAR);
      expect(rankNormalisedRHat(values)).toBeLessThan(1.01);
      for (let j = 0; j <= i; j++) {
        const products = along(draws, n, (q) => (q[i]! - centre[i]!) * (q[j]! - centre[j]!));
        expect(Math.abs(departure(products, covariance[i * n + j]!))).toBeLessThan(FAR);
      }
    }
    expect(divergences(draws)).toBe(0);
  });

  it('a skewed density, ln of a Gamma(2) variable: mean 1 - Euler constant, variance pi^2/6 - 1 (digamma and trigamma of 2)', () => {
    const density = densityOf(1, ([x]) => [2 * x! - Math.exp(x!), [2 - Math.exp(x!)]]);
    const mean = 0.42278433509846713;
    const variance = Math.PI ** 2 / 6 - 1;
    // Long steps with many refusals, and short ones: the distribution must not depend on them.
    for (const targetAcceptance of [0.35, 0.6, 0.95]) {
      const draws = run(density, { chains: 4, draws: 6000, warmup: 200, seed: 22, targetAcceptance });
      const values = along(draws, 1, (q) => q[0]!);
      expect(Math.abs(departure(values, mean))).toBeLessThan(FAR);
      const squares = values.map((chain) => chain.map((x) => (x - mean) ** 2));
      expect(Math.abs(departure(squares, variance))).toBeLessThan(FAR);
      // P(Gamma(2) < 1) = 1 - 2/e.
      const below = values.map((chain) => chain.map((x) => (x < 0 ? 1 : 0)));
      expect(Math.abs(departure(below, 1 - 2 / Math.E))).toBeLessThan(FAR);
    }
  });

  it('ten such variables, coarse steps: mean of ln density 10 (2 digamma(2) - 2), which any wrong weight shifts', () => {
    const size = 10;
    const density = densityOf(size, (q) => [
      q.reduce((sum, x) => sum + 2 * x - Math.exp(x), 0),
      q.map((x) => 2 - Math.exp(x)),
    ]);
    const draws = run(density, { chains: 4, draws: 10000, warmup: 200, seed: 22, targetAcceptance: 0.6 });
    const logDensities = draws.map((chain) => chain.logDensities);
    expect(Math.abs(departure(logDensities, size * (2 * 0.42278433509846713 - 2)))).toBeLessThan(FAR);
  });

  it('a banana, x ~ N(0, 2^2) and y ~ N(x^2/2, 1): moments 0, 2, 4, 9, 0 and E x^2 y = 24', () => {
    const density = densityOf(2, (q) => {
      const [x, y] = [q[0]!, q[1]!];
      const off = y - (x * x) / 2;
      return [(-x * x) / 8 - (off * off) / 2, [-x / 4 + off * x, -off]];
    });
    // Far out on the arms the ridge is 6 times stiffer than at the bend: longer steps diverge there, and are reported.
    const hasty = run(density, { chains: 4, draws: 1000, warmup: 500, seed: 23, targetAcceptance: 0.7 });
    expect(divergences(hasty)).toBeGreaterThan(10);
    const draws = run(density, { chains: 4, draws: 5000, warmup: 500, seed: 23, targetAcceptance: 0.99 });
    const checks: readonly (readonly [(q: Float64Array) => number, number])[] = [
      [(q) => q[0]!, 0],
      [(q) => q[1]!, 2],
      [(q) => q[0]! ** 2, 4],
      [(q) => (q[1]! - 2) ** 2, 9],
      [(q) => q[0]! * (q[1]! - 2), 0],
      [(q) => q[0]! ** 2 * q[1]!, 24],
    ];
    for (const [of, truth] of checks)
      expect(Math.abs(departure(along(draws, 2, of), truth))).toBeLessThan(FAR);
  });

  it('bounded variables by a change of variable: Beta(2, 5) on (0, 1), mean 2/7, variance 10/392, P(x < 0.1) = 0.114265', () => {
    const density = densityOf(1, ([u]) => {
      const x = 1 / (1 + Math.exp(-u!));
      // The Jacobian x(1 - x) adds one to either power.
      return [2 * Math.log(x) + 5 * Math.log1p(-x), [2 * (1 - x) - 5 * x]];
    });
    const draws = run(density, { chains: 4, draws: 5000, warmup: 300, seed: 24 });
    const values = along(draws, 1, ([u]) => 1 / (1 + Math.exp(-u!)));
    expect(Math.abs(departure(values, 2 / 7))).toBeLessThan(FAR);
    const squares = values.map((chain) => chain.map((x) => (x - 2 / 7) ** 2));
    expect(Math.abs(departure(squares, 10 / 392))).toBeLessThan(FAR);
    // 1 - sum of the binomial terms: P(Beta(2, 5) < x) = 1 - (1 - x)^6 - 6 x (1 - x)^5.
    const below = values.map((chain) => chain.map((x) => (x < 0.1 ? 1 : 0)));
    expect(Math.abs(departure(below, 1 - 0.9 ** 6 - 0.6 * 0.9 ** 5))).toBeLessThan(FAR);
  });

  it('a hard wall: the half normal x > 0, ln density -Infinity or NaN beyond, mean sqrt(2/pi), variance 1 - 2/pi', () => {
    for (const outside of [-Infinity, NaN]) {
      const density = densityOf(1, ([x]) => (x! > 0 ? [-0.5 * x! * x!, [-x!]] : [outside, [NaN]]));
      const draws = run(density, { chains: 4, draws: 5000, warmup: 300, seed: 25, start: () => [1] });
      const values = along(draws, 1, ([x]) => x!);
      expect(values.every((chain) => chain.every((x) => x > 0))).toBe(true);
      expect(Math.abs(departure(values, Math.sqrt(2 / Math.PI)))).toBeLessThan(FAR);
      expect(
        Math.abs(
          departure(
            along(draws, 1, ([x]) => x! * x!),
            1,
          ),
        ),
      ).toBeLessThan(FAR);
      // Every trajectory that meets the wall is reported.
      expect(divergences(draws)).toBeGreaterThan(500);
    }
  });
});

/** Neal 2003 (Annals of Statistics 31, 705): v ~ N(0, 3^2), nine x ~ N(0, e^v). */
const FUNNEL_SIZE = 10;

function centredFunnel(): SmoothDensity {
  return densityOf(FUNNEL_SIZE, (q) => {
    const v = q[0]!;
    const slope = Float64Array.from(q, (x) => -x * Math.exp(-v));
    const squares = q.reduce((sum, x, j) => (j === 0 ? 0 : sum + x * x), 0);
    slope[0] = -v / 9 - 4.5 + 0.5 * squares * Math.exp(-v);
    return [(-v * v) / 18 - 4.5 * v - 0.5 * squares * Math.exp(-v), slope];
  });
}

describe('NutsChain says so when it does not', () => {
  it("Neal's funnel as it stands: too narrow for any one step; divergences, energies and R-hat say so", () => {
    const draws = run(centredFunnel(), { chains: 4, draws: 1000, warmup: 500, seed: 26 });
    const v = along(draws, FUNNEL_SIZE, (q) => q[0]!);
    expect(divergences(draws)).toBeGreaterThan(10);
    expect(Math.min(...draws.map((chain) => ebfmi(chain.energies)))).toBeLessThan(0.3);
    expect(rankNormalisedRHat(v) > 1.01 || bulkEss(v) < 400).toBe(true);
  });

  it('the same funnel written with x / e^(v/2): mean and spread of v right, nothing to complain of', () => {
    const density = densityOf(FUNNEL_SIZE, (q) => {
      const slope = Float64Array.from(q, (x, j) => (j === 0 ? -x / 9 : -x));
      return [q.reduce((sum, x, j) => sum + 0.5 * x * slope[j]!, 0), slope];
    });
    const draws = run(density, { chains: 4, draws: 1000, warmup: 500, seed: 27 });
    const v = along(draws, FUNNEL_SIZE, (q) => q[0]!);
    expect(Math.abs(departure(v, 0))).toBeLessThan(FAR);
    expect(
      Math.abs(
        departure(
          along(draws, FUNNEL_SIZE, (q) => q[0]! ** 2),
          9,
        ),
      ),
    ).toBeLessThan(FAR);
    expect(divergences(draws)).toBe(0);
    expect(Math.min(...draws.map((chain) => ebfmi(chain.energies)))).toBeGreaterThan(0.7);
    expect(rankNormalisedRHat(v)).toBeLessThan(1.01);
    expect(Math.min(bulkEss(v), tailEss(v))).toBeGreaterThan(400);
  });

  it('two modes 20 standard deviations apart, chains started in either: R-hat far from 1', () => {
    const density = densityOf(1, ([x]) => {
      const centre = x! > 0 ? 10 : -10;
      return [-0.5 * (x! - centre) ** 2, [centre - x!]];
    });
    const start = (chain: number): number[] => [chain % 2 === 0 ? 10 : -10];
    const draws = run(density, { chains: 4, draws: 500, warmup: 200, seed: 28, start });
    expect(rankNormalisedRHat(along(draws, 1, ([x]) => x!))).toBeGreaterThan(1.5);
  });

  it('a poisoned gradient: the energy is not conserved, the acceptance or the step collapses', () => {
    const honest = gaussian(new Float64Array(3), identity(3));
    const poisoned: SmoothDensity = {
      size: 3,
      evaluate(position, gradient) {
        const value = honest.evaluate(position, gradient);
        gradient[1]! *= -1;
        return value;
      },
    };
    const sampler = (density: SmoothDensity): NutsChain =>
      new NutsChain(
        density,
        { start: Float64Array.of(0.1, 0.2, 0.3), covariance: identity(3), warmup: 200 },
        RandomStream.fromSeed(29),
      );
    const good = sampler(honest);
    const bad = sampler(poisoned);
    good.warmUp();
    bad.warmUp();
    expect(good.stepSize).toBeGreaterThan(0.5);
    expect(bad.stepSize).toBeLessThan(0.5 * good.stepSize);
    expect(bad.gradientEvaluations).toBeGreaterThan(2 * good.gradientEvaluations);
  });
});
