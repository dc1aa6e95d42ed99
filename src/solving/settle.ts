/** Search, rivals and the maximum: what is settled before anything is said about uncertainty. */
import type { Case, VelocitySet } from '../observations/types.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { findCompanions, type Found } from './find-companions.js';
import { polish } from './polish.js';
import { explorerFor } from './prepare.js';
import { rivalsOf, type RivalSearch } from './rivals.js';
import { requireSolvable } from './solvable.js';

export interface Settled {
  readonly explorer: Explorer;
  readonly spanDays: number;
  readonly found: Found;
  readonly best: PlannedFit;
  /** One per companion of `best`. */
  readonly rivals: readonly RivalSearch[];
}

/** A better period found among the rivals is adopted at most this often. */
const ADOPTIONS = 4;

/**
 * @param progress - told what is being done and which share of the work is behind
 * @throws InputDataError when there are too few velocities or no span to search
 */
export function settleCase(
  theCase: Case,
  velocities: VelocitySet,
  progress: (stage: string, fraction: number) => void,
): Settled {
  requireSolvable(velocities);
  const { explorer, spanDays } = explorerFor(theCase, velocities);
  progress('searching', 0);
  const found = findCompanions(explorer, (done) => {
    progress(`searching for companion ${done + 1}`, Math.min(0.8, 0.2 * done));
  });
  progress('refitting aliases', 0.8);
  return { explorer, spanDays, found, ...settleRivals(explorer, found) };
}

/** Rivals of every companion; a rival that turns out better becomes the solution and the question is asked again. */
function settleRivals(explorer: Explorer, found: Found): { best: PlannedFit; rivals: RivalSearch[] } {
  let best = polished(explorer, found.best);
  for (let turn = 0; ; turn++) {
    const rivals: RivalSearch[] = [];
    let better: PlannedFit | null = null;
    for (let c = 0; c < best.plan.companions.length && better === null; c++) {
      const search = rivalsOf(explorer, best, c, otherPeriods(explorer, found, best, c));
      rivals.push(search);
      better = search.better;
    }
    if (better === null || turn >= ADOPTIONS) {
      return { best, rivals: better === null ? rivals : allRivals(explorer, found, best) };
    }
    best = polished(explorer, explorer.settleStructure(better));
  }
}

/** The last steps to the maximum, unless they lead to an orbit that cannot be. */
function polished(explorer: Explorer, planned: PlannedFit): PlannedFit {
  const top = polish(planned);
  return explorer.isInRange(top) ? top : planned;
}

/** Rivals of every companion of a solution. */
export function allRivals(explorer: Explorer, found: Found, best: PlannedFit): RivalSearch[] {
  return best.plan.companions.map((_, c) =>
    rivalsOf(explorer, best, c, otherPeriods(explorer, found, best, c)),
  );
}

/** Periods of the other finalists of the stage at which this companion was found, and of other strong peaks. */
function otherPeriods(explorer: Explorer, found: Found, best: PlannedFit, index: number): number[] {
  const period = explorer.portable(best).companions[index]!.periodDays;
  const stage = found.stages.find(({ addition }) => {
    if (addition === null) return false;
    const own = explorer.portable(addition.planned).companions.at(-1)!.periodDays;
    return Math.abs(1 / own - 1 / period) * explorer.range.spanDays < 1;
  });
  if (stage === undefined) return [];
  const finalists = stage.alternatives.map(
    (planned) => explorer.portable(planned).companions.at(-1)!.periodDays,
  );
  return [...finalists, ...stage.search.peaks.slice(0, 6).map((peak) => 1 / peak.frequencyPerDay)].slice(
    0,
    10,
  );
}
