/** One simulated light curve, with velocities where an orbit is eccentric: noise, gaps, variability and known transits. */
import type { RandomStream } from '../../../src/numerics/random.js';
import type { MockRedNoise, MockVariability } from '../../../src/observations/mock-types.js';
import type { LightCurveTable, Observations } from '../../../src/observations/photometry-types.js';
import type { VelocitySet } from '../../../src/observations/types.js';
import type { OrbitElements } from '../../../src/orbit/elements.js';
import { periastronFromInferiorConjunction } from '../../../src/orbit/conversions.js';
import { quasiPeriodic, redNoise } from '../../../src/planning/mock-noise.js';
import {
  conjunctionsBetween,
  lossOfLight,
  scaledAxisOf,
  transitingOrbit,
  type LimbDarkening,
  type MockStar,
  type TransitingOrbit,
} from '../../../src/planning/mock-transits.js';
import { logUniform, simulate } from '../simulate.js';

export const START_BJD = 2459000;

export interface Truth extends TransitingOrbit {
  readonly semiAmplitudeMps: number;
  /** Depth over its standard error with all events folded, from the truth. */
  readonly signalToNoise: number;
  /** Conjunctions whose transits hold at least half of the points that they should. */
  readonly seen: readonly number[];
}

export interface SimulatedLight {
  readonly star: MockStar;
  readonly limb: LimbDarkening;
  readonly observations: Observations;
  readonly truth: readonly Truth[];
}

/** What a kind of light curve is made of. */
export interface LightRecipe {
  readonly spanDays: number;
  readonly cadenceDays: number;
  /** Gaps in days since the start. */
  readonly gaps: readonly { readonly afterDays: number; readonly lengthDays: number }[];
  readonly star: MockStar;
  readonly limb: LimbDarkening;
  readonly companions: readonly CompanionRecipe[];
  readonly sigma: number;
  readonly redNoise: MockRedNoise | null;
  readonly variability: MockVariability | null;
  readonly velocities: { readonly count: number; readonly sigmaMps: number } | null;
}

export interface CompanionRecipe {
  readonly orbit: OrbitElements;
  readonly radiusRatio: number;
  readonly impactParameter: number;
}

/** A dwarf star: the radius follows the mass. */
export function dwarf(random: RandomStream): MockStar {
  const massSolar = random.uniformBetween(0.5, 1.35);
  return { massSolar, radiusSolar: massSolar ** 0.9 * random.uniformBetween(0.95, 1.2) };
}

/** Between the limbs of cool and of hot stars. */
export function limbOf(random: RandomStream): LimbDarkening {
  return { u1: random.uniformBetween(0.15, 0.55), u2: random.uniformBetween(0.05, 0.35) };
}

/** An orbit with a transit in its first revolution after the start. */
export function orbitWithConjunction(
  random: RandomStream,
  shape: {
    readonly periodDays: number;
    readonly eccentricity: number;
    readonly argPeriastronStarRad: number;
    readonly semiAmplitudeMps: number;
  },
): OrbitElements {
  const timeInferiorConjunctionBjdTdb = START_BJD + random.uniform() * shape.periodDays;
  return {
    ...shape,
    timePeriastronBjdTdb: periastronFromInferiorConjunction({ ...shape, timeInferiorConjunctionBjdTdb }),
  };
}

/** Whether the companion keeps clear of the star, by a factor that leaves room for the fit. */
export function keepsClear(star: MockStar, periodDays: number, eccentricity: number): boolean {
  return scaledAxisOf(star, periodDays) * (1 - eccentricity) > 2.2;
}

/** Mid-exposures of a survey. */
export function surveyTimesOf({ spanDays, cadenceDays, gaps }: LightRecipe): Float64Array {
  const times: number[] = [];
  for (let days = 0.5 * cadenceDays; days < spanDays; days += cadenceDays)
    if (!gaps.some(({ afterDays, lengthDays }) => days >= afterDays && days < afterDays + lengthDays))
      times.push(START_BJD + days);
  return Float64Array.from(times);
}

