/** Named quantities with uncertainties, and the covariance of what was fitted, from the curvature at the solution. */
import { RandomStream } from '../numerics/random.js';
import type { Case, Measured, VelocitySet } from '../observations/types.js';
import { curvatureAt, gaussianDraws, type Curvature } from './curvature.js';
import { reportedValues, type ElementValues, type ReportedValues } from './elements-report.js';
import { pointOfVector, vectorOfPoint } from './polish.js';
import type { VelocityProblem } from './problem.js';
import type { ModelPoint } from './model-structure.js';
import { centralInterval, fixedQuantity } from './quantities.js';
import type { StarDraw } from './derived.js';
import type { ElementKey, Quantity } from './types.js';

const DRAWS = 4000;

export const ELEMENT_UNITS: Readonly<Record<ElementKey, string>> = {
  period: 'd',
  eccentricity: '',
  argumentOfPeriastron: 'deg',
  timeOfPeriastron: 'd',
  timeOfInferiorConjunction: 'd',
  semiAmplitude: 'm/s',
};

export type Reference = { readonly periastron: number; readonly conjunction: number };

/** Everything from which quantities are read: the best point, draws around it, and stars drawn beside them. */
export interface Sampled {
  readonly problem: VelocityProblem;
  readonly references: readonly Reference[];
  readonly values: ReportedValues;
  readonly draws: readonly ReportedValues[];
  readonly stars: readonly StarDraw[];
  readonly star: StarDraw;
  readonly curvature: Curvature;
  readonly point: ModelPoint;
  /** Per companion its inclination where transits tell it; absent or `null` where they do not. */
  readonly inclinationsDeg?: readonly ({ readonly best: number; readonly draws: Float64Array } | null)[];
}

/** Passages nearest to the weighted mean time of the data, where they are least correlated with the period. */
export function passagesNearData(problem: VelocityProblem, point: ModelPoint): Reference[] {
  const { timesDays, sigmasMps, instrumentOf } = problem.data;
  let total = 0;
  let sum = 0;
  for (let i = 0; i < timesDays.length; i++) {
    const weight = 1 / (sigmasMps[i]! ** 2 + point.jittersMps[instrumentOf[i]!]! ** 2);
    total += weight;
    sum += weight * timesDays[i]!;
  }
  const mean = sum / total;
  const first = problem.structure.companions.map(() => ({ periastron: mean, conjunction: mean }));
  return reportedValues(problem, point, first).companions.map((values) => ({
    periastron: values.timeOfPeriastron,
    conjunction: values.timeOfInferiorConjunction,
  }));
}

function drawMeasured(measured: Measured | null, random: RandomStream): number | null {
  if (measured === null) return null;
  for (let attempt = 0; attempt < 50; attempt++) {
    const value = measured.value + measured.sigma * random.normal();
    if (value > 0) return value;
  }
  return measured.value;
}

/** Stars drawn from what the case says of them, one per draw of the elements. */
export function drawStars(theCase: Case, count: number, seed: number): StarDraw[] {
  const random = RandomStream.fromSeed(seed, 2);
  const { massSolar, radiusSolar, effectiveTemperatureK } = theCase.star;
  return Array.from({ length: count }, () => ({
    massSolar: drawMeasured(massSolar, random),
    radiusSolar: drawMeasured(radiusSolar, random),
    effectiveTemperatureK: drawMeasured(effectiveTemperatureK, random),
    inclinationDeg: null,
  }));
}

/** The star as the case gives it. */
export function starOf(theCase: Case): StarDraw {
  return {
    massSolar: theCase.star.massSolar?.value ?? null,
    radiusSolar: theCase.star.radiusSolar?.value ?? null,
    effectiveTemperatureK: theCase.star.effectiveTemperatureK?.value ?? null,
    inclinationDeg: null,
  };
}

export function sampleAround(
  problem: VelocityProblem,
  point: ModelPoint,
  theCase: Case,
  seed: number,
): Sampled {
  const references = passagesNearData(problem, point);
  const curvature = curvatureAt(problem, point);
  const draws =
    curvature.covariance === null
      ? []
      : gaussianDraws(problem, point, curvature.covariance, DRAWS, RandomStream.fromSeed(seed, 1));
  return {
    problem,
    references,
    values: reportedValues(problem, point, references),
    draws: draws.map((draw) => reportedValues(problem, draw, references)),
    stars: drawStars(theCase, draws.length, seed),
    star: starOf(theCase),
    curvature,
    point,
  };
}

