/** One simulated set, fitted and sampled as the program does it. */
import { RandomStream } from '../../src/numerics/random.js';
import { bulkEss } from '../../src/numerics/sampling/diagnostics.js';
import { NutsChain } from '../../src/numerics/sampling/nuts.js';
import { fitModel, THOROUGH } from '../../src/solving/fit-model.js';
import { ModelBuilder, portableOf, type PortablePoint } from '../../src/solving/model-builder.js';
import { polish } from '../../src/solving/polish.js';
import { curvatureOfDensity } from '../../src/solving/posterior/density-curvature.js';
import { PosteriorDensity } from '../../src/solving/posterior/posterior-density.js';
import { BARE_CASE } from '../solving/helpers.js';
import { planOf, simulate, windowsOf, type CalibrationProblem, type SimulatedSet } from './problems.js';
import { quantitiesOf } from './quantities.js';
import { windowedDensity } from './windowed-density.js';

const WARMUP = 200;
/** Draws kept for the ranks, evenly thinned: a rank is one of 200 numbers. */
export const RANK_DRAWS = 199;
const BATCH = 5 * RANK_DRAWS;
/** As in the program, draws are added until they are worth enough independent ones; here as many as are kept. */
export const ENOUGH_ESS = 200;
const MOST_BATCHES = 10;

export interface SampledSet {
  readonly problem: CalibrationProblem;
  readonly index: number;
  readonly set: SimulatedSet;
  /** Maximum of the likelihood next to the truth. */
  readonly best: PortablePoint;
  /** Per quantity, the truth. */
  readonly truths: readonly number[];
  /** Per quantity, the draws in order; a multiple of `RANK_DRAWS`. */
  readonly columns: readonly Float64Array[];
  readonly smallestEss: number;
  readonly divergences: number;
}

function maximum(builder: ModelBuilder, problem: CalibrationProblem, truth: PortablePoint): PortablePoint {
  const plan = planOf(problem);
  const velocityProblem = builder.problem(plan);
  const fit = fitModel(velocityProblem, builder.point(velocityProblem, truth), THOROUGH);
  const best = polish({ plan, fit }).fit;
  return portableOf(best.problem, best.point);
}

/** The same problem, index and seed give the same draws. */
export function sampleSet(problem: CalibrationProblem, index: number, seed: number): SampledSet {
  const set = simulate(problem, RandomStream.fromSeed(seed + index));
  const { truth, data } = set;
  const builder = new ModelBuilder(data, ['spectrograph'], BARE_CASE, 0);
  const plan = planOf(problem);
  const best = maximum(builder, problem, truth);
  const density = new PosteriorDensity(builder.problem(plan), plan, problem.scales);
  const windowed = windowedDensity(density, windowsOf(problem));
  // The best point may touch the star, where nothing may start; the truth never does.
  const unused = new Float64Array(density.size);
  const isInside = Number.isFinite(windowed.evaluate(density.position(best), unused));
  const start = density.position(isInside ? best : truth);
  const chain = new NutsChain(
    windowed,
    { start, covariance: curvatureOfDensity(windowed, start), warmup: WARMUP },
    RandomStream.fromSeed(seed + index, 1),
  );
  const quantities = quantitiesOf(problem);
  const truths = quantities.read(truth, truth);
  const growing = truths.map((): number[] => []);
  let columns: Float64Array[] = [];
  let smallestEss = 0;
  let divergences = 0;
  for (let batch = 0; batch < MOST_BATCHES && smallestEss < ENOUGH_ESS; batch++) {
    const { positions, divergent } = chain.draw(BATCH);
    for (let d = 0; d < BATCH; d++) {
      const position = positions.subarray(d * density.size, (d + 1) * density.size);
      quantities.read(density.portable(position), truth).forEach((value, q) => growing[q]!.push(value));
      divergences += divergent[d]!;
    }
    columns = growing.map((values) => Float64Array.from(values));
    smallestEss = Math.min(...columns.map((column) => bulkEss([column])));
  }
  return { problem, index, set, best, truths, columns, smallestEss, divergences };
}
