/** The quantities of a fitted model, each with its interval from the mixture or from draws of it. */
import {
  DAYS_PER_YEAR,
  MINUTES_PER_DAY,
  RAD_PER_DEG,
  SECONDS_PER_DAY,
  TWO_PI,
} from '../../orbit/constants.js';
import type { RandomStream } from '../../numerics/random.js';
import { quantile } from '../../numerics/summary.js';
import { centralInterval, unknownQuantity } from '../quantities.js';
import type { Quantity } from '../types.js';
import type { FittedModel } from './fit-timing-model.js';
import { drawMixture, linearFunctional, mixtureQuantity, type MixtureNode } from './mixture.js';
import type { TimingProblem } from './model-forms.js';
import {
  changeTimescaleMyr,
  dimensionlessChange,
  lightTimeAcrossSeconds,
  lightTimeMassFunctionSolar,
  mimickingAccelerationMpsPerYear,
  periodChangeMsPerYear,
  properMotionPeriodChangeMsPerYear,
  reflexOrbitAu,
  reflexSemiAmplitudeMps,
  tidalQuality,
} from './physics.js';
import { TIMING_PARAMETER_UNITS, type TimingParameterKey, type TimingParameters } from './types.js';

const DRAWS = 8000;

/** What is known of the system beside the times; `null` where it is not. */
export interface SystemFacts {
  readonly massRatio: number | null;
  /** a/R of the star. */
  readonly scaledSemiMajorAxis: number | null;
  /** Of the relative orbit, au; light time across it. */
  readonly semiMajorAxisAu: number | null;
  readonly properMotionMasPerYear: number | null;
  readonly distanceParsec: number | null;
}

/** One set of coefficients in the words of the trade; times in days since the origin at the reference cycle. */
interface Point {
  readonly beta: Float64Array;
  readonly frequency: number;
}

type Recipe = (point: Point) => number;

/** Numbers that are not linear in the coefficients, by model. */
function recipes(
  model: FittedModel,
  problem: TimingProblem,
  facts: SystemFacts,
): Partial<Record<TimingParameterKey, Recipe>> {
  const { halfRange: h, nearPeriodDays, nearTimeDays, times, hasBoth } = problem;
  const periodOf = ({ beta }: Point): number => nearPeriodDays + beta[1]! / h;
  const timeOf = ({ beta }: Point): number => times.originBjdTdb + nearTimeDays + beta[0]!;
  const shiftDays = ({ beta }: Point): number => beta[model.form.size - 1]!;
  const lightDays =
    facts.semiMajorAxisAu === null ? 0 : lightTimeAcrossSeconds(facts.semiMajorAxisAu) / SECONDS_PER_DAY;
  const shift: Partial<Record<TimingParameterKey, Recipe>> =
    hasBoth && model.form.name !== 'precessing'
      ? {
          occultationShift: (point) => shiftDays(point) * MINUTES_PER_DAY,
          eccentricityCosine: (point) => (Math.PI * (shiftDays(point) - lightDays)) / (2 * periodOf(point)),
        }
      : {};
  switch (model.form.name) {
    case 'linear':
      return shift;
    case 'quadratic': {
      const perCycle: Recipe = ({ beta }) => (2 * beta[2]!) / (h * h);
      const perYear: Recipe = (point) => periodChangeMsPerYear(perCycle(point), periodOf(point));
      const { massRatio, scaledSemiMajorAxis: scaled } = facts;
      return {
        periodChangePerCycle: perCycle,
        periodChange: perYear,
        changeTimescale: (point) => changeTimescaleMyr(perCycle(point), periodOf(point)),
        ...(massRatio === null || scaled === null
          ? {}
          : {
              tidalQuality: (point) => tidalQuality(dimensionlessChange(perYear(point)), massRatio, scaled),
            }),
        mimickingAcceleration: (point) => mimickingAccelerationMpsPerYear(perYear(point), periodOf(point)),
        ...shift,
      };
    }
    case 'sinusoidal': {
      const amplitudeDays: Recipe = ({ beta }) => Math.hypot(beta[2]!, beta[3]!);
      const amplitudeSeconds: Recipe = (point) => amplitudeDays(point) * SECONDS_PER_DAY;
      const modulation: Recipe = (point) => periodOf(point) / point.frequency;
      return {
        modulationPeriod: modulation,
        modulationAmplitude: (point) => amplitudeDays(point) * MINUTES_PER_DAY,
        modulationPeak: (point) =>
          timeOf(point) + (Math.atan2(point.beta[3]!, point.beta[2]!) / TWO_PI) * modulation(point),
        reflexOrbit: (point) => reflexOrbitAu(amplitudeSeconds(point)),
        outerMassFunction: (point) => lightTimeMassFunctionSolar(amplitudeSeconds(point), modulation(point)),
        reflexSemiAmplitude: (point) => reflexSemiAmplitudeMps(amplitudeSeconds(point), modulation(point)),
        ...shift,
      };
    }
    case 'precessing': {
      const anomalistic: Recipe = (point) => periodOf(point) / (1 - point.frequency);
      return {
        eccentricity: (point) => (Math.hypot(point.beta[2]!, point.beta[3]!) * Math.PI) / anomalistic(point),
        argumentOfPeriastron: ({ beta }) => {
          const angle = Math.atan2(beta[3]!, -beta[2]!) / RAD_PER_DEG;
          return angle < 0 ? angle + 360 : angle;
        },
        apsidalRate: (point) => (360 * point.frequency * DAYS_PER_YEAR) / periodOf(point),
        apsidalPeriod: (point) => periodOf(point) / point.frequency / DAYS_PER_YEAR,
        anomalisticPeriod: anomalistic,
      };
    }
  }
}

