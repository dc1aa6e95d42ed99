/** Periods in the data, without a solution: one stage of the search and the window function. */
import type { Case, VelocitySet } from '../observations/types.js';
import { permutationFalseAlarm, permutedMaxima } from './permutations.js';
import { explorerFor } from './prepare.js';
import { stageRecord } from './search-record.js';
import { requireSolvable } from './solvable.js';
import type { SearchStage, WindowFunction } from './types.js';
import { windowFunction } from './window-function.js';

export interface PeriodsOptions {
  readonly seed: number;
  readonly permutations: number;
  readonly onProgress?: (stage: string, fraction: number) => void;
}

export interface PeriodsReport {
  readonly stage: SearchStage;
  readonly window: WindowFunction;
  readonly notices: readonly { readonly code: string; readonly message: string }[];
  /** What was refitted at each frequency, and how the false-alarm probabilities were obtained. */
  readonly method: string;
}

export function searchPeriods(
  theCase: Case,
  velocities: VelocitySet,
  options: PeriodsOptions,
): PeriodsReport {
  requireSolvable(velocities);
  const { explorer, spanDays } = explorerFor(theCase, velocities);
  options.onProgress?.('searching', 0);
  const base = explorer.withBestDrift(
    { companions: [], drift: explorer.drifts[0]! },
    explorer.builder.emptyPoint(),
  );
  const search = explorer.search(base);
  const eccentric = explorer
    .bestAddition(base, search, null)
    .filter((planned) => !planned.plan.companions[0]!.circular)
    .sort((a, b) => b.fit.logLikelihood - a.fit.logLikelihood)[0];
  const companion = eccentric === undefined ? null : explorer.portable(eccentric).companions[0]!;
  const stage = stageRecord(
    search,
    0,
    spanDays,
    companion === null
      ? null
      : {
          periodDays: companion.periodDays,
          eccentricity: companion.eccentricity,
          gain: eccentric!.fit.logLikelihood - base.fit.logLikelihood,
        },
  );
  const { permutations, seed } = options;
  options.onProgress?.('false-alarm probabilities', 0.6);
  const maxima = permutations > 0 ? permutedMaxima(explorer, base, permutations, seed) : null;
  const peaks =
    maxima === null
      ? stage.peaks
      : stage.peaks.map((peak) => {
          const { probability, exceeding } = permutationFalseAlarm(maxima, peak.power);
          // Where no permutation comes near, their number is all that they say; the bound says more.
          const bound = Math.min(probability, peak.falseAlarmProbability);
          return { ...peak, falseAlarmProbability: exceeding === 0 ? bound : probability };
        });
  const drift = ['', ', and a linear drift', ', and a quadratic drift'][base.plan.drift]!;
  return {
    stage: { ...stage, peaks },
    window: windowFunction(search.background.timesDays, search.background.weights, spanDays),
    notices: velocities.notices.map(({ code, message, path }) => ({ code, message: `${path}: ${message}` })),
    method: `a mean per instrument${drift} refitted at each frequency; false-alarm probabilities ${permutations > 0 ? `from ${permutations} permutations within instruments, or the analytic bound of Baluev 2008 where none reached the power` : 'are the analytic bound of Baluev 2008'}`,
  };
}
