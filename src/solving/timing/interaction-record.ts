/** A fit of interacting companions as it is recorded: plain, finite numbers with their units. */
import { JUPITER_MASS_IN_EARTH } from '../../orbit/constants.js';
import type { Quantity } from '../types.js';
import { BIC_THRESHOLD } from './compare-models.js';
import type { InteractionFit, InteractionPrediction, InteractionTable } from './interaction-types.js';
import type { InteractingCompanion, InteractionRecord } from './system-types.js';

/** Predicted transits after a date, the first few of each companion. */
export interface WantedPredictions {
  /** `null`: after the last mid-time of the companion. */
  readonly afterDays: number | null;
  readonly next: number;
}

/** @param tables - those that were fitted */
export function interactionRecord(
  fit: InteractionFit,
  tables: readonly InteractionTable[],
  wanted: WantedPredictions,
): InteractionRecord {
  return {
    status: fit.status,
    usable: fit.usable,
    needed: fit.usable && fit.deltaBic >= BIC_THRESHOLD,
    epoch: fit.epochDays,
    companions: fit.companions.map(
      ({ mass, rmsMinutes, points, massRatioRange95, ...rest }): InteractingCompanion => ({
        ...rest,
        massEarth: mass,
        massJupiter: inJupiterMasses(mass),
        massRatioRange95:
          massRatioRange95 === null ? null : { lower: massRatioRange95[0], upper: massRatioRange95[1] },
        rms: rmsMinutes,
        count: points,
      }),
    ),
    resonances: fit.resonances.map(({ letters, j, delta, superPeriodDays }) => ({
      letters,
      ratio: j === null ? null : `${j}:${j - 1}`,
      distance: delta,
      superPeriod: superPeriodDays,
    })),
    chiSquare: fit.chiSquare,
    chiSquareLines: fit.chiSquareLines,
    degreesOfFreedom: fit.degreesOfFreedom,
    deltaLogLikelihood: fit.deltaLogLikelihood,
    deltaBic: fit.deltaBic,
    predictions: fit.predictions.flatMap((prediction, c) => nextOf(prediction, tables[c]!, wanted)),
    rivals: fit.rivals,
    modelError: fit.modelErrorSeconds,
    posterior: fit.posterior,
    massCorrelation: fit.massCorrelation.map((row) =>
      row.map((value) => (Number.isFinite(value) ? value : null)),
    ),
    assumptions: fit.assumptions,
    warnings: fit.warnings,
  };
}

/** A mass in Earth masses as one in Jupiter masses. */
export function inJupiterMasses(mass: Quantity): Quantity {
  const scaled = (value: number | null): number | null =>
    value === null ? null : value / JUPITER_MASS_IN_EARTH;
  return {
    ...mass,
    value: scaled(mass.value),
    sigma: scaled(mass.sigma),
    lower: scaled(mass.lower),
    upper: scaled(mass.upper),
    unit: 'M_jup',
  };
}

function nextOf(
  { letter, cycles, timesDays, sigmasDays, variationMinutes }: InteractionPrediction,
  table: InteractionTable,
  { afterDays, next }: WantedPredictions,
): InteractionRecord['predictions'] {
  const lastCycle = Array.from(table.cycles).reduce((last, cycle) => Math.max(last, cycle), -Infinity);
  const first = timesDays.findIndex((time, i) =>
    afterDays === null ? cycles[i]! > lastCycle : time > afterDays,
  );
  if (first < 0) return [];
  return Array.from({ length: Math.min(next, timesDays.length - first) }, (_, k) => {
    const at = first + k;
    return {
      letter,
      cycle: cycles[at]!,
      time: timeQuantity(timesDays[at]!, sigmasDays[at]!),
      variation: variationMinutes[at]!,
    };
  });
}

function timeQuantity(value: number, sigma: number): Quantity {
  if (!Number.isFinite(sigma))
    return {
      value,
      sigma: null,
      lower: null,
      upper: null,
      unit: 'd',
      why: 'no uncertainties of the orbits could be had',
    };
  return { value, sigma, lower: value - sigma, upper: value + sigma, unit: 'd' };
}
