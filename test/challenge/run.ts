/**
 * Measures what the solver misses: `npm run challenge -- [part of a kind's name] [sets per kind] [--seed=N]`. Kinds of light
 * curves begin with "survey" or "no transits".
 */
import { fileURLToPath } from 'node:url';
import { jobsOfPart, runInParts, runWords, tellResult } from '../support/run-in-parts.js';
import { evaluateSet, type SetResult } from './evaluate.js';
import { KINDS } from './kinds.js';
import { evaluateLight, type LightResult } from './light/evaluate.js';
import { LIGHT_KINDS } from './light/kinds.js';
import { lightReport } from './light/report.js';
import { velocityReport } from './report.js';

const DEFAULT_SEED = 20261201;
const PROCESSES = 2;

type Result = { readonly velocities: SetResult } | { readonly light: LightResult };

const given = process.argv.slice(2);
const { words, option } = runWords(given);
const [wanted = '', sets = ''] = words;
const baseSeed = Number(option('seed') ?? DEFAULT_SEED);
const part = option('part');
const indices = (kind: { readonly sets: number }): number[] =>
  Array.from({ length: sets === '' ? kind.sets : Math.min(Number(sets), kind.sets) }, (_, index) => index);
const chosen = KINDS.filter(({ name }) => name.includes(wanted));
const chosenLight = LIGHT_KINDS.filter(({ name }) => name.includes(wanted));

if (part !== undefined) {
  const jobs: (() => Result)[] = [
    ...chosen.flatMap((kind) =>
      indices(kind).map((index) => () => ({ velocities: evaluateSet(kind, index, baseSeed) })),
    ),
    ...chosenLight.flatMap((kind) =>
      indices(kind).map((index) => () => ({ light: evaluateLight(kind, index, baseSeed) })),
    ),
  ];
  for (const job of jobsOfPart(jobs, Number(part), PROCESSES)) tellResult(job());
} else {
  const results = await runInParts<Result>(fileURLToPath(import.meta.url), given, PROCESSES);
  const light = results.flatMap((result) => ('light' in result ? [result.light] : []));
  const velocities = results.flatMap((result) => ('velocities' in result ? [result.velocities] : []));
  if (chosen.length > 0) process.stdout.write(`${velocityReport(chosen, velocities)}\n`);
  if (chosenLight.length > 0) process.stdout.write(lightReport(chosenLight, light));
}
