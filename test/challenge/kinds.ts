/** Simulated data sets with known truth, for measuring what the solver misses. All invented; seeds are fixed by the caller. */
import { RandomStream } from '../../src/numerics/random.js';
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

export interface Kind {
  readonly name: string;
  readonly companions: number;
  readonly sets: number;
  make(random: RandomStream): SimulatedSet;
}

const START = 2459000;

/** Nights of one site: about seven months a year, observed near culmination (which drifts through the season). */
function siteTimes(random: RandomStream, count: number, spanDays: number): Float64Array {
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

function simulate(random: RandomStream, recipe: Recipe): SimulatedSet {
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

function logUniform(random: RandomStream, low: number, high: number): number {
  return Math.exp(random.uniformBetween(Math.log(low), Math.log(high)));
}

function orbit(
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
function sampledStrength(companion: OrbitElements, times: Float64Array, sigma: number): number {
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

const count = (random: RandomStream, low: number, high: number): number =>
  low + random.integerBelow(high - low + 1);

/** Two decades of period apart at most; successive periods at least 1.6 apart. */
function spacedPeriods(random: RandomStream, n: number, low: number, high: number): number[] {
  for (;;) {
    const periods = Array.from({ length: n }, () => logUniform(random, low, high)).sort((a, b) => a - b);
    if (periods.every((p, i) => i === 0 || p / periods[i - 1]! > 1.6)) return periods;
  }
}

export const KINDS: readonly Kind[] = [
  {
    name: 'one companion',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(400, 2000);
      const sigmaMps = random.uniformBetween(1, 5);
      const k = sigmaMps * random.uniformBetween(3, 15);
      const companion = orbit(
        random,
        logUniform(random, 3, 0.5 * spanDays),
        random.uniformBetween(0, 0.6),
        k,
      );
      return simulate(random, { count: count(random, 35, 80), spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    // An orbit whose swing through periastron fell between the observations cannot be found by anybody: the strength as
    // sampled is at least 16 sigma.
    name: 'very eccentric',
    companions: 1,
    sets: 20,
    make(random) {
      for (;;) {
        const spanDays = random.uniformBetween(500, 2000);
        const sigmaMps = random.uniformBetween(1, 5);
        const times = siteTimes(random, count(random, 45, 90), spanDays);
        const k = sigmaMps * random.uniformBetween(10, 40);
        const companion = orbit(
          random,
          logUniform(random, 15, 0.6 * spanDays),
          random.uniformBetween(0.6, 0.93),
          k,
        );
        if (sampledStrength(companion, times, sigmaMps) < 16) continue;
        return simulate(random, { count: times.length, times, spanDays, companions: [companion], sigmaMps });
      }
    },
  },
  {
    name: 'three instruments',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(600, 2500);
      const sigmaMps = random.uniformBetween(1, 3);
      const k = sigmaMps * random.uniformBetween(5, 20);
      const companion = orbit(
        random,
        logUniform(random, 3, 0.4 * spanDays),
        random.uniformBetween(0, 0.5),
        k,
      );
      return simulate(random, {
        count: count(random, 60, 110),
        spanDays,
        companions: [companion],
        sigmaMps,
        instruments: 3,
      });
    },
  },
  {
    name: 'two companions',
    companions: 2,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(800, 2500);
      const sigmaMps = random.uniformBetween(1, 3);
      const companions = spacedPeriods(random, 2, 3, 0.4 * spanDays).map((p) =>
        orbit(random, p, random.uniformBetween(0, 0.4), sigmaMps * random.uniformBetween(4, 15)),
      );
      return simulate(random, { count: count(random, 70, 120), spanDays, companions, sigmaMps });
    },
  },
  {
    name: 'three companions and drift',
    companions: 3,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(1000, 3000);
      const sigmaMps = random.uniformBetween(1, 2.5);
      const companions = spacedPeriods(random, 3, 3, 0.3 * spanDays).map((p) =>
        orbit(random, p, random.uniformBetween(0, 0.3), sigmaMps * random.uniformBetween(4, 12)),
      );
      const slopeMpsPerDay =
        (sigmaMps * random.uniformBetween(3, 12) * (random.uniform() < 0.5 ? -1 : 1)) / spanDays;
      return simulate(random, {
        count: count(random, 120, 170),
        spanDays,
        companions,
        sigmaMps,
        slopeMpsPerDay,
      });
    },
  },
  {
    name: 'period 0.55-0.95 of the span',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(800, 2500);
      const sigmaMps = random.uniformBetween(1, 4);
      const k = sigmaMps * random.uniformBetween(5, 20);
      const companion = orbit(
        random,
        spanDays * random.uniformBetween(0.55, 0.95),
        random.uniformBetween(0, 0.5),
        k,
      );
      return simulate(random, { count: count(random, 40, 80), spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    name: 'period near one day, one site',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(200, 900);
      const sigmaMps = random.uniformBetween(1, 3);
      const offset = random.uniformBetween(0.01, 0.12) * (random.uniform() < 0.5 ? -1 : 1);
      const companion = orbit(
        random,
        1 + offset,
        random.uniformBetween(0, 0.1),
        sigmaMps * random.uniformBetween(3, 12),
      );
      return simulate(random, { count: count(random, 45, 90), spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    // sigma_K = sigma sqrt(2/n) of an evenly sampled circular orbit.
    name: 'faint (K = 7 sigma_K)',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(400, 1200);
      const n = count(random, 60, 110);
      const sigmaMps = random.uniformBetween(1, 3);
      const companion = orbit(
        random,
        logUniform(random, 3, 0.3 * spanDays),
        random.uniformBetween(0, 0.15),
        7 * sigmaMps * Math.sqrt(2 / n),
      );
      return simulate(random, { count: n, spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    name: 'nothing but noise',
    companions: 0,
    sets: 200,
    make(random) {
      const spanDays = random.uniformBetween(300, 2500);
      const instruments = 1 + random.integerBelow(3);
      const sigmaMps = random.uniformBetween(1, 5);
      return simulate(random, {
        count: count(random, 30, 110),
        spanDays,
        companions: [],
        sigmaMps,
        instruments,
      });
    },
  },
];
