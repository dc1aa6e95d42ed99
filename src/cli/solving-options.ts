/** What the solver is told beside the case and the velocities. */
import { UsageError } from '../errors.js';
import type { CommandArguments } from './command-arguments.js';
import { programVersion } from './version.js';

const LARGEST_SEED = 2 ** 32 - 1;
const MOST_PERMUTATIONS = 100_000;
const FEWEST_DRAWS = 1000;
const MOST_DRAWS = 1_000_000;
const DEFAULT_DRAWS = 10_000;

export function seedOf(given: CommandArguments): number {
  return given.wholeNumber('seed', 0, LARGEST_SEED) ?? 1;
}

export interface SolvingChoices {
  readonly seed: number;
  readonly quick: boolean;
  readonly permutations: number;
  /** Most draws per chain. */
  readonly drawLimit: number;
  readonly provenance: {
    readonly version: string;
    readonly node: string;
    readonly command: readonly string[];
  };
}

/** @throws UsageError for numbers out of range, and for a limit of draws where none are taken */
export function solvingChoices(given: CommandArguments): SolvingChoices {
  if (given.isOn('quick') && given.text('draw-limit') !== null)
    throw new UsageError('--draw-limit and --quick are given together', {
      allowed: 'one of them: --quick takes no draws of the posterior',
      hint: 'leave --quick out',
    });
  return {
    seed: seedOf(given),
    quick: given.isOn('quick'),
    permutations: given.wholeNumber('permutations', 0, MOST_PERMUTATIONS) ?? 0,
    drawLimit: given.wholeNumber('draw-limit', FEWEST_DRAWS, MOST_DRAWS) ?? DEFAULT_DRAWS,
    provenance: { version: programVersion(), node: process.versions.node, command: given.command },
  };
}
