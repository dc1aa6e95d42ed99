/** Fits and searches of one target: the steps from which the search for companions is put together. */
import type { Case } from '../observations/types.js';
import { AU_M, DAYS_PER_YEAR, R_SUN_M } from '../orbit/constants.js';
import type { DriftDegree, VelocityData } from '../signals/velocity-term.js';
import { fitModel, ROUGH, THOROUGH, type FitEffort, type ModelFit } from './fit-model.js';
import { ModelBuilder, type CompanionPlan, type ModelPlan, type PortablePoint } from './model-builder.js';
import type { RelativeElements } from './parametrisations/parametrisation.js';
import { Periodogram } from './periodogram.js';
import { searchRange, type SearchRange } from './search-range.js';
import { searchStage, type StageSearch } from './search-stage.js';

/** A model and its best fit. */
export interface PlannedFit {
  readonly plan: ModelPlan;
  readonly fit: ModelFit;
}

/** A drift term must lower the BIC by this much to be taken. */
const DRIFT_MARGIN = 4;
/** With fewer velocities than this (beyond the zero points) a companion not yet found passes for a drift too easily. */
const FEWEST_FOR_DRIFT = 8;
/** A fit whose period runs away beyond this many times the longest period searched has found a drift, not an orbit. */
const LONGEST_FIT = 20;
const LARGEST_AMPLITUDE_MPS = 1e7;
const PEAKS = 14;
/** Starts taken from the scan of eccentric shapes. */
const SHAPES = 14;
/** Of all rough fits, this many are fitted thoroughly. */
const FINALISTS = 5;

export class Explorer {
  readonly builder: ModelBuilder;
  readonly theCase: Case;
  readonly range: SearchRange;
  readonly drifts: readonly DriftDegree[];
  readonly #instruments: readonly string[];
  readonly #periodograms = new Map<string, Periodogram>();

  constructor(
    data: VelocityData,
    instruments: readonly string[],
    theCase: Case,
    epochBjdTdb: number,
    spanDays: number,
  ) {
    this.#instruments = instruments;
    this.builder = new ModelBuilder(data, instruments, theCase, epochBjdTdb);
    this.theCase = theCase;
    this.range = searchRange(spanDays, theCase.periodRangeDays);
    const free = data.timesDays.length - data.instrumentCount;
    const all: readonly DriftDegree[] =
      theCase.drift === 'auto'
        ? [0, 1, 2]
        : [{ none: 0, linear: 1, quadratic: 2 }[theCase.drift] as DriftDegree];
    this.drifts =
      theCase.drift === 'auto'
        ? all.filter((degree) => degree === 0 || free >= FEWEST_FOR_DRIFT + 2 * degree)
        : all;
  }

