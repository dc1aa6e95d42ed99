/** Other periods for a companion of the solution: aliases and other peaks, each refitted before it is judged. */
import { aliasesOf } from './aliases.js';
import { byBic, type Explorer, type PlannedFit } from './explorer.js';
import { ROUGH } from './fit-model.js';
import type { RelativeElements } from './parametrisations/parametrisation.js';
import { sinusoidAt } from './periodogram.js';
import { backgroundOf, shapeElements, sinusoidElements } from './search-stage.js';
import { scanShapes } from './shape-scan.js';
import type { LinearBackground } from './linear-background.js';
import type { Rival } from './types.js';

/** Refits whose ln L falls short by more than this are dismissed. */
const DISMISSED_BELOW = -12;
const LARGEST_COUNT = 8;
/** A likelihood ratio below e^3 (1 in 20) is no ground for preferring one period. */
export const CLOSE_RIVAL = -3;

export interface RivalSearch {
  readonly rivals: readonly Rival[];
  /** Their fits, in the same order; `null` for one outside the periods that were asked for. */
  readonly fits: readonly (PlannedFit | null)[];
  readonly tried: number;
  /** A refit that beats the solution, if there is one. */
  readonly better: PlannedFit | null;
}

/**
 * @param best - the solution
 * @param index - which of its companions
 * @param otherPeriods - further periods to refit, e.g. of other finalists of the search
 */
export function rivalsOf(
  explorer: Explorer,
  best: PlannedFit,
  index: number,
  otherPeriods: readonly number[],
): RivalSearch {
  const choice = best.plan.companions[index]!.choice;
  if (choice?.elements.period !== undefined) return { rivals: [], fits: [], tried: 0, better: null };
  const portable = explorer.portable(best);
  const companion = portable.companions[index]!;
  const frequency = 1 / companion.periodDays;
  const resolution = 1 / explorer.range.spanDays;
  const trials = aliasesOf(frequency, resolution);
  for (const period of otherPeriods) {
    const other = 1 / period;
    if (Math.abs(other - frequency) < 0.75 * resolution) continue;
    if (trials.some((trial) => Math.abs(trial.frequencyPerDay - other) < 0.5 * resolution)) continue;
    trials.push({ frequencyPerDay: other, kind: 'other peak' });
  }
  const plan = { ...best.plan, companions: best.plan.companions.filter((_, c) => c !== index) };
  const start = { ...portable, companions: portable.companions.filter((_, c) => c !== index) };
  const background = backgroundOf(explorer.fit(plan, start, ROUGH).fit);
  const judged: { readonly rival: Rival; readonly fit: PlannedFit | null }[] = [];
  let better: PlannedFit | null = null;
  let tried = 0;
  for (const trial of trials) {
    const starts = startsNear(explorer, background, trial.frequencyPerDay, companion.eccentricity);
    const roughs = starts.map((element) =>
      explorer.fit(
        best.plan,
        { ...portable, companions: portable.companions.map((c, i) => (i === index ? element : c)) },
        ROUGH,
      ),
    );
    const usable = roughs.filter((rough) => explorer.isInRange(rough)).sort(byBic);
    tried++;
    const top = usable[0];
    if (top === undefined || top.fit.logLikelihood < best.fit.logLikelihood + DISMISSED_BELOW - 3) continue;
    const refit = explorer.fit(best.plan, explorer.portable(top));
    const found = explorer.portable(refit).companions[index]!;
    // A refit that slid back to the solution itself is no rival, nor one that slid onto another rival.
    const apart = (period: number): boolean => Math.abs(1 / found.periodDays - 1 / period) > 0.5 * resolution;
    if (!apart(companion.periodDays) || !judged.every(({ rival }) => apart(rival.period))) continue;
    if (!explorer.isInRange(refit)) continue;
    const isBetter =
      refit.fit.logDensity > best.fit.logDensity + 1e-3 && refit.fit.bic < (better ?? best).fit.bic;
    const isAskedFor = wasAskedFor(explorer, found.periodDays);
    if (isBetter && isAskedFor) better = refit;
    const rival: Rival = {
      period: found.periodDays,
      kind: trial.kind,
      deltaLogLikelihood: refit.fit.logLikelihood - best.fit.logLikelihood,
      eccentricity: found.eccentricity,
    };
    judged.push({ rival, fit: isAskedFor ? refit : null });
  }
  const kept = judged
    .filter(({ rival }) => rival.deltaLogLikelihood > DISMISSED_BELOW)
    .sort((a, b) => b.rival.deltaLogLikelihood - a.rival.deltaLogLikelihood)
    .slice(0, LARGEST_COUNT);
  return { rivals: kept.map(({ rival }) => rival), fits: kept.map(({ fit }) => fit), tried, better };
}

/** Rivals outside the searched range are told, but none of them becomes the solution. */
function wasAskedFor(explorer: Explorer, periodDays: number): boolean {
  const highest = explorer.theCase.periodRangeDays.high ?? Infinity;
  return periodDays >= explorer.range.shortestPeriodDays && periodDays <= highest;
}

/** The best sinusoid within a resolution element of a frequency and, for eccentric companions, the best shape there. */
function startsNear(
  explorer: Explorer,
  background: LinearBackground,
  frequencyPerDay: number,
  eccentricity: number,
): RelativeElements[] {
  const resolution = 1 / explorer.range.spanDays;
  let best = frequencyPerDay;
  let bestPower = -1;
  for (let k = -8; k <= 8; k++) {
    const trial = frequencyPerDay + (k * resolution) / 14;
    if (trial <= 0) continue;
    const { power } = sinusoidAt(background, trial);
    if (power > bestPower) {
      bestPower = power;
      best = trial;
    }
  }
  const sinusoid = sinusoidElements(best, sinusoidAt(background, best));
  const starts: RelativeElements[] = [{ ...sinusoid, eccentricity: eccentricity > 0 ? 0.05 : 0 }];
  if (eccentricity > 0.3) {
    const [shape] = scanShapes(background, {
      lowestFrequencyPerDay: Math.max(0.3 * resolution, frequencyPerDay - 0.6 * resolution),
      highestFrequencyPerDay: frequencyPerDay + 0.6 * resolution,
      spanDays: explorer.range.spanDays,
      instrumentOf: explorer.builder.data.instrumentOf,
      starts: 1,
    });
    if (shape !== undefined) starts.push(shapeElements(shape));
  }
  return starts;
}
