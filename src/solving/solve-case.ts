/** The main job: velocities of one target in, solution out. Pure: no files, no clock, no console. */
import { rootMeanSquare } from '../numerics/summary.js';
import type { Case, Measured, VelocitySet } from '../observations/types.js';
import { DAYS_PER_YEAR } from '../orbit/constants.js';
import type { VelocityModelPoint } from '../signals/velocity-model.js';
import { assumptionsOf } from './assumptions.js';
import { companionRecord, neighbourRecords } from './companion-record.js';
import { absoluteElements } from './elements-report.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { findCompanions, type Found } from './find-companions.js';
import { polish } from './polish.js';
import { explorerFor } from './prepare.js';
import { fixedQuantity, unknownQuantity } from './quantities.js';
import { rivalsOf, type RivalSearch } from './rivals.js';
import { foundStageRecord } from './search-record.js';
import { backgroundOf } from './search-stage.js';
import { requireSolvable } from './solvable.js';
import type { CandidateRecord, InstrumentRecord, Quantity, SolutionRecord, Solved } from './types.js';
import { drawnQuantity, fittedCovariance, sampleAround, type Sampled } from './uncertainties.js';
import { warningsOf } from './warnings.js';
import { windowFunction } from './window-function.js';

export interface SolveOptions {
  readonly seed: number;
  /** Curvature at the solution only; no posterior. */
  readonly quick: boolean;
  /** Permutations for false-alarm probabilities; 0 keeps the analytic bound. */
  readonly permutations: number;
  readonly provenance: {
    readonly version: string;
    readonly node: string;
    readonly command: readonly string[];
  };
  readonly onProgress?: (stage: string, fraction: number) => void;
}

/** A better period found among the rivals is adopted at most this often. */
const ADOPTIONS = 4;

/**
 * @throws InputDataError when there are too few velocities or no span to search
 */
export function solveCase(theCase: Case, velocities: VelocitySet, options: SolveOptions): Solved {
  requireSolvable(velocities);
  const progress = options.onProgress ?? ((): void => undefined);
  const { explorer, epochBjdTdb, spanDays } = explorerFor(theCase, velocities);
  progress('searching', 0);
  const found = findCompanions(explorer, (done) => {
    progress(`searching for companion ${done + 1}`, Math.min(0.8, 0.2 * done));
  });
  progress('refitting aliases', 0.8);
  const { best, rivals } = settleRivals(explorer, found);
  progress('uncertainties', 0.9);
  const { problem, point } = best.fit;
  const sampled = sampleAround(problem, point, theCase, options.seed);
  const letters = lettersOf(theCase, best);
  const companions = best.plan.companions.map((_, c) =>
    companionRecord(explorer, best, sampled, c, letters[c]!, rivals[c]!, options),
  );
  const residualsMps = residualsOf(best);
  const instruments = instrumentRecords(velocities, sampled, best, residualsMps);
  const record: SolutionRecord = {
    schema: 'tugline/solution',
    version: 1,
    target: theCase.target,
    timeScale: velocities.timeScale,
    epoch: epochBjdTdb,
    star: {
      mass: starQuantity(theCase.star.massSolar, 'M_sun'),
      radius: starQuantity(theCase.star.radiusSolar, 'R_sun'),
      effectiveTemperature: starQuantity(theCase.star.effectiveTemperatureK, 'K'),
    },
    companions,
    candidates: candidateRecords(explorer, found),
    neighbours: neighbourRecords(sampled, companions),
    velocity: {
      instruments,
      slope:
        best.plan.drift > 0
          ? drawnQuantity(sampled, 'm/s/yr', (values) => values.slopeMpsPerYear)
          : fixedQuantity(0, 'm/s/yr'),
      curvature:
        best.plan.drift > 1
          ? drawnQuantity(sampled, 'm/s/yr^2', (values) => values.curvatureMpsPerYear2)
          : fixedQuantity(0, 'm/s/yr^2'),
    },
    fit: fitRecord(best, sampled, letters, velocities, residualsMps),
    posterior: null,
    assumptions: assumptionsOf(theCase, best, sampled.curvature.source),
    warnings: warningsOf({ explorer, best, theCase, velocities, companions, instruments }),
    provenance: {
      program: 'tugline',
      version: options.provenance.version,
      node: options.provenance.node,
      seed: options.seed,
      command: options.provenance.command,
      inputs: velocities.tables.map(({ path, sha256, rows, used }) => ({ path, sha256, rows, used })),
    },
  };
  const { timesDays, weights } = backgroundOf(best.fit);
  return {
    record,
    velocities,
    best: modelPoint(sampled, letters, epochBjdTdb),
    residualsMps,
    stages: found.stages.map((stage) => foundStageRecord(stage, spanDays)),
    window: windowFunction(timesDays, weights, spanDays),
  };
}

