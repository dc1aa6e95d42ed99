/** Starting points of a joint fit in natural parameters, from what search, mid-times and velocities have found. */
import { LOG_SCALED_AXIS_FACTOR } from '../../orbit/star-density.js';
import type { RelativeElements } from '../parametrisations/parametrisation.js';
import type { Ephemeris } from './curve-windows.js';
import type { JointRecipe } from './joint-data.js';
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
  SHAPE,
} from './natural.js';

/** What is known of one companion before the joint fit. */
export interface CompanionStart {
  readonly periodDays: number;
  readonly conjunctionDays: number;
  readonly eccentricity: number;
  readonly argPeriastronStarRad: number;
  readonly semiAmplitudeMps: number;
  /** `null` for a companion that is not seen in transit. */
  readonly transit: { readonly durationDays: number; readonly depth: number } | null;
}

export interface NoiseStart {
  readonly zeroPointsMps: Float64Array;
  readonly drift: readonly [number, number];
  readonly jittersMps: Float64Array;
}

/** Impact parameters, over 1 + radius ratio, from which a fit is started: central to grazing. */
export const IMPACT_STARTS: readonly number[] = [0.2, 0.55, 0.8, 0.93];
/** Limb darkening of a sun-like star in the visual, as a start only. */
export const START_LIMB: readonly [number, number] = [0.4, 0.25];

/** Period at which a central transit of a star of 1 g/cm3 takes so long, days. */
function periodOfDuration(durationDays: number): number {
  return (Math.PI * durationDays) ** 3 * Math.exp(LOG_SCALED_AXIS_FACTOR);
}

export function startFromEphemeris(ephemeris: Ephemeris, velocity: RelativeElements | null): CompanionStart {
  return {
    periodDays: ephemeris.periodDays ?? velocity?.periodDays ?? periodOfDuration(ephemeris.durationDays),
    conjunctionDays: ephemeris.midTimeDays,
    eccentricity: velocity?.eccentricity ?? 0,
    argPeriastronStarRad: velocity?.argPeriastronStarRad ?? Math.PI / 2,
    semiAmplitudeMps: velocity?.semiAmplitudeMps ?? 0,
    transit: { durationDays: ephemeris.durationDays, depth: ephemeris.depth },
  };
}

/** Radius ratio and a/R of a dip of given duration and depth, at an impact parameter over 1 + k. */
function shapeOfDip(start: CompanionStart, relativeImpact: number): { ratio: number; logDensity: number } {
  const { durationDays, depth } = start.transit!;
  // A grazing companion covers about half of itself.
  const isGrazing = relativeImpact > 0.9;
  const ratio = Math.min(
    0.9,
    Math.max(0.003, Math.sqrt(Math.max(1e-6, isGrazing ? 2.5 * depth : 0.9 * depth))),
  );
  const chord = (1 + ratio) * Math.sqrt(1 - relativeImpact ** 2);
  const e = start.eccentricity;
  const speed = Math.sqrt(1 - e * e) / (1 + e * Math.sin(start.argPeriastronStarRad));
  const axis = Math.max(
    (1.5 * (1 + ratio)) / (1 - e),
    (start.periodDays / (Math.PI * durationDays)) * chord * speed,
  );
  return { ratio, logDensity: 3 * Math.log(axis) - 2 * Math.log(start.periodDays) - LOG_SCALED_AXIS_FACTOR };
}

/**
 * @param impacts - per companion the impact parameter over 1 + k that is tried
 * @returns natural parameters, see `NaturalIndex`
 */
export function naturalStart(
  recipe: JointRecipe,
  starts: readonly CompanionStart[],
  noise: NoiseStart | null,
  impacts: readonly number[],
): Float64Array {
  const index = new NaturalIndex(recipe);
  const natural = new Float64Array(index.size);
  const densities: number[] = [];
  starts.forEach((start, c) => {
    const base = index.companion(c);
    const companion = recipe.companions[c]!;
    const e = companion.circular ? 0 : start.eccentricity;
    natural[base + LOG_PERIOD] = Math.log(start.periodDays);
    natural[base + CONJUNCTION] = start.conjunctionDays;
    natural[base + SHAPE] = e * Math.cos(start.argPeriastronStarRad);
    natural[base + SHAPE + 1] = e * Math.sin(start.argPeriastronStarRad);
    natural[base + AMPLITUDE] = start.semiAmplitudeMps;
    if (start.transit === null || !companion.transits) return;
    const { ratio, logDensity } = shapeOfDip(start, impacts[c]!);
    natural[base + RADIUS_RATIO] = ratio;
    natural[base + RELATIVE_IMPACT] = impacts[c]!;
    densities.push(logDensity);
  });
  // The density of the star is shared: the largest, so that no companion starts inside the star.
  natural[index.logStarDensity] =
    recipe.starDensityGcc === null
      ? densities.length === 0
        ? 0
        : Math.max(...densities)
      : Math.log(recipe.starDensityGcc.value);
  recipe.bands.forEach((band, b) => {
    natural[index.band(b)] = band.u1?.value ?? START_LIMB[0];
    natural[index.band(b) + 1] = band.u2?.value ?? START_LIMB[1];
  });
  recipe.curves.forEach((curve, i) => {
    natural[index.curveJitter(i)] = 0.5 * curve.typicalSigma;
    natural[index.dilution(i)] = curve.dilution.value;
    natural[index.correlatedNoise(i)] = curve.typicalSigma;
    natural[index.correlatedNoise(i) + 1] = 0.04;
  });
  if (noise !== null) {
    noise.zeroPointsMps.forEach((zeroPoint, i) => (natural[index.zeroPoint(i)] = zeroPoint));
    natural[index.drift] = noise.drift[0];
    natural[index.drift + 1] = noise.drift[1];
    noise.jittersMps.forEach((jitter, i) => (natural[index.velocityJitter(i)] = jitter));
  }
  recipe.midTimes.forEach((set, i) => {
    natural[index.midTimeJitter(i)] = Float64Array.from(set.sigmasDays).sort()[0]!;
  });
  return natural;
}
