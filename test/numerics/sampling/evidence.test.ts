/** Marginal likelihoods against integrals known otherwise, and stated errors against the scatter of repeats. */
import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import {
  bridgeEvidence,
  importanceEvidence,
  type BridgeEvidence,
  type SmoothDensity,
} from '../../../src/numerics/sampling/index.js';
import { expectWithin } from '../../support/expect-within.js';
import { mean, rootMeanSquare, standardDeviation } from '../../../src/numerics/summary.js';
import { densityOf, identity, pooledPositions, readReference, run } from './densities.js';

const reference = readReference('evidence.json') as {
  eggBox: number;
  shells: number;
  line: { t: number[]; y: number[]; sigma: number; priorSigma: number; logEvidence: number };
};

interface Estimate {
  readonly logEvidence: number;
  readonly standardError: number;
}

/** Right within four stated errors, and the stated error small enough to mean something. */
function expectEvidence(got: Estimate, truth: number, largestError: number): void {
  expect(got.standardError).toBeLessThan(largestError);
  expectWithin(got.logEvidence, truth, {
    abs: 4 * got.standardError,
    unit: 'ln Z',
    why: 'four stated standard errors',
  });
}

function bridged(
  density: SmoothDensity,
  seed: number,
  options: { start?: number[]; covariance?: Float64Array; draws?: number } = {},
): BridgeEvidence {
  const draws = run(density, {
    chains: 4,
    draws: options.draws ?? 1000,
    warmup: 300,
    seed,
    start: () => options.start ?? [...new Float64Array(density.size)],
    ...(options.covariance === undefined ? {} : { covariance: options.covariance }),
  });
  return bridgeEvidence(density, pooledPositions(draws), { random: RandomStream.fromSeed(seed, 9) });
}

/** Unit-normalised, sigma 0.1, in a uniform cube of side 2: ln Z = -size·ln 2 (the truncation, e^-50, is ignored). */
function narrowNormal(size: number): SmoothDensity {
  const constant = -size * (Math.log(2) + 0.5 * Math.log(2 * Math.PI) + Math.log(0.1));
  return densityOf(size, (q) => [q.reduce((sum, x) => sum - 50 * x * x, constant), q.map((x) => -100 * x)]);
}

/** Product of logistic densities, normalised: ln Z = 0. Tails heavier than normal. */
function logistic(size: number): SmoothDensity {
  return densityOf(size, (q) => [
    q.reduce((sum, x) => sum - Math.abs(x) - 2 * Math.log1p(Math.exp(-Math.abs(x))), 0),
    q.map((x) => -Math.tanh(x / 2)),
  ]);
}

/** The straight line of the reference with its priors, ln (likelihood · prior) with all constants. */
function line(): SmoothDensity {
  const { t, y, sigma, priorSigma } = reference.line;
  const perDatum = -Math.log(sigma) - 0.5 * Math.log(2 * Math.PI);
  const perPrior = -Math.log(priorSigma) - 0.5 * Math.log(2 * Math.PI);
  return densityOf(2, (q) => {
    const [a, b] = [q[0]!, q[1]!];
    let value = t.length * perDatum + 2 * perPrior - (a * a + b * b) / (2 * priorSigma ** 2);
    let slopeA = -a / priorSigma ** 2;
    let slopeB = -b / priorSigma ** 2;
    t.forEach((time, k) => {
      const residual = y[k]! - a - b * time;
      value -= residual ** 2 / (2 * sigma ** 2);
      slopeA += residual / sigma ** 2;
      slopeB += (residual * time) / sigma ** 2;
    });
    return [value, [slopeA, slopeB]];
  });
}

/** One ring of the shells problem: radius 2, width 0.1 around the origin, prior 1/144 per unit area. */
const ring = densityOf(2, (q) => {
  const [x, y] = [q[0]!, q[1]!];
  const r = Math.hypot(x, y);
  const off = (r - 2) / 0.1;
  const pull = -off / 0.1 / r;
  const constant = -Math.log(144) - 0.5 * Math.log(2 * Math.PI) - Math.log(0.1);
  return [constant - 0.5 * off * off, [pull * x, pull * y]];
});

const SIDE = 10 * Math.PI;

/** The egg box within its square and nearer than half way to the neighbours of the mode at (2 pi k, 2 pi l). */
function eggBoxMode(centreX: number, centreY: number, isWalled: boolean): SmoothDensity {
  return densityOf(2, (q) => {
    const [x, y] = [q[0]!, q[1]!];
    const isHere = Math.abs(x - centreX) + Math.abs(y - centreY) < 2 * Math.PI;
    const isInside = !isWalled || (x >= 0 && x <= SIDE && y >= 0 && y <= SIDE);
    if (!isHere || !isInside) return [-Infinity, [0, 0]];
    const base = 2 + Math.cos(x / 2) * Math.cos(y / 2);
    const steep = -2.5 * base ** 4;
    return [
      base ** 5 - 2 * Math.log(SIDE),
      [steep * Math.sin(x / 2) * Math.cos(y / 2), steep * Math.cos(x / 2) * Math.sin(y / 2)],
    ];
  });
}

