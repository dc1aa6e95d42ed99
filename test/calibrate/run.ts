/**
 * Simulation-based calibration of the posterior [Talts et al. 2018, arXiv:1804.06788]:
 * `npm run calibrate -- [part of a problem's name] [--sets=N] [--seed=N] [--out=folder]`.
 * Prints Markdown; with --out the tables and the rank histograms are written as well.
 */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { runInParts, runWords, tellResult } from '../support/run-in-parts.js';
import { judgeSet, type SetResult } from './judge-set.js';
import { EXERCISES } from './exercises.js';
import { rankChart } from './rank-chart.js';
import { problemReport } from './report.js';
import { rankCounts } from './statistics.js';

const DEFAULT_SEED = 5_000_000;
const DEFAULT_SETS = 1500;
const PROCESSES = 2;

const given = process.argv.slice(2);
const { words, option } = runWords(given);
const wanted = words[0] ?? '';
const sets = Number(option('sets') ?? DEFAULT_SETS);
const baseSeed = Number(option('seed') ?? DEFAULT_SEED);
const part = option('part');
const out = option('out');
const chosen = EXERCISES.filter(({ name }) => name.includes(wanted));
if (!(Number.isSafeInteger(sets) && sets >= 40 && Number.isSafeInteger(baseSeed) && chosen.length > 0)) {
  process.stderr.write(
    `--sets must be a whole number >= 40 and --seed a whole number; problems are ${EXERCISES.map(({ name }) => name).join(', ')}\n`,
  );
  process.exitCode = 2;
} else if (part !== undefined) {
  runPart(Number(part));
} else {
  const began = performance.now();
  const results = await runInParts<SetResult>(fileURLToPath(import.meta.url), given, PROCESSES);
  report(results, (performance.now() - began) / 60_000);
}

function runPart(own: number): void {
  EXERCISES.forEach((exercise, p) => {
    if (!chosen.includes(exercise)) return;
    for (let index = own; index < sets; index += PROCESSES) {
      tellResult(judgeSet(exercise.sample(index, baseSeed + 1_000_000 * p)));
    }
  });
}

function report(results: readonly SetResult[], minutes: number): void {
  const tables: string[] = [];
  if (out !== undefined) mkdirSync(out, { recursive: true });
  for (const exercise of chosen) {
    const own = results.filter((result) => result.problem === exercise.name);
    tables.push(problemReport(exercise, own));
    if (out === undefined) continue;
    const panels = exercise.names.map((name, q) => ({ name, counts: rankCounts(own, q) }));
    const title = `Ranks of the truth among the draws: ${exercise.name}, ${own.length} sets`;
    writeFileSync(join(out, `ranks-${exercise.name.replaceAll(' ', '-')}.svg`), rankChart(title, panels));
  }
  const text = tables.join('\n');
  process.stdout.write(`${text}\n${minutes.toFixed(1)} minutes\n`);
  if (out !== undefined) writeFileSync(join(out, 'calibration.md'), text);
}
