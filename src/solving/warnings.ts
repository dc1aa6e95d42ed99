/** What the user must know before believing a solution. */
import type { Case, VelocitySet } from '../observations/types.js';
import { medianAbsoluteDeviation } from '../numerics/summary.js';
import { AU_IN_SOLAR_RADII } from '../orbit/constants.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { ACCEPTED } from './addition.js';
import { chiSquareOf } from './residuals.js';
import { CLOSE_RIVAL } from './rivals.js';
import { YEAR_PER_DAY } from './window-function.js';
import type { CompanionRecord, InstrumentRecord } from './types.js';

export interface Warning {
  readonly code: string;
  readonly message: string;
}

interface WarningInput {
  readonly explorer: Explorer;
  readonly best: PlannedFit;
  /** (n), observed minus model, m/s. */
  readonly residualsMps: Float64Array;
  readonly theCase: Case;
  readonly velocities: VelocitySet;
  readonly companions: readonly CompanionRecord[];
  readonly instruments: readonly InstrumentRecord[];
}

type Check = (given: WarningInput) => Warning[];

const days = (period: number): string => `${period < 10 ? period.toFixed(3) : period.toFixed(1)} d`;

const longPeriods: Check = ({ explorer, companions }) =>
  companions.flatMap(({ letter, elements }) => {
    const period = elements.period.value!;
    const { spanDays } = explorer.range;
    if (period > spanDays) {
      return [{ code: 'period-longer-than-data', message: `companion ${letter}: the period (${days(period)}) is longer than the observations (${days(spanDays)}); period, eccentricity and mass are not independent of each other` }];
    }
    return period > 0.7 * spanDays
      ? [{ code: 'hardly-one-revolution', message: `companion ${letter}: the observations (${days(spanDays)}) cover hardly more than one revolution (${days(period)})` }]
      : [];
  }); // prettier-ignore

const fewData: Check = ({ best, velocities }) => {
  const left = velocities.count - best.fit.problem.freeCount;
  return left < 5
    ? [{ code: 'few-data', message: `${velocities.count} velocities for ${best.fit.problem.freeCount} free parameters: the goodness of fit says little` }]
    : [];
}; // prettier-ignore

const lonelyInstruments: Check = ({ instruments }) =>
  instruments
    .filter((instrument) => instrument.count === 1)
    .map((instrument) => ({
      code: 'one-velocity-instrument',
      message: `instrument ${instrument.name} has one velocity: its zero point absorbs it, and it does not constrain the orbit`,
    }));

const steepOrbits: Check = ({ companions }) =>
  companions
    .filter(({ elements }) => elements.eccentricity.value! > 0.95)
    .map(({ letter }) => ({
      code: 'eccentricity-at-limit',
      message: `companion ${letter}: the eccentricity was driven close to 1; look whether single velocities carry it`,
    }));

const undetermined: Check = ({ companions }) =>
  companions
    .filter(
      ({ elements }) =>
        elements.period.value !== null && elements.period.fixed !== true && elements.period.sigma === null,
    )
    .map(({ letter }) => ({
      code: 'uncertainty-unknown',
      message: `companion ${letter}: the curvature at the solution does not determine every element, so that no uncertainties are given`,
    }));

/** Two signals closer than the resolution of the data share one peak. */
const sharedSignals: Check = ({ explorer, companions }) =>
  companions.flatMap((first, i) =>
    companions.slice(i + 1).flatMap((second) => {
      const apart = Math.abs(1 / first.elements.period.value! - 1 / second.elements.period.value!);
      return apart * explorer.range.spanDays < 1
        ? [{ code: 'one-signal-claimed-twice', message: `companions ${first.letter} and ${second.letter} are closer in frequency than the data resolve: they may describe one signal` }]
        : [];
    }),
  ); // prettier-ignore

const closeRivals: Check = ({ companions }) =>
  companions.flatMap(({ letter, rivals }) => {
    const top = rivals[0];
    return top !== undefined && top.deltaLogLikelihood > CLOSE_RIVAL
      ? [{ code: 'rival-period', message: `companion ${letter}: a period of ${days(top.period)} (${top.kind}) fits nearly as well (Δ ln L ${top.deltaLogLikelihood.toFixed(1)})` }]
      : [];
  }); // prettier-ignore