describe('bridgeEvidence', () => {
  it('normal in a cube, 2, 5 and 13 coordinates: -size ln 2 (Skilling 2006, Bayesian Analysis 1, 833)', () => {
    for (const size of [2, 5, 13]) {
      const got = bridged(narrowNormal(size), 40, { covariance: identity(size, 0.01) });
      expectEvidence(got, -size * Math.LN2, 0.02);
      expect(got.effectiveDraws).toBeGreaterThan(400);
      expect(got.effectiveDraws).toBeLessThanOrEqual(2000);
    }
  });

  it('straight line with normal priors (closed form by scipy, reference/sampling/evidence.json)', () => {
    expectEvidence(bridged(line(), 41, { start: [1, 1] }), reference.line.logEvidence, 0.01);
  });

  it('a change of variable: Beta(2, 5) unnormalised integrates to B(2, 5) = 1/30', () => {
    const density = densityOf(1, ([u]) => {
      const x = 1 / (1 + Math.exp(-u!));
      return [2 * Math.log(x) + 5 * Math.log1p(-x), [2 * (1 - x) - 5 * x]];
    });
    expectEvidence(bridged(density, 42), -Math.log(30), 0.01);
  });

  it('shells: two rings that do not meet, one bridged, counted twice (reference/sampling/evidence.json)', () => {
    const one = bridged(ring, 43, { start: [2, 0], draws: 6000 });
    expectEvidence({ ...one, logEvidence: one.logEvidence + Math.LN2 }, reference.shells, 0.03);
  });

  it('egg box: one whole mode bridged, counted 12.5 times - 8 inside, 8 halves, 2 quarters (reference/sampling/evidence.json)', () => {
    const mode = eggBoxMode(2 * Math.PI, 2 * Math.PI, false);
    const start = [2 * Math.PI, 2 * Math.PI];
    const one = bridged(mode, 44, { start, covariance: identity(2, 0.01) });
    expectEvidence({ ...one, logEvidence: one.logEvidence + Math.log(12.5) }, reference.eggBox, 0.02);
  });

  it('states the scatter of its repeats: 40 runs of 2 and 7 coordinates, normal and heavier tailed', () => {
    for (const [density, truth] of [
      [narrowNormal(2), -2 * Math.LN2],
      [narrowNormal(7), -7 * Math.LN2],
      [logistic(7), 0],
    ] as const) {
      const runs = Array.from({ length: 40 }, (_, k) => bridged(density, 100 + k, { draws: 400 }));
      expectScatter(runs, truth);
    }
  });

  it('counts the correlation of the draws: 40 autoregressive series (0.95), proposals so few that the draws matter most', () => {
    const size = 3;
    const runs = Array.from({ length: 40 }, (_, k) => {
      const random = RandomStream.fromSeed(70, k);
      const place = new Float64Array(size);
      const draws = new Float64Array(3000 * size);
      for (let start = 0; start < draws.length; start += size) {
        for (let j = 0; j < size; j++) {
          place[j] = 0.95 * place[j]! + Math.sqrt(1 - 0.95 ** 2) * 0.1 * random.normal();
          draws[start + j] = place[j]!;
        }
      }
      return bridgeEvidence(narrowNormal(size), draws, { random, proposals: 30 });
    });
    expectScatter(runs, -size * Math.LN2);
  });

  it('misses what its draws have missed: of two far modes, one sampled gives half the integral', () => {
    const density = densityOf(1, ([x]) => {
      const centre = x! > 0 ? 20 : -20;
      return [-0.5 * (x! - centre) ** 2 - 0.5 * Math.log(2 * Math.PI), [centre - x!]];
    });
    // The whole is 2; the docstring says so, and this is why each mode must be found by other means first.
    expectEvidence(bridged(density, 45, { start: [20] }), 0, 0.01);
  });

  it('refuses draws that do not fit, are too few, do not vary or lie outside the domain', () => {
    const density = narrowNormal(2);
    const random = RandomStream.fromSeed(46);
    const scattered = Float64Array.from({ length: 200 }, () => 0.1 * random.normal());
    expect(() => bridgeEvidence(density, new Float64Array(201), { random })).toThrow(/at least 40 draws/);
    expect(() => bridgeEvidence(density, new Float64Array(78), { random })).toThrow(/at least 40 draws/);
    expect(() => bridgeEvidence(density, new Float64Array(200), { random })).toThrow(/do not vary/);
    expect(() => bridgeEvidence(density, scattered, { random, proposals: 1 })).toThrow(/1 proposals/);
    const walled = densityOf(2, (q) => [q[0]! > 0 ? -q[0]! : -Infinity, [-1, 0]]);
    expect(() => bridgeEvidence(walled, scattered, { random })).toThrow(/outside the domain/);
  });
});

