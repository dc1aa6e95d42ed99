/**
 * Sampling coordinates of a companion about which the case states something: the solver's own parameters (element by
 * element), with the density that the case states for each and the slope of each map carried along.
 */
import type { CompanionChoice, ElementName } from '../../observations/types.js';
import type { Parametrisation } from '../parametrisations/parametrisation.js';
import type { CompanionMap } from './companion-map.js';
import type { PriorScales } from './priors.js';

/** Step of the central differences by which the small prior terms are differentiated. */
const STEP = 1e-5;

/**
 * @param parametrisation - of the companion, from the model
 * @param choice - what the case states; elements that it does not name have the default priors
 */
export function statedMap(
  parametrisation: Parametrisation,
  choice: CompanionChoice,
  scales: PriorScales,
): CompanionMap {
  const { size } = parametrisation;
  const coordinates = new Float64Array(5);
  const rows = new Float64Array(parametrisation.priorCount);
  const scratch = new Float64Array(size);
  const stated = choice.elements;
  /** ln density in the solver's parameters: Gaussian rows, slopes of the maps, and default priors of what is not stated. */
  const logPrior = (position: Float64Array): number => {
    if (!parametrisation.toCoordinates(position, 0, coordinates, null)) return -Infinity;
    const period = Math.exp(coordinates[0]!);
    if (!(period > scales.shortestPeriodDays && period < scales.longestPeriodDays)) return -Infinity;
    const amplitude = coordinates[4]!;
    if (!(amplitude < scales.largestAmplitudeMps)) return -Infinity;
    let sum = parametrisation.logSlopes(position, 0);
    if (parametrisation.priorCount > 0) {
      parametrisation.priors(position, 0, rows, null);
      for (const row of rows) sum -= 0.5 * row * row;
    }
    // A period is log-uniform and an amplitude 1/(K + scale) unless the case states otherwise.
    if (isFree('period')) sum -= coordinates[0]!;
    if (isFree('semiAmplitude')) sum -= Math.log(amplitude + scales.amplitudeScaleMps);
    return sum;
  };
  function isFree(name: ElementName): boolean {
    return stated[name] === undefined;
  }
  return {
    size,
    logNormalisation: 0,
    toCoordinates(position, offset, out, jacobian, priorGradient): number {
      for (let j = 0; j < size; j++) scratch[j] = position[offset + j]!;
      const value = logPrior(scratch);
      if (!Number.isFinite(value)) return -Infinity;
      for (let j = 0; j < size; j++) {
        const centre = scratch[j]!;
        scratch[j] = centre + STEP;
        const above = logPrior(scratch);
        scratch[j] = centre - STEP;
        const below = logPrior(scratch);
        scratch[j] = centre;
        priorGradient[j] = (above - below) / (2 * STEP);
        if (!Number.isFinite(priorGradient[j]!)) priorGradient[j] = 0;
      }
      return parametrisation.toCoordinates(scratch, 0, out, jacobian) ? value : -Infinity;
    },
    fromElements(elements, position, offset): void {
      parametrisation.fromElements(elements, position, offset);
    },
  };
}
