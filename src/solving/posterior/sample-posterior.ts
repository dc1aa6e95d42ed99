/**
 * The posterior of a solution: its own mode and those of its close rivals, each sampled on its own and weighted by its
 * marginal likelihood. Modes are never mixed into one mean.
 */
import type { Case, VelocitySet } from '../../observations/types.js';
import { AU_M, DAYS_PER_YEAR, R_SUN_M } from '../../orbit/constants.js';
import { curvatureAt } from '../curvature.js';
import { reportedFromPortable } from '../elements-report.js';
import type { PlannedFit } from '../explorer.js';
import { polish } from '../polish.js';
import type { RivalSearch } from '../rivals.js';
import type { Settled } from '../settle.js';
import { allRivals } from '../settle.js';
import type { PosteriorDraws, PosteriorRecord } from '../types.js';
import { drawStars, passagesNearData, starOf, type Sampled } from '../uncertainties.js';
import { chainPool } from './chain-pool.js';
import { densityOf, type DensityRecipe } from './chain-job.js';
import { priorScales, priorSentences, type PriorScales } from './priors.js';
import { CONVERGENCE, sampleMode, samplingRecord, type ModeSample } from './sample-mode.js';
import { marginalsOf, type CompanionMarginals } from './marginals.js';
import type { PosteriorDensity } from './posterior-density.js';
import { posteriorDraws } from './posterior-draws.js';

export interface PosteriorOptions {
  readonly seed: number;
  readonly threads: number;
  /** Most draws per chain. */
  readonly limit: number;
  readonly isStopped: () => boolean;
  readonly onProgress: (share: number) => void;
}

export interface PosteriorSample {
  /** The fit at the best point of the reported mode. */
  readonly best: PlannedFit;
  readonly rivals: readonly RivalSearch[];
  readonly scales: PriorScales;
  readonly record: PosteriorRecord;
  sampledFor(theCase: Case, seed: number): Sampled;
  /** One per companion. */
  readonly marginals: readonly CompanionMarginals[];
  draws(sampled: Sampled, letters: readonly string[]): PosteriorDraws;
}

/** Rivals within this in ln L are sampled as modes of their own. */
const MODE_WITHIN = -7;
const MOST_MODES = 4;
/** Draws carried into derived quantities. */
const KEPT_DRAWS = 8000;

/** Radius of the star over the semi-major axis at a period of one day. */
function starRadiusAtOneDay(theCase: Case): number {
  const axisAu = Math.cbrt((theCase.star.massSolar?.value ?? 1) / DAYS_PER_YEAR ** 2);
  return ((theCase.star.radiusSolar?.value ?? 1) * R_SUN_M) / AU_M / axisAu;
}

/** Prior scales of a settled case. */
export function scalesOf(settled: Settled, theCase: Case): PriorScales {
  const { explorer } = settled;
  return priorScales(
    explorer.builder.data,
    explorer.range.spanDays,
    explorer.range,
    starRadiusAtOneDay(theCase),
  );
}

/** The solution and its close rivals as starting points of modes. */
function modeFits(settled: Settled): PlannedFit[] {
  const { best, rivals } = settled;
  const close = rivals
    .flatMap((search) => search.fits)
    .filter((fit) => fit !== null)
    .filter((fit) => fit.fit.logLikelihood - best.fit.logLikelihood > MODE_WITHIN)
    .sort((a, b) => b.fit.logLikelihood - a.fit.logLikelihood);
  return [best, ...close.slice(0, MOST_MODES - 1).map((fit) => polish(fit))];
}

export async function samplePosterior(
  settled: Settled,
  theCase: Case,
  velocities: VelocitySet,
  options: PosteriorOptions,
): Promise<PosteriorSample> {
  const { explorer } = settled;
  const scales = scalesOf(settled, theCase);
  const fits = modeFits(settled);
  const pool = chainPool(Math.min(options.threads, CONVERGENCE.chains));
  const samples: { readonly planned: PlannedFit; readonly sample: ModeSample<PosteriorDensity> }[] = [];
  try {
    for (const [index, planned] of fits.entries()) {
      if (index > 0 && options.isStopped()) break;
      const recipe: DensityRecipe = {
        kind: 'velocities',
        data: explorer.builder.data,
        instruments: velocities.instruments,
        theCase,
        epochBjdTdb: explorer.builder.epochBjdTdb,
        plan: planned.plan,
        scales,
      };
      const density = densityOf(recipe);
      const sample = await sampleMode(pool, recipe, density, density.position(explorer.portable(planned)), {
        seed: options.seed,
        stream: 1000 * (index + 1),
        limit: options.limit,
        isStopped: options.isStopped,
        onProgress: (share) => {
          options.onProgress((index + share) / fits.length);
        },
      });
      samples.push({ planned, sample });
    }
  } finally {
    await pool.close();
  }
  const largest = Math.max(...samples.map(({ sample }) => sample.logEvidence));
  const weights = samples.map(({ sample }) => Math.exp(sample.logEvidence - largest));
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const order = samples.map((_, i) => i).sort((a, b) => weights[b]! - weights[a]!);
  const reported = samples[order[0]!]!;
  const { sample } = reported;
  const record: PosteriorRecord = {
    ...samplingRecord(sample),
    // Modes that were not reached leave the weights incomplete, however well the first one was sampled.
    ...(samples.length < fits.length ? { status: 'interrupted' as const } : {}),
    modes: order.map((i) => ({
      periods: explorer.portable(samples[i]!.planned).companions.map((companion) => companion.periodDays),
      logEvidence: samples[i]!.sample.logEvidence,
      standardError: samples[i]!.sample.logEvidenceError,
      weight: weights[i]! / total,
    })),
    priors: priorSentences(scales, theCase),
  };
  return {
    best: reported.planned,
    rivals:
      reported.planned === settled.best
        ? settled.rivals
        : allRivals(explorer, settled.found, reported.planned),
    scales,
    record,
    marginals: marginalsOf(
      settled,
      reported.planned,
      { logEvidence: sample.logEvidence, standardError: sample.logEvidenceError },
      scales,
      options.seed,
    ),
    sampledFor: (ofCase, seed) => sampledFromMode(settled, reported.planned, sample, ofCase, seed),
    draws: (sampled, letters) =>
      posteriorDraws(
        sample,
        sampled,
        theCase,
        letters,
        velocities,
        explorer.builder.epochBjdTdb,
        options.seed,
      ),
  };
}

/** Draws of one mode as reported values, evenly thinned. */
function sampledFromMode(
  settled: Settled,
  planned: PlannedFit,
  sample: ModeSample<PosteriorDensity>,
  theCase: Case,
  seed: number,
): Sampled {
  const { problem, point } = planned.fit;
  const references = passagesNearData(problem, point);
  const { density, chains, drawsPerChain } = sample;
  const { size } = density;
  const every = Math.max(1, Math.ceil((chains.length * drawsPerChain) / KEPT_DRAWS));
  const draws = chains.flatMap((positions) =>
    Array.from({ length: Math.floor(drawsPerChain / every) }, (_, d) => {
      const at = d * every * size;
      return reportedFromPortable(density.portable(positions.subarray(at, at + size)), references);
    }),
  );
  return {
    problem,
    references,
    values: reportedFromPortable(settled.explorer.portable(planned), references),
    draws,
    stars: drawStars(theCase, draws.length, seed),
    star: starOf(theCase),
    curvature: curvatureAt(problem, point),
    point,
  };
}
