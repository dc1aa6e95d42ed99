/**
 * How many companions, and which: one at a time from the strongest signal on, everything refitted together whenever
 * one is added, earlier choices questioned again, until what is left clears the thresholds no more.
 */
import type { CompanionChoice } from '../observations/types.js';
import { Explorer, byBic, byLikelihood, type PlannedFit } from './explorer.js';
import { ACCEPTED, CANDIDATE, clears, measure, type Addition } from './addition.js';
import { searchRange, type SearchRange } from './search-range.js';
import type { StageSearch } from './search-stage.js';

/** A search by sinusoids alone. */
const NO_SHAPES = 0;

/** Finalists of a stage that are weighed before the search ends. */
const QUESTIONED = 4;

export interface FoundStage {
  readonly search: StageSearch;
  /** Number of companions in the model that was refitted at each trial. */
  readonly companionsFitted: number;
  readonly addition: Addition | null;
  /** Other additions that were fitted thoroughly, best BIC first. */
  readonly alternatives: readonly PlannedFit[];
  /** The eccentric addition that gains most. */
  readonly bestShape: {
    readonly periodDays: number;
    readonly eccentricity: number;
    readonly gain: number;
  } | null;
}

export interface Found {
  readonly best: PlannedFit;
  readonly stages: readonly FoundStage[];
  /** Signals that clear only the weaker thresholds. */
  readonly candidate: Addition | null;
}

/** Number of fitted companions when the case names it; `null` leaves it to the evidence. */
function wantedCount(explorer: Explorer): number | null {
  const { companions } = explorer.theCase;
  if (companions === 'auto' || explorer.theCase.searchFurther === true) return null;
  return typeof companions === 'number' ? companions : companions.length;
}

export function findCompanions(explorer: Explorer, onStage: (done: number) => void): Found {
  const { theCase } = explorer;
  const wanted = wantedCount(explorer);
  const limit = wanted ?? theCase.maximumCompanions;
  const listed: readonly CompanionChoice[] = typeof theCase.companions === 'object' ? theCase.companions : [];
  const free = explorer.builder.data.timesDays.length - explorer.builder.data.instrumentCount;
  let best = explorer.withBestDrift(
    { companions: [], drift: explorer.drifts[0]! },
    explorer.builder.emptyPoint(),
  );
  const stages: FoundStage[] = [];
  let candidate: Addition | null = null;
  for (let count = 0; count <= limit; count++) {
    const choice = listed[count] ?? null;
    const range = choice === null ? explorer.range : rangeOfChoice(explorer, choice);
    const search = explorer.search(best, range);
    if (count === limit || free < 3 * (count + 1)) {
      stages.push({ search, companionsFitted: count, addition: null, alternatives: [], bestShape: null });
      break;
    }
    const { addition, alternatives } = nextAddition(explorer, best, search, choice, range);
    const all = addition === null ? alternatives : [addition.planned, ...alternatives];
    stages.push({
      search,
      companionsFitted: count,
      addition,
      alternatives,
      bestShape: bestShapeOf(explorer, best, all),
    });
    onStage(count + 1);
    if (addition === null) break;
    if (wanted === null && choice === null && !clears(addition, ACCEPTED)) {
      if (clears(addition, CANDIDATE)) candidate = addition;
      break;
    }
    best = questionEarlierChoices(explorer, explorer.settleStructure(addition.planned), listed);
  }
  return { best, stages, candidate };
}

function nextAddition(
  explorer: Explorer,
  base: PlannedFit,
  search: StageSearch,
  choice: CompanionChoice | null,
  range: SearchRange,
): { addition: Addition | null; alternatives: readonly PlannedFit[] } {
  let fits = [...explorer.bestAddition(base, search, choice)];
  if (base.plan.drift > 0 && explorer.drifts.includes(0)) {
    // A drift may have swallowed part of a long period: look without it too, and let the BIC decide.
    const bare = explorer.fit({ ...base.plan, drift: 0 }, explorer.portable(base));
    fits.push(...explorer.bestAddition(bare, explorer.search(bare, range, NO_SHAPES), choice));
  }
  fits = fits.sort(byBic);
  const top = fits[0];
  if (top === undefined) return { addition: null, alternatives: [] };
  let first: Addition | null = null;
  // Where nights of many velocities favour a signal that does not survive nightly counting, the next one may.
  for (const fit of fits.slice(0, QUESTIONED)) {
    const addition = measure(explorer, base, explorer.settleStructure(fit), fits);
    if (clears(addition, ACCEPTED)) return { addition, alternatives: fits.filter((other) => other !== fit) };
    first ??= addition;
    if (addition.refusal === null) break;
  }
  return { addition: first, alternatives: fits.slice(1) };
}

function bestShapeOf(
  explorer: Explorer,
  base: PlannedFit,
  fits: readonly PlannedFit[],
): FoundStage['bestShape'] {
  const eccentric = fits.filter((planned) => !planned.plan.companions.at(-1)!.circular).sort(byLikelihood)[0];
  if (eccentric === undefined) return null;
  const companion = explorer.portable(eccentric).companions.at(-1)!;
  return {
    periodDays: companion.periodDays,
    eccentricity: companion.eccentricity,
    gain: eccentric.fit.logLikelihood - base.fit.logLikelihood,
  };
}

/** Searches anew for each earlier companion with the others in place; adopts what lowers the BIC. */
function questionEarlierChoices(
  explorer: Explorer,
  start: PlannedFit,
  listed: readonly CompanionChoice[],
): PlannedFit {
  let best = start;
  for (let pass = 0; pass < 2; pass++) {
    const before = best.fit.bic;
    for (let c = 0; c < best.plan.companions.length - (pass === 0 ? 1 : 0); c++) {
      if (listed[c] !== undefined || best.plan.companions.length < 2) continue;
      const others = explorer.without(best, c);
      const isEccentric = explorer.portable(best).companions[c]!.eccentricity > 0.3;
      const search = isEccentric
        ? explorer.search(others)
        : explorer.search(others, explorer.range, NO_SHAPES);
      const fits = explorer.bestAddition(others, search, null);
      const top = fits[0];
      if (top === undefined) continue;
      const settled = explorer.settleStructure(top);
      if (settled.fit.bic < best.fit.bic - 1e-4) best = settled;
    }
    if (best.fit.bic > before - 1e-3) break;
  }
  return best;
}

/** Search range of a companion whose period the case states. */
function rangeOfChoice(explorer: Explorer, choice: CompanionChoice): SearchRange {
  const { period } = choice.elements;
  if (period === undefined) return explorer.range;
  const span = explorer.range.spanDays;
  const bounds =
    period.kind === 'range'
      ? { low: period.low, high: period.high }
      : period.kind === 'prior'
        ? { low: Math.max(1e-3, period.value - 5 * period.sigma), high: period.value + 5 * period.sigma }
        : { low: period.value * (1 - 1e-6), high: period.value * (1 + 1e-6) };
  return searchRange(span, bounds);
}
