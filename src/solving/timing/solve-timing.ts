/** Mid-times in; ephemeris, models and predictions out. */
import { InputDataError } from '../../errors.js';
import { median, rootMeanSquare } from '../../numerics/summary.js';
import type { MidTimeTable } from '../../observations/photometry-types.js';
import { relativeSemiMajorAxisAu } from '../../orbit/masses.js';
import { MINUTES_PER_DAY, SECONDS_PER_DAY } from '../../orbit/constants.js';
import { verdictOn } from './compare-models.js';
import { numberCycles, type NumberingChoices } from './cycles.js';
import type { Numbering } from './written-cycles.js';
import { fitTimingModel, type FittedModel } from './fit-timing-model.js';
import { jitterScale } from './jitter-profile.js';
import { fitAllModels, type ModelRangeDays } from './fit-all-models.js';
import { mixtureMoments, linearFunctional } from './mixture.js';
import { modelForm, timingProblem, type TimingProblem } from './model-forms.js';
import type { SystemFacts } from './parameters.js';
import { lightTimeAcrossSeconds } from './physics.js';
import { calculatedDays, predictions, timingCurve } from './predict.js';
import { outliersOf, timingAssumptions, timingWarnings } from './timing-remarks.js';
import { mergeMidTimes, sharedEventNotices } from './timing-data.js';
import type { TimingCurve, TimingRecord, TimingSolved } from './types.js';

export interface TimingChoices extends NumberingChoices {
  readonly target: string;
  /** Known of the system; the semi-major axis may also come from the star's mass. */
  readonly facts: SystemFacts;
  readonly starMassSolar: number | null;
  /** Periods of a modulation to look at, days; `null` leaves an end to the data. */
  readonly modulationDays: ModelRangeDays;
  /** How many events to predict, and after which date (`null`: the last mid-time). */
  readonly next: number;
  readonly afterBjdTdb: number | null;
  readonly seed: number;
  readonly provenance: {
    readonly version: string;
    readonly node: string;
    readonly command: readonly string[];
  };
  readonly onProgress?: (stage: string, fraction: number) => void;
}

const FEWEST_TIMES = 3;
/** Curves run on into the future by this share of the range of the cycles, and at least to the last prediction. */
const FUTURE_SHARE = 0.2;

/**
 * @param tables - of one companion
 * @throws InputDataError for fewer than three times, wrong cycles, or cycles that cannot be counted
 */
export function solveTiming(tables: readonly MidTimeTable[], choices: TimingChoices): TimingSolved {
  const progress = choices.onProgress ?? ((): void => undefined);
  const { times: merged, notices } = mergeMidTimes(tables);
  if (merged.count < FEWEST_TIMES)
    throw tooFew(
      tables,
      `${merged.count} mid-time${merged.count === 1 ? '' : 's'} cannot tell an ephemeris and its errors`,
    );
  progress('counting cycles', 0);
  const numbering = numberCycles(merged, choices);
  const { times } = numbering;
  if (new Set(times.cycles).size < 2) throw tooFew(tables, 'all mid-times are of one cycle');
  progress('fitting', 0.1);
  const { problem, facts } = centredProblem(numbering, choices);
  const fits = fitAllModels(problem, facts, choices.modulationDays, choices.seed, (share) => {
    progress('fitting', 0.1 + 0.8 * share);
  });
  const verdict = verdictOn(fits.records);
  const linear = fits.models[0]!;
  const preferred = fits.models.find(({ form }) => form.name === verdict.preferred)!;
  const lastDays = times.timesDays[times.count - 1]!;
  const afterDays = choices.afterBjdTdb === null ? lastDays : choices.afterBjdTdb - times.originBjdTdb;
  const expected = predictions(preferred, problem, afterDays, choices.next);
  progress('predicting', 0.95);
  const extremes = extremesOf(times.cycles);
  const occultations = times.isOccultation.reduce((sum, flag) => sum + flag, 0);
  const outliers = outliersOf(times, preferred);
  const allNotices = [...notices, ...numbering.notices, ...sharedEventNotices(times)];
  const record: TimingRecord = {
    schema: 'tugline/timing',
    version: 1,
    target: choices.target,
    timeScale: tables[0]!.timeScale,
    data: {
      count: times.count,
      transits: times.count - occultations,
      occultations,
      firstCycle: extremes.first,
      lastCycle: extremes.last,
      first: times.originBjdTdb + times.timesDays[0]!,
      last: times.originBjdTdb + lastDays,
    },
    numbering: {
      how: numbering.how,
      statement: numbering.statement,
      rivals: numbering.rivals.map(({ periodDays, deltaScore, phaseScatter }) => ({
        period: periodDays,
        deltaScore,
        phaseScatter,
      })),
    },
    referenceCycle: problem.referenceCycle,
    models: fits.records,
    notTried: fits.notTried,
    preferred: verdict.preferred,
    reasons: verdict.reasons,
    predictions: expected,
    outliers,
    assumptions: timingAssumptions(problem, facts),
    warnings: [...allNotices, ...timingWarnings(tables, problem, preferred, outliers)],
    provenance: {
      program: 'tugline',
      ...choices.provenance,
      seed: choices.seed,
      inputs: tables.map(({ path, sha256, rows, used }) => ({ path, sha256, rows, used })),
    },
  };
  return {
    record,
    rows: rowArrays(problem, linear, preferred),
    curves: curvesOf(
      fits.models,
      preferred,
      problem,
      Math.max(...expected.map(({ cycle }) => cycle), record.data.lastCycle),
    ),
  };
}

