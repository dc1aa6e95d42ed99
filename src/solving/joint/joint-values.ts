/** One point of a joint model as the numbers that are reported. */
import {
  fullDurationDays,
  inclinationFromImpactParameterRad,
  occultationPhase,
  totalDurationDays,
} from '../../orbit/transit-geometry.js';
import { ORBIT_COORDINATES } from '../../signals/keplerian.js';
import { TRANSIT_COORDINATES } from '../../signals/transit/light-curve-kernel.js';
import { transitFlux } from '../../signals/transit/transit-flux.js';
import { reportedFromPortable, type ReportedValues } from '../elements-report.js';
import { portableFrom, type PortablePoint } from '../model-builder.js';
import { CONJUNCTION, RELATIVE_IMPACT } from './natural.js';
import type { JointDensity } from './joint-density.js';

const DEGREES = 180 / Math.PI;

export interface TransitValues {
  readonly radiusRatio: number;
  readonly scaledSemiMajorAxis: number;
  /** >= 0 */
  readonly impactParameter: number;
  readonly inclinationDeg: number;
  readonly totalDurationHours: number;
  /** NaN when grazing. */
  readonly fullDurationHours: number;
  /** In the first band. */
  readonly midTransitDepthPpm: number;
  /** After the reported conjunction, days, light time included. */
  readonly occultationLagDays: number;
}

export interface JointValues {
  /** See `NaturalIndex`; relative impact parameters without their sign. */
  readonly natural: Float64Array;
  readonly reported: ReportedValues;
  /** `null` for companions that do not transit. */
  readonly transits: readonly (TransitValues | null)[];
}

export type References = readonly { readonly periastron: number; readonly conjunction: number }[];

/** Orbits, zero points, drift and jitters of a position. */
export function portableAt(density: JointDensity, position: Float64Array): PortablePoint {
  const { coordinates, recipe } = density;
  coordinates.read(position);
  const { natural, index, orbit } = coordinates;
  const instruments = recipe.velocities?.instrumentCount ?? 0;
  const linear = new Float64Array(instruments + recipe.drift);
  const jitters = new Float64Array(instruments);
  for (let i = 0; i < instruments; i++) {
    linear[i] = natural[index.zeroPoint(i)]!;
    jitters[i] = natural[index.velocityJitter(i)]!;
  }
  for (let d = 0; d < recipe.drift; d++) linear[instruments + d] = natural[index.drift + d]!;
  return portableFrom(orbit, orbit.length / ORBIT_COORDINATES, linear, jitters);
}

const flux = new Float64Array(5);

function transitValues(
  transit: Float64Array,
  limb: readonly [number, number],
  companion: PortablePoint['companions'][number],
  starRadiusLightDays: number,
): TransitValues {
  const { periodDays, eccentricity, argPeriastronStarRad } = companion;
  const radiusRatio = transit[4]!;
  const impactParameter = transit[5]!;
  const scaledSemiMajorAxis = Math.exp(transit[6]!);
  const scaled = { scaledSemiMajorAxis, eccentricity, argPeriastronStarRad };
  const inclinationRad = inclinationFromImpactParameterRad(impactParameter, scaled);
  const tilted = { ...scaled, inclinationRad };
  transitFlux(impactParameter, radiusRatio, limb[0], limb[1], flux);
  const lightDays =
    (2 * scaledSemiMajorAxis * (1 - eccentricity ** 2) * starRadiusLightDays) /
    (1 - (eccentricity * Math.sin(argPeriastronStarRad)) ** 2);
  return {
    radiusRatio,
    scaledSemiMajorAxis,
    impactParameter,
    inclinationDeg: inclinationRad * DEGREES,
    totalDurationHours: 24 * (totalDurationDays(tilted, periodDays, radiusRatio) ?? NaN),
    fullDurationHours: 24 * (fullDurationDays(tilted, periodDays, radiusRatio) ?? NaN),
    midTransitDepthPpm: 1e6 * (1 - flux[0]!),
    occultationLagDays: periodDays * occultationPhase(eccentricity, argPeriastronStarRad) + lightDays,
  };
}

export function jointValues(
  density: JointDensity,
  position: Float64Array,
  references: References,
): JointValues {
  const portable = portableAt(density, position);
  const { recipe } = density;
  const { index } = density.coordinates;
  const natural = Float64Array.from(density.coordinates.natural);
  const { transit } = density.coordinates;
  const hasBands = recipe.bands.length > 0;
  const limb = [hasBands ? natural[index.band(0)]! : 0, hasBands ? natural[index.band(0) + 1]! : 0] as const;
  const transits = recipe.companions.map((companion, c) => {
    const at = index.companion(c) + RELATIVE_IMPACT;
    natural[at] = Math.abs(natural[at]!);
    return companion.transits
      ? transitValues(
          transit.subarray(c * TRANSIT_COORDINATES, (c + 1) * TRANSIT_COORDINATES),
          limb,
          portable.companions[c]!,
          recipe.starRadiusLightDays,
        )
      : null;
  });
  return { natural, reported: reportedFromPortable(portable, references), transits };
}

/** Passages next to which epochs are reported: the conjunction of the fit. */
export function referencesOf(density: JointDensity, position: Float64Array): References {
  const portable = portableAt(density, position);
  const conjunctions = portable.companions.map(
    (_, c) => density.coordinates.natural[density.coordinates.index.companion(c) + CONJUNCTION]!,
  );
  const first = conjunctions.map((conjunction) => ({ periastron: conjunction, conjunction }));
  return reportedFromPortable(portable, first).companions.map((values) => ({
    periastron: values.timeOfPeriastron,
    conjunction: values.timeOfInferiorConjunction,
  }));
}