/** One element of a companion; epochs as full dates. */
export function elementQuantity(
  sampled: Sampled,
  index: number,
  key: ElementKey,
  epochBjdTdb: number,
): Quantity {
  const unit = ELEMENT_UNITS[key];
  const { circular } = sampled.problem.structure.companions[index]!;
  const best = sampled.values.companions[index]!;
  if (circular && key === 'eccentricity') return fixedQuantity(0, unit);
  if (circular && key === 'argumentOfPeriastron') return fixedQuantity(90, unit);
  const isTime = key === 'timeOfPeriastron' || key === 'timeOfInferiorConjunction';
  const shift = isTime ? epochBjdTdb : 0;
  const drawn = Float64Array.from(sampled.draws, (draw) => draw.companions[index]![key]);
  // Judged before the epoch is added: a date of a binary may be known to less than 1e-12 of a Julian date.
  const spread =
    drawn.length > 0 ? Math.max(...sample(drawn).map((value) => Math.abs(value - drawn[0]!))) : 1;
  if (drawn.length > 0 && spread <= 1e-12 * Math.max(Math.abs(drawn[0]!), isTime ? best.period : 0))
    return fixedQuantity(asWritten(shift + best[key]), unit);
  const cycle = key === 'argumentOfPeriastron' ? 360 : 0;
  return centralInterval(
    shift + best[key],
    drawn.map((value) => shift + value),
    unit,
    cycle,
  );
}

/** A number that the case fixed, without the last digits that its way through the solver's parameters left. */
function asWritten(value: number): number {
  return Number(value.toPrecision(14));
}

function sample(values: Float64Array): number[] {
  return Array.from({ length: Math.min(50, values.length) }, (_, i) => values[i]!);
}

/** A quantity read from every draw by `read`. */
export function drawnQuantity(
  sampled: Sampled,
  unit: string,
  read: (values: ReportedValues) => number,
): Quantity {
  return centralInterval(read(sampled.values), Float64Array.from(sampled.draws, read), unit);
}

interface NamedReading {
  readonly name: string;
  read(values: ReportedValues): number;
}

/** What was fitted, in the order of the covariance matrix. */
function fittedReadings(
  sampled: Sampled,
  letters: readonly string[],
  velocities: VelocitySet,
): NamedReading[] {
  const { structure, freeJitters, linearColumns } = sampled.problem;
  const readings: NamedReading[] = [];
  structure.companions.forEach(({ circular }, c) => {
    const keys: ElementKey[] = circular
      ? ['period', 'timeOfInferiorConjunction', 'semiAmplitude']
      : ['period', 'eccentricity', 'argumentOfPeriastron', 'timeOfPeriastron', 'semiAmplitude'];
    for (const key of keys) {
      readings.push({
        name: `companions.${letters[c]!}.${key}`,
        read: (values) => values.companions[c]![key],
      });
    }
  });
  velocities.instruments.forEach((name, i) => {
    if (linearColumns[i]! >= 0)
      readings.push({
        name: `velocity.instruments.${name}.zeroPoint`,
        read: (values) => values.zeroPointsMps[i]!,
      });
  });
  if (structure.drift > 0)
    readings.push({ name: 'velocity.slope', read: (values) => values.slopeMpsPerYear });
  if (structure.drift > 1)
    readings.push({ name: 'velocity.curvature', read: (values) => values.curvatureMpsPerYear2 });
  for (const i of freeJitters) {
    readings.push({
      name: `velocity.instruments.${velocities.instruments[i]!}.jitter`,
      read: (values) => values.jittersMps[i]!,
    });
  }
  return readings;
}

/** Covariance of the fitted elements in the units of `solution.json`, by linear propagation from the solver's parameters. */
export function fittedCovariance(
  sampled: Sampled,
  letters: readonly string[],
  velocities: VelocitySet,
): { names: string[]; matrix: number[][] } {
  const { problem, point, references } = sampled;
  const { covariance, size } = sampled.curvature;
  const readings = fittedReadings(sampled, letters, velocities);
  const names = readings.map((reading) => reading.name);
  if (covariance === null) return { names, matrix: [] };
  const centre = vectorOfPoint(problem, point);
  const rows = readings.map(() => new Float64Array(size));
  for (let j = 0; j < size; j++) {
    const step = 1e-4 * Math.sqrt(covariance[j * size + j]!);
    const at = (sign: number): ReportedValues => {
      const vector = Float64Array.from(centre);
      vector[j]! += sign * step;
      return reportedValues(problem, pointOfVector(problem, vector, point.jittersMps), references);
    };
    const above = at(1);
    const below = at(-1);
    readings.forEach((reading, r) => {
      let difference = reading.read(above) - reading.read(below);
      if (reading.name.endsWith('argumentOfPeriastron')) difference -= 360 * Math.round(difference / 360);
      rows[r]![j] = difference / (2 * step);
    });
  }
  // A jitter at zero is a mirror point: its own uncertainty stands for the vanishing derivative there.
  problem.freeJitters.forEach((instrument, index) => {
    const r = names.indexOf(`velocity.instruments.${velocities.instruments[instrument]!}.jitter`);
    rows[r]!.fill(0);
    rows[r]![problem.parameterCount + index] = 1;
  });
  const matrix = rows.map((left) =>
    rows.map((right) => {
      let sum = 0;
      for (let a = 0; a < size; a++) {
        if (left[a] === 0) continue;
        for (let b = 0; b < size; b++) sum += left[a]! * covariance[a * size + b]! * right[b]!;
      }
      return sum;
    }),
  );
  return { names, matrix };
}

export type { ElementValues };