const weakCompanions: Check = ({ companions }) =>
  companions
    .filter(
      ({ evidence }) =>
        evidence.falseAlarmProbability > ACCEPTED.falseAlarmProbability ||
        evidence.deltaBic < ACCEPTED.deltaBic,
    )
    .map(({ letter, evidence }) => ({
      code: 'companion-not-supported',
      message: `companion ${letter} was asked for but does not clear the thresholds (false-alarm probability ${evidence.falseAlarmProbability.toPrecision(2)}, ΔBIC ${evidence.deltaBic.toFixed(1)})`,
    }));

/** Periods that the rotation of the Earth or its orbit could have made. */
const terrestrialPeriods: Check = ({ explorer, companions }) =>
  companions.flatMap(({ letter, elements }) => {
    const frequency = 1 / elements.period.value!;
    const near = [
      { name: 'one day', value: 1 },
      { name: 'one year', value: YEAR_PER_DAY },
    ].find(({ value }) => Math.abs(frequency - value) < Math.max(0.5 / explorer.range.spanDays, 0.003 * value));
    return near === undefined
      ? []
      : [{ code: 'terrestrial-period', message: `companion ${letter}: the period is close to ${near.name}; the phases that could be observed are few, and systematic effects of that period exist` }];
  }); // prettier-ignore

const largestPhaseGap: Check = ({ velocities, companions }) =>
  companions.flatMap(({ letter, elements }) => {
    const phases = [...velocities.timesBjdTdb].map((t) => (t - elements.timeOfPeriastron.value!) / elements.period.value!);
    const sorted = phases.map((phase) => phase - Math.floor(phase)).sort((a, b) => a - b);
    const gaps = sorted.map((phase, i) => (sorted[i + 1] ?? sorted[0]! + 1) - phase);
    const widest = Math.max(...gaps);
    return widest > 0.35
      ? [{ code: 'phase-gap', message: `companion ${letter}: ${(100 * widest).toFixed(0)} % of the orbit was never observed` }]
      : [];
  }); // prettier-ignore

const largeJitters: Check = ({ velocities, instruments }) =>
  instruments.flatMap((instrument, index) => {
    const sigmas = velocities.sigmasMps.filter((_, i) => velocities.instrumentOf[i] === index).sort();
    const typical = sigmas[Math.floor(sigmas.length / 2)] ?? 0;
    return instrument.count > 3 && instrument.jitter.value! > 5 * typical
      ? [{ code: 'large-jitter', message: `instrument ${instrument.name}: the jitter (${instrument.jitter.value!.toPrecision(2)} m/s) is many times the stated errors (${typical.toPrecision(2)} m/s): something that is not in the model, or errors too small` }]
      : [];
  }); // prettier-ignore

/** With jitters that cannot grow, unexplained scatter would pass for precision. */
const excessScatter: Check = ({ best, residualsMps, velocities }) => {
  const { problem, point } = best.fit;
  if (!problem.structure.jitters.some((jitter) => jitter.isStated)) return [];
  const chiSquare = chiSquareOf(residualsMps, problem.data, point.jittersMps);
  const degrees = velocities.count - problem.freeCount;
  return degrees > 4 && chiSquare > 1.8 * degrees
    ? [{ code: 'scatter-exceeds-noise', message: `χ² is ${chiSquare.toFixed(0)} for ${degrees} degrees of freedom: errors and stated jitters are too small for these residuals, so uncertainties and evidence are too good; leave the jitter free` }]
    : [];
}; // prettier-ignore

/** Velocities far from all others: one alone can pass for an orbit, or hide one. */
const outliers: Check = ({ residualsMps, velocities }) => {
  const scaled = residualsMps.map((residual, i) => residual / velocities.sigmasMps[i]!);
  const scatter = 1.4826 * (medianAbsoluteDeviation(scaled) || 1);
  return Array.from(scaled, (z, i) => ({ times: Math.abs(z) / scatter, i }))
    .filter(({ times }) => times > 5)
    .sort((a, b) => b.times - a.times)
    .slice(0, 5)
    .map(({ times, i }) => ({
      code: 'outlier',
      message: `${velocities.tables[velocities.tableOf[i]!]?.path ?? 'table'}:${velocities.lines[i]!}: this velocity lies ${times.toFixed(0)} times the usual scatter from the model; one such value can hide an orbit or pass for one: check it, or flag it`,
    }));
}; // prettier-ignore

