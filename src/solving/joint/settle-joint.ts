/** The joint maximum: windows, baselines, circular or eccentric, settled in turn. */
import type { Observations } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import { bicWithTransit, chooseBaseline } from './baseline-choice.js';
import { bicByRefit } from './baseline-refit.js';
import { carriedTo } from './carry-natural.js';
import type { NumberedSet } from './found-transit.js';
import { fitFrom, fitFromStarts, type JointFit } from './joint-fit.js';
import {
  prepareJoint,
  type PlannedCompanion,
  type PreparedJoint,
  type VelocityPart,
} from './joint-recipe.js';
import type { NoiseStart } from './joint-start.js';
import type { PreparedCurve } from './prepare-curve.js';
import { SHAPE } from './natural.js';
import { refinedBy } from './plan-companions.js';
import { withOtherShapes, withShiftedEphemeris } from './restarts.js';

/** Single events whose baselines are judged by refits; with more of them the others hold the shape of the transit. */
const MOST_REFITTED = 4;
/** Windows and baselines are settled anew this often: the first duration is that of a box. */
const TURNS = 2;
const START_ECCENTRICITY = 0.05;
/** Below this signal to noise of the folded dips. */
const FAINT = 60;

export interface SettledJoint {
  readonly prepared: PreparedJoint;
  readonly companions: readonly PlannedCompanion[];
  readonly fit: JointFit;
  /** Per companion the fit with the other shape (circular or eccentric) where the choice was left to the evidence. */
  readonly otherShapes: readonly (JointFit | null)[];
}

export interface JointGiven {
  readonly theCase: Case;
  readonly observations: Observations;
  readonly sets: readonly NumberedSet[];
  readonly velocity: VelocityPart | null;
  readonly noise: NoiseStart | null;
  readonly epochBjdTdb: number;
}

/** @returns `null` where no start gives a finite model */
export function settleJoint(given: JointGiven, planned: readonly PlannedCompanion[]): SettledJoint | null {
  const prepare = (companions: readonly PlannedCompanion[], baselines: Baselines): PreparedJoint =>
    prepareJoint(
      given.theCase,
      given.observations,
      companions,
      given.sets,
      given.velocity,
      given.epochBjdTdb,
      baselines,
    );
  let companions = planned;
  let baselines: Baselines = new Map();
  let prepared = prepare(companions, baselines);
  const starts = companions.map(({ start }) => start);
  let fit = fitFromStarts(prepared.recipe, starts, given.noise);
  if (fit === null) return null;
  for (let turn = 0; turn < TURNS; turn++) {
    companions = refinedBy(fit, companions);
    baselines = chosenBaselines(given, prepared, fit);
    const renewed = prepare(companions, baselines);
    const next = fitFrom(renewed.recipe, carriedTo(fit.natural, fit.recipe, renewed.recipe));
    if (next === null) break;
    [fit, prepared] = [next, renewed];
  }
  fit = overNeighbours(fit, companions);
  const otherShapes: (JointFit | null)[] = companions.map(() => null);
  for (let c = 0; c < companions.length; c++) {
    if (!isShapeOpen(given, companions[c]!)) continue;
    const flipped = companions.map((companion, o) =>
      o === c ? { ...companion, circular: !companion.circular } : companion,
    );
    const otherPrepared = prepare(flipped, baselines);
    const start = carriedTo(withShape(fit, c, flipped[c]!.circular), fit.recipe, otherPrepared.recipe);
    const other = fitFrom(otherPrepared.recipe, start);
    otherShapes[c] = other;
    if (other === null || other.bic >= fit.bic) continue;
    otherShapes[c] = fit;
    [fit, prepared, companions] = [other, otherPrepared, flipped];
  }
  return { prepared, companions: refinedBy(fit, companions), fit, otherShapes };
}

/** Faint transits are tried at neighbouring phases and periods. */
function overNeighbours(fit: JointFit, companions: readonly PlannedCompanion[]): JointFit {
  return companions.reduce((best, { found, start }, c) => {
    const { transits, isPeriodUnknown } = fit.recipe.companions[c]!;
    const isFaint = (found?.candidate?.signalToNoise ?? Infinity) < FAINT;
    if (!transits) return best;
    const shiftedOver = !isPeriodUnknown && isFaint ? start.transit!.durationDays : null;
    const shaped = withOtherShapes(best, c, shiftedOver);
    return shiftedOver === null ? shaped : withShiftedEphemeris(shaped, c, shiftedOver);
  }, fit);
}

type Baselines = ReadonlyMap<string, readonly string[]>;

/** Whether the evidence decides between a circular and an eccentric orbit: a light curve alone cannot. */
function isShapeOpen({ theCase, sets, velocity }: JointGiven, companion: PlannedCompanion): boolean {
  const wanted = companion.choice?.circular ?? theCase.circular;
  if (wanted !== 'auto' || companion.choice?.elements.eccentricity !== undefined) return false;
  const hasOccultations = sets.some(
    ({ letter, times }) => letter === companion.letter && times.isOccultation.some((flag) => flag === 1),
  );
  return (
    (velocity !== null && companion.pulls) ||
    (companion.occultationLagDays !== null && companion.found?.isSeen === true) ||
    hasOccultations
  );
}

/** The natural parameters of a fit, with a small eccentricity where one is to grow. */
function withShape(fit: JointFit, companion: number, circular: boolean): Float64Array {
  const natural = Float64Array.from(fit.natural);
  const at = fit.density.coordinates.index.companion(companion) + SHAPE;
  natural[at] = circular ? 0 : START_ECCENTRICITY;
  natural[at + 1] = circular ? 0 : START_ECCENTRICITY;
  return natural;
}

function chosenBaselines(
  given: JointGiven,
  { curves, ephemerides }: PreparedJoint,
  fit: JointFit,
): Baselines {
  const chosen = new Map<string, readonly string[]>();
  const isOpen = curves.filter(({ table }) => table.baseline === 'auto').length <= MOST_REFITTED;
  curves.forEach((curve, i) => {
    if (curve.table.baseline !== 'auto') return;
    const likelihood = fit.density.curves[i]!;
    likelihood.predict(fit.density.curvePoints[i]!, false);
    const score =
      isOpen && curve.windows.length === 1
        ? bicByRefit(fit, i)
        : (other: PreparedCurve): number => bicWithTransit(other, likelihood.transit);
    chosen.set(curve.table.name, chooseBaseline(curve, given.epochBjdTdb, ephemerides, score));
  });
  return chosen;
}
