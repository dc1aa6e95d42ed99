/** What the solver is told beside the case and the velocities. */
import type { CommandArguments } from './command-arguments.js';
import { programVersion } from './version.js';

const LARGEST_SEED = 2 ** 32 - 1;
const MOST_PERMUTATIONS = 100_000;

export function seedOf(given: CommandArguments): number {
  return given.wholeNumber('seed', 0, LARGEST_SEED) ?? 1;
}

export interface SolvingChoices {
  readonly seed: number;
  readonly quick: boolean;
  readonly permutations: number;
  readonly provenance: {
    readonly version: string;
    readonly node: string;
    readonly command: readonly string[];
  };
}

export function solvingChoices(given: CommandArguments): SolvingChoices {
  return {
    seed: seedOf(given),
    quick: given.isOn('quick'),
    permutations: given.wholeNumber('permutations', 0, MOST_PERMUTATIONS) ?? 0,
    provenance: { version: programVersion(), node: process.versions.node, command: given.command },
  };
}
