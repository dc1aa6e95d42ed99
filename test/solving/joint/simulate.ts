/** Invented stars with transits: light curves, mid-times and velocities whose truth is known. */
import type { RandomStream } from '../../../src/numerics/random.js';
import type {
  LightCurveTable,
  MidTimeTable,
  Observations,
} from '../../../src/observations/photometry-types.js';
import type { Case, VelocitySet } from '../../../src/observations/types.js';
import { periastronFromInferiorConjunction } from '../../../src/orbit/conversions.js';
import { scaledSemiMajorAxisFromDensity } from '../../../src/orbit/star-density.js';
import {
  lossOfLight,
  type LimbDarkening,
  type TransitingOrbit,
} from '../../../src/planning/mock-transits.js';
import type { PosteriorSolveOptions } from '../../../src/solving/solve-with-posterior.js';
import { BARE_CASE, OPTIONS, simulated } from '../helpers.js';

export const START_BJD = 2_459_000.5;
export const LIMB: LimbDarkening = { u1: 0.35, u2: 0.2 };

export interface TrueCompanion {
  readonly periodDays: number;
  readonly conjunctionBjdTdb: number;
  readonly eccentricity?: number;
  readonly argPeriastronStarRad?: number;
  readonly radiusRatio: number;
  readonly impactParameter: number;
  readonly semiAmplitudeMps?: number;
}

/** Mean density of the invented star, g/cm3. */
export const STAR_DENSITY = 1.3;

export function orbitOf(companion: TrueCompanion, densityGcc: number = STAR_DENSITY): TransitingOrbit {
  const { periodDays, conjunctionBjdTdb, radiusRatio, impactParameter } = companion;
  const shape = {
    periodDays,
    eccentricity: companion.eccentricity ?? 0,
    argPeriastronStarRad: companion.argPeriastronStarRad ?? Math.PI / 2,
  };
  return {
    ...shape,
    conjunctionBjdTdb,
    timePeriastronBjdTdb: periastronFromInferiorConjunction({
      ...shape,
      timeInferiorConjunctionBjdTdb: conjunctionBjdTdb,
    }),
    radiusRatio,
    impactParameter,
    scaledSemiMajorAxis: scaledSemiMajorAxisFromDensity(densityGcc, periodDays),
    durationDays: 0,
  };
}

export interface CurvePlan {
  readonly name: string;
  readonly band?: string;
  readonly timesBjdTdb: Float64Array;
  readonly exposureDays?: number;
  readonly sigma: number;
  readonly companions: readonly TrueCompanion[];
  /** Multiplies the transits; 1 everywhere unless given. */
  readonly baseline?: (timeBjdTdb: number) => number;
  readonly airmass?: (timeBjdTdb: number) => number;
  readonly densityGcc?: number;
  readonly settings?: Partial<Pick<LightCurveTable, 'baseline' | 'dilution' | 'jitter' | 'noise'>>;
}

/** Times from one date to another at a fixed distance. */
export function cadence(fromBjd: number, toBjd: number, stepDays: number): Float64Array {
  return Float64Array.from({ length: Math.round((toBjd - fromBjd) / stepDays) }, (_, i) => fromBjd + (i + 0.5) * stepDays);
} // prettier-ignore

export function lightCurve(random: RandomStream, plan: CurvePlan): LightCurveTable {
  const { timesBjdTdb, sigma } = plan;
  const exposureDays = plan.exposureDays ?? 0;
  const orbits = plan.companions.map((companion) => orbitOf(companion, plan.densityGcc));
  const loss = lossOfLight(orbits, LIMB, { timesBjdTdb, exposureDays }, 0);
  const flux = timesBjdTdb.map(
    (time, i) => (plan.baseline?.(time) ?? 1) * (1 - loss[i]!) + sigma * random.normal(),
  );
  return tableOf(plan, flux);
}

/** A table of any fluxes. */
export function tableOf(plan: CurvePlan, flux: Float64Array): LightCurveTable {
  const { name, band, timesBjdTdb, sigma, airmass } = plan;
  const rows = timesBjdTdb.length;
  return {
    content: 'light curve',
    path: `${name}.csv`,
    sha256: 'cd'.repeat(32),
    rows,
    used: rows,
    columns: [],
    timeScale: 'BJD_TDB',
    timeOffsetDays: 0,
    lines: Uint32Array.from({ length: rows }, (_, i) => i + 2),
    notices: [],
    name,
    band: band ?? 'V',
    fluxUnit: 'relative',
    timesBjdTdb,
    flux,
    sigmas: new Float64Array(rows).fill(sigma),
    sigmasKnown: 'column',
    normalisation: 1,
    exposureDays: plan.exposureDays ?? 0,
    exposureKnown: plan.exposureDays === undefined ? 'none' : 'stated',
    regressors: new Map(airmass === undefined ? [] : [['airmass', timesBjdTdb.map(airmass)]]),
    dilution: { value: 0, sigma: 0 },
    baseline: 'auto',
    jitter: null,
    noise: 'white',
    ...plan.settings,
  };
}

export function midTimeTable(
  timesBjdTdb: readonly number[],
  sigmaDays: number,
  more: Partial<Pick<MidTimeTable, 'cycles' | 'isOccultation' | 'companion'>> = {},
): MidTimeTable {
  const rows = timesBjdTdb.length;
  return {
    content: 'mid-times',
    path: 'mid-times.csv',
    sha256: 'ef'.repeat(32),
    rows,
    used: rows,
    columns: [],
    timeScale: 'BJD_TDB',
    timeOffsetDays: 0,
    lines: Uint32Array.from({ length: rows }, (_, i) => i + 2),
    notices: [],
    timesBjdTdb: Float64Array.from(timesBjdTdb),
    sigmasDays: new Float64Array(rows).fill(sigmaDays),
    cycles: null,
    isOccultation: new Uint8Array(rows),
    sources: new Array<string>(rows).fill(''),
    companion: null,
    ...more,
  };
}

export function velocitiesOf(
  random: RandomStream,
  companions: readonly TrueCompanion[],
  times: Float64Array,
  sigmaMps: number,
): VelocitySet {
  return simulated(random, {
    times,
    sigmaMps,
    zeroPointsMps: [-12],
    companions: companions.map((companion) => ({
      ...orbitOf(companion),
      semiAmplitudeMps: companion.semiAmplitudeMps ?? 0,
    })),
  });
}

export function observed(parts: Partial<Observations>): Observations {
  return { velocities: null, lightCurves: [], midTimes: [], ...parts };
}

export function caseOf(parts: Partial<Case> = {}): Case {
  return { ...BARE_CASE, ...parts };
}

export const QUICK: PosteriorSolveOptions = { ...OPTIONS, threads: 0, drawLimit: 1000 };
