/** One simulated set with transits, fitted and sampled as the program does it. */
import { RandomStream } from '../../../src/numerics/random.js';
import { NutsChain } from '../../../src/numerics/sampling/nuts.js';
import { JointDensity } from '../../../src/solving/joint/joint-density.js';
import { BRIEF, maximise } from '../../../src/solving/joint/maximise.js';
import { curvatureOfDensity } from '../../../src/solving/posterior/density-curvature.js';
import { drawEnough, type DrawnSet } from '../draw-enough.js';
import { WARMUP } from '../sample-set.js';
import { windowedDensity } from '../windowed-density.js';
import type { TransitProblem } from './problems.js';
import { quantitiesOf } from './quantities.js';
import { simulateTransits } from './simulate.js';

/** The same problem, index and seed give the same draws. */
export function sampleTransitSet(problem: TransitProblem, index: number, seed: number): DrawnSet {
  const { position, natural, recipe } = simulateTransits(problem, RandomStream.fromSeed(seed + index));
  const density = new JointDensity(recipe, 'all');
  const windowed = windowedDensity(density, problem.windows);
  const { position: best, value } = maximise(windowed, position, BRIEF);
  const start = Number.isFinite(value) ? best : position;
  const chain = new NutsChain(
    windowed,
    { start, covariance: curvatureOfDensity(windowed, start), warmup: WARMUP },
    RandomStream.fromSeed(seed + index, 1),
  );
  const quantities = quantitiesOf(problem);
  const read = (from: Float64Array): number[] => quantities.map((quantity) => quantity.read(from));
  return {
    name: problem.name,
    index,
    truths: read(natural),
    standardised: [],
    ...drawEnough(chain, density.size, (place) => read(density.naturalAt(place)!)),
  };
}
