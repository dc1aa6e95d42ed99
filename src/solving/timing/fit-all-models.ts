/** Every model that the times can carry, fitted and described; the others with the reason. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import { RandomStream } from '../../numerics/random.js';
import { rootMeanSquare } from '../../numerics/summary.js';
import { powerOfGain, sinusoidFalseAlarm, weightedVariance } from '../false-alarm.js';
import { fitTimingModel, type FittedModel } from './fit-timing-model.js';
import { frequencyRange, type FrequencyRange } from './frequency-scan.js';
import { jitterScale } from './jitter-profile.js';
import {
  modelForm,
  MODEL_NAMES,
  type ModelForm,
  type TimingModelName,
  type TimingProblem,
} from './model-forms.js';
import { jitterQuantity, modelParameters, type SystemFacts } from './parameters.js';
import type { TimingModelRecord, UntriedModelRecord } from './types.js';

export interface ModelRangeDays {
  readonly low: number | null;
  readonly high: number | null;
}

export interface AllFits {
  /** The linear model first. */
  readonly models: readonly FittedModel[];
  readonly records: readonly TimingModelRecord[];
  readonly notTried: readonly UntriedModelRecord[];
}

/** A modulation longer than this many ranges of the data is a parabola. */
const LONGEST_MODULATION_IN_RANGES = 1.5;
/** Cycles of a modulation between two events: nothing faster can be told from something slower. */
const MOST_BETWEEN_EVENTS = 0.5;
/** An orbit that precesses once in fewer cycles than this has no first-order form. */
const FASTEST_PRECESSION = 0.01;
const SLOWEST_PRECESSION_IN_RANGES = 10;
/** Times beyond the number of coefficients that a model must have. */
const SPARE_TIMES = { linear: 1, quadratic: 2, sinusoidal: 4, precessing: 4 } as const;
const DISTINCT_CYCLES = { linear: 2, quadratic: 4, sinusoidal: 6, precessing: 4 } as const;

/** Fits what can be fitted. `onProgress` hears the share that is done. */
export function fitAllModels(
  problem: TimingProblem,
  facts: SystemFacts,
  modulationDays: ModelRangeDays,
  seed: number,
  onProgress: (share: number) => void,
): AllFits {
  const scale = jitterScale(problem.times.sigmasDays, rootMeanSquare(problem.yDays));
  const models: FittedModel[] = [];
  const notTried: UntriedModelRecord[] = [];
  for (const [index, name] of MODEL_NAMES.entries()) {
    onProgress(index / MODEL_NAMES.length);
    const form = modelForm(name, problem);
    const range = form.hasFrequency ? rangeOf(name, problem, modulationDays) : null;
    const why = obstacle(form, problem, range);
    const fitted =
      why === null ? fitTimingModel(problem, form, scale, range, models[0]?.jitterDays ?? 0) : null;
    if (fitted === null) notTried.push({ name, why: why ?? 'the times do not determine its coefficients' });
    else models.push(fitted);
  }
  const linear = models[0]!;
  const records = models.map((model, index) =>
    describe(model, linear, problem, facts, RandomStream.fromSeed(seed, index)),
  );
  return { models, records, notTried };
}

/** The largest number of half cycles of which all distances between events are multiples, in cycles. */
function cycleGrain(times: { readonly cycles: Int32Array; readonly isOccultation: Uint8Array }): number {
  let grain = 0;
  const first = 2 * times.cycles[0]! + times.isOccultation[0]!;
  for (let row = 1; row < times.cycles.length; row++) {
    let a = Math.abs(2 * times.cycles[row]! + times.isOccultation[row]! - first);
    while (a !== 0) [grain, a] = [a, grain % a];
  }
  return grain / 2;
}

function rangeOf(
  name: TimingModelName,
  problem: TimingProblem,
  wanted: ModelRangeDays,
): FrequencyRange | null {
  const cycles = 2 * problem.halfRange;
  const period = problem.nearPeriodDays;
  const low =
    name === 'precessing'
      ? 1 / (SLOWEST_PRECESSION_IN_RANGES * cycles)
      : wanted.high === null
        ? 1 / (LONGEST_MODULATION_IN_RANGES * cycles)
        : period / wanted.high;
  const high =
    name === 'precessing'
      ? FASTEST_PRECESSION
      : Math.min(
          MOST_BETWEEN_EVENTS / cycleGrain(problem.times),
          wanted.low === null ? Infinity : period / wanted.low,
        );
  return low < high ? frequencyRange(low, high, cycles, problem.times.count) : null;
}

