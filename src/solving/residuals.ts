/** What a fit leaves, and how much that is in units of the noise. */
import type { VelocityData } from '../signals/velocity-term.js';
import type { ModelFit } from './fit-model.js';

/** (n), observed minus model, m/s; `null` where the model has no value at the point of the fit. */
export function residualsOf({ problem, point }: ModelFit): Float64Array | null {
  const prediction = problem.predictionAt(point.parameters);
  return prediction === null
    ? null
    : problem.data.velocitiesMps.map((velocity, i) => velocity - prediction[i]!);
}

/** sum r^2/(sigma^2 + s^2), s the jitter of each velocity's instrument. */
export function chiSquareOf(
  residualsMps: Float64Array,
  data: VelocityData,
  jittersMps: Float64Array,
): number {
  return residualsMps.reduce((sum, residual, i) => {
    const variance = data.sigmasMps[i]! ** 2 + jittersMps[data.instrumentOf[i]!]! ** 2;
    return sum + (residual * residual) / variance;
  }, 0);
}
