/** The joint solution as it is recorded: what velocities say, overlaid with what transits and mid-times add. */
import { rootMeanSquare } from '../../numerics/summary.js';
import type { Observations } from '../../observations/photometry-types.js';
import type { CompanionChoice } from '../../observations/types.js';
import { derivedQuantities } from '../companion-record.js';
import { describeSolution, samplingWarnings, starQuantity, type Making } from '../describe-solution.js';
import { absoluteElements } from '../elements-report.js';
import { fixedQuantity, unknownQuantity } from '../quantities.js';
import { chiSquareOf } from '../residuals.js';
import type { CompanionRecord, DerivedKey, ElementKey, Quantity, SolutionRecord, Solved } from '../types.js';
import { ELEMENT_UNITS, elementQuantity } from '../uncertainties.js';
import { inputsOf } from './joint-inputs.js';
import { timeEvents } from './event-times.js';
import { dataCount, freeCount } from './joint-fit.js';
import { jointPosteriorDraws, jointReadings, drawnCovariance, type JointReading } from './joint-columns.js';
import { jointEvidence } from './joint-evidence.js';
import type { JointResult } from './joint-result.js';
import { emptyVelocitySet, jointSampled, type JointSampled } from './joint-sampled.js';
import { jointAssumptions, jointWarnings } from './joint-words.js';
import { photometryArrays } from './photometry-arrays.js';
import { photometryRecord, residualsOf } from './photometry-record.js';
import { predictedInteraction } from './predicted-interaction.js';
import { transitDerived, transitElements } from './transit-quantities.js';

/** Quantities that only a pull on the star tells. */
const OF_PULL: readonly DerivedKey[] = [
  'starOrbitSemiMajorAxis',
  'massFunction',
  'minimumMass',
  'mass',
  'astrometricSignature',
  'hillRadius',
];
/** Quantities that need a period. */
const OF_PERIOD: readonly DerivedKey[] = [
  'semiMajorAxis',
  'periastronDistance',
  'apastronDistance',
  'periastronSpeed',
  'apastronSpeed',
  'nextInferiorConjunction',
  'nextPeriastron',
  'transitProbability',
  'equilibriumTemperature',
  'irradiation',
  'transitDuration',
];

export function describeJoint(result: JointResult, making: Making): Solved {
  const { theCase, observations, search, velocity, settled, sample, epochBjdTdb } = result;
  const joint = jointSampled(theCase, settled, sample, velocity, epochBjdTdb, making.seed);
  const velocities =
    observations.velocities ??
    emptyVelocitySet(
      observations.lightCurves[0]?.timeScale ?? observations.midTimes[0]?.timeScale ?? 'BJD_TDB',
    );
  const letters = settled.companions.map(({ letter }) => letter);
  const base = velocity === null ? null : ofVelocities(result, joint, making);
  const companions = settled.companions.map((_, c) =>
    companionOf(result, joint, c, base?.record.companions[c] ?? null, making),
  );
  const readings = jointReadings(settled.fit.density, letters, velocities.instruments, epochBjdTdb);
  const events = timeEvents(settled.fit, settled.prepared.curves);
  // Timing the events has left the curves as they were; the density itself is put back to the maximum.
  settled.fit.density.evaluate(settled.fit.maximum.position, new Float64Array(settled.fit.density.size));
  const arrays = photometryArrays(settled, joint, events, search, observations.lightCurves, epochBjdTdb);
  const interaction = predictedInteraction(result, joint, arrays.midTimes);
  const photometry = {
    ...photometryRecord(theCase, settled, joint, events, search, epochBjdTdb),
    ...(interaction === null ? {} : { interaction }),
  };
  const record: SolutionRecord = {
    schema: 'tugline/solution',
    version: 1,
    target: theCase.target,
    timeScale: velocities.timeScale,
    epoch: epochBjdTdb,
    star: {
      mass: starQuantity(theCase.star.massSolar, 'M_sun'),
      radius: starQuantity(theCase.star.radiusSolar, 'R_sun'),
      effectiveTemperature: starQuantity(theCase.star.effectiveTemperatureK, 'K'),
    },
    companions,
    candidates: base?.record.candidates ?? [],
    neighbours: base?.record.neighbours ?? [],
    velocity: base?.record.velocity ?? {
      instruments: [],
      slope: fixedQuantity(0, 'm/s/yr'),
      curvature: fixedQuantity(0, 'm/s/yr^2'),
    },
    photometry,
    fit: fitRecord(result, joint, readings, base?.residualsMps ?? new Float64Array(0)),
    posterior: sample.record,
    assumptions: jointAssumptions(result),
    warnings: [
      ...samplingWarnings(sample.record === null ? null : { record: sample.record }),
      ...jointWarnings(result, photometry, companions),
      ...(base?.record.warnings ?? []),
    ],
    provenance: {
      program: 'tugline',
      version: making.provenance.version,
      node: making.provenance.node,
      seed: making.seed,
      command: making.provenance.command,
      inputs: inputsOf(theCase, observations),
    },
  };
  return {
    record,
    velocities,
    best: base?.best ?? {
      companions: joint.best.reported.companions.map((values) => absoluteElements(values, epochBjdTdb)),
      letters,
      zeroPointsMps: new Float64Array(0),
      jittersMps: new Float64Array(0),
      epochBjdTdb,
      slopeMpsPerDay: 0,
      curvatureMpsPerDay2: 0,
    },
    residualsMps: base?.residualsMps ?? new Float64Array(0),
    stages: base?.stages ?? [],
    window: base?.window ?? {
      frequenciesPerDay: new Float64Array(0),
      power: new Float64Array(0),
      peaks: [],
    },
    posterior:
      sample.record === null ? null : jointPosteriorDraws(sample, readings, joint.best, joint.references),
    photometry: arrays,
  };
}