/** Why a model cannot be tried, or `null`. */
function obstacle(form: ModelForm, problem: TimingProblem, range: FrequencyRange | null): string | null {
  const { times } = problem;
  const { name } = form;
  if (name === 'precessing') {
    const occultations = new Set(times.cycles.filter((_, row) => times.isOccultation[row] === 1));
    if (!problem.hasBoth)
      return 'precession moves transits and occultations apart; with one kind alone it cannot be told from a sinusoid';
    if (occultations.size < 2)
      return 'occultations of one cycle do not show how they move against the transits';
  }
  const needed = form.size + SPARE_TIMES[name];
  if (times.count < needed) return `${times.count} times are too few: it needs at least ${needed}`;
  const distinct = new Set(times.cycles).size;
  if (distinct < DISTINCT_CYCLES[name])
    return `the times are of ${distinct} cycles; it needs at least ${DISTINCT_CYCLES[name]}`;
  if (form.hasFrequency && range === null)
    return 'no frequency lies within the range that was asked for or that the data span';
  return null;
}

/** Why a fitted model is not to be preferred, or `null`. */
function cautionOn(model: FittedModel): string | null {
  if (model.form.hasFrequency && model.isAtEdge)
    return `its best ${model.form.name === 'precessing' ? 'apsidal ' : ''}period lies at the end of the range that was searched, so that the times do not determine it`;
  if (model.logEvidence === null) return 'the times do not confine its own coefficients';
  return null;
}

/** False-alarm probability of the sinusoid; the noise level is free in both models. */
function falseAlarm(model: FittedModel, linear: FittedModel, problem: TimingProblem): number | null {
  if (model.form.name !== 'sinusoidal' || model.range === null) return null;
  const { times } = problem;
  const weights = times.sigmasDays.map((sigma) => 1 / (sigma * sigma + linear.jitterDays ** 2));
  return sinusoidFalseAlarm(powerOfGain(model.logLikelihood - linear.logLikelihood, times.count), {
    dataCount: times.count,
    backgroundCount: linear.form.size,
    bandwidthPerDay: model.range.high - model.range.low,
    timeVarianceDays2: weightedVariance(Float64Array.from(times.cycles), weights),
  });
}

const OWN_NAMES: Readonly<Record<TimingModelName, readonly string[]>> = {
  linear: [],
  quadratic: ['periodChangePerCycle'],
  sinusoidal: ['cosine', 'sine'],
  precessing: ['cosine', 'sine'],
};

/** Covariance in reported units: time (d), period (d), the model's own (d), shift (d). */
function covarianceRecord(model: FittedModel, problem: TimingProblem): TimingModelRecord['covariance'] {
  const { form, covariance } = model;
  const h = problem.halfRange;
  const own = OWN_NAMES[form.name];
  const names = ['time', 'period', ...own];
  if (form.size > names.length) names.push('occultationShift');
  const factors = names.map((name) =>
    name === 'period' ? 1 / h : name === 'periodChangePerCycle' ? 2 / (h * h) : 1,
  );
  return {
    names,
    matrix: names.map((_, i) =>
      names.map((__, j) => covariance[i * form.size + j]! * factors[i]! * factors[j]!),
    ),
  };
}

function describe(
  model: FittedModel,
  linear: FittedModel,
  problem: TimingProblem,
  facts: SystemFacts,
  random: RandomStream,
): TimingModelRecord {
  const { times } = problem;
  const n = times.count;
  const k = model.freeParameters;
  const spare = n - k - 1;
  const { size } = model.form;
  const covariance = model.covariance;
  let chiSquareOfErrors = 0;
  for (let row = 0; row < n; row++)
    chiSquareOfErrors += (model.residualsDays[row]! / times.sigmasDays[row]!) ** 2;
  return {
    name: model.form.name,
    parameters: modelParameters(model, problem, facts, random),
    jitter: jitterQuantity(model, random),
    logLikelihood: model.logLikelihood,
    chiSquare: model.chiSquare,
    chiSquareOfErrors,
    degreesOfFreedom: n - size - (model.form.hasFrequency ? 1 : 0),
    freeParameters: k,
    bic: model.bic,
    aicc: spare > 0 ? 2 * k - 2 * model.logLikelihood + (2 * k * (k + 1)) / spare : null,
    logBayesFactor:
      model.logEvidence === null || linear.logEvidence === null
        ? null
        : model.logEvidence - linear.logEvidence,
    rms: rootMeanSquare(model.residualsDays) * MINUTES_PER_DAY,
    searched:
      model.range === null
        ? null
        : {
            shortest: problem.nearPeriodDays / model.range.high,
            longest: problem.nearPeriodDays / model.range.low,
            trials: model.range.count,
          },
    falseAlarmProbability: falseAlarm(model, linear, problem),
    uncertainties: model.form.hasFrequency ? 'grid' : 'closed',
    correlation: covariance[1]! / Math.sqrt(covariance[0]! * covariance[size + 1]!),
    covariance: covarianceRecord(model, problem),
    caution: cautionOn(model),
  };
}
