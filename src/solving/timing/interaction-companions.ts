/** The record of each companion of a fit of interacting orbits. */
import { quantile, rootMeanSquare, standardDeviation } from '../../numerics/summary.js';
import { RandomStream } from '../../numerics/random.js';
import { MINUTES_PER_DAY, SOLAR_MASS_IN_EARTH } from '../../orbit/constants.js';
import {
  nearestResonance,
  resonanceCoefficients,
  resonanceDistance,
  superPeriodDays,
} from '../../orbit/interaction/near-resonance.js';
import { centralInterval, unknownQuantity } from '../quantities.js';
import type { Quantity } from '../types.js';
import type { InteractionDraws } from './interaction-draws.js';
import { COORDINATES } from './interaction-model.js';
import type { InteractionModel } from './interaction-model.js';
import type { Followed } from './interaction-predictions.js';
import type { InteractionSolution } from './interaction-search.js';
import { FARTHEST_RESONANCE, orderByPeriod } from './interaction-starts.js';
import type {
  InteractionCompanionRecord,
  InteractionStar,
  InteractionTable,
  ResonanceRecord,
} from './interaction-types.js';

/** Eccentricities of the second look at the masses, in units of the prior's width. */
const LOW_ECCENTRICITY = 1 / 3;
const FEWEST_EFFECTIVE = 100;
const STAR_STREAM = 3;

export function resonanceRecords(
  model: InteractionModel,
  tables: readonly InteractionTable[],
): ResonanceRecord[] {
  const order = orderByPeriod(model);
  return order.slice(1).map((outer, at) => {
    const inner = order[at]!;
    const p = model.lines[inner]!.periodDays;
    const q = model.lines[outer]!.periodDays;
    const j = nearestResonance(p, q, FARTHEST_RESONANCE);
    return {
      letters: [tables[inner]!.letter, tables[outer]!.letter],
      j,
      delta: j === null ? null : resonanceDistance(p, q, j),
      superPeriodDays: j === null ? null : superPeriodDays(p, q, j),
    };
  });
}

export function companionRecords(
  model: InteractionModel,
  tables: readonly InteractionTable[],
  star: InteractionStar,
  solution: InteractionSolution,
  draws: InteractionDraws,
  followed: Followed,
  eccentricityScale: number,
  seed: number,
): InteractionCompanionRecord[] {
  const { points } = draws;
  const random = RandomStream.fromSeed(seed, STAR_STREAM);
  const starMasses = Float64Array.from(points, () =>
    star.massSolar === null ? NaN : star.massSolar + (star.massSolarSigma ?? 0) * random.normal(),
  );
  const lowWeights = lowEccentricityWeights(points, eccentricityScale);
  const frees = freeEccentricities(model, points);
  const quantity = (value: number, values: Float64Array, unit: string): Quantity =>
    draws.why === null
      ? centralInterval(value, values, unit)
      : { value, sigma: null, lower: null, upper: null, unit, why: draws.why };
  return tables.map((table, c) => {
    const at = COORDINATES * c;
    const column = (map: (point: Float64Array) => number): Float64Array => Float64Array.from(points, map);
    const ratios = column((point) => Math.exp(point[at]!));
    const bestRatio = Math.exp(solution.point[at]!);
    const bestE = Math.hypot(solution.point[at + 1]!, solution.point[at + 2]!);
    const { draws: more } = followed;
    return {
      letter: table.letter,
      massRatio: quantity(bestRatio, ratios, ''),
      mass:
        star.massSolar === null
          ? unknownQuantity('M_earth', 'it needs the mass of the star')
          : quantity(
              bestRatio * star.massSolar * SOLAR_MASS_IN_EARTH,
              ratios.map((ratio, d) => ratio * starMasses[d]! * SOLAR_MASS_IN_EARTH),
              'M_earth',
            ),
      massRatioRange95: ratios.length > 0 ? [quantile(ratios, 0.025), quantile(ratios, 0.975)] : null,
      massRatioLowEccentricity: reweighted(ratios, lowWeights),
      massEccentricityCorrelation: strongestCorrelation(
        column((point) => point[at]!),
        frees,
        table,
        tables,
      ),
      eccentricity: quantity(
        bestE,
        column((point) => Math.hypot(point[at + 1]!, point[at + 2]!)),
        '',
      ),
      eCosOmega: quantity(
        solution.point[at + 1]!,
        column((point) => point[at + 1]!),
        '',
      ),
      eSinOmega: quantity(
        solution.point[at + 2]!,
        column((point) => point[at + 2]!),
        '',
      ),
      period: quantity(followed.bestPeriodsDays[c]!, more.periodsDays[c]!, 'd'),
      timeOfInferiorConjunction: quantity(followed.bestConjunctionsDays[c]!, more.conjunctionsDays[c]!, 'd'),
      meanPeriod: meanPeriod(model, c, solution.jittersDays[c]!),
      jitter: quantity(
        solution.jittersDays[c]! * MINUTES_PER_DAY,
        more.jittersDays[c]!.map((jitter) => jitter * MINUTES_PER_DAY),
        'min',
      ),
      rmsMinutes: rootMeanSquare(followed.predictions[c]!.residualMinutes),
      points: table.cycles.length,
    };
  });
}

