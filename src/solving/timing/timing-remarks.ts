/** What a solution of mid-times assumes, and what its reader should be warned of. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import { median, medianAbsoluteDeviation } from '../../numerics/summary.js';
import type { MidTimeTable } from '../../observations/photometry-types.js';
import type { FittedModel } from './fit-timing-model.js';
import {
  LARGEST_DEVIATION_IN_PERIODS,
  LARGEST_PRECESSING_ECCENTRICITY,
  type TimingProblem,
} from './model-forms.js';
import type { SystemFacts } from './parameters.js';
import { lightTimeAcrossSeconds } from './physics.js';
import { placesOf, type NumberedTimes, type TimingNotice } from './timing-data.js';
import type { TimingRecord } from './types.js';

/** Rows further away than this many times the usual scatter are named. */
const OUTLIER_BEYOND = 5;
const NORMAL_MAD = 1.4826;
const FEW_TIMES = 8;

/** Rows whose residual, in units of its own error, is more than five times the usual size. */
export function outliersOf(times: NumberedTimes, model: FittedModel): TimingRecord['outliers'] {
  if (times.count < 5) return [];
  const scaled = model.residualsDays.map((residual, row) => residual / times.sigmasDays[row]!);
  const usual = Math.max(1, NORMAL_MAD * medianAbsoluteDeviation(scaled));
  return Array.from(scaled, (value, row) => ({ row, deviation: Math.abs(value) / usual }))
    .filter(({ deviation }) => deviation > OUTLIER_BEYOND)
    .map(({ row, deviation }) => ({
      path: times.origins[row]!.path,
      line: times.origins[row]!.line,
      cycle: times.cycles[row]!,
      residual: model.residualsDays[row]! * MINUTES_PER_DAY,
      deviation,
    }));
}

export function timingAssumptions(problem: TimingProblem, facts: SystemFacts): string[] {
  const light = facts.semiMajorAxisAu;
  return [
    'Mid-times are independent and normal with variance σ² + jitter²; the jitter is fitted in every model, with prior density 1/√(s² + (0.3 median σ)²).',
    `Intervals hold 68.3 % of the posterior: normal distributions in the linear coefficients, closed, summed over a quadrature of the jitter and, for sinusoid and precession, over a grid of the frequency (log-uniform prior). Values are those of highest likelihood.`,
    `Marginal likelihoods have uniform priors: time, period and shift of occultations within one period, deviations (at the ends of the data for a parabola) within ± ${LARGEST_DEVIATION_IN_PERIODS} of the period, e of a precessing orbit below ${LARGEST_PRECESSING_ECCENTRICITY}.`,
    ...(problem.hasBoth
      ? [
          light === null
            ? 'The light time across the orbit is not known (no mass of the star): it is part of the shift of the occultations and of e cos ω.'
            : `Occultations are late by the light time across the orbit, 2a/c = ${lightTimeAcrossSeconds(light).toFixed(1)} s, which e cos ω and the precessing model allow for.`,
        ]
      : []),
    ...(problem.times.isOccultation.every((flag) => flag === 1)
      ? ['There are occultations only: transits are half a period before them as on a circular orbit.']
      : []),
  ];
}

export function timingWarnings(
  tables: readonly MidTimeTable[],
  problem: TimingProblem,
  preferred: FittedModel,
  outliers: TimingRecord['outliers'],
): TimingNotice[] {
  const { times } = problem;
  const warnings: TimingNotice[] = [];
  const scales = [...new Set(tables.map(({ timeScale }) => timeScale))];
  if (scales.length > 1)
    warnings.push({
      code: 'mixed-time-scales',
      message: `the tables are in different time scales (${scales.join(', ')}); UTC and TDB differ by more than a minute, heliocentric and barycentric times by up to 8 s`,
    });
  else if (scales[0] !== 'BJD_TDB')
    warnings.push({
      code: 'time-scale',
      message: `the times are ${scales[0] === 'unknown' ? 'in a scale that the table does not name' : `in ${scales[0]!}`} and are used as they stand`,
    });
  const usual = median(times.sigmasDays);
  if (preferred.jitterDays > usual)
    warnings.push({
      code: 'excess-scatter',
      message: `the times scatter by ${(preferred.jitterDays * MINUTES_PER_DAY).toPrecision(2)} min beyond their errors (usually ${(usual * MINUTES_PER_DAY).toPrecision(2)} min): errors too small, or a motion that no model here describes`,
    });
  if (times.count < FEW_TIMES)
    warnings.push({
      code: 'few-times',
      message: `${times.count} times say little about scatter beyond the errors, so that the intervals depend on the prior of the jitter`,
    });
  if (outliers.length > 0) {
    const rows = outliers.map(({ path, line }) =>
      times.origins.findIndex((origin) => origin.path === path && origin.line === line),
    );
    warnings.push({
      code: 'outliers',
      message: `more than ${OUTLIER_BEYOND} times the usual scatter away, and kept: ${placesOf(times, rows)}`,
    });
  }
  return warnings;
}
