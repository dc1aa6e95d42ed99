/** Everything that is calibrated, velocities first. */
import type { DrawnSet } from './draw-enough.js';
import { PROBLEMS } from './problems.js';
import { quantitiesOf } from './quantities.js';
import { sampleSet } from './sample-set.js';
import { TRANSIT_PROBLEMS } from './transits/problems.js';
import { namesOf } from './transits/quantities.js';
import { sampleTransitSet } from './transits/sample-transit-set.js';

export interface Exercise {
  readonly name: string;
  /** Of the quantities. */
  readonly names: readonly string[];
  sample(index: number, seed: number): DrawnSet;
}

export const EXERCISES: readonly Exercise[] = [
  ...PROBLEMS.map((problem) => ({
    name: problem.name,
    names: quantitiesOf(problem).names,
    sample: (index: number, seed: number) => sampleSet(problem, index, seed),
  })),
  ...TRANSIT_PROBLEMS.map((problem) => ({
    name: problem.name,
    names: namesOf(problem),
    sample: (index: number, seed: number) => sampleTransitSet(problem, index, seed),
  })),
];
