/** `run.json`: what differs from one run to the next, kept apart so that all other files are the same bytes again. */
import { stableJson } from './json.js';

export interface RunFacts {
  /** ISO 8601, UTC. */
  readonly date: string;
  readonly durationSeconds: number;
  readonly machine: { readonly system: string; readonly architecture: string; readonly processors: number };
}

/**
 * Names of the other files are listed so that a later run knows what in the folder is its own to replace.
 *
 * @param posteriorStep - `posterior.csv` holds every draw (1), or one in so many
 */
export function runJson(
  facts: RunFacts,
  version: string,
  files: readonly string[],
  posteriorStep = 1,
): string {
  return stableJson({
    schema: 'tugline/run',
    version: 1,
    program: version,
    date: facts.date,
    durationSeconds: facts.durationSeconds,
    machine: facts.machine,
    files: [...files].sort(),
    ...(posteriorStep > 1 ? { thinned: { 'posterior.csv': { oneDrawIn: posteriorStep } } } : {}),
  });
}
