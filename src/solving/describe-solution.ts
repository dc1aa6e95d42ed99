/** The solution as it is recorded: what was settled, with uncertainties read from draws. Pure. */
import { rootMeanSquare } from '../numerics/summary.js';
import { companionLetter } from '../observations/letters.js';
import type { Case, Measured, VelocitySet } from '../observations/types.js';
import { DAYS_PER_YEAR } from '../orbit/constants.js';
import type { VelocityModelPoint } from '../signals/velocity-model.js';
import { assumptionsOf } from './assumptions.js';
import { companionRecord, neighbourRecords } from './companion-record.js';
import { absoluteElements } from './elements-report.js';
import type { Explorer, PlannedFit } from './explorer.js';
import type { Found } from './find-companions.js';
import { fixedQuantity, unknownQuantity } from './quantities.js';
import type { CompanionMarginals } from './posterior/marginals.js';
import type { PosteriorSample } from './posterior/sample-posterior.js';
import { chiSquareOf, residualsOf } from './residuals.js';
import { foundStageRecord } from './search-record.js';
import { backgroundOf } from './search-stage.js';
import type { Settled } from './settle.js';
import type {
  CandidateRecord,
  CompanionRecord,
  InstrumentRecord,
  PosteriorRecord,
  Quantity,
  SolutionRecord,
  Solved,
} from './types.js';
import { drawnQuantity, fittedCovariance, type Sampled } from './uncertainties.js';
import { warningsOf } from './warnings.js';
import { windowFunction } from './window-function.js';

/** What the record says about how it was made. */
export interface Making {
  readonly seed: number;
  readonly permutations: number;
  readonly provenance: {
    readonly version: string;
    readonly node: string;
    readonly command: readonly string[];
  };
}

export function describeSolution(
  theCase: Case,
  velocities: VelocitySet,
  settled: Settled,
  sampled: Sampled,
  making: Making,
  posterior: PosteriorSample | null = null,
): Solved {
  const { explorer, found, best, rivals, spanDays } = settled;
  const { epochBjdTdb } = explorer.builder;
  const letters = lettersOf(theCase, best);
  const companions = best.plan.companions.map((_, c) =>
    withMarginals(
      companionRecord(explorer, best, sampled, c, letters[c]!, rivals[c]!, making),
      posterior?.marginals[c] ?? null,
    ),
  );
  const residualsMps = residualsOf(best.fit)!;
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
    posterior: posterior?.record ?? null,
    assumptions: assumptionsOf(theCase, best, posterior === null ? sampled.curvature.source : 'posterior'),
    warnings: [
      ...samplingWarnings(posterior),
      ...warningsOf({ explorer, best, residualsMps, theCase, velocities, companions, instruments }),
    ],
    provenance: {
      program: 'tugline',
      version: making.provenance.version,
      node: making.provenance.node,
      seed: making.seed,
      command: making.provenance.command,
      inputs: [
        ...caseInput(theCase),
        ...velocities.tables.map(({ path, sha256, rows, used }) => ({ path, sha256, rows, used })),
      ],
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
    posterior: posterior?.draws(sampled, letters) ?? null,
  };
}

/** A posterior that did not converge is no basis for intervals. */
export function samplingWarnings(
  posterior: { readonly record: PosteriorRecord } | null,
): SolutionRecord['warnings'] {
  if (posterior === null || posterior.record.status === 'converged') return [];
  const { rHatMax, bulkEssMin, tailEssMin, status } = posterior.record;
  const why = status === 'interrupted' ? 'was interrupted' : 'reached its limit of draws';
  return [
    {
      code: 'posterior-not-converged',
      message: `the sampling of the posterior ${why} before it had converged (R̂ ${rHatMax.toFixed(3)}, effective sample size ${Math.min(bulkEssMin, tailEssMin).toFixed(0)}): do not quote its intervals`,
    },
  ];
}

/** The case file among the inputs; it has no rows. */
function caseInput({ path, sha256 }: Case): SolutionRecord['provenance']['inputs'] {
  return path === null || sha256 === undefined ? [] : [{ path, sha256, rows: 0, used: 0 }];
}

function withMarginals(record: CompanionRecord, marginals: CompanionMarginals | null): CompanionRecord {
  if (marginals === null) return record;
  const { evidence } = record;
  const eccentricity =
    evidence.eccentricity === null ? null : { ...evidence.eccentricity, marginal: marginals.eccentricity };
  return { ...record, evidence: { ...evidence, marginal: marginals.presence, eccentricity } };
}

function lettersOf(theCase: Case, best: PlannedFit): string[] {
  const listed = typeof theCase.companions === 'object' ? theCase.companions : [];
  return best.plan.companions.map((_, c) => listed[c]?.letter ?? companionLetter(c));
}

export function starQuantity(measured: Measured | null, unit: string): Quantity {
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
  const chiSquare = chiSquareOf(residualsMps, problem.data, point.jittersMps);
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
