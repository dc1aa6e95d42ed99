/**
 * Masses and eccentricities of transiting companions from the variations of their mid-times: the equations of motion are
 * integrated, nothing is approximated but what `assumptions` says.
 */
import { UsageError } from '../../errors.js';
import { SECONDS_PER_DAY } from '../../orbit/constants.js';
import { conjunctionTimes } from '../../orbit/interaction/conjunctions.js';
import { companionRecords, correlation, resonanceRecords } from './interaction-companions.js';
import { drawsOfCurvature, drawsOfPosterior } from './interaction-draws.js';
import { COORDINATES, InteractionModel } from './interaction-model.js';
import { followDraws } from './interaction-predictions.js';
import { interactionAssumptions, interactionWarnings } from './interaction-remarks.js';
import { bestJittersOf, curvatureAt, promisedDecrease, searchInteraction } from './interaction-search.js';
import type { InteractionSolution } from './interaction-search.js';
import type {
  InteractionFit,
  InteractionOptions,
  InteractionStar,
  InteractionTable,
} from './interaction-types.js';

const DEFAULT_ECCENTRICITY_SCALE = 0.1;
const DEFAULT_DRAWS = 10_000;
const DEFAULT_OUTLOOK = 0.25;
/** Different cycles that a table needs, and companions that can be integrated together. */
export const FEWEST_CYCLES = 4;
export const MOST_COMPANIONS = 5;
/** A fit has converged when another undamped step promises to lower chi-square by less than this. */
const NEGLIGIBLE_DECREASE = 0.1;

/**
 * Fits masses and eccentricities of two to five companions to their mid-transit times.
 *
 * @param tables - one per companion, with cycle numbers; transits only
 * @throws UsageError when the tables cannot be used so: all reasons together
 *
 * Method: starts along the degeneracy of mass and eccentricity that the near-resonant formula [Lithwick2012] gives, least
 * squares with integrated orbits, straight lines and jitters integrated out, adaptive importance sampling.
 * Deterministic for a seed.
 */
export function fitInteraction(
  tables: readonly InteractionTable[],
  star: InteractionStar,
  options: InteractionOptions = {},
): InteractionFit {
  checkTables(tables);
  const eccentricityScale = options.eccentricityScale ?? DEFAULT_ECCENTRICITY_SCALE;
  const seed = options.seed ?? 1;
  const mostDraws = options.draws ?? DEFAULT_DRAWS;
  const report = options.onProgress ?? (() => undefined);
  const spans = tables.map(({ timesDays }) => {
    const times = Float64Array.from(timesDays).sort();
    return times[times.length - 1]! - times[0]!;
  });
  const model = new InteractionModel(tables, (options.outlook ?? DEFAULT_OUTLOOK) * Math.max(...spans));
  checkPeriods(model, tables);
  const solutions = searchInteraction(model, eccentricityScale, (share) => {
    report(0.3 * share, 'fitting masses');
  });
  const best = solutions[0];
  if (best === undefined)
    throw new UsageError('no orbits of interacting companions could be fitted to the mid-times', {
      hint: 'check the cycle numbers, and whether both tables belong to companions of one star',
    });
  const draws =
    mostDraws > 0
      ? drawsOfPosterior(model, solutions, eccentricityScale, mostDraws, seed, (share) => {
          report(0.3 + 0.6 * share, 'sampling masses');
        })
      : drawsOfCurvature(model, best, eccentricityScale, seed);
  report(0.9, 'predicting mid-times');
  const followed = followDraws(model, tables, best, draws, eccentricityScale, seed);
  const companions = companionRecords(model, tables, star, best, draws, followed, eccentricityScale, seed);
  const fit = {
    ...evidence(model, best),
    ...convergence(model, best, eccentricityScale),
    epochDays: model.epochDays,
    companions,
    resonances: resonanceRecords(model, tables),
    predictions: followed.predictions.map((prediction, c) => ({
      ...prediction,
      observedSpanDays: spans[c]!,
    })),
    rivals: solutions.slice(1).map(({ point, logDensity }) => ({
      massRatios: tables.map((_, c) => Math.exp(point[COORDINATES * c]!)),
      eccentricities: tables.map((_, c) =>
        Math.hypot(point[COORDINATES * c + 1]!, point[COORDINATES * c + 2]!),
      ),
      deltaLogLikelihood: logDensity - best.logDensity,
    })),
    modelErrorSeconds: modelError(model, best),
    posterior: draws.posterior,
    massCorrelation: massCorrelation(draws.points, tables.length),
  };
  report(1, 'predicting mid-times');
  return {
    ...fit,
    assumptions: interactionAssumptions(eccentricityScale, mostDraws > 0),
    warnings: interactionWarnings(fit, draws.points, best.point),
  };
}

