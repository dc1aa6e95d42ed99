/** Invented solutions for tests of everything that shows one: no solver is involved, the numbers are made here. */
import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import type { OrbitElements } from '../../src/orbit/elements.js';
import type { VelocitySet } from '../../src/observations/types.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import type { VelocityModelPoint } from '../../src/signals/velocity-model.js';
import { DERIVED_KEYS } from '../../src/solving/types.js';
import type {
  CompanionRecord,
  Quantity,
  SearchStage,
  Solved,
  WindowFunction,
} from '../../src/solving/types.js';

export interface FixtureRequest {
  readonly seed: number;
  readonly target: string;
  readonly instruments: readonly {
    readonly name: string;
    readonly count: number;
    readonly sigmaMps: number;
    readonly jitterMps: number;
    readonly zeroPointMps: number;
  }[];
  readonly companions: readonly (OrbitElements & { readonly semiMajorAxisAu: number | null })[];
  readonly fromBjdTdb: number;
  readonly toBjdTdb: number;
  readonly slopeMpsPerDay?: number;
  readonly curvatureMpsPerDay2?: number;
  /** Length of the frequency grids of the periodograms. */
  readonly gridLength?: number;
}

/** A source of random numbers: the same seed gives the same numbers. */
export function randomSource(seed: number): { uniform(): number; gauss(): number } {
  const generator = xoroshiro128plus(seed * 7919 + 17);
  for (let i = 0; i < 20; i += 1) generator.next(); // first draws of neighbouring seeds are alike
  const uniform = (): number => uniformFloat64(generator);
  return {
    uniform,
    gauss: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}

const quantity = (value: number | null, unit: string, sigma = 0): Quantity =>
  value === null
    ? { value: null, sigma: null, lower: null, upper: null, unit, why: 'not known in this invented case' }
    : { value, sigma, lower: value - sigma, upper: value + sigma, unit };

/** Makes velocities of the wanted model at random times, and a solution that is exactly that model. */
export function makeSolved(request: FixtureRequest): Solved {
  const random = randomSource(request.seed);
  const epoch = Math.round((request.fromBjdTdb + request.toBjdTdb) / 2);
  const best: VelocityModelPoint = {
    companions: request.companions,
    letters: request.companions.map((_, index) => 'bcdefgh'[index]!),
    zeroPointsMps: Float64Array.from(request.instruments, (one) => one.zeroPointMps),
    jittersMps: Float64Array.from(request.instruments, (one) => one.jitterMps),
    epochBjdTdb: epoch,
    slopeMpsPerDay: request.slopeMpsPerDay ?? 0,
    curvatureMpsPerDay2: request.curvatureMpsPerDay2 ?? 0,
  };
  const span = request.toBjdTdb - request.fromBjdTdb;
  const rows = request.instruments
    .flatMap((one, instrument) => {
      // Instruments follow one another with some overlap, as they do at observatories.
      const share = 1.6 / request.instruments.length;
      const start = (instrument / request.instruments.length) * (1 - Math.min(1, share) / 2);
      return Array.from({ length: one.count }, () => {
        const night = request.fromBjdTdb + span * (start + Math.min(1 - start, share) * random.uniform());
        return {
          time: Math.floor(night) + 0.35 + 0.3 * random.uniform(),
          instrument,
          sigma: one.sigmaMps * (0.7 + 0.6 * random.uniform()),
        };
      });
    })
    .sort((one, other) => one.time - other.time);
  const times = Float64Array.from(rows, (row) => row.time);
  const model = evaluateVelocity(best, times);
  const residuals = Float64Array.from(
    rows,
    (row) => random.gauss() * Math.hypot(row.sigma, best.jittersMps[row.instrument]!),
  );
  const velocities: VelocitySet = {
    count: rows.length,
    timesBjdTdb: times,
    velocitiesMps: Float64Array.from(
      rows,
      (row, i) => model[i]! + residuals[i]! + best.zeroPointsMps[row.instrument]!,
    ),
    sigmasMps: Float64Array.from(rows, (row) => row.sigma),
    instrumentOf: Uint16Array.from(rows, (row) => row.instrument),
    instruments: request.instruments.map((one) => one.name),
    tableOf: new Uint16Array(rows.length),
    lines: Uint32Array.from(rows, (_, i) => i + 2),
    tables: [{ path: 'invented.csv', sha256: '0'.repeat(64), rows: rows.length, used: rows.length }],
    timeScale: 'BJD_TDB',
    notices: [],
  };
  const stages = request.companions.map((orbit, index) => makeStage(orbit, index, span, request, random));
  stages.push(makeStage(null, request.companions.length, span, request, random));
  return {
    record: makeRecord(request, velocities, best, residuals),
    velocities,
    best,
    residualsMps: residuals,
    stages,
    window: makeWindow(times, request.gridLength ?? 4000),
    posterior: null,
  };
}

function makeStage(
  orbit: OrbitElements | null,
  companionsFitted: number,
  span: number,
  request: FixtureRequest,
  random: { uniform(): number },
): SearchStage {
  const n = request.gridLength ?? 4000;
  const lowest = 1 / (1.5 * span);
  const frequencies = Float64Array.from({ length: n }, (_, i) => lowest + ((2 - lowest) * i) / (n - 1));
  const shape = (frequency: number, centre: number): number =>
    Math.exp(-(((frequency - centre) * Math.max(span, n / 16)) ** 2));
  const power = frequencies.map((frequency) => {
    const noise = 0.06 * random.uniform() ** 3;
    if (orbit === null) return noise;
    const centre = 1 / orbit.periodDays;
    return Math.min(
      1,
      noise +
        0.7 * shape(frequency, centre) +
        0.45 * shape(frequency, Math.abs(1.0027379 - centre)) +
        0.3 * shape(frequency, 1.0027379 + centre),
    );
  });
  const ranked = Array.from(power.keys()).sort((one, other) => power[other]! - power[one]!);
  const peaks: SearchStage['peaks'][number][] = [];
  for (const index of ranked) {
    const periodDays = 1 / frequencies[index]!;
    if (peaks.length === 5) break;
    if (peaks.some((peak) => Math.abs(1 / peak.periodDays - frequencies[index]!) < 0.01)) continue;
    peaks.push({
      periodDays,
      power: power[index]!,
      deltaLogLikelihood: 100 * power[index]!,
      falseAlarmProbability: power[index]! > 0.2 ? 1e-9 : 0.6,
      semiAmplitudeMps: orbit?.semiAmplitudeMps ?? 1,
      kind: peaks.length === 0 ? 'strongest' : 'independent',
    });
  }
  return {
    title:
      companionsFitted === 0 ? 'no companion fitted' : `${companionsFitted} fitted, looking for one more`,
    companionsFitted,
    frequenciesPerDay: frequencies,
    power,
    levels: [
      { falseAlarmProbability: 0.1, power: 0.14 },
      { falseAlarmProbability: 0.01, power: 0.17 },
      { falseAlarmProbability: 0.001, power: 0.2 },
    ],
    peaks,
    eccentricPeak:
      orbit !== null && orbit.eccentricity > 0.5
        ? {
            periodDays: orbit.periodDays,
            eccentricity: orbit.eccentricity,
            deltaLogLikelihood: 80,
            falseAlarmProbability: 1e-9,
          }
        : null,
  };
}

function makeWindow(times: Float64Array, n: number): WindowFunction {
  const length = Math.min(n, 3000);
  const frequencies = Float64Array.from({ length }, (_, i) => (2.1 * (i + 1)) / length);
  const power = frequencies.map((frequency) => {
    let [c, s] = [0, 0];
    for (const time of times) {
      c += Math.cos(2 * Math.PI * frequency * (time - times[0]!));
      s += Math.sin(2 * Math.PI * frequency * (time - times[0]!));
    }
    return (c * c + s * s) / times.length ** 2;
  });
  const at = power.indexOf(Math.max(...power.filter((_, i) => frequencies[i]! > 0.9)));
  return {
    frequenciesPerDay: frequencies,
    power,
    peaks: [
      {
        frequencyPerDay: frequencies[at]!,
        periodDays: 1 / frequencies[at]!,
        power: power[at]!,
        name: 'solar day',
      },
    ],
  };
}

function makeRecord(
  request: FixtureRequest,
  velocities: VelocitySet,
  best: VelocityModelPoint,
  residuals: Float64Array,
): Solved['record'] {
  const rms = Math.sqrt(residuals.reduce((sum, value) => sum + value * value, 0) / residuals.length);
  const companions = request.companions.map((orbit, index): CompanionRecord => {
    const derived = Object.fromEntries(DERIVED_KEYS.map((key) => [key, quantity(null, '')])) as Record<
      (typeof DERIVED_KEYS)[number],
      Quantity
    >;
    derived.semiMajorAxis = quantity(orbit.semiMajorAxisAu, 'au', 0.01);
    derived.minimumMass = quantity(orbit.semiMajorAxisAu === null ? null : 1.1, 'M_jup', 0.1);
    derived.massFunction = quantity(1e-9, 'M_sun', 1e-10);
    return {
      letter: best.letters[index]!,
      elements: {
        period: quantity(orbit.periodDays, 'd', orbit.periodDays * 1e-4),
        eccentricity: quantity(orbit.eccentricity, '', 0.01),
        argumentOfPeriastron: quantity((orbit.argPeriastronStarRad * 180) / Math.PI, 'deg', 2),
        timeOfPeriastron: quantity(orbit.timePeriastronBjdTdb, 'd', 0.02),
        timeOfInferiorConjunction: quantity(orbit.timePeriastronBjdTdb, 'd', 0.02),
        semiAmplitude: quantity(orbit.semiAmplitudeMps, 'm/s', 0.5),
      },
      derived,
      circular: orbit.eccentricity === 0,
      evidence: {
        deltaLogLikelihood: 90,
        deltaBic: 160,
        falseAlarmProbability: 1e-12,
        falseAlarmMethod: 'invented',
        marginal: null,
        eccentricity: null,
      },
      rivals: [],
    };
  });
  return {
    schema: 'tugline/solution',
    version: 1,
    target: request.target,
    timeScale: 'BJD_TDB',
    epoch: best.epochBjdTdb,
    star: {
      mass: quantity(1.02, 'M_sun', 0.03),
      radius: quantity(null, 'R_sun'),
      effectiveTemperature: quantity(null, 'K'),
    },
    companions,
    candidates: [],
    neighbours: [],
    velocity: {
      instruments: request.instruments.map((one) => ({
        name: one.name,
        count: one.count,
        zeroPoint: quantity(one.zeroPointMps, 'm/s', 0.4),
        jitter: quantity(one.jitterMps, 'm/s', 0.3),
        rms,
      })),
      slope: quantity((request.slopeMpsPerDay ?? 0) * 365.25, 'm/s/yr'),
      curvature: quantity((request.curvatureMpsPerDay2 ?? 0) * 365.25 ** 2, 'm/s/yr^2'),
    },
    fit: {
      status: 'converged', reason: 'invented', usable: true, logLikelihood: -100, chiSquare: velocities.count, degreesOfFreedom: velocities.count - 8,
      freeParameters: 8, bic: 240, aicc: 220, rms, covariance: { names: [], matrix: [] },
    }, // prettier-ignore
    posterior: null,
    assumptions: [],
    warnings: [],
    provenance: {
      program: 'tugline',
      version: '0.0.0',
      node: 'v20',
      seed: request.seed,
      command: ['tugline', 'solve'],
      inputs: [],
    },
  };
}
