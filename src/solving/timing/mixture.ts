/**
 * The posterior of a model as a weighted sum of normal distributions: one for each node of jitter and frequency, closed in
 * the linear coefficients.
 */
import { choleskyInPlace } from '../../numerics/linear-algebra.js';
import type { RandomStream } from '../../numerics/random.js';
import { erfc } from '../../numerics/special-functions.js';
import { LOWER_TAIL } from '../quantities.js';
import type { Quantity } from '../types.js';

export interface MixtureNode {
  /** Of the posterior; all sum to 1. */
  readonly weight: number;
  readonly jitterDays: number;
  /** Per cycle; 0 for models without one. */
  readonly frequency: number;
  readonly beta: Float64Array;
  /** (size x size), row-major. */
  readonly covariance: Float64Array;
}

/** A number that is linear in the coefficients, with its mean and standard deviation in every node. */
export interface LinearFunctional {
  readonly means: Float64Array;
  readonly deviations: Float64Array;
}

/** @param rowOf - the coefficients' factors in a node, and a constant; `out` is overwritten */
export function linearFunctional(
  nodes: readonly MixtureNode[],
  size: number,
  rowOf: (node: MixtureNode, out: Float64Array) => number,
): LinearFunctional {
  const means = new Float64Array(nodes.length);
  const deviations = new Float64Array(nodes.length);
  const row = new Float64Array(size);
  nodes.forEach((node, index) => {
    let mean = rowOf(node, row);
    let variance = 0;
    for (let k = 0; k < size; k++) {
      mean += row[k]! * node.beta[k]!;
      for (let l = 0; l < size; l++) variance += row[k]! * row[l]! * node.covariance[k * size + l]!;
    }
    means[index] = mean;
    deviations[index] = Math.sqrt(Math.max(0, variance));
  });
  return { means, deviations };
}

/** Mean and standard deviation over all nodes. */
export function mixtureMoments(
  nodes: readonly MixtureNode[],
  { means, deviations }: LinearFunctional,
): { readonly mean: number; readonly sigma: number } {
  // Departures from one of the means keep the digits.
  const reference = means[0] ?? 0;
  let first = 0;
  let second = 0;
  nodes.forEach(({ weight }, index) => {
    const departure = means[index]! - reference;
    first += weight * departure;
    second += weight * (departure * departure + deviations[index]! ** 2);
  });
  return { mean: reference + first, sigma: Math.sqrt(Math.max(0, second - first * first)) };
}

/** Share of the mixture below `value`. */
function shareBelow(nodes: readonly MixtureNode[], functional: LinearFunctional, value: number): number {
  const { means, deviations } = functional;
  let below = 0;
  for (let k = 0; k < means.length; k++) {
    const deviation = deviations[k]!;
    const distance = value - means[k]!;
    if (deviation > 0) below += nodes[k]!.weight * 0.5 * erfc((-distance / deviation) * Math.SQRT1_2);
    else if (distance >= 0) below += nodes[k]!.weight;
  }
  return below;
}

/** Of the standard deviation: far below what a quadrature of the jitter leaves. */
const QUANTILE_TOLERANCE = 1e-7;

/** The value below which `probability` of the mixture lies: regula falsi with the Illinois correction, bisecting now and then. */
function mixtureQuantile(
  nodes: readonly MixtureNode[],
  functional: LinearFunctional,
  probability: number,
): number {
  const { mean, sigma } = mixtureMoments(nodes, functional);
  if (!(sigma > 0)) return mean;
  // By Chebyshev's inequality less than 1 in 400 lies beyond twenty standard deviations.
  let low = mean - 20 * sigma;
  let high = mean + 20 * sigma;
  let excessLow = -probability;
  let excessHigh = 1 - probability;
  let side = 0;
  for (let step = 0; step < 80 && high - low > QUANTILE_TOLERANCE * sigma; step++) {
    const isHalving = step < 4 || step % 4 === 3;
    const middle = isHalving
      ? low + (high - low) / 2
      : (low * excessHigh - high * excessLow) / (excessHigh - excessLow);
    const excess = shareBelow(nodes, functional, middle) - probability;
    if (Math.abs(excess) < QUANTILE_TOLERANCE) return middle;
    if (excess < 0) {
      low = middle;
      excessLow = excess;
      if (side === -1) excessHigh *= 0.5;
      side = -1;
    } else {
      high = middle;
      excessHigh = excess;
      if (side === 1) excessLow *= 0.5;
      side = 1;
    }
  }
  return low + (high - low) / 2;
}

/** A quantity with the given value and the interval of the mixture; `add` is added to value and bounds alike. */
export function mixtureQuantity(
  nodes: readonly MixtureNode[],
  functional: LinearFunctional,
  value: number,
  unit: string,
  add = 0,
): Quantity {
  return {
    value: value + add,
    sigma: mixtureMoments(nodes, functional).sigma,
    lower: mixtureQuantile(nodes, functional, LOWER_TAIL) + add,
    upper: mixtureQuantile(nodes, functional, 1 - LOWER_TAIL) + add,
    unit,
  };
}

export interface MixtureDraws {
  readonly count: number;
  /** (count x size), row-major. */
  readonly betas: Float64Array;
  readonly frequencies: Float64Array;
  readonly jittersDays: Float64Array;
}

/** Independent draws; every node has its share of them to within one (systematic sampling). */
export function drawMixture(
  nodes: readonly MixtureNode[],
  size: number,
  count: number,
  random: RandomStream,
): MixtureDraws {
  const betas = new Float64Array(count * size);
  const frequencies = new Float64Array(count);
  const jittersDays = new Float64Array(count);
  const start = random.uniform();
  const factor = new Float64Array(size * size);
  const normals = new Float64Array(size);
  let drawn = 0;
  let reached = 0;
  for (const node of nodes) {
    reached += node.weight;
    if (drawn >= count || (drawn + start) / count >= reached) continue;
    factor.set(node.covariance);
    if (!choleskyInPlace(factor, size)) factor.fill(0);
    while (drawn < count && (drawn + start) / count < reached) {
      for (let k = 0; k < size; k++) normals[k] = random.normal();
      for (let k = 0; k < size; k++) {
        let value = node.beta[k]!;
        for (let l = 0; l <= k; l++) value += factor[k * size + l]! * normals[l]!;
        betas[drawn * size + k] = value;
      }
      frequencies[drawn] = node.frequency;
      jittersDays[drawn] = node.jitterDays;
      drawn++;
    }
  }
  return {
    count: drawn,
    betas: betas.subarray(0, drawn * size),
    frequencies: frequencies.subarray(0, drawn),
    jittersDays: jittersDays.subarray(0, drawn),
  };
}
