/** When the next events come, and how a model runs along the cycles, each with the uncertainty of the prediction itself. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import type { Quantity } from '../types.js';
import type { FittedModel } from './fit-timing-model.js';
import { linearFunctional, mixtureMoments, mixtureQuantity, type LinearFunctional } from './mixture.js';
import type { TimingProblem } from './model-forms.js';
import type { PredictionRecord, TimingCurve } from './types.js';

/** Bounds the search for the first event after a date far away. */
const MOST_CYCLES_AHEAD = 1e7;

/** Time of an event by the best coefficients, days since the origin. */
function eventDays(
  model: FittedModel,
  problem: TimingProblem,
  cycle: number,
  isOccultation: boolean,
): number {
  const row = new Float64Array(model.form.size);
  const offset = cycle - problem.referenceCycle;
  let departure = model.form.row(offset, isOccultation, model.frequency, row);
  for (let k = 0; k < row.length; k++) departure += row[k]! * model.beta[k]!;
  return departure + nearDays(problem, cycle, isOccultation);
}

function nearDays(problem: TimingProblem, cycle: number, isOccultation: boolean): number {
  const halves = isOccultation ? 0.5 : 0;
  return problem.nearTimeDays + problem.nearPeriodDays * (cycle - problem.referenceCycle + halves);
}

/** What a model adds to the near ephemeris at an event, in every node of its posterior. */
function departureOf(
  model: FittedModel,
  problem: TimingProblem,
  cycle: number,
  isOccultation: boolean,
): LinearFunctional {
  const offset = cycle - problem.referenceCycle;
  return linearFunctional(model.nodes, model.form.size, (node, out) =>
    model.form.row(offset, isOccultation, node.frequency, out),
  );
}

/** BJD_TDB of an event, its interval from all nodes of the posterior. */
export function eventQuantity(
  model: FittedModel,
  problem: TimingProblem,
  cycle: number,
  isOccultation: boolean,
): Quantity {
  const near = nearDays(problem, cycle, isOccultation);
  const functional = departureOf(model, problem, cycle, isOccultation);
  const value = eventDays(model, problem, cycle, isOccultation) - near;
  return mixtureQuantity(model.nodes, functional, value, 'd', near + problem.times.originBjdTdb);
}

/** 1 sigma of an event, days. */
function eventSigma(
  model: FittedModel,
  problem: TimingProblem,
  cycle: number,
  isOccultation: boolean,
): number {
  const functional = departureOf(model, problem, cycle, isOccultation);
  return mixtureMoments(model.nodes, functional).sigma;
}

/** First cycle whose event lies after a date. */
function firstCycleAfter(
  model: FittedModel,
  problem: TimingProblem,
  afterDays: number,
  isOccultation: boolean,
): number {
  const guess = problem.referenceCycle + (afterDays - problem.nearTimeDays) / problem.nearPeriodDays;
  if (!(Math.abs(guess) < MOST_CYCLES_AHEAD)) return Math.ceil(guess);
  let cycle = Math.floor(guess) - 2;
  // The clock may have run away from the near ephemeris; whole cycles bring it back.
  for (let step = 0; step < 50; step++) {
    const behind = (afterDays - eventDays(model, problem, cycle, isOccultation)) / problem.nearPeriodDays;
    if (behind >= 0 && behind < 1) break;
    cycle += Math.floor(behind);
  }
  return cycle + 1;
}

/** The next `count` transits after a date, and the occultations where the set holds some. */
export function predictions(
  model: FittedModel,
  problem: TimingProblem,
  afterDays: number,
  count: number,
): PredictionRecord[] {
  const kinds = problem.times.isOccultation.includes(1) ? [false, true] : [false];
  const events = kinds.flatMap((isOccultation) => {
    const first = firstCycleAfter(model, problem, afterDays, isOccultation);
    return Array.from({ length: count }, (_, k): PredictionRecord => ({
      cycle: first + k,
      kind: isOccultation ? 'occultation' : 'transit',
      time: eventQuantity(model, problem, first + k, isOccultation),
    }));
  });
  return events.sort((a, b) => (a.time.value ?? 0) - (b.time.value ?? 0));
}

const CURVE_POINTS = 400;
const MOST_CURVE_POINTS = 3000;
const POINTS_PER_MODULATION = 24;

/** A model from `firstCycle` to `lastCycle`, against the linear ephemeris. */
export function timingCurve(
  model: FittedModel,
  linear: FittedModel,
  problem: TimingProblem,
  range: { readonly firstCycle: number; readonly lastCycle: number },
  choices: { readonly isOccultation: boolean; readonly withSigma: boolean },
): TimingCurve {
  const width = range.lastCycle - range.firstCycle;
  const wanted = Math.ceil(POINTS_PER_MODULATION * model.frequency * width);
  const points = Math.min(MOST_CURVE_POINTS, Math.max(CURVE_POINTS, wanted));
  const cycles = Float64Array.from(
    { length: points },
    (_, k) => range.firstCycle + (width * k) / (points - 1),
  );
  const { isOccultation } = choices;
  return {
    model: model.form.name,
    kind: isOccultation ? 'occultation' : 'transit',
    cycles,
    timesBjdTdb: cycles.map(
      (cycle) =>
        problem.times.originBjdTdb +
        eventDays(linear, problem, cycle, false) +
        (isOccultation ? 0.5 : 0) * problem.nearPeriodDays,
    ),
    oMinusCMinutes: cycles.map(
      (cycle) =>
        (eventDays(model, problem, cycle, isOccultation) -
          calculatedDays(linear, problem, cycle, isOccultation)) *
        MINUTES_PER_DAY,
    ),
    sigmaMinutes: choices.withSigma
      ? cycles.map((cycle) => eventSigma(model, problem, cycle, isOccultation) * MINUTES_PER_DAY)
      : null,
  };
}

/** The "C" of O-C: the linear ephemeris, an occultation half a period after its transit. Days since the origin. */
export function calculatedDays(
  linear: FittedModel,
  problem: TimingProblem,
  cycle: number,
  isOccultation: boolean,
): number {
  return eventDays(linear, problem, isOccultation ? cycle + 0.5 : cycle, false);
}