describe('importanceEvidence', () => {
  const random = RandomStream.fromSeed(50);

  it('normal in a cube, 1, 5 and 13 coordinates, and the straight line', () => {
    for (const size of [1, 5, 13]) {
      const options = { random, draws: 8000 };
      const got = importanceEvidence(
        narrowNormal(size),
        new Float64Array(size),
        identity(size, 0.01),
        options,
      );
      expectEvidence(got, -size * Math.LN2, 0.02);
      expect(got.effectiveSampleSize).toBeGreaterThan(0.5 * 8000);
      expect(got.effectiveSampleSize).toBeLessThan(8000);
    }
    // Mean and covariance of the line's coefficients: sigma^2 times the inverse of the sums 6, 15, 55.
    const covariance = Float64Array.of(55, -15, -15, 6).map((value) => (0.04 * value) / 105);
    const got = importanceEvidence(line(), Float64Array.of(1.095, 0.962), covariance, {
      random,
      draws: 20000,
    });
    expectEvidence(got, reference.line.logEvidence, 0.005);
  });

  it('egg box: the evidences of its 18 modes, whole, halved and quartered by the walls, added up', () => {
    let sum = 0;
    let variance = 0;
    let modes = 0;
    for (let k = 0; k <= 5; k++) {
      for (let l = k % 2; l <= 5; l += 2) {
        const centre = Float64Array.of(2 * Math.PI * k, 2 * Math.PI * l);
        const options = { random, draws: 2000 };
        const mode = eggBoxMode(centre[0]!, centre[1]!, true);
        const got = importanceEvidence(mode, centre, identity(2, 0.01), options);
        const part = Math.exp(got.logEvidence - 235);
        sum += part;
        variance += (part * got.standardError) ** 2;
        modes++;
      }
    }
    expect(modes).toBe(18);
    const total = { logEvidence: 235 + Math.log(sum), standardError: Math.sqrt(variance) / sum };
    expectEvidence(total, reference.eggBox, 0.01);
  });

  it('shells: a wide proposal covers one ring, counted twice', () => {
    const one = importanceEvidence(ring, new Float64Array(2), identity(2, 3), { random, draws: 40000 });
    expectEvidence({ ...one, logEvidence: one.logEvidence + Math.LN2 }, reference.shells, 0.02);
    // Most draws fall beside the thin ring, and the effective number says so.
    expect(one.effectiveSampleSize).toBeLessThan(0.4 * 40000);
  });

  it('states the scatter of its repeats: 60 runs with a centre and a covariance that are a little off', () => {
    const runs = Array.from({ length: 60 }, (_, k) =>
      importanceEvidence(logistic(5), new Float64Array(5).fill(0.3), identity(5, 2.5), {
        random: RandomStream.fromSeed(60, k),
        draws: 1500,
      }),
    );
    expectScatter(runs, 0);
  });

  it('gives -Infinity where nothing was found, and refuses what makes no sense', () => {
    const empty = densityOf(1, () => [NaN, [0]]);
    const nothing = importanceEvidence(empty, new Float64Array(1), identity(1), { random, draws: 10 });
    expect(nothing).toEqual({ logEvidence: -Infinity, standardError: NaN, effectiveSampleSize: 0 });
    const call =
      (changes: object, covariance = identity(2)): (() => unknown) =>
      () =>
        importanceEvidence(narrowNormal(2), new Float64Array(2), covariance, {
          random,
          draws: 10,
          ...changes,
        });
    expect(call({ draws: 1 })).toThrow(/1 draws were asked for; allowed is a whole number >= 2/);
    expect(call({ degreesOfFreedom: 2.5 })).toThrow(/2.5 degrees of freedom/);
    expect(call({}, identity(2, -1))).toThrow(/2 x 2 and positive definite/);
    expect(() =>
      importanceEvidence(narrowNormal(2), new Float64Array(3), identity(3), { random, draws: 10 }),
    ).toThrow(/3 numbers does not fit 2 coordinates/);
  });
});

/** Scatter over stated error, within the noise of that ratio (11 % for 40 runs: three times that), and no bias. */
function expectScatter(runs: readonly Estimate[], truth: number): void {
  const values = runs.map((run) => run.logEvidence);
  const ratio = standardDeviation(values) / rootMeanSquare(runs.map((run) => run.standardError));
  expect(ratio).toBeGreaterThan(0.67);
  expect(ratio).toBeLessThan(1.33);
  const error = standardDeviation(values) / Math.sqrt(runs.length);
  expect(Math.abs(mean(values) - truth)).toBeLessThan(4 * error);
}