/** Period of the straight line, with the error that the times give it. */
function meanPeriod(model: InteractionModel, c: number, jitterDays: number): Quantity {
  const likelihood = model.likelihoods[c]!;
  likelihood.evaluate(model.observedDays[c]!, jitterDays);
  const value = model.lines[c]!.periodDays;
  const sigma = Math.sqrt(likelihood.lineCovariance[2]!) / likelihood.cycleScale;
  return { value, sigma, lower: value - sigma, upper: value + sigma, unit: 'd' };
}

/** Weights that turn draws with the prior's width of eccentricities into draws with a third of it; `null` where too few carry it. */
function lowEccentricityWeights(points: readonly Float64Array[], scale: number): Float64Array | null {
  if (points.length === 0) return null;
  const change = 0.5 * ((LOW_ECCENTRICITY * scale) ** -2 - scale ** -2);
  const squares = Float64Array.from(points, (point) => {
    let sum = 0;
    for (let c = 0; c < point.length; c += COORDINATES) sum += point[c + 1]! ** 2 + point[c + 2]! ** 2;
    return sum;
  });
  const least = squares.reduce((low, value) => Math.min(low, value), Infinity);
  const weights = squares.map((square) => Math.exp(-change * (square - least)));
  const total = weights.reduce((sum, w) => sum + w, 0);
  const effective = total ** 2 / weights.reduce((sum, w) => sum + w * w, 0);
  return effective >= FEWEST_EFFECTIVE ? weights.map((w) => w / total) : null;
}

function reweighted(ratios: Float64Array, weights: Float64Array | null): Quantity {
  if (weights === null)
    return unknownQuantity('', 'too few draws have eccentricities that low: the times ask for larger ones');
  const order = Array.from(ratios.keys()).sort((a, b) => ratios[a]! - ratios[b]!);
  const at = (probability: number): number => {
    let sum = 0;
    for (const d of order) {
      sum += weights[d]!;
      if (sum >= probability) return ratios[d]!;
    }
    return ratios[order[order.length - 1]!]!;
  };
  const mean = ratios.reduce((sum, ratio, d) => sum + weights[d]! * ratio, 0);
  const sigma = Math.sqrt(ratios.reduce((sum, ratio, d) => sum + weights[d]! * (ratio - mean) ** 2, 0));
  return { value: at(0.5), sigma, lower: at(0.158655), upper: at(0.841345), unit: '' };
}

interface FreeEccentricity {
  readonly inner: number;
  readonly outer: number;
  /** |f z + g z'| of every draw. */
  readonly sizes: Float64Array;
}

function freeEccentricities(model: InteractionModel, points: readonly Float64Array[]): FreeEccentricity[] {
  const order = orderByPeriod(model);
  return order.slice(1).flatMap((outer, at) => {
    const inner = order[at]!;
    const j = nearestResonance(
      model.lines[inner]!.periodDays,
      model.lines[outer]!.periodDays,
      FARTHEST_RESONANCE,
    );
    if (j === null) return [];
    const { f, g } = resonanceCoefficients(j);
    const [a, b] = [COORDINATES * inner, COORDINATES * outer];
    const sizes = Float64Array.from(points, (point) =>
      Math.hypot(f * point[a + 1]! + g * point[b + 1]!, f * point[a + 2]! + g * point[b + 2]!),
    );
    return [{ inner, outer, sizes }];
  });
}

function strongestCorrelation(
  logMasses: Float64Array,
  frees: readonly FreeEccentricity[],
  table: InteractionTable,
  tables: readonly InteractionTable[],
): number | null {
  let strongest: number | null = null;
  for (const { inner, outer, sizes } of frees) {
    if (tables[inner] !== table && tables[outer] !== table) continue;
    const value = correlation(logMasses, sizes);
    if (Number.isFinite(value) && (strongest === null || Math.abs(value) > Math.abs(strongest)))
      strongest = value;
  }
  return strongest;
}

/** Pearson's coefficient; NaN for fewer than three pairs or no variation. */
export function correlation(a: Float64Array, b: Float64Array): number {
  if (a.length < 3) return NaN;
  const meanA = a.reduce((sum, x) => sum + x, 0) / a.length;
  const meanB = b.reduce((sum, x) => sum + x, 0) / b.length;
  const sum = a.reduce((total, x, i) => total + (x - meanA) * (b[i]! - meanB), 0);
  return sum / ((a.length - 1) * standardDeviation(a) * standardDeviation(b));
}
