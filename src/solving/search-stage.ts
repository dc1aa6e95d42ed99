/**
 * One stage of the search: what is left after the present model is looked through for one more companion, by sinusoids
 * and by eccentric shapes, with everything linear in the present model refitted at each trial.
 */
import type { ModelFit } from './fit-model.js';
import { weightedVariance, type FalseAlarmSetting } from './false-alarm.js';
import { makeBackground, type LinearBackground } from './linear-background.js';
import type { RelativeElements } from './parametrisations/parametrisation.js';
import { Periodogram, sinusoidAt, type FrequencyGrid, type SinusoidFit } from './periodogram.js';
import { scanShapes, type ShapeStart } from './shape-scan.js';

export interface Peak {
  readonly frequencyPerDay: number;
  readonly power: number;
  readonly amplitudeMps: number;
  readonly start: RelativeElements;
}

export interface StageSearch {
  readonly background: LinearBackground;
  readonly grid: FrequencyGrid;
  readonly power: Float64Array;
  readonly setting: FalseAlarmSetting;
  /** Strongest sinusoids, strongest first. */
  readonly peaks: readonly Peak[];
  /** Strongest eccentric shapes as starts. */
  readonly shapes: readonly (RelativeElements & { readonly power: number })[];
}

/** The linear background of a fitted model: its own partial derivatives around the best point. */
export function backgroundOf(fit: ModelFit): LinearBackground {
  const { problem, point } = fit;
  const { data, parameterCount: p } = problem;
  const n = data.timesDays.length;
  problem.setJitters(point.jittersMps);
  const residuals = new Float64Array(problem.residualCount);
  const jacobian = new Float64Array(problem.residualCount * p);
  problem.evaluate(point.parameters, residuals, jacobian);
  const weights = new Float64Array(n);
  const unweighted = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const variance = data.sigmasMps[i]! ** 2 + point.jittersMps[data.instrumentOf[i]!]! ** 2;
    weights[i] = 1 / variance;
    unweighted[i] = residuals[i]! * Math.sqrt(variance);
  }
  const linear = problem.linearColumns.filter((column) => column >= 0);
  const firstLinear = Math.min(...linear, p);
  const order = [...linear, ...Array.from({ length: firstLinear }, (_, j) => j)];
  const columns = order.map((column) =>
    Float64Array.from({ length: n }, (_, i) => jacobian[i * p + column]! / Math.sqrt(weights[i]!)),
  );
  return makeBackground(data.timesDays, unweighted, weights, columns);
}

/** Search of one stage over a grid. `shapes: 0` leaves the eccentric scan out. */
export function searchStage(
  fit: ModelFit,
  periodogram: Periodogram,
  spanDays: number,
  counts: { readonly peaks: number; readonly shapes: number },
): StageSearch {
  const background = backgroundOf(fit);
  const { grid } = periodogram;
  const power = new Float64Array(grid.count);
  periodogram.prepare(background);
  periodogram.powerOf(background, background.residuals, background.chiSquare, power);
  const last = grid.startPerDay + (grid.count - 1) * grid.stepPerDay;
  const setting: FalseAlarmSetting = {
    dataCount: background.timesDays.length,
    backgroundCount: background.basis.length,
    bandwidthPerDay: last - grid.startPerDay,
    timeVarianceDays2: weightedVariance(background.timesDays, background.weights),
  };
  const shapes =
    counts.shapes > 0
      ? scanShapes(background, {
          lowestFrequencyPerDay: grid.startPerDay,
          highestFrequencyPerDay: last,
          spanDays,
          instrumentOf: fit.problem.data.instrumentOf,
          starts: counts.shapes,
        })
      : [];
  return {
    background,
    grid,
    power,
    setting,
    peaks: strongestPeaks(background, grid, power, spanDays, counts.peaks),
    shapes: shapes.map(shapeElements),
  };
}

/** Local maxima at least half a resolution element apart, refined off the grid. */
export function strongestPeaks(
  background: LinearBackground,
  grid: FrequencyGrid,
  power: Float64Array,
  spanDays: number,
  count: number,
): Peak[] {
  const indices: number[] = [];
  for (let j = 0; j < power.length; j++) {
    const here = power[j]!;
    if (here > 0 && here >= (power[j - 1] ?? 0) && here > (power[j + 1] ?? 0)) indices.push(j);
  }
  indices.sort((a, b) => power[b]! - power[a]!);
  const chosen: number[] = [];
  const apart = Math.max(1, Math.round(0.7 / (spanDays * grid.stepPerDay)));
  for (const index of indices) {
    if (chosen.length >= count) break;
    if (chosen.every((other) => Math.abs(other - index) >= apart)) chosen.push(index);
  }
  return chosen.map((index) =>
    refinePeak(background, grid.startPerDay + index * grid.stepPerDay, grid.stepPerDay),
  );
}

/** Golden-section search of the exact power around a grid peak. */
function refinePeak(background: LinearBackground, frequency: number, step: number): Peak {
  const ratio = 0.6180339887498949;
  let low = Math.max(frequency - step, frequency * 0.5);
  let high = frequency + step;
  let a = high - ratio * (high - low);
  let b = low + ratio * (high - low);
  let powerA = sinusoidAt(background, a).power;
  let powerB = sinusoidAt(background, b).power;
  for (let turn = 0; turn < 24; turn++) {
    if (powerA > powerB) {
      high = b;
      b = a;
      powerB = powerA;
      a = high - ratio * (high - low);
      powerA = sinusoidAt(background, a).power;
    } else {
      low = a;
      a = b;
      powerA = powerB;
      b = low + ratio * (high - low);
      powerB = sinusoidAt(background, b).power;
    }
  }
  const best = 0.5 * (low + high);
  const fit = sinusoidAt(background, best);
  const start = sinusoidElements(best, fit);
  return { frequencyPerDay: best, power: fit.power, amplitudeMps: start.semiAmplitudeMps, start };
}

/**
 * A sinusoid as a circular orbit: a cos(wt) + b sin(wt) = K cos(wt + phase) with phase = atan2(-b, a), which is the mean
 * longitude at the epoch.
 */
export function sinusoidElements(frequencyPerDay: number, fit: SinusoidFit): RelativeElements {
  const phase = Math.atan2(-fit.sinAmplitude, fit.cosAmplitude);
  return {
    periodDays: 1 / frequencyPerDay,
    eccentricity: 0,
    argPeriastronStarRad: Math.PI / 2,
    timePeriastronDays: (Math.PI / 2 - phase) / (2 * Math.PI * frequencyPerDay),
    semiAmplitudeMps: Math.hypot(fit.cosAmplitude, fit.sinAmplitude),
  };
}

/** A start of the scan as elements. */
export function shapeElements(start: ShapeStart): RelativeElements & { power: number } {
  const periodDays = 1 / start.frequencyPerDay;
  return {
    periodDays,
    eccentricity: start.eccentricity,
    argPeriastronStarRad: Math.atan2(-start.sinAmplitude, start.cosAmplitude),
    timePeriastronDays: (-start.meanAnomalyAtEpochRad * periodDays) / (2 * Math.PI),
    semiAmplitudeMps: Math.hypot(start.cosAmplitude, start.sinAmplitude),
    power: start.power,
  };
}