function checkTables(tables: readonly InteractionTable[]): void {
  const problems: string[] = [];
  if (tables.length < 2 || tables.length > MOST_COMPANIONS)
    problems.push(`mid-times of ${tables.length} companions were given, allowed are 2 to ${MOST_COMPANIONS}`);
  for (const { letter, cycles, timesDays, sigmasDays } of tables) {
    const different = new Set(Array.from(cycles)).size;
    if (different < FEWEST_CYCLES)
      problems.push(
        `companion ${letter} has mid-times of ${different} cycles, at least ${FEWEST_CYCLES} are needed`,
      );
    if (!Array.from(cycles).every(Number.isInteger))
      problems.push(`companion ${letter} has cycles that are not whole numbers`);
    if (!Array.from(timesDays).every(Number.isFinite))
      problems.push(`companion ${letter} has a time that is no number`);
    if (!Array.from(sigmasDays).every((sigma) => sigma > 0 && sigma < Infinity))
      problems.push(`companion ${letter} has an error that is not above zero`);
  }
  if (problems.length > 0)
    throw new UsageError(problems.join('; '), {
      allowed: 'one table of mid-transit times per companion, each with cycle numbers and errors',
    });
}

/** Companions with nearly one period, or a period below zero, mean wrong cycle numbers. */
function checkPeriods(model: InteractionModel, tables: readonly InteractionTable[]): void {
  const problems: string[] = [];
  model.lines.forEach(({ periodDays }, a) => {
    const { letter } = tables[a]!;
    if (!(periodDays > 0))
      problems.push(
        `companion ${letter}: the times do not grow with the cycle numbers (${periodDays} d a cycle)`,
      );
    for (let b = 0; b < a; b++) {
      const ratio = periodDays / model.lines[b]!.periodDays;
      if (ratio > 0.85 && ratio < 1.18)
        problems.push(
          `companions ${tables[b]!.letter} and ${letter} have nearly the same period (ratio ${ratio.toFixed(3)})`,
        );
    }
  });
  if (problems.length > 0)
    throw new UsageError(problems.join('; '), {
      hint: 'check the cycle numbers and the letters of the tables',
    });
}

/** Against straight lines, jitters refitted on both sides. */
function evidence(
  model: InteractionModel,
  best: InteractionSolution,
): Pick<
  InteractionFit,
  'chiSquare' | 'chiSquareLines' | 'degreesOfFreedom' | 'deltaLogLikelihood' | 'deltaBic'
> {
  model.predict(best.point);
  const residuals = model.observedDays.map((times, t) =>
    times.map((time, i) => time - model.predictedDays[t]![i]!),
  );
  const { logLikelihood } = bestJittersOf(model.likelihoods, residuals);
  const lines = bestJittersOf(model.likelihoods, model.observedDays);
  const chiSquareOf = (values: readonly Float64Array[]): number =>
    model.likelihoods.reduce((sum, likelihood, t) => {
      likelihood.evaluate(values[t]!, best.jittersDays[t]!);
      return sum + likelihood.chiSquare;
    }, 0);
  const count = residuals.reduce((sum, { length }) => sum + length, 0);
  const gain = logLikelihood - lines.logLikelihood;
  return {
    chiSquare: chiSquareOf(residuals),
    chiSquareLines: chiSquareOf(model.observedDays),
    degreesOfFreedom: count - 2 * model.companionCount - model.size,
    deltaLogLikelihood: gain,
    deltaBic: 2 * gain - model.size * Math.log(count),
  };
}

function convergence(
  model: InteractionModel,
  best: InteractionSolution,
  eccentricityScale: number,
): Pick<InteractionFit, 'status' | 'usable'> {
  const isConverged =
    best.outcome.status === 'converged' ||
    promisedDecrease(model, best.point, best.jittersDays, eccentricityScale) < NEGLIGIBLE_DECREASE;
  if (curvatureAt(model, best.point, best.jittersDays, eccentricityScale) === null)
    return { status: 'failed', usable: false };
  return { status: isConverged ? 'converged' : 'iteration-limit', usable: isConverged };
}

/** Largest difference from the exact integration over the observed times, s. */
function modelError(model: InteractionModel, best: InteractionSolution): number {
  model.predict(best.point);
  const companions = model.lines.map((_, c) => ({
    ...model.osculating(c),
    inclinationRad: Math.PI / 2,
    nodeRad: 0,
  }));
  const fast = model.lines.map((_, c) => model.allTimes(c).timesDays);
  const last = Math.max(...fast.map((times) => times[times.length - 1]!));
  const exact = conjunctionTimes({ starMassSolar: 1, epochDays: 0, companions }, 0, last + 1e-3);
  let worst = 0;
  exact.forEach(({ transits }, c) => {
    const times = fast[c]!;
    for (let i = 0; i < Math.min(times.length, transits.length); i++)
      worst = Math.max(worst, Math.abs(times[i]! - transits[i]!));
  });
  return worst * SECONDS_PER_DAY;
}

function massCorrelation(points: readonly Float64Array[], count: number): number[][] {
  const columns = Array.from({ length: count }, (_, c) =>
    Float64Array.from(points, (point) => point[COORDINATES * c]!),
  );
  return columns.map((a, i) => columns.map((b, k) => (i === k ? 1 : correlation(a, b))));
}