function extremesOf(cycles: Int32Array): { readonly first: number; readonly last: number } {
  let first = Infinity;
  let last = -Infinity;
  for (const cycle of cycles) {
    first = Math.min(first, cycle);
    last = Math.max(last, cycle);
  }
  return { first, last };
}

function tooFew(tables: readonly MidTimeTable[], message: string): InputDataError {
  return new InputDataError([
    {
      code: 'too-few-mid-times',
      file: tables[0]?.path ?? '',
      line: null,
      column: null,
      field: null,
      message,
      hint: 'at least three mid-times of two or more cycles are needed',
    },
  ]);
}

/** The problem at the cycle where time and period of the linear model are least correlated. */
function centredProblem(
  numbering: Numbering,
  choices: TimingChoices,
): { readonly problem: TimingProblem; readonly facts: SystemFacts } {
  const { times, near } = numbering;
  const middle = Math.round(median(times.cycles));
  const first = timingProblem(times, near, middle);
  const form = modelForm('linear', first);
  const scale = jitterScale(times.sigmasDays, rootMeanSquare(first.yDays));
  const fit = fitTimingModel(first, form, scale, null, 0);
  if (fit === null) throw new RangeError('a straight line through times of two or more cycles is determined');
  const near2 = {
    timeDays: first.nearTimeDays + fit.beta[0]!,
    periodDays: first.nearPeriodDays + fit.beta[1]! / first.halfRange,
    cycle: middle,
  };
  const referenceCycle = Math.round(leastCorrelatedCycle(first, fit));
  const facts = completed(choices, near2.periodDays);
  const lightDays =
    facts.semiMajorAxisAu === null ? 0 : lightTimeAcrossSeconds(facts.semiMajorAxisAu) / SECONDS_PER_DAY;
  return { problem: timingProblem(times, near2, referenceCycle, lightDays), facts };
}

/** E_opt = E - cov(T, P)/var(P), over the whole posterior of the linear model. */
export function leastCorrelatedCycle(problem: TimingProblem, linear: FittedModel): number {
  const { size } = linear.form;
  const at = (offset: number): number => {
    const functional = linearFunctional(linear.nodes, size, (node, out) =>
      linear.form.row(offset, false, node.frequency, out),
    );
    return mixtureMoments(linear.nodes, functional).sigma ** 2;
  };
  // The variance of the predicted time is a parabola in the cycle; its lowest point is where they do not correlate.
  const h = problem.halfRange;
  const [left, middle, right] = [at(-h), at(0), at(h)];
  const curvature = left - 2 * middle + right;
  return problem.referenceCycle + (curvature > 0 ? (0.5 * h * (left - right)) / curvature : 0);
}

function completed(choices: TimingChoices, periodDays: number): SystemFacts {
  const { facts, starMassSolar } = choices;
  if (facts.semiMajorAxisAu !== null || starMassSolar === null) return facts;
  return { ...facts, semiMajorAxisAu: relativeSemiMajorAxisAu(starMassSolar, periodDays) };
}

function rowArrays(
  problem: TimingProblem,
  linear: FittedModel,
  preferred: FittedModel,
): TimingSolved['rows'] {
  const { times } = problem;
  return {
    count: times.count,
    cycles: times.cycles,
    isOccultation: times.isOccultation,
    timesBjdTdb: times.timesDays.map((time) => time + times.originBjdTdb),
    sigmasMinutes: times.sigmasDays.map((sigma) => sigma * MINUTES_PER_DAY),
    oMinusCMinutes: times.timesDays.map(
      (time, row) =>
        (time - calculatedDays(linear, problem, times.cycles[row]!, times.isOccultation[row] === 1)) *
        MINUTES_PER_DAY,
    ),
    residualsMinutes: preferred.residualsDays.map((residual) => residual * MINUTES_PER_DAY),
    sources: times.origins.map(({ source }) => source),
    paths: times.origins.map(({ path }) => path),
    lines: Uint32Array.from(times.origins, ({ line }) => line),
  };
}

function curvesOf(
  models: readonly FittedModel[],
  preferred: FittedModel,
  problem: TimingProblem,
  lastWanted: number,
): TimingCurve[] {
  const { cycles, isOccultation } = problem.times;
  const { first, last } = extremesOf(cycles);
  const ahead = last + FUTURE_SHARE * (last - first);
  // Predictions far from the data would squeeze them; the chart shows what lies near.
  const range = {
    firstCycle: first - 0.02 * (last - first),
    lastCycle: lastWanted < last + (last - first) ? Math.max(ahead, lastWanted) : ahead,
  };
  const kinds = [false, true].filter((kind) => isOccultation.includes(kind ? 1 : 0));
  return models.flatMap((model) =>
    kinds.map((kind) =>
      timingCurve(model, models[0]!, problem, range, { isOccultation: kind, withSigma: model === preferred }),
    ),
  );
}
