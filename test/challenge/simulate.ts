/** One simulated data set: nights of a site, orbits, instruments and noise. */
import type { RandomStream } from '../../src/numerics/random.js';
import type { OrbitElements } from '../../src/orbit/elements.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import type { VelocitySet } from '../../src/observations/types.js';

export interface SimulatedSet {
  readonly velocities: VelocitySet;
  readonly truth: readonly OrbitElements[];
  readonly slopeMpsPerDay: number;
  readonly curvatureMpsPerDay2: number;
  readonly epochBjdTdb: number;
}

const START = 2459000;

/** Nights of one site: about seven months a year, observed near culmination (which drifts through the season). */
export function siteTimes(random: RandomStream, count: number, spanDays: number): Float64Array {
  const times = new Float64Array(count);
  const used = new Set<number>();
  for (let i = 0; i < count;) {
    const night = Math.floor(random.uniform() * spanDays);
    const season = (night % 365.25) / 365.25;
    if ((spanDays > 300 && season > 0.6) || used.has(night)) continue;
    used.add(night);
    times[i++] = START + night + 0.5 + 0.15 * (0.3 - season) + 0.06 * random.normal();
  }
  return times.sort();
}

interface Recipe {
  readonly count: number;
  readonly spanDays: number;
  readonly companions: readonly OrbitElements[];
  readonly sigmaMps: number;
  readonly instruments?: number;
  readonly slopeMpsPerDay?: number;
  readonly curvatureMpsPerDay2?: number;
  readonly times?: Float64Array;
}

export function simulate(random: RandomStream, recipe: Recipe): SimulatedSet {
  const times = recipe.times ?? siteTimes(random, recipe.count, recipe.spanDays);
  const count = times.length;
  const instruments = recipe.instruments ?? 1;
  const zeroPoints = Array.from({ length: instruments }, (_, i) =>
    i === 0 ? 12 : random.uniformBetween(-600, 600),
  );
  const jitters = Array.from({ length: instruments }, () =>
    instruments === 1 ? 0 : random.uniformBetween(0.5, 2) * recipe.sigmaMps,
  );
  const epochBjdTdb = START + recipe.spanDays / 2;
  const slopeMpsPerDay = recipe.slopeMpsPerDay ?? 0;
  const curvatureMpsPerDay2 = recipe.curvatureMpsPerDay2 ?? 0;
  const model = evaluateVelocity(
    {
      companions: recipe.companions,
      letters: recipe.companions.map((_, i) => String.fromCharCode(98 + i)),
      zeroPointsMps: new Float64Array(0),
      jittersMps: new Float64Array(0),
      epochBjdTdb,
      slopeMpsPerDay,
      curvatureMpsPerDay2,
    },
    times,
  );
  const instrumentOf = new Uint16Array(count);
  const sigmasMps = new Float64Array(count);
  const velocitiesMps = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const instrument = random.integerBelow(instruments);
    instrumentOf[i] = instrument;
    sigmasMps[i] = recipe.sigmaMps * Math.exp(0.2 * random.normal());
    const noise = Math.hypot(sigmasMps[i]!, jitters[instrument]!) * random.normal();
    velocitiesMps[i] = model[i]! + zeroPoints[instrument]! + noise;
  }
  return {
    velocities: {
      count,
      timesBjdTdb: times,
      velocitiesMps,
      sigmasMps,
      instrumentOf,
      instruments: Array.from({ length: instruments }, (_, i) => `spectrograph ${i + 1}`),
      tableOf: new Uint16Array(count),
      lines: Uint32Array.from({ length: count }, (_, i) => i + 2),
      tables: [{ path: 'simulated.csv', sha256: '', rows: count, used: count }],
      timeScale: 'BJD_TDB',
      notices: [],
    },
    truth: recipe.companions,
    slopeMpsPerDay,
    curvatureMpsPerDay2,
    epochBjdTdb,
  };
}

export function logUniform(random: RandomStream, low: number, high: number): number {
  return Math.exp(random.uniformBetween(Math.log(low), Math.log(high)));
}

export function orbit(
  random: RandomStream,
  periodDays: number,
  eccentricity: number,
  semiAmplitudeMps: number,
): OrbitElements {
  return {
    periodDays,
    eccentricity,
    argPeriastronStarRad: random.uniformBetween(0, 2 * Math.PI),
    timePeriastronBjdTdb: START + random.uniformBetween(0, periodDays),
    semiAmplitudeMps,
  };
}

/** Signal-to-noise of an orbit as sampled: root of the weighted sum of squares about its mean. */
export function sampledStrength(companion: OrbitElements, times: Float64Array, sigma: number): number {
  const v = evaluateVelocity(
    {
      companions: [companion], letters: ['b'], zeroPointsMps: new Float64Array(0), jittersMps: new Float64Array(0),
      epochBjdTdb: START, slopeMpsPerDay: 0, curvatureMpsPerDay2: 0,
    }, // prettier-ignore
    times,
  );
  const mean = v.reduce((sum, x) => sum + x, 0) / v.length;
  return Math.sqrt(v.reduce((sum, x) => sum + (x - mean) ** 2, 0)) / sigma;
}

export const count = (random: RandomStream, low: number, high: number): number =>
  low + random.integerBelow(high - low + 1);

/** Two decades of period apart at most; successive periods at least 1.6 apart. */
export function spacedPeriods(random: RandomStream, n: number, low: number, high: number): number[] {
  for (;;) {
    const periods = Array.from({ length: n }, () => logUniform(random, low, high)).sort((a, b) => a - b);
    if (periods.every((p, i) => i === 0 || p / periods[i - 1]! > 1.6)) return periods;
  }
}
