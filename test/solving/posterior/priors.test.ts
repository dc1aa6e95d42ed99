import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { bulkEss } from '../../../src/numerics/sampling/diagnostics.js';
import { NutsChain } from '../../../src/numerics/sampling/nuts.js';
import type { VelocityData } from '../../../src/signals/velocity-term.js';
import {
  circularMap,
  eccentricMap,
  type CompanionMap,
} from '../../../src/solving/posterior/companion-map.js';
import type { PriorScales } from '../../../src/solving/posterior/priors.js';
import { windowedDensity } from '../../calibrate/windowed-density.js';
import { expectWithin } from '../../support/expect-within.js';
import { densityFor, SCALES } from './densities.js';

/** Without a star nothing limits the eccentricity, and the whole disc is allowed. */
const POINT_STAR: PriorScales = { ...SCALES, starRadiusAtOneDay: 0 };
const LOG_PERIODS = [Math.log(SCALES.shortestPeriodDays), Math.log(SCALES.longestPeriodDays)] as const;
const LOG_LARGEST = Math.log(SCALES.largestAmplitudeMps);

/** Sum of a function over the midpoints of `cells` equal cells, times their width. */
function midpoint(low: number, high: number, cells: number, of: (x: number) => number): number {
  const width = (high - low) / cells;
  let sum = 0;
  for (let cell = 0; cell < cells; cell++) sum += of(low + (cell + 0.5) * width);
  return sum * width;
}

/** Prior density in sampling coordinates. The longitude, on which it does not depend, stays at 0 and counts 2 pi. */
function densityOf(map: CompanionMap): (...free: number[]) => number {
  const position = new Float64Array(map.size);
  const coordinates = new Float64Array(5);
  const jacobian = new Float64Array(5 * map.size);
  const gradient = new Float64Array(map.size);
  return (...free) => {
    position.set([free[0]!, 0, ...free.slice(1)]);
    const value = map.toCoordinates(position, 0, coordinates, jacobian, gradient);
    return 2 * Math.PI * Math.exp(value - map.logNormalisation);
  };
}

/** Integral over ln P, the plane (by radius tan(angle), the density being the same all around) and ln K. */
function eccentricIntegral(scales: PriorScales, periods: number, radii: number): number {
  const density = densityOf(eccentricMap(scales));
  return midpoint(...LOG_PERIODS, periods, (logPeriod) =>
    midpoint(0, Math.PI / 2, radii, (angle) => {
      const s = Math.tan(angle);
      const area = (2 * Math.PI * s) / Math.cos(angle) ** 2;
      const [x, y] = [s * Math.cos(1), s * Math.sin(1)];
      return area * midpoint(LOG_LARGEST - 30, LOG_LARGEST, 300, (logK) => density(logPeriod, x, y, logK));
    }),
  );
}

describe('prior densities are normalised', () => {
  it('circular orbit', () => {
    const density = densityOf(circularMap(SCALES));
    const integral = midpoint(...LOG_PERIODS, 20, (logPeriod) =>
      midpoint(LOG_LARGEST - 30, LOG_LARGEST, 3000, (logK) => density(logPeriod, logK)),
    );
    expectWithin(integral, 1, {
      abs: 1e-5,
      unit: '1',
      why: 'midpoint rule, 3000 cells of ln K; measured 4e-7',
    });
  });

  it('eccentric orbit about a point', () => {
    expectWithin(eccentricIntegral(POINT_STAR, 4, 400), 1, {
      abs: 1e-3,
      unit: '1',
      why: 'midpoint rule, 300 cells of ln K; measured 5e-5',
    });
  });

  it('eccentric orbit about a star: only orbits that do not touch it share the whole', () => {
    expectWithin(eccentricIntegral(SCALES, 16, 400), 1, {
      abs: 2e-3,
      unit: '1',
      why: 'midpoint rule with a step in it',
    });
  });

  it('jitter: one of its two mirror images integrates to 1', () => {
    const density = densityFor({ data: weightless(), companions: [] });
    const { sigmasMps } = weightless();
    const logLikelihood = -sigmasMps.reduce(
      (sum, sigma) => sum + Math.log(sigma) + 0.5 * Math.log(2 * Math.PI),
      0,
    );
    const gradient = new Float64Array(2);
    const end = Math.asinh(SCALES.largestJitterMps / SCALES.jitterScaleMps);
    const integral = midpoint(0, end, 100, (u) =>
      Math.exp(density.evaluate(Float64Array.of(0, u), gradient) - logLikelihood),
    );
    // The zero point is uniform over 2 half-widths.
    expectWithin(integral * 2 * SCALES.zeroPointHalfWidthMps, 1, {
      abs: 1e-6,
      unit: '1',
      why: 'uniform in u; the likelihood of errors of 1e9 m/s is flat to 1e-12',
    });
  });
});

/** Velocities whose errors are so large that they say nothing. */
function weightless(): VelocityData {
  return {
    timesDays: Float64Array.of(-10, 0, 3, 10),
    velocitiesMps: new Float64Array(4),
    sigmasMps: new Float64Array(4).fill(1e9),
    instrumentOf: new Uint16Array(4),
    instrumentCount: 1,
  };
}

/** The zero point is fixed and the longitude held by a window: both are flat without end. */
const HELD = { north: { zeroPointMps: { kind: 'fixed', value: 0 }, jitterMps: null } } as const;

