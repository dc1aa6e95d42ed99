/** Elements, zero points, jitters and drift of a point as the named numbers that are reported. */
import { DAYS_PER_YEAR, TWO_PI } from '../orbit/constants.js';
import { conjunctionDelayDays } from '../orbit/conversions.js';
import type { OrbitElements } from '../orbit/elements.js';
import { portableOf, type PortablePoint } from './model-builder.js';
import type { RelativeElements } from './parametrisations/parametrisation.js';
import type { VelocityProblem } from './problem.js';
import type { ModelPoint } from './model-structure.js';
import type { ElementKey } from './types.js';

const DEGREES = 180 / Math.PI;

/** Elements in the units of `solution.json`, times in days since the solver's epoch. */
export type ElementValues = Readonly<Record<ElementKey, number>>;

export interface ReportedValues {
  readonly companions: readonly ElementValues[];
  readonly zeroPointsMps: Float64Array;
  readonly jittersMps: Float64Array;
  readonly slopeMpsPerYear: number;
  readonly curvatureMpsPerYear2: number;
}

/**
 * @param references - per companion the times (days since the epoch) next to which the passages are wanted
 */
export function reportedValues(
  problem: VelocityProblem,
  point: ModelPoint,
  references: readonly { readonly periastron: number; readonly conjunction: number }[],
): ReportedValues {
  return reportedFromPortable(portableOf(problem, point), references);
}

/** The same from a point that does not depend on a parametrisation. */
export function reportedFromPortable(
  portable: PortablePoint,
  references: readonly { readonly periastron: number; readonly conjunction: number }[],
): ReportedValues {
  return {
    companions: portable.companions.map((companion, c) => elementValues(companion, references[c]!)),
    zeroPointsMps: portable.zeroPointsMps,
    jittersMps: portable.jittersMps,
    slopeMpsPerYear: portable.drift[0] * DAYS_PER_YEAR,
    curvatureMpsPerYear2: portable.drift[1] * DAYS_PER_YEAR ** 2,
  };
}

function elementValues(
  companion: RelativeElements,
  reference: { readonly periastron: number; readonly conjunction: number },
): ElementValues {
  const { periodDays, timePeriastronDays } = companion;
  const near = (time: number, wanted: number): number =>
    time + periodDays * Math.round((wanted - time) / periodDays);
  return {
    period: periodDays,
    eccentricity: companion.eccentricity,
    argumentOfPeriastron: (((companion.argPeriastronStarRad % TWO_PI) + TWO_PI) % TWO_PI) * DEGREES,
    timeOfPeriastron: near(timePeriastronDays, reference.periastron),
    timeOfInferiorConjunction: near(
      timePeriastronDays + conjunctionDelayDays(companion),
      reference.conjunction,
    ),
    semiAmplitude: companion.semiAmplitudeMps,
  };
}

/** Elements in the units used inside, with full dates. */
export function absoluteElements(values: ElementValues, epochBjdTdb: number): OrbitElements {
  return {
    periodDays: values.period,
    eccentricity: values.eccentricity,
    argPeriastronStarRad: values.argumentOfPeriastron / DEGREES,
    timePeriastronBjdTdb: epochBjdTdb + values.timeOfPeriastron,
    semiAmplitudeMps: values.semiAmplitude,
  };
}
