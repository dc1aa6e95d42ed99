/** The stations of the joint solution up to its maximum, and the same model fitted from the truth. */
import type { Case } from '../../../src/observations/types.js';
import { fitFrom, type JointFit } from '../../../src/solving/joint/joint-fit.js';
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
  SHAPE,
} from '../../../src/solving/joint/natural.js';
import { planCompanions } from '../../../src/solving/joint/plan-companions.js';
import { settleJoint, type SettledJoint } from '../../../src/solving/joint/settle-joint.js';
import { epochOfAll } from '../../../src/solving/joint/solve-observations.js';
import { searchTransits } from '../../../src/solving/joint/transit-search.js';
import { settleVelocities } from '../../../src/solving/joint/velocity-part.js';
import { nearestPassage } from '../../../src/orbit/conversions.js';
import type { FoundTransit } from '../../../src/solving/joint/found-transit.js';
import type { FoundEphemeris } from './judge.js';
import type { SimulatedLight, Truth } from './simulate.js';

export interface LightSolution {
  readonly epochBjdTdb: number;
  /** From the search of the light curve, before any fit. */
  readonly searched: readonly FoundTransit[];
  /** `null` where nothing was found. */
  readonly settled: SettledJoint | null;
}

const SILENT = (): void => undefined;

export function solveLight(theCase: Case, { observations }: SimulatedLight): LightSolution {
  const epochBjdTdb = epochOfAll(observations);
  const search = searchTransits(theCase, observations, epochBjdTdb, SILENT);
  const { velocities } = observations;
  const seen = search.transits.some(({ isSeen }) => isSeen);
  if (!seen) return { epochBjdTdb, searched: search.transits, settled: null };
  const velocity =
    velocities === null
      ? null
      : settleVelocities(theCase, velocities, search.transits, epochBjdTdb, 1, SILENT);
  const settled = settleJoint(
    {
      theCase,
      observations,
      sets: search.sets,
      velocity: velocity?.part ?? null,
      noise: velocity === null ? null : velocity.portable,
      epochBjdTdb,
    },
    planCompanions(theCase, search.transits, velocity),
  );
  return { epochBjdTdb, searched: search.transits, settled };
}

export function searchedEphemerides({ searched, epochBjdTdb }: LightSolution): FoundEphemeris[] {
  return searched.map(({ ephemeris }) => ({
    periodDays: ephemeris.periodDays,
    midTimeBjdTdb: epochBjdTdb + ephemeris.midTimeDays,
  }));
}

/** Ephemerides of the transiting companions after the fit, with their places in the model. */
export function fittedEphemerides({ settled, epochBjdTdb }: LightSolution): (FoundEphemeris & {
  readonly companion: number;
})[] {
  if (settled === null) return [];
  const { recipe, natural } = settled.fit;
  const index = new NaturalIndex(recipe);
  return recipe.companions.flatMap(({ transits, isPeriodUnknown }, companion) => {
    if (!transits) return [];
    const base = index.companion(companion);
    return [
      {
        companion,
        periodDays: isPeriodUnknown ? null : Math.exp(natural[base + LOG_PERIOD]!),
        midTimeBjdTdb: epochBjdTdb + natural[base + CONJUNCTION]!,
      },
    ];
  });
}

/**
 * The same model, fitted from the truth: what belongs to the companions and to the star is true, what belongs to the noise
 * is as it was fitted.
 *
 * @param truthOf - per companion of the model the truth, `undefined` where it has none
 */
export function fitFromTruth(
  { settled, epochBjdTdb }: LightSolution,
  set: SimulatedLight,
  truthOf: readonly (Truth | undefined)[],
): JointFit | null {
  const { recipe, natural } = settled!.fit;
  const start = Float64Array.from(natural);
  const index = new NaturalIndex(recipe);
  recipe.companions.forEach((companion, c) => {
    const truth = truthOf[c];
    if (truth === undefined) return;
    const base = index.companion(c);
    start[base + LOG_PERIOD] = Math.log(truth.periodDays);
    start[base + CONJUNCTION] =
      nearestPassage(truth.conjunctionBjdTdb, truth.periodDays, epochBjdTdb + companion.conjunctionDays) -
      epochBjdTdb;
    const e = companion.circular ? 0 : truth.eccentricity;
    start[base + SHAPE] = e * Math.cos(truth.argPeriastronStarRad);
    start[base + SHAPE + 1] = e * Math.sin(truth.argPeriastronStarRad);
    if (companion.pulls) start[base + AMPLITUDE] = truth.semiAmplitudeMps;
    start[base + RADIUS_RATIO] = truth.radiusRatio;
    start[base + RELATIVE_IMPACT] = truth.impactParameter / (1 + truth.radiusRatio);
  });
  start[index.logStarDensity] = Math.log(densityGcc(set));
  start[index.band(0)] = set.limb.u1;
  start[index.band(0) + 1] = set.limb.u2;
  return fitFrom(recipe, start);
}

/** Mean density of the simulated star, g/cm3: M / (4/3 pi R^3), the Sun's is 1.41. */
export function densityGcc({ star }: SimulatedLight): number {
  return (1.41 * star.massSolar) / star.radiusSolar ** 3;
}
