/** A small invented solution for tests of what is written from it; no number in it comes from a fit. */
import type { VelocitySet } from '../../src/observations/types.js';
import {
  DERIVED_KEYS,
  type CompanionRecord,
  type DerivedKey,
  type Quantity,
  type SolutionRecord,
  type Solved,
} from '../../src/solving/types.js';

export function quantity(value: number, sigma: number, unit: string): Quantity {
  return { value, sigma, lower: value - sigma, upper: value + sigma, unit };
}

export function unknown(unit: string, why: string): Quantity {
  return { value: null, sigma: null, lower: null, upper: null, unit, why };
}

export function fixed(value: number, unit: string): Quantity {
  return { value, sigma: null, lower: null, upper: null, unit, fixed: true };
}

const DERIVED: Partial<Record<DerivedKey, Quantity>> = {
  semiMajorAxis: quantity(0.2312, 0.0025, 'au'),
  minimumMass: { value: 0.7123, sigma: 0.0219, lower: 0.6911, upper: 0.738, unit: 'M_jup' },
  massFunction: quantity(2.01e-10, 0.11e-10, 'M_sun'),
};

export function companionFixture(): CompanionRecord {
  const derived = Object.fromEntries(
    DERIVED_KEYS.map((key) => [key, DERIVED[key] ?? unknown('', 'the inclination is not known')]),
  ) as unknown as CompanionRecord['derived'];
  return {
    letter: 'b',
    elements: {
      period: quantity(41.6321, 0.0141, 'd'),
      eccentricity: { value: 0.352, sigma: 0.013, lower: 0.3402, upper: 0.3661, unit: '' },
      argumentOfPeriastron: quantity(128.4, 2.13, 'deg'),
      timeOfPeriastron: quantity(2460412.834, 0.21, 'd'),
      timeOfInferiorConjunction: quantity(2460409.17, 0.34, 'd'),
      semiAmplitude: quantity(38.41, 0.552, 'm/s'),
    },
    derived,
    circular: false,
    evidence: {
      deltaLogLikelihood: 160.37,
      deltaBic: 297.91,
      falseAlarmProbability: 3.2e-21,
      falseAlarmMethod: 'analytic bound (Baluev 2008)',
      marginal: null,
      eccentricity: {
        deltaLogLikelihood: 41.23,
        deltaBic: 73.4,
        lucySweeneyProbability: 1e-12,
        marginal: null,
        eccentricFit: null,
      },
    },
    rivals: [
      { period: 0.97921, kind: 'sidereal-day alias', deltaLogLikelihood: -22.44, eccentricity: 0.31 },
      { period: 20.83, kind: 'half period', deltaLogLikelihood: -61.2, eccentricity: 0.1 },
    ],
  };
}

const TIMES = [2459910.25, 2459950.75, 2460001.5, 2460400.125];

/** @param names - two instruments; the second row onwards belongs to the second one */
export function velocitiesFixture(names: readonly [string, string], path = 'north.csv'): VelocitySet {
  return {
    count: 4,
    timesBjdTdb: Float64Array.from(TIMES),
    velocitiesMps: Float64Array.from([10.5, -3.25, 46309.200000000004, 1]),
    sigmasMps: Float64Array.from([2, 2.5, 3, 2]),
    instrumentOf: Uint16Array.from([0, 1, 1, 0]),
    instruments: names,
    tableOf: new Uint16Array(4),
    lines: Uint32Array.from([2, 3, 4, 9]),
    tables: [{ path, sha256: 'ab'.repeat(32), rows: 5, used: 4 }],
    timeScale: 'BJD_TDB',
    notices: [],
  };
}

export interface FixtureChanges {
  readonly target?: string;
  readonly names?: readonly [string, string];
  readonly path?: string;
  readonly companions?: readonly CompanionRecord[];
  readonly record?: Partial<SolutionRecord>;
}

export function solvedFixture(changes: FixtureChanges = {}): Solved {
  const names = changes.names ?? ['north', 'south'];
  const path = changes.path ?? 'north.csv';
  const velocities = velocitiesFixture(names, path);
  const companions = changes.companions ?? [companionFixture()];
  const record: SolutionRecord = {
    schema: 'tugline/solution',
    version: 1,
    target: changes.target ?? 'Vellamo',
    timeScale: 'BJD_TDB',
    epoch: 2460100.5,
    star: {
      mass: quantity(0.94, 0.03, 'M_sun'),
      radius: unknown('R_sun', 'not given'),
      effectiveTemperature: unknown('K', 'not given'),
    },
    companions,
    candidates: [{ period: 7.31, semiAmplitude: 1.9, falseAlarmProbability: 0.004, deltaBic: 6.2 }],
    neighbours: [],
    velocity: {
      instruments: names.map((name, index) => ({
        name,
        count: 2,
        zeroPoint: quantity(118 - 400 * index, 0.61, 'm/s'),
        jitter: { value: 0.4, sigma: 0.5, lower: 0.05, upper: 1.32, unit: 'm/s' },
        rms: 2.61,
      })),
      slope: quantity(-4.21, 0.33, 'm/s/yr'),
      curvature: fixed(0, 'm/s/yr^2'),
    },
    fit: {
      status: 'converged',
      reason: 'relative change of ln L 3e-10, limit 1e-8',
      usable: true,
      logLikelihood: -201.33,
      chiSquare: 3.9,
      degreesOfFreedom: 2,
      freeParameters: 10,
      bic: 421.6,
      aicc: null,
      rms: 2.83,
      covariance: { names: ['companions.b.period'], matrix: [[0.0002]] },
    },
    posterior: null,
    assumptions: ['The noise is Gaussian and independent from one velocity to the next.'],
    warnings: [{ code: 'few-data', message: 'There are fewer velocities than free parameters.' }],
    provenance: {
      program: 'tugline',
      version: '0.1.0',
      node: '20.20.2',
      seed: 1,
      command: ['tugline', 'solve', path, '--star-mass', '0.94 +- 0.03'],
      inputs: [{ path, sha256: 'ab'.repeat(32), rows: 5, used: 4 }],
    },
    ...changes.record,
  };
  return {
    record,
    velocities,
    best: {
      companions: companions.map(() => ({
        periodDays: 41.6321,
        eccentricity: 0.352,
        argPeriastronStarRad: 2.241,
        timePeriastronBjdTdb: 2460412.834,
        semiAmplitudeMps: 38.41,
      })),
      letters: companions.map((companion) => companion.letter),
      zeroPointsMps: Float64Array.from([118, -282]),
      jittersMps: Float64Array.from([1, 1]),
      epochBjdTdb: 2460100.5,
      slopeMpsPerDay: -0.0115,
      curvatureMpsPerDay2: 0,
    },
    residualsMps: Float64Array.from([0.5, -1.25, 0.1, -2]),
    stages: [],
    window: { frequenciesPerDay: new Float64Array(0), power: new Float64Array(0), peaks: [] },
    posterior: null,
  };
}
