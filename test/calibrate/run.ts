/**
 * Simulation-based calibration of the posterior [Talts et al. 2018, arXiv:1804.06788]:
 * `npm run calibrate -- [part of a problem's name] [--sets=N] [--seed=N] [--out=folder]`.
 * Prints Markdown; with --out the tables and the rank histograms are written as well.
 */
import { spawn } from 'node:child_process';
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { judgeSet, type SetResult } from './judge-set.js';
import { PROBLEMS } from './problems.js';
import { quantitiesOf } from './quantities.js';
import { rankChart } from './rank-chart.js';
import { problemReport } from './report.js';
import { sampleSet } from './sample-set.js';
import { rankCounts } from './statistics.js';

const DEFAULT_SEED = 5_000_000;
const DEFAULT_SETS = 1500;
const PROCESSES = 2;

const words = process.argv.slice(2);
const wanted = words.find((word) => !word.startsWith('--')) ?? '';
function option(name: string): string | undefined {
  return words.find((word) => word.startsWith(`--${name}=`))?.slice(name.length + 3);
}
const sets = Number(option('sets') ?? DEFAULT_SETS);
const baseSeed = Number(option('seed') ?? DEFAULT_SEED);
const part = option('part');
const out = option('out');
const chosen = PROBLEMS.filter(({ name }) => name.includes(wanted));
if (!(Number.isSafeInteger(sets) && sets >= 40 && Number.isSafeInteger(baseSeed) && chosen.length > 0)) {
  process.stderr.write(
    `--sets must be a whole number >= 40 and --seed a whole number; problems are ${PROBLEMS.map(({ name }) => name).join(', ')}\n`,
  );
  process.exitCode = 2;
} else if (part !== undefined) {
  runPart(Number(part));
} else {
  const began = performance.now();
  const results = await runParts();
  report(results, (performance.now() - began) / 60_000);
}

function runPart(own: number): void {
  PROBLEMS.forEach((problem, p) => {
    if (!chosen.includes(problem)) return;
    for (let index = own; index < sets; index += PROCESSES) {
      const result = judgeSet(sampleSet(problem, index, baseSeed + 1_000_000 * p));
      process.stdout.write(`${JSON.stringify(result)}\n`);
    }
  });
}

async function runParts(): Promise<SetResult[]> {
  const script = fileURLToPath(import.meta.url);
  const outputs = await Promise.all(
    Array.from({ length: PROCESSES }, (_, p) => {
      const child = spawn(
        process.execPath,
        ['--import', 'tsx', script, wanted, `--part=${p}`, `--sets=${sets}`, `--seed=${baseSeed}`],
        { stdio: ['ignore', 'pipe', 'inherit'] },
      );
      let text = '';
      child.stdout.on('data', (chunk: Buffer) => (text += chunk.toString()));
      return new Promise<string>((resolve, reject) => {
        child.on('error', reject);
        child.on('close', (code) => {
          if (code === 0) resolve(text);
          else reject(new Error(`a part of the calibration ended with code ${code ?? -1}`));
        });
      });
    }),
  );
  return outputs
    .flatMap((text) => text.split('\n'))
    .filter((line) => line !== '')
    .map((line) => JSON.parse(line) as SetResult);
}

function report(results: readonly SetResult[], minutes: number): void {
  const tables: string[] = [];
  if (out !== undefined) mkdirSync(out, { recursive: true });
  for (const problem of chosen) {
    const own = results.filter((result) => result.problem === problem.name);
    tables.push(problemReport(problem, own));
    if (out === undefined) continue;
    const panels = quantitiesOf(problem).names.map((name, q) => ({ name, counts: rankCounts(own, q) }));
    const title = `Ranks of the truth among the draws: ${problem.name}, ${own.length} sets`;
    writeFileSync(join(out, `ranks-${problem.name.replaceAll(' ', '-')}.svg`), rankChart(title, panels));
  }
  const text = tables.join('\n');
  process.stdout.write(`${text}\n${minutes.toFixed(1)} minutes\n`);
  if (out !== undefined) writeFileSync(join(out, 'calibration.md'), text);
}