/** The record that velocities alone give, at the point and with the draws of the joint solution. */
function ofVelocities(result: JointResult, joint: JointSampled, making: Making): Solved {
  const { theCase, observations, velocity } = result;
  const { settled } = velocity!;
  const { explorer, best } = settled;
  const plan = { ...joint.plan, companions: joint.plan.companions.slice(0, best.plan.companions.length) };
  const problem = explorer.builder.problem(plan);
  const values = joint.sampled;
  const portable = explorer.builder.portable({ ...best.fit, problem: values.problem, point: values.point });
  const own = explorer.builder.point(problem, {
    ...portable,
    companions: portable.companions.slice(0, plan.companions.length),
  });
  const logLikelihood = problem.logLikelihood(own);
  const fit = {
    ...best.fit,
    problem,
    point: own,
    logLikelihood,
    logDensity: problem.logDensity(own),
    bic: problem.freeCount * Math.log(problem.data.timesDays.length) - 2 * logLikelihood,
  };
  const sampled = { ...values, problem, point: own };
  return describeSolution(
    { ...theCase, companions: listedAs(result, plan.companions.length) },
    observations.velocities!,
    { ...settled, best: { plan, fit } },
    sampled,
    making,
  );
}

/** The companions of the velocities by the letters that they have in the joint solution. */
function listedAs({ settled }: JointResult, count: number): readonly CompanionChoice[] {
  return settled.companions.slice(0, count).map(({ letter, circular, choice }) => ({
    ...(choice ?? { circular, elements: {}, inclinationDeg: null }),
    letter,
  }));
}

