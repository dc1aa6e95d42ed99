/** Puts the parts of a joint model together: which companions, which points, which bands, which priors. */
import { starRadiusLightDays } from '../../orbit/light-time.js';
import type { Observations } from '../../observations/photometry-types.js';
import type { Case, CompanionChoice } from '../../observations/types.js';
import type { Explorer } from '../explorer.js';
import type { ModelPlan } from '../model-builder.js';
import type { PriorScales } from '../posterior/priors.js';
import type { Ephemeris } from './curve-windows.js';
import type { FoundTransit, NumberedSet } from './found-transit.js';
import type { BandSetting, JointCompanion, JointRecipe, MidTimeData } from './joint-data.js';
import { prepareCurve, type PreparedCurve } from './prepare-curve.js';
import type { CompanionStart } from './joint-start.js';

/** The part of a joint model that velocities carry. */
export interface VelocityPart {
  readonly explorer: Explorer;
  readonly plan: ModelPlan;
  readonly scales: PriorScales;
}

/** A companion of the model before it is fitted. */
export interface PlannedCompanion {
  readonly letter: string;
  readonly circular: boolean;
  readonly start: CompanionStart;
  readonly found: FoundTransit | null;
  readonly pulls: boolean;
  readonly choice: CompanionChoice | null;
  readonly occultationLagDays: number | null;
}

export interface PreparedJoint {
  readonly recipe: JointRecipe;
  /** By which the points were chosen. */
  readonly ephemerides: readonly Ephemeris[];
  readonly curves: readonly PreparedCurve[];
}

/** Periods within this factor of a known one belong to the prior. */
const KNOWN_PERIOD_REACH = 1.5;
/** Where one event is all there is, periods up to this many days are possible. */
export const LONGEST_UNKNOWN_DAYS = 10_000;

/**
 * @param baselines - per light curve the terms beside the constant, see `prepareCurve`
 */
export function prepareJoint(
  theCase: Case,
  observations: Observations,
  companions: readonly PlannedCompanion[],
  sets: readonly NumberedSet[],
  velocity: VelocityPart | null,
  epochBjdTdb: number,
  baselines: ReadonlyMap<string, readonly string[]>,
): PreparedJoint {
  const bands: string[] = [];
  const ephemerides: Ephemeris[] = companions.flatMap(({ found, start, letter, occultationLagDays }) =>
    found === null || !found.isSeen
      ? []
      : [
          {
            ...found.ephemeris,
            letter,
            midTimeDays: start.conjunctionDays,
            periodDays: found.ephemeris.periodDays === null ? null : start.periodDays,
            occultationLagDays,
          },
        ],
  );
  const curves =
    ephemerides.length === 0
      ? []
      : observations.lightCurves.flatMap((table) => {
          const known = bands.indexOf(table.band);
          const band = known < 0 ? bands.length : known;
          const prepared = prepareCurve(
            table,
            epochBjdTdb,
            ephemerides,
            band,
            baselines.get(table.name) ?? (table.baseline === 'auto' ? [] : table.baseline),
          );
          if (prepared === null) return [];
          if (known < 0) bands.push(table.band);
          return [prepared];
        });
  const isSeen = (companion: PlannedCompanion): boolean =>
    companion.found?.isSeen === true && curves.length > 0;
  const { radiusSolar, densityGcc } = theCase.star;
  const { explorer, plan, scales } = velocity ?? { explorer: null, plan: null, scales: null };
  const instruments = explorer?.builder.data.instrumentCount ?? 0;
  const counts = new Array<number>(instruments).fill(0);
  for (const instrument of explorer?.builder.data.instrumentOf ?? []) counts[instrument]!++;
  const names = observations.velocities?.instruments ?? [];
  const recipe: JointRecipe = {
    kind: 'joint',
    epochBjdTdb,
    velocities: explorer?.builder.data ?? null,
    drift: plan?.drift ?? 0,
    zeroPoints: names.map((name) => theCase.instruments[name]?.zeroPointMps ?? null),
    velocityJitters: names.map((name) => theCase.instruments[name]?.jitterMps ?? null),
    velocityCounts: counts,
    curves: curves.map((curve) => curve.data),
    bands: bands.map((name) => bandSetting(theCase, name)),
    midTimes: midTimeData(companions, sets, epochBjdTdb),
    companions: companions.map((companion) =>
      jointCompanion(companion, isSeen(companion), densityGcc != null, explorer, scales),
    ),
    starDensityGcc: densityGcc ?? null,
    starRadiusLightDays: radiusSolar === null ? 0 : starRadiusLightDays(radiusSolar.value),
    scales,
  };
  return { recipe, ephemerides, curves };
}

function bandSetting(theCase: Case, name: string): BandSetting {
  const choice = theCase.bands?.[name];
  return { name, u1: choice?.u1 ?? null, u2: choice?.u2 ?? null };
}

function jointCompanion(
  companion: PlannedCompanion,
  transits: boolean,
  hasDensity: boolean,
  explorer: Explorer | null,
  scales: PriorScales | null,
): JointCompanion {
  const { letter, circular, start, pulls, found, choice, occultationLagDays } = companion;
  const isUnknown = found !== null && found.ephemeris.periodDays === null;
  const isKnown = found !== null && !isUnknown && found.how !== 'velocities';
  return {
    letter,
    circular,
    transits,
    pulls,
    occultation: occultationLagDays !== null && transits,
    choice,
    conjunctionDays: start.conjunctionDays,
    isPeriodUnknown: isUnknown,
    nominalPeriodDays:
      isUnknown && !hasDensity ? Math.max(start.periodDays, 1.5 * found.shortestPeriodDays) : null,
    shortestPeriodDays: isKnown
      ? start.periodDays / KNOWN_PERIOD_REACH
      : isUnknown
        ? found.shortestPeriodDays
        : (scales?.shortestPeriodDays ?? explorer?.range.shortestPeriodDays ?? 0.1),
    longestPeriodDays: isKnown
      ? start.periodDays * KNOWN_PERIOD_REACH
      : isUnknown
        ? LONGEST_UNKNOWN_DAYS
        : (scales?.longestPeriodDays ?? LONGEST_UNKNOWN_DAYS),
  };
}

/** Mid-times with cycles counted from the companion's reference transit. */
function midTimeData(
  companions: readonly PlannedCompanion[],
  sets: readonly NumberedSet[],
  epochBjdTdb: number,
): MidTimeData[] {
  return sets.flatMap(({ letter, times, line }) => {
    const index = companions.findIndex((companion) => companion.letter === letter);
    if (index < 0) return [];
    const shift = times.originBjdTdb - epochBjdTdb;
    const first = Math.round((companions[index]!.start.conjunctionDays - line.timeDays) / line.periodDays);
    return [
      {
        companion: index,
        path: times.origins[0]!.path,
        timesDays: times.timesDays.map((time) => time + shift),
        sigmasDays: times.sigmasDays,
        cycles: Float64Array.from(times.cycles, (cycle) => cycle - first),
        isOccultation: times.isOccultation,
      },
    ];
  });
}