/** Rivals of every companion; a rival that turns out better becomes the solution and the question is asked again. */
function settleRivals(explorer: Explorer, found: Found): { best: PlannedFit; rivals: RivalSearch[] } {
  let best = polish(found.best);
  for (let turn = 0; ; turn++) {
    const rivals: RivalSearch[] = [];
    let better: PlannedFit | null = null;
    for (let c = 0; c < best.plan.companions.length && better === null; c++) {
      const search = rivalsOf(explorer, best, c, otherPeriods(explorer, found, best, c));
      rivals.push(search);
      better = search.better;
    }
    if (better === null || turn >= ADOPTIONS) {
      while (rivals.length < best.plan.companions.length)
        rivals.push(
          rivalsOf(explorer, best, rivals.length, otherPeriods(explorer, found, best, rivals.length)),
        );
      return { best, rivals };
    }
    best = polish(explorer.settleStructure(better));
  }
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

function lettersOf(theCase: Case, best: PlannedFit): string[] {
  const listed = typeof theCase.companions === 'object' ? theCase.companions : [];
  return best.plan.companions.map((_, c) => listed[c]?.letter ?? String.fromCharCode('b'.charCodeAt(0) + c));
}

function starQuantity(measured: Measured | null, unit: string): Quantity {
  if (measured === null) return unknownQuantity(unit, 'not given');
  const { value, sigma } = measured;
  return sigma > 0
    ? { value, sigma, lower: value - sigma, upper: value + sigma, unit }
    : fixedQuantity(value, unit);
}

function candidateRecords(explorer: Explorer, found: Found): CandidateRecord[] {
  if (found.candidate === null) return [];
  const { planned, falseAlarmProbability, deltaBic } = found.candidate;
  const companion = explorer.portable(planned).companions.at(-1)!;
  return [
    {
      period: companion.periodDays,
      semiAmplitude: companion.semiAmplitudeMps,
      falseAlarmProbability,
      deltaBic,
    },
  ];
}

function residualsOf(best: PlannedFit): Float64Array {
  const { problem, point } = best.fit;
  const prediction = problem.predictionAt(point.parameters)!;
  return problem.data.velocitiesMps.map((velocity, i) => velocity - prediction[i]!);
}

function instrumentRecords(
  velocities: VelocitySet,
  sampled: Sampled,
  best: PlannedFit,
  residualsMps: Float64Array,
): InstrumentRecord[] {
  const { problem } = best.fit;
  return velocities.instruments.map((name, i) => {
    const own = residualsMps.filter((_, row) => velocities.instrumentOf[row] === i);
    return {
      name,
      count: own.length,
      zeroPoint:
        problem.linearColumns[i]! >= 0
          ? drawnQuantity(sampled, 'm/s', (values) => values.zeroPointsMps[i]!)
          : fixedQuantity(sampled.values.zeroPointsMps[i]!, 'm/s'),
      jitter: problem.freeJitters.includes(i)
        ? drawnQuantity(sampled, 'm/s', (values) => values.jittersMps[i]!)
        : fixedQuantity(sampled.values.jittersMps[i]!, 'm/s'),
      rms: own.length > 0 ? rootMeanSquare(own) : 0,
    };
  });
}

function fitRecord(
  best: PlannedFit,
  sampled: Sampled,
  letters: readonly string[],
  velocities: VelocitySet,
  residualsMps: Float64Array,
): SolutionRecord['fit'] {
  const { problem, point, logLikelihood, bic, status, reason } = best.fit;
  const n = velocities.count;
  const k = problem.freeCount;
  const chiSquare = residualsMps.reduce((sum, residual, i) => {
    const variance = velocities.sigmasMps[i]! ** 2 + point.jittersMps[velocities.instrumentOf[i]!]! ** 2;
    return sum + (residual * residual) / variance;
  }, 0);
  return {
    status,
    reason,
    usable: status !== 'failed' && best.plan.companions.length > 0,
    logLikelihood,
    chiSquare,
    degreesOfFreedom: n - k,
    freeParameters: k,
    bic,
    aicc: n - k - 1 > 0 ? 2 * k - 2 * logLikelihood + (2 * k * (k + 1)) / (n - k - 1) : null,
    rms: rootMeanSquare(residualsMps),
    covariance: fittedCovariance(sampled, letters, velocities),
  };
}

function modelPoint(sampled: Sampled, letters: readonly string[], epochBjdTdb: number): VelocityModelPoint {
  return {
    companions: sampled.values.companions.map((values) => absoluteElements(values, epochBjdTdb)),
    letters,
    zeroPointsMps: sampled.values.zeroPointsMps,
    jittersMps: sampled.values.jittersMps,
    epochBjdTdb,
    slopeMpsPerDay: sampled.values.slopeMpsPerYear / DAYS_PER_YEAR,
    curvatureMpsPerDay2: sampled.values.curvatureMpsPerYear2 / DAYS_PER_YEAR ** 2,
  };
}
