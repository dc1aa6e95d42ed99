/** Draws around the joint maximum: of the posterior by the sampler, or of the curvature at the maximum. */
import { ConvergenceError } from '../../errors.js';
import { choleskyInPlace } from '../../numerics/linear-algebra.js';
import { RandomStream } from '../../numerics/random.js';
import { chainPool } from '../posterior/chain-pool.js';
import { CONVERGENCE, sampleMode, samplingRecord } from '../posterior/sample-mode.js';
import type { PosteriorOptions } from '../posterior/sample-posterior.js';
import type { PosteriorRecord } from '../types.js';
import { jointPriorSentences } from './joint-priors.js';
import { JointDensity } from './joint-density.js';
import type { SettledJoint } from './settle-joint.js';
import { FULL, maximise } from './maximise.js';
import { steadyCovariance } from './steady-curvature.js';

/** Draws of the curvature where nothing is sampled. */
const CURVATURE_DRAWS = 4000;
const STREAM = 9000;

export interface JointSample {
  /** Of the posterior. */
  readonly density: JointDensity;
  /** Positions of each chain, row-major (draws, size). */
  readonly chains: readonly Float64Array[];
  readonly logDensities: readonly Float64Array[];
  readonly drawsPerChain: number;
  /** `null` for draws of the curvature. */
  readonly record: PosteriorRecord | null;
}

export async function sampleJoint(
  settled: SettledJoint,
  periodsDays: readonly number[],
  options: PosteriorOptions,
): Promise<JointSample> {
  const { recipe } = settled.fit;
  const density = new JointDensity(recipe, 'all');
  const start = maximise(density, density.coordinates.position(settled.fit.natural), FULL).position;
  const pool = chainPool(Math.min(options.threads, CONVERGENCE.chains));
  try {
    const sample = await sampleMode(pool, recipe, density, start, {
      seed: options.seed,
      stream: STREAM,
      limit: options.limit,
      isStopped: options.isStopped,
      onProgress: options.onProgress,
    });
    const { chains, logDensities, drawsPerChain, logEvidence, logEvidenceError } = sample;
    const record: PosteriorRecord = {
      ...samplingRecord(sample),
      modes: [{ periods: periodsDays, logEvidence, standardError: logEvidenceError, weight: 1 }],
      priors: jointPriorSentences(recipe),
    };
    return { density, chains, logDensities, drawsPerChain, record };
  } catch (error) {
    if (!(error instanceof ConvergenceError)) throw error;
    throw new ConvergenceError(
      'the posterior cannot be sampled from its maximum, which lies too close to a wall of what is possible; --quick gives the curvature there',
      {},
      { cause: error },
    );
  } finally {
    await pool.close();
  }
}

/** Gaussian draws from the curvature of the posterior at its maximum. */
export function drawJointCurvature(settled: SettledJoint, seed: number): JointSample {
  const density = new JointDensity(settled.fit.recipe, 'all');
  const { size } = density;
  const centre = maximise(density, density.coordinates.position(settled.fit.natural), FULL).position;
  const factor = tamed(steadyCovariance(density, centre), density);
  const isUsable = choleskyInPlace(factor, size);
  const random = RandomStream.fromSeed(seed, STREAM);
  const positions: number[] = [];
  const draw = new Float64Array(size);
  const normal = new Float64Array(size);
  for (let d = 0; isUsable && d < CURVATURE_DRAWS; d++) {
    for (let j = 0; j < size; j++) normal[j] = random.normal();
    for (let j = 0; j < size; j++) {
      let sum = centre[j]!;
      for (let k = 0; k <= j; k++) sum += factor[j * size + k]! * normal[k]!;
      draw[j] = sum;
    }
    if (density.coordinates.read(draw) > -Infinity) positions.push(...draw);
  }
  const count = positions.length / size;
  return {
    density,
    chains: [Float64Array.from(positions)],
    logDensities: [new Float64Array(count)],
    drawsPerChain: count,
    record: null,
  };
}

/** Coordinates of extra scatter and impact parameters near zero are flat there and bend later: their curvature is not believed beyond this. */
const WIDEST_MIRRORED = 1;

/** The covariance with mirrored coordinates no wider than they can be. */
function tamed(covariance: Float64Array, { coordinates, size }: JointDensity): Float64Array {
  for (const at of coordinates.mirrored) {
    const width = Math.sqrt(covariance[at * size + at]!);
    if (width <= WIDEST_MIRRORED) continue;
    const scale = WIDEST_MIRRORED / width;
    for (let j = 0; j < size; j++) {
      covariance[at * size + j]! *= scale;
      covariance[j * size + at]! *= scale;
    }
  }
  return covariance;
}