/** Errors much larger than the scatter make every signal look weak. */
const errorsTooLarge: Check = ({ best: { fit }, residualsMps, velocities }) => {
  const { problem } = fit;
  const withoutJitter = new Float64Array(problem.data.instrumentCount);
  const chiSquare = chiSquareOf(residualsMps, problem.data, withoutJitter);
  const degrees = velocities.count - problem.freeCount;
  return degrees > 8 && chiSquare < 0.35 * degrees
    ? [{ code: 'errors-too-large', message: `χ² is ${chiSquare.toPrecision(2)} for ${degrees} degrees of freedom: the stated errors are much larger than the scatter, so that signals look weaker than they are; check their unit` }]
    : [];
}; // prettier-ignore

/** A companion that was asked for and is not there. */
const missingCompanions: Check = ({ theCase, companions }) => {
  const wanted = typeof theCase.companions === 'object' ? theCase.companions.length : theCase.companions;
  return typeof wanted === 'number' && wanted > companions.length
    ? [{ code: 'companion-not-found', message: `${wanted} companions were asked for, ${companions.length} could be fitted: look at the range of periods that is searched, and at the number of velocities` }]
    : [];
}; // prettier-ignore

/** An orbit inside the star contradicts what the case says of the star. */
const insideStar: Check = ({ theCase, companions }) =>
  companions.flatMap(({ letter, derived }) => {
    const axis = derived.semiMajorAxis.value;
    const radius = theCase.star.radiusSolar?.value ?? null;
    if (axis === null || radius === null || axis * AU_IN_SOLAR_RADII > radius) return [];
    return [{ code: 'orbit-inside-star', message: `companion ${letter}: the orbit (${axis.toPrecision(3)} au) lies inside a star of ${radius} R_sun: radius and orbit contradict each other` }];
  }); // prettier-ignore

/** A harmonic of another companion may be its eccentricity. */
const harmonics: Check = ({ companions }) =>
  companions.flatMap((outer) =>
    companions
      .filter((inner) => inner !== outer)
      .flatMap((inner) => {
        const ratio = outer.elements.period.value! / inner.elements.period.value!;
        const order = [2, 3].find((whole) => Math.abs(ratio / whole - 1) < 0.01);
        return order !== undefined && outer.circular
          ? [{ code: 'harmonic-period', message: `companion ${inner.letter} has ${order === 2 ? 'half' : 'a third of'} the period of ${outer.letter}, whose orbit is taken as circular: an eccentric orbit of ${outer.letter} may be the reason` }]
          : [];
      }),
  ); // prettier-ignore

const cutGrid: Check = ({ explorer }) =>
  explorer.range.cut
    ? [{ code: 'search-cut', message: `the observations span ${explorer.range.spanDays.toFixed(0)} d, too long to search below ${days(explorer.range.shortestPeriodDays)} at full resolution: state a period range, and check the dates` }]
    : []; // prettier-ignore

const tableNotices: Check = ({ velocities }) =>
  velocities.notices.map((notice) => ({
    code: notice.code,
    message: `${notice.path}: ${notice.message}`,
  }));

const CHECKS: readonly Check[] = [
  tableNotices,
  fewData,
  cutGrid,
  lonelyInstruments,
  longPeriods,
  steepOrbits,
  undetermined,
  sharedSignals,
  weakCompanions,
  closeRivals,
  terrestrialPeriods,
  largestPhaseGap,
  largeJitters,
  excessScatter,
  harmonics,
  outliers,
  errorsTooLarge,
  missingCompanions,
  insideStar,
];

export function warningsOf(given: WarningInput): Warning[] {
  return CHECKS.flatMap((check) => check(given));
}
