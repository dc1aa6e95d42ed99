/** One simulated set of velocities, fitted and sampled as the program does it. */
import { RandomStream } from '../../src/numerics/random.js';
import { NutsChain } from '../../src/numerics/sampling/nuts.js';
import { fitModel, THOROUGH } from '../../src/solving/fit-model.js';
import { ModelBuilder, portableOf, type PortablePoint } from '../../src/solving/model-builder.js';
import { polish } from '../../src/solving/polish.js';
import { curvatureOfDensity } from '../../src/solving/posterior/density-curvature.js';
import { PosteriorDensity } from '../../src/solving/posterior/posterior-density.js';
import { BARE_CASE } from '../solving/helpers.js';
import { circularBounds } from './circular-bounds.js';
import { drawEnough, type DrawnSet } from './draw-enough.js';
import { planOf, simulate, windowsOf, type CalibrationProblem, type SimulatedSet } from './problems.js';
import { quantitiesOf } from './quantities.js';
import { windowedDensity } from './windowed-density.js';

export const WARMUP = 200;

function maximum(builder: ModelBuilder, problem: CalibrationProblem, truth: PortablePoint): PortablePoint {
  const plan = planOf(problem);
  const velocityProblem = builder.problem(plan);
  const fit = fitModel(velocityProblem, builder.point(velocityProblem, truth), THOROUGH);
  const best = polish({ plan, fit }).fit;
  return portableOf(best.problem, best.point);
}

/** The same problem, index and seed give the same draws. */
export function sampleSet(problem: CalibrationProblem, index: number, seed: number): DrawnSet {
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
  const isCircular = problem.companions.every(({ circular }) => circular);
  return {
    name: problem.name,
    index,
    truths,
    standardised: isCircular ? standardisedErrors(set, quantities.read(best, truth), truths) : [],
    ...drawEnough(chain, density.size, (position) => quantities.read(density.portable(position), truth)),
  };
}

/**
 * Errors of the maximum-likelihood estimate over the bounds, in the order of the quantities of a circular orbit: ln P, K,
 * mean longitude, zero point.
 */
function standardisedErrors(
  set: SimulatedSet,
  estimate: readonly number[],
  truths: readonly number[],
): number[] {
  const { logPeriod, amplitudeMps, longitudeRad, zeroPointMps } = circularBounds(set);
  const bounds = [logPeriod, amplitudeMps, longitudeRad, zeroPointMps];
  return bounds.map((bound, q) => (estimate[q]! - truths[q]!) / bound);
}
