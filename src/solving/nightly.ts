/**
 * Nights as the unit of evidence. Velocities of one night share whatever disturbed that night, so that ten of them are
 * not ten independent witnesses. A companion must also be there when each night of an instrument counts once.
 */
import type { VelocityData } from '../signals/velocity-term.js';
import { Explorer, type PlannedFit } from './explorer.js';

/** Velocities of one instrument within this time of the first belong to one night. */
const NIGHT_DAYS = 0.4;
/** Below this period, nights cannot be averaged without losing the signal itself. */
const SHORTEST_PERIOD_DAYS = 5;
/** The question is asked when at least this share of the velocities shares its night with another. */
const SHARE_IN_COMPANY = 0.2;

/** Index of the night (of an instrument) of each velocity, in order of first appearance. */
export function nightsOf(data: VelocityData): { nightOf: Uint32Array; count: number } {
  const n = data.timesDays.length;
  const nightOf = new Uint32Array(n);
  const open = new Map<number, { start: number; night: number }>();
  let count = 0;
  for (let i = 0; i < n; i++) {
    const instrument = data.instrumentOf[i]!;
    let current = open.get(instrument);
    if (current === undefined || data.timesDays[i]! - current.start > NIGHT_DAYS) {
      current = { start: data.timesDays[i]!, night: count++ };
      open.set(instrument, current);
    }
    nightOf[i] = current.night;
  }
  return { nightOf, count };
}

/**
 * The same velocities with each night of an instrument as one: the weighted mean of the residuals about `fit`, set on
 * its model at the mean time. `null` when nights hold hardly more than one velocity each.
 */
export function nightlyExplorer(explorer: Explorer, fit: PlannedFit): Explorer | null {
  const { data } = explorer.builder;
  const { nightOf, count } = nightsOf(data);
  const sizes = new Uint32Array(count);
  for (const night of nightOf) sizes[night]!++;
  const inCompany = nightOf.reduce((sum, night) => sum + (sizes[night]! > 1 ? 1 : 0), 0);
  if (inCompany < SHARE_IN_COMPANY * nightOf.length) return null;
  const { problem, point } = fit.fit;
  const prediction = Float64Array.from(problem.predictionAt(point.parameters)!);
  const weight = new Float64Array(count);
  const time = new Float64Array(count);
  const residual = new Float64Array(count);
  const instrumentOf = new Uint16Array(count);
  for (let i = 0; i < nightOf.length; i++) {
    const night = nightOf[i]!;
    const w = 1 / data.sigmasMps[i]! ** 2;
    weight[night]! += w;
    time[night]! += w * data.timesDays[i]!;
    residual[night]! += w * (data.velocitiesMps[i]! - prediction[i]!);
    instrumentOf[night] = data.instrumentOf[i]!;
  }
  const timesDays = time.map((sum, night) => sum / weight[night]!);
  const nightly: VelocityData = {
    timesDays,
    velocitiesMps: residual.map((sum, night) => sum / weight[night]!),
    sigmasMps: weight.map((w) => 1 / Math.sqrt(w)),
    instrumentOf,
    instrumentCount: data.instrumentCount,
  };
  const averaged = explorer.withData(nightly);
  // The model at the mean times is added to the mean residuals.
  const nightlyProblem = averaged.builder.problem(fit.plan);
  const start = averaged.builder.point(nightlyProblem, explorer.portable(fit));
  const atMeanTimes = nightlyProblem.predictionAt(start.parameters);
  if (atMeanTimes === null) return null;
  for (let night = 0; night < count; night++) nightly.velocitiesMps[night]! += atMeanTimes[night]!;
  return averaged;
}

export interface NightlySupport {
  /** Gain in ln L and in BIC when each night counts once. */
  readonly deltaLogLikelihood: number;
  readonly deltaBic: number;
  /** The model without the companion, refitted to the nights. */
  readonly base: PlannedFit;
  readonly explorer: Explorer;
}

/**
 * What `withIt` gains over `without` on nightly means; `null` where the question does not arise (one velocity a night, or
 * a companion too fast to be averaged over a night).
 */
export function nightlySupport(
  explorer: Explorer,
  without: PlannedFit,
  withIt: PlannedFit,
): NightlySupport | null {
  const added = explorer.portable(withIt).companions;
  const shortest = Math.min(...added.map((companion) => companion.periodDays).slice(-1));
  if (shortest < SHORTEST_PERIOD_DAYS) return null;
  const averaged = nightlyExplorer(explorer, withIt);
  if (averaged === null) return null;
  const base = averaged.fit(without.plan, explorer.portable(without));
  const top = averaged.fit(withIt.plan, explorer.portable(withIt));
  return {
    deltaLogLikelihood: top.fit.logLikelihood - base.fit.logLikelihood,
    deltaBic: base.fit.bic - top.fit.bic,
    base,
    explorer: averaged,
  };
}
