/** The light that the companions of a plan take, and when. */
import { ModelDomainError } from '../errors.js';
import { GM_SUN_M3_S2, R_SUN_M, SECONDS_PER_DAY, SPEED_OF_LIGHT_MPS, TWO_PI } from '../orbit/constants.js';
import { inferiorConjunctionFromPeriastron, meanLongitudeAtEpoch } from '../orbit/conversions.js';
import type { OrbitElements } from '../orbit/elements.js';
import {
  inclinationFromImpactParameterRad,
  totalDurationDays,
  transitImpactParameter,
} from '../orbit/transit-geometry.js';
import type { MockTransit } from '../observations/mock-types.js';
import { LightCurveKernel, TRANSIT_COORDINATES } from '../signals/transit/light-curve-kernel.js';

export interface MockStar {
  readonly massSolar: number;
  readonly radiusSolar: number;
}

/** A companion with everything that its transits depend on. */
export interface TransitingOrbit extends Omit<OrbitElements, 'semiAmplitudeMps'> {
  readonly conjunctionBjdTdb: number;
  readonly radiusRatio: number;
  readonly impactParameter: number;
  readonly scaledSemiMajorAxis: number;
  /** First to last contact by formula, days; 0 where the discs do not meet. */
  readonly durationDays: number;
}

export interface LimbDarkening {
  readonly u1: number;
  readonly u2: number;
}

/** a/R_star from Kepler's third law, the companion's mass neglected. */
export function scaledAxisOf(star: MockStar, periodDays: number): number {
  const rate = TWO_PI / (periodDays * SECONDS_PER_DAY);
  return Math.cbrt((GM_SUN_M3_S2 * star.massSolar) / (rate * rate)) / (star.radiusSolar * R_SUN_M);
}

/** @throws ModelDomainError when the companion would touch the star or no inclination gives the impact parameter */
export function transitingOrbit(
  orbit: Omit<OrbitElements, 'semiAmplitudeMps'>,
  transit: MockTransit,
  star: MockStar,
): TransitingOrbit {
  const { periodDays, eccentricity, argPeriastronStarRad } = orbit;
  const scaledSemiMajorAxis = scaledAxisOf(star, periodDays);
  const { radiusRatio, path } = transit;
  const nearest = scaledSemiMajorAxis * (1 - eccentricity);
  if (!(nearest > 1 + radiusRatio))
    throw new ModelDomainError(
      `distance at periastron of the companion of ${periodDays} d, in stellar radii`,
      nearest,
      `more than ${1 + radiusRatio}: it must not touch the star`,
    );
  const shape = { scaledSemiMajorAxis, eccentricity, argPeriastronStarRad };
  const impactParameter =
    path.kind === 'impact-parameter'
      ? path.value
      : transitImpactParameter({ ...shape, inclinationRad: (path.deg * Math.PI) / 180 });
  const tilted = { ...shape, inclinationRad: inclinationFromImpactParameterRad(impactParameter, shape) };
  return {
    periodDays,
    eccentricity,
    argPeriastronStarRad,
    timePeriastronBjdTdb: orbit.timePeriastronBjdTdb,
    conjunctionBjdTdb: inferiorConjunctionFromPeriastron(orbit),
    radiusRatio,
    impactParameter,
    scaledSemiMajorAxis,
    durationDays: totalDurationDays(tilted, periodDays, radiusRatio) ?? 0,
  };
}

/** When and how the light is recorded. */
export interface Exposures {
  /** Mid-exposures, BJD_TDB. */
  readonly timesBjdTdb: Float64Array;
  readonly exposureDays: number;
}

/**
 * Loss of light 1 - F of all companions together, averaged over each exposure (within 1e-8); light time across the orbit
 * included. Bodies in front of one another are not accounted for.
 *
 * @returns (n)
 */
export function lossOfLight(
  orbits: readonly TransitingOrbit[],
  limb: LimbDarkening,
  exposures: Exposures,
  starRadiusSolar: number,
): Float64Array {
  const { timesBjdTdb, exposureDays } = exposures;
  const loss = new Float64Array(timesBjdTdb.length);
  const coordinates = new Float64Array(TRANSIT_COORDINATES);
  for (const orbit of orbits) {
    // Counted from a conjunction, so that times stay short.
    const epoch = orbit.conjunctionBjdTdb;
    const kernel = new LightCurveKernel({
      timesDays: timesBjdTdb.map((time) => time - epoch),
      exposureDays,
      starRadiusLightDays: (starRadiusSolar * R_SUN_M) / SPEED_OF_LIGHT_MPS / SECONDS_PER_DAY,
    });
    coordinates[0] = Math.log(orbit.periodDays);
    coordinates[1] = meanLongitudeAtEpoch(orbit, epoch);
    coordinates[2] = orbit.eccentricity * Math.cos(orbit.argPeriastronStarRad);
    coordinates[3] = orbit.eccentricity * Math.sin(orbit.argPeriastronStarRad);
    coordinates[4] = orbit.radiusRatio;
    coordinates[5] = orbit.impactParameter;
    coordinates[6] = Math.log(orbit.scaledSemiMajorAxis);
    if (!kernel.evaluate(coordinates, 0, limb.u1, limb.u2, 0, false))
      throw new ModelDomainError('limb darkening u1/3 + u2/6', limb.u1 / 3 + limb.u2 / 6, 'below 1');
    for (let entry = 0; entry < kernel.touchedCount; entry++)
      loss[kernel.touched[entry]!]! += kernel.loss[entry]!;
  }
  return loss;
}

/** Times of inferior conjunction from one date to another, with their cycle numbers counted from the orbit's conjunction. */
export function conjunctionsBetween(
  orbit: { readonly periodDays: number; readonly conjunctionBjdTdb: number },
  fromBjdTdb: number,
  toBjdTdb: number,
): { readonly cycle: number; readonly timeBjdTdb: number }[] {
  const { periodDays, conjunctionBjdTdb } = orbit;
  const first = Math.ceil((fromBjdTdb - conjunctionBjdTdb) / periodDays);
  const last = Math.floor((toBjdTdb - conjunctionBjdTdb) / periodDays);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => ({
    cycle: first + i,
    timeBjdTdb: conjunctionBjdTdb + (first + i) * periodDays,
  }));
}