  /** The same case and search range for other data of the same instruments, e.g. nightly means. */
  withData(data: VelocityData): Explorer {
    return new Explorer(data, this.#instruments, this.theCase, this.builder.epochBjdTdb, this.range.spanDays);
  }

  fit(plan: ModelPlan, start: PortablePoint, effort: FitEffort = THOROUGH): PlannedFit {
    const problem = this.builder.problem(plan);
    return { plan, fit: fitModel(problem, this.builder.point(problem, start), effort) };
  }

  portable(planned: PlannedFit): PortablePoint {
    return this.builder.portable(planned.fit);
  }

  /** The same companions with the drift that the data pay for. */
  withBestDrift(plan: ModelPlan, start: PortablePoint): PlannedFit {
    let best = this.fit({ ...plan, drift: this.drifts[0]! }, start);
    for (const drift of this.drifts.slice(1)) {
      const other = this.fit({ ...plan, drift }, this.portable(best));
      if (other.fit.bic < best.fit.bic - DRIFT_MARGIN * (drift - best.plan.drift)) best = other;
    }
    return best;
  }

  /** Search for one more companion on top of a fit. */
  search(planned: PlannedFit, range: SearchRange = this.range, shapes: number = SHAPES): StageSearch {
    const { grid } = range;
    const key = `${grid.startPerDay} ${grid.stepPerDay} ${grid.count}`;
    let periodogram = this.#periodograms.get(key);
    if (periodogram === undefined) {
      periodogram = new Periodogram(grid);
      this.#periodograms.set(key, periodogram);
    }
    return searchStage(planned.fit, periodogram, range.spanDays, {
      peaks: PEAKS,
      shapes,
    });
  }

  /**
   * The best model with one companion more, started from every peak and shape of the stage; circular and eccentric
   * fits compete by BIC. Also the other finalists, best first.
   */
  bestAddition(base: PlannedFit, stage: StageSearch, choice: CompanionPlan['choice']): readonly PlannedFit[] {
    const portable = this.portable(base);
    const wanted = choice?.circular ?? this.theCase.circular;
    const roughs: PlannedFit[] = [];
    const add = (circular: boolean, start: RelativeElements): PlannedFit => {
      const plan: ModelPlan = { ...base.plan, companions: [...base.plan.companions, { choice, circular }] };
      return this.fit(plan, { ...portable, companions: [...portable.companions, start] }, ROUGH);
    };
    for (const peak of stage.peaks) {
      const circular = add(true, peak.start);
      if (wanted !== false) roughs.push(circular);
      if (wanted === true) continue;
      const found = this.portable(circular).companions.at(-1)!;
      roughs.push(add(false, { ...found, eccentricity: Math.max(found.eccentricity, 0.05) }));
    }
    if (wanted !== true) for (const shape of stage.shapes) roughs.push(add(false, shape));
    return this.finalists(roughs);
  }

  /** Distinct rough fits, the best few of them (by ln L of the eccentric and by BIC) fitted thoroughly, best BIC first. */
  finalists(roughs: readonly PlannedFit[], count: number = FINALISTS): PlannedFit[] {
    const usable = roughs.filter((rough) => rough.fit.status !== 'failed' && this.isInRange(rough));
    const chosen: PlannedFit[] = [];
    for (const order of [byBic, byLikelihood]) {
      let taken = 0;
      for (const rough of [...usable].sort(order)) {
        if (taken >= count) break;
        if (chosen.some((other) => this.#same(other, rough))) continue;
        chosen.push(rough);
        taken++;
      }
    }
    const fits = chosen.map((rough) => this.fit(rough.plan, this.portable(rough)));
    return fits.filter((planned) => planned.fit.status !== 'failed' && this.isInRange(planned)).sort(byBic);
  }

  /** Whether every orbit of a fit is one that could exist and was searched for. */
  isInRange(planned: PlannedFit): boolean {
    return this.portable(planned).companions.every(
      (companion) =>
        companion.periodDays < LONGEST_FIT * this.range.longestPeriodDays &&
        companion.semiAmplitudeMps < LARGEST_AMPLITUDE_MPS &&
        companion.eccentricity < this.#largestEccentricity(companion.periodDays),
    );
  }

  /** An orbit whose periastron lies inside the star is no orbit; nor is anything beyond e = 0.985 searched. */
  #largestEccentricity(periodDays: number): number {
    const { massSolar, radiusSolar } = this.theCase.star;
    const axisAu = Math.cbrt((massSolar?.value ?? 1) * (periodDays / DAYS_PER_YEAR) ** 2);
    const radiusAu = ((radiusSolar?.value ?? 1) * R_SUN_M) / AU_M;
    return Math.max(0.05, Math.min(0.985, 1 - radiusAu / axisAu));
  }

  #same(a: PlannedFit, b: PlannedFit): boolean {
    const one = this.portable(a).companions.at(-1);
    const other = this.portable(b).companions.at(-1);
    if (one === undefined || other === undefined) return true;
    if (a.plan.companions.at(-1)!.circular !== b.plan.companions.at(-1)!.circular) return false;
    const apart = Math.abs(1 / one.periodDays - 1 / other.periodDays) * this.range.spanDays;
    return (
      apart < 0.05 &&
      Math.abs(one.eccentricity - other.eccentricity) < 0.05 &&
      Math.abs(a.fit.logLikelihood - b.fit.logLikelihood) < 0.05
    );
  }

  /** Circular or eccentric for each companion, and the drift: changes one at a time while the BIC falls. */
  settleStructure(start: PlannedFit): PlannedFit {
    let best = start;
    for (let turn = 0; turn < 8; turn++) {
      let better = null as PlannedFit | null;
      const consider = (other: PlannedFit, margin: number): void => {
        if (other.fit.status === 'failed' || !this.isInRange(other)) return;
        if (other.fit.bic < (better ?? best).fit.bic - margin) better = other;
      };
      const portable = this.portable(best);
      best.plan.companions.forEach((companion, c) => {
        if ((companion.choice?.circular ?? this.theCase.circular) !== 'auto') return;
        const companions = best.plan.companions.map((other, o) =>
          o === c ? { ...other, circular: !other.circular } : other,
        );
        consider(this.fit({ ...best.plan, companions }, portable), 1e-6);
      });
      for (const drift of this.drifts) {
        if (drift !== best.plan.drift)
          consider(
            this.fit({ ...best.plan, drift }, portable),
            drift > best.plan.drift ? DRIFT_MARGIN : -DRIFT_MARGIN,
          );
      }
      if (better === null) return best;
      best = better;
    }
    return best;
  }

  /** The model without one companion, refitted, its drift chosen anew. */
  without(planned: PlannedFit, index: number): PlannedFit {
    const portable = this.portable(planned);
    const plan = { ...planned.plan, companions: planned.plan.companions.filter((_, c) => c !== index) };
    const start = { ...portable, companions: portable.companions.filter((_, c) => c !== index) };
    const kept = this.fit(plan, start);
    if (this.drifts.length === 1) return kept;
    const other = this.withBestDrift(plan, this.portable(kept));
    return other.fit.bic < kept.fit.bic ? other : kept;
  }
}

export function byBic(a: PlannedFit, b: PlannedFit): number {
  return a.fit.bic - b.fit.bic;
}

export function byLikelihood(a: PlannedFit, b: PlannedFit): number {
  return b.fit.logDensity - a.fit.logDensity;
}