/** Angles by key: their cycle, for draws on both sides of north. The peak of a modulation repeats with it. */
function cycleOf(key: TimingParameterKey, modulationDays: number): number {
  if (key === 'argumentOfPeriastron') return 360;
  return key === 'modulationPeak' ? modulationDays : 0;
}

/** Row of factors that picks one coefficient. */
function unitRow(index: number, factor: number, out: Float64Array): void {
  out.fill(0);
  out[index] = factor;
}

/** All quantities of a model. */
export function modelParameters(
  model: FittedModel,
  problem: TimingProblem,
  facts: SystemFacts,
  random: RandomStream,
): TimingParameters {
  const { nodes, form, beta, frequency } = model;
  const { halfRange: h } = problem;
  const parameters: Partial<Record<TimingParameterKey, Quantity>> = {};
  const linear = (rowOf: (node: MixtureNode, out: Float64Array) => number, addDays: number): Quantity => {
    const row = new Float64Array(form.size);
    const self: MixtureNode = { weight: 1, jitterDays: 0, frequency, beta, covariance: model.covariance };
    let value = rowOf(self, row);
    for (let k = 0; k < form.size; k++) value += row[k]! * beta[k]!;
    return mixtureQuantity(nodes, linearFunctional(nodes, form.size, rowOf), value, 'd', addDays);
  };
  const originDays = problem.times.originBjdTdb + problem.nearTimeDays;
  // Of the mean clock: what the model adds to it at the reference cycle is left out.
  parameters.time = linear((_node, out) => (unitRow(0, 1, out), 0), originDays);
  parameters.timeAtZero = linear(
    (node, out) => form.row(-problem.referenceCycle, false, node.frequency, out),
    originDays - problem.nearPeriodDays * problem.referenceCycle,
  );
  parameters.period = linear((_node, out) => (unitRow(1, 1 / h, out), 0), problem.nearPeriodDays);
  const draws = drawMixture(nodes, form.size, DRAWS, random);
  const own = recipes(model, problem, facts);
  const modulationDays = frequency > 0 ? problem.nearPeriodDays / frequency : 0;
  for (const [name, recipe] of Object.entries(own)) {
    const key = name as TimingParameterKey;
    const unit = TIMING_PARAMETER_UNITS[key];
    const values = new Float64Array(draws.count);
    for (let d = 0; d < draws.count; d++)
      values[d] = recipe({
        beta: draws.betas.subarray(d * form.size, (d + 1) * form.size),
        frequency: draws.frequencies[d]!,
      });
    parameters[key] = tamed(
      key,
      centralInterval(recipe({ beta, frequency }), values, unit, cycleOf(key, modulationDays)),
      values,
    );
  }
  return withSuppositions(parameters, facts);
}

/** A time scale (or Q') of a change that may be zero has no upper end: its sigma would be that of the longest draw. */
function tamed(key: TimingParameterKey, quantity: Quantity, values: Float64Array): Quantity {
  if (key !== 'changeTimescale' && key !== 'tidalQuality') return quantity;
  const lower = quantity.lower ?? 0;
  const upper = quantity.upper ?? 0;
  return {
    ...quantity,
    sigma: (upper - lower) / 2,
    ...(upper > 10 * lower
      ? {
          why: `the change may be zero; 95 % of the posterior lie above ${quantile(values, 0.05).toPrecision(2)}`,
        }
      : {}),
  };
}

/** What needs a fact that is not given is `null` with the reason; what proper motion explains is no matter of the fit. */
function withSuppositions(
  parameters: Partial<Record<TimingParameterKey, Quantity>>,
  facts: SystemFacts,
): TimingParameters {
  const { periodChange, period } = parameters;
  if (periodChange?.value === undefined || periodChange.value === null || period?.value == null)
    return parameters;
  const { properMotionMasPerYear: motion, distanceParsec: distance } = facts;
  const explained = { sigma: null, lower: null, upper: null, unit: 'ms/yr' };
  const properMotionChange: TimingParameters =
    motion === null || distance === null
      ? {}
      : {
          properMotionChange: {
            ...explained,
            value: properMotionPeriodChangeMsPerYear(period.value, motion, distance),
          },
        };
  const quality = parameters.tidalQuality;
  const tidal: Quantity =
    periodChange.value >= 0
      ? unknownQuantity('', 'the period does not shrink')
      : (quality ??
        unknownQuantity('', 'mass ratio and a/R of the star are not given (--mass-ratio, --scaled-axis)'));
  return { ...parameters, tidalQuality: tidal, ...properMotionChange };
}

/** Jitter in minutes with its interval from the mixture's draws. */
export function jitterQuantity(model: FittedModel, random: RandomStream): Quantity {
  const draws = drawMixture(model.nodes, model.form.size, DRAWS, random);
  return centralInterval(
    model.jitterDays * MINUTES_PER_DAY,
    draws.jittersDays.map((jitter) => jitter * MINUTES_PER_DAY),
    'min',
  );
}