function companionOf(
  result: JointResult,
  joint: JointSampled,
  index: number,
  base: CompanionRecord | null,
  making: Making,
): CompanionRecord {
  const { settled, epochBjdTdb, observations } = result;
  const companion = settled.companions[index]!;
  const { pulls, transits, isPeriodUnknown } = settled.fit.recipe.companions[index]!;
  const keys = Object.keys(ELEMENT_UNITS) as ElementKey[];
  const elements = Object.fromEntries(
    keys.map((key) => [key, elementOf(joint, index, key, epochBjdTdb, { pulls, isPeriodUnknown })]),
  ) as Record<ElementKey, Quantity>;
  const lastObservationDays = lastTime(observations) - epochBjdTdb;
  const derived =
    base?.derived ??
    derivedQuantities(
      { epochBjdTdb, lastObservationDays },
      joint.sampled,
      index,
      companion.choice,
      making.seed,
    );
  const kept = Object.fromEntries(
    Object.entries(derived).map(([key, quantity]): [string, Quantity] => {
      if (!pulls && OF_PULL.includes(key as DerivedKey))
        return [key, unknownQuantity(quantity.unit, 'no velocities show its pull')];
      if (isPeriodUnknown && OF_PERIOD.includes(key as DerivedKey))
        return [key, unknownQuantity(quantity.unit, 'its period is not known')];
      return [key, quantity];
    }),
  ) as Record<DerivedKey, Quantity>;
  const reading = {
    index,
    best: joint.best,
    draws: joint.draws,
    star: joint.sampled.star,
    stars: joint.sampled.stars,
    epochBjdTdb,
    pulls,
    isPeriodUnknown,
  };
  return {
    letter: companion.letter,
    elements: transits ? { ...elements, ...transitElements(reading) } : elements,
    derived: transits ? { ...kept, ...transitDerived(reading) } : kept,
    circular: companion.circular,
    evidence: jointEvidence(result, index, base?.evidence ?? null),
    rivals: base?.rivals ?? [],
    ...(base?.rivalsTried === undefined ? {} : { rivalsTried: base.rivalsTried }),
  };
}

function elementOf(
  joint: JointSampled,
  index: number,
  key: ElementKey,
  epochBjdTdb: number,
  known: { readonly pulls: boolean; readonly isPeriodUnknown: boolean },
): Quantity {
  if (key === 'semiAmplitude' && !known.pulls)
    return unknownQuantity(ELEMENT_UNITS[key], 'no velocities show its pull');
  const quantity = elementQuantity(joint.sampled, index, key, epochBjdTdb);
  if (key !== 'period' || !known.isPeriodUnknown) return quantity;
  const { lower, upper, unit } = quantity;
  return {
    value: null,
    sigma: null,
    lower,
    upper,
    unit,
    why: 'one transit only: the data bound the period but do not tell it',
  };
}

function lastTime({ velocities, lightCurves, midTimes }: Observations): number {
  return Math.max(
    velocities?.timesBjdTdb.at(-1) ?? -Infinity,
    ...lightCurves.map((table) => table.timesBjdTdb.at(-1) ?? -Infinity),
    ...midTimes.flatMap((table) => Array.from(table.timesBjdTdb)),
  );
}

function fitRecord(
  { settled, observations, velocity }: JointResult,
  joint: JointSampled,
  readings: readonly JointReading[],
  residualsMps: Float64Array,
): SolutionRecord['fit'] {
  const { fit, prepared, companions } = settled;
  const n = dataCount(fit.recipe);
  const k = freeCount(fit.recipe, fit.density);
  let chiSquare =
    observations.velocities === null || velocity === null
      ? 0
      : chiSquareOf(residualsMps, velocity.part.explorer.builder.data, joint.best.reported.jittersMps);
  prepared.curves.forEach((_, i) => {
    const { variances } = fit.density.curves[i]!;
    residualsOf(settled, i).forEach((residual, row) => (chiSquare += residual ** 2 / variances[row]!));
  });
  fit.recipe.midTimes.forEach((set, i) => {
    const jitter = joint.best.natural[fit.density.coordinates.index.midTimeJitter(i)]!;
    const { predictionDays } = fit.density.midTimes[i]!;
    set.timesDays.forEach((time, row) => {
      chiSquare += (time - predictionDays[row]!) ** 2 / (set.sigmasDays[row]! ** 2 + jitter ** 2);
    });
  });
  const { value, steepest } = fit.maximum;
  return {
    status: steepest < 0.05 ? 'converged' : 'iteration-limit',
    reason: `largest slope of ln L along a direction of unit curvature ${steepest.toExponential(1)}, limit 5e-2`,
    usable: companions.length > 0,
    logLikelihood: value,
    chiSquare,
    degreesOfFreedom: n - k,
    freeParameters: k,
    bic: fit.bic,
    aicc: n - k - 1 > 0 ? 2 * k - 2 * value + (2 * k * (k + 1)) / (n - k - 1) : null,
    rms: residualsMps.length > 0 ? rootMeanSquare(residualsMps) : 0,
    covariance: drawnCovariance(readings, joint.best, joint.draws),
  };
}
