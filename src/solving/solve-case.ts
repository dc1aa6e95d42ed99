/** The main job: velocities of one target in, solution out. Pure: no files, no clock, no console. */
import type { Case, VelocitySet } from '../observations/types.js';
import { describeSolution, type Making } from './describe-solution.js';
import { settleCase } from './settle.js';
import type { Solved } from './types.js';
import { sampleAround } from './uncertainties.js';

export interface SolveOptions extends Making {
  /** Curvature at the solution only; no posterior. */
  readonly quick: boolean;
  readonly onProgress?: (stage: string, fraction: number) => void;
}

/**
 * Solution with uncertainties from the curvature at the maximum.
 *
 * @throws InputDataError when there are too few velocities or no span to search
 */
export function solveCase(theCase: Case, velocities: VelocitySet, options: SolveOptions): Solved {
  const progress = options.onProgress ?? ((): void => undefined);
  const settled = settleCase(theCase, velocities, progress);
  progress('uncertainties', 0.9);
  const { problem, point } = settled.best.fit;
  const sampled = sampleAround(problem, point, theCase, options.seed);
  return describeSolution(theCase, velocities, settled, sampled, options);
}