export function simulateLight(random: RandomStream, recipe: LightRecipe): SimulatedLight {
  const { star, limb, cadenceDays, sigma } = recipe;
  const timesBjdTdb = surveyTimesOf(recipe);
  const orbits = recipe.companions.map(({ orbit, radiusRatio, impactParameter }) =>
    transitingOrbit(orbit, { radiusRatio, path: { kind: 'impact-parameter', value: impactParameter } }, star),
  );
  const exposures = { timesBjdTdb, exposureDays: cadenceDays };
  const losses = orbits.map((orbit) => lossOfLight([orbit], limb, exposures, star.radiusSolar));
  const days = timesBjdTdb.map((time) => time - START_BJD);
  const still = new Float64Array(days.length);
  const slow = recipe.variability === null ? still : quasiPeriodic(recipe.variability, days, random);
  const red = recipe.redNoise === null ? still : redNoise(recipe.redNoise, days, random);
  const sigmas = days.map(() => sigma * random.uniformBetween(0.95, 1.05));
  const flux = days.map((_, i) => {
    const lost = losses.reduce((sum, loss) => sum + loss[i]!, 0);
    return (1 - lost) * (1 + slow[i]!) + red[i]! + sigmas[i]! * random.normal();
  });
  return {
    star,
    limb,
    observations: {
      velocities: recipe.velocities === null ? null : velocitiesFor(random, recipe),
      lightCurves: [lightCurveTable(timesBjdTdb, flux, sigmas, cadenceDays)],
      midTimes: [],
    },
    truth: orbits.map((orbit, c) => ({
      ...orbit,
      semiAmplitudeMps: recipe.companions[c]!.orbit.semiAmplitudeMps,
      signalToNoise: foldedSignalToNoise(losses[c]!, recipe),
      seen: conjunctionsSeen(orbit, timesBjdTdb, cadenceDays),
    })),
  };
}

/**
 * Depth over its standard error, all events folded: mean loss times root of the number of points, over sigma. Red noise
 * whose memory is about as long as a transit does not average out within one: its share is added per event.
 */
export function foldedSignalToNoise(loss: Float64Array, { sigma, redNoise: red }: LightRecipe): number {
  let sum = 0;
  let points = 0;
  let events = 0;
  loss.forEach((lost, i) => {
    if (lost <= 0) return;
    sum += lost;
    points++;
    if (i === 0 || loss[i - 1]! <= 0) events++;
  });
  if (points === 0) return 0;
  const depth = sum / points;
  const ofWhite = (depth * Math.sqrt(points)) / sigma;
  const ofRed = red === null ? Infinity : (depth * Math.sqrt(events)) / red.size;
  return 1 / Math.hypot(1 / ofWhite, 1 / ofRed);
}

function conjunctionsSeen(orbit: TransitingOrbit, times: Float64Array, cadenceDays: number): number[] {
  const half = orbit.durationDays / 2;
  return conjunctionsBetween(orbit, times[0]! - half, times[times.length - 1]! + half)
    .map(({ timeBjdTdb }) => timeBjdTdb)
    .filter((middle) => {
      const points = times.filter((time) => Math.abs(time - middle) < half).length;
      return points >= Math.max(1, (0.5 * orbit.durationDays) / cadenceDays);
    });
}

/** A table as a reader would hand it on. */
export function lightCurveTable(
  timesBjdTdb: Float64Array,
  flux: Float64Array,
  sigmas: Float64Array,
  exposureDays: number,
): LightCurveTable {
  const count = timesBjdTdb.length;
  const normalisation = Float64Array.from(flux).sort()[count >> 1]!;
  return {
    content: 'light curve',
    path: 'simulated.csv',
    sha256: '',
    rows: count,
    used: count,
    columns: [],
    timeScale: 'BJD_TDB',
    timeOffsetDays: 0,
    lines: Uint32Array.from({ length: count }, (_, i) => i + 2),
    notices: [],
    name: 'simulated',
    band: 'simulated',
    fluxUnit: 'relative',
    timesBjdTdb,
    flux: flux.map((value) => value / normalisation),
    sigmas: sigmas.map((sigma) => sigma / normalisation),
    sigmasKnown: 'column',
    normalisation,
    exposureDays,
    exposureKnown: 'stated',
    regressors: new Map(),
    dilution: { value: 0, sigma: 0 },
    baseline: 'auto',
    jitter: null,
    noise: 'white',
  };
}

/** Velocities through some months after the survey. */
function velocitiesFor(random: RandomStream, { companions, velocities, spanDays }: LightRecipe): VelocitySet {
  const { count, sigmaMps } = velocities!;
  const times = Float64Array.from({ length: count }, () => {
    return START_BJD + spanDays + Math.floor(random.uniform() * 90) + 0.5 + 0.08 * random.normal();
  }).sort();
  return simulate(random, {
    count,
    times,
    spanDays: 90,
    companions: companions.map(({ orbit }) => orbit),
    sigmaMps,
  }).velocities;
}

/** A radius ratio, impact parameter and period that belong to nothing in particular. */
export function anyRatio(random: RandomStream): number {
  return logUniform(random, 0.02, 0.2);
}