interface PriorDraw {
  readonly logPeriod: number;
  readonly eccentricity: number;
  readonly omega: number;
  readonly amplitudeMps: number;
  readonly jitterMps: number;
}

/**
 * Draws of the prior. For an eccentric orbit ln P and ln K lie under windows, off their bounds: their own distributions are
 * seen in the circular case, and that of (e, omega) does not depend on them other than by the limit of e.
 */
function drawPrior(circular: boolean, scales: PriorScales, count: number): PriorDraw[] {
  const density = densityFor({ data: weightless(), companions: [{ circular }], instruments: HELD, scales });
  const windows = [{ at: 1, centre: 0, width: 1 }];
  if (!circular)
    windows.push(
      { at: 0, centre: Math.log(60), width: 0.7 },
      { at: 4, centre: Math.log(10), width: 1 },
      { at: 5, centre: 0, width: 1.5 },
    );
  const windowed = windowedDensity(density, windows);
  const start = density.position({
    companions: [
      {
        periodDays: 80,
        eccentricity: circular ? 0 : 0.3,
        argPeriastronStarRad: 1,
        timePeriastronDays: 12,
        semiAmplitudeMps: 10,
      },
    ],
    zeroPointsMps: Float64Array.of(0),
    drift: [0, 0],
    jittersMps: Float64Array.of(3),
  });
  start[1] = 0;
  const covariance = new Float64Array(density.size ** 2);
  // Only the order of these widths matters: ln P, longitude, (x, y,) ln K, jitter.
  const widths = circular ? [2, 1, 3, 4] : [0.7, 1, 1, 1, 1, 1.5];
  widths.forEach((width, j) => (covariance[j * density.size + j] = width * width));
  const chain = new NutsChain(windowed, { start, covariance, warmup: 500 }, RandomStream.fromSeed(29));
  const { positions } = chain.draw(count);
  return Array.from({ length: count }, (_, d) => {
    const point = density.portable(positions.subarray(d * density.size, (d + 1) * density.size));
    const companion = point.companions[0]!;
    return {
      logPeriod: Math.log(companion.periodDays),
      eccentricity: companion.eccentricity,
      omega: companion.argPeriastronStarRad,
      amplitudeMps: companion.semiAmplitudeMps,
      jitterMps: point.jittersMps[0]!,
    };
  });
}

/** Shares of eight equal bins, each within 4 standard errors of 1/8 for the effective number of draws. */
function expectUniform(name: string, shares: readonly number[]): void {
  const bins = 8;
  const effective = bulkEss([Float64Array.from(shares)]);
  expect(effective, name).toBeGreaterThan(300);
  const counts = new Array<number>(bins).fill(0);
  for (const share of shares) counts[Math.floor(share * bins)]!++;
  const error = Math.sqrt(((1 / bins) * (1 - 1 / bins)) / effective);
  counts.forEach((count, bin) => {
    expectWithin(count / shares.length, 1 / bins, {
      abs: 4 * error,
      unit: `of ${name}, bin ${bin}`,
      why: `${effective.toFixed(0)} effective draws`,
    });
  });
}

const DRAWS = 12_000;
const logShare = (k: number): number =>
  Math.log1p(k / SCALES.amplitudeScaleMps) /
  Math.log1p(SCALES.largestAmplitudeMps / SCALES.amplitudeScaleMps);
const jitterShare = (s: number): number =>
  Math.asinh(s / SCALES.jitterScaleMps) / Math.asinh(SCALES.largestJitterMps / SCALES.jitterScaleMps);
const periodShare = (logPeriod: number): number =>
  (logPeriod - LOG_PERIODS[0]) / (LOG_PERIODS[1] - LOG_PERIODS[0]);

/** Each expectation is a cumulative distribution in closed form: a value's share is uniform if the value has that prior. */
describe('draws without data reproduce the stated priors', () => {
  it('circular: period log-uniform, amplitude 1/(K + k0), jitter 1/sqrt(s^2 + s0^2)', () => {
    const draws = drawPrior(true, SCALES, DRAWS);
    expectUniform('ln P', draws.map(({ logPeriod }) => periodShare(logPeriod))); // prettier-ignore
    expectUniform('K', draws.map(({ amplitudeMps }) => logShare(amplitudeMps))); // prettier-ignore
    expectUniform('jitter', draws.map(({ jitterMps }) => jitterShare(jitterMps))); // prettier-ignore
  });

  it('eccentric: eccentricity and argument uniform', () => {
    const draws = drawPrior(false, POINT_STAR, DRAWS);
    expectUniform('e', draws.map(({ eccentricity }) => eccentricity)); // prettier-ignore
    expectUniform('omega', draws.map(({ omega }) => omega / (2 * Math.PI))); // prettier-ignore
  });

  it('about a star, eccentricity is uniform up to the orbit that touches it', () => {
    const draws = drawPrior(false, { ...SCALES, starRadiusAtOneDay: 1.2 }, DRAWS);
    const limit = (logPeriod: number): number => 1 - 1.2 * Math.exp((-2 / 3) * logPeriod);
    expectUniform('e over its limit', draws.map((draw) => draw.eccentricity / limit(draw.logPeriod))); // prettier-ignore
  });
});
