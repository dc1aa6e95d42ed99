/** Measures what the solver misses: `npm run challenge -- [part of a kind's name] [sets per kind] [--seed=N]`. */
import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { evaluateSet, type SetResult } from './evaluate.js';
import { KINDS } from './kinds.js';

const DEFAULT_SEED = 20261201;
const PROCESSES = 2;

const [wanted = '', sets = ''] = process.argv.slice(2).filter((word) => !word.startsWith('--'));
const seedWord = process.argv.find((word) => word.startsWith('--seed='));
const baseSeed = seedWord === undefined ? DEFAULT_SEED : Number(seedWord.slice('--seed='.length));
const part = process.argv.find((word) => word.startsWith('--part='))?.slice('--part='.length);
const chosen = KINDS.filter((kind) => kind.name.includes(wanted));
const jobs = chosen.flatMap((kind) =>
  Array.from({ length: sets === '' ? kind.sets : Math.min(Number(sets), kind.sets) }, (_, index) => ({
    kind,
    index,
  })),
);

if (part !== undefined) {
  jobs.forEach(({ kind, index }, job) => {
    if (job % PROCESSES === Number(part))
      process.stdout.write(`${JSON.stringify(evaluateSet(kind, index, baseSeed))}\n`);
  });
} else {
  report(await runParts());
}

async function runParts(): Promise<SetResult[]> {
  const script = fileURLToPath(import.meta.url);
  const outputs = await Promise.all(
    Array.from({ length: PROCESSES }, (_, p) => {
      const child = spawn(
        process.execPath,
        ['--import', 'tsx', script, wanted, sets, `--part=${p}`, `--seed=${baseSeed}`],
        {
          stdio: ['ignore', 'pipe', 'inherit'],
        },
      );
      let text = '';
      child.stdout.on('data', (chunk: Buffer) => (text += chunk.toString()));
      return new Promise<string>((resolve, reject) => {
        child.on('error', reject);
        child.on('close', (code) => {
          if (code === 0) resolve(text);
          else reject(new Error(`a part of the challenge ended with code ${code ?? -1}`));
        });
      });
    }),
  );
  return outputs
    .flatMap((text) => text.split('\n'))
    .filter((line) => line !== '')
    .map((line) => JSON.parse(line) as SetResult);
}

function report(results: readonly SetResult[]): void {
  const lines = [
    '| kind | sets | right number | ln L within 0.1 of truth start | mean s |',
    '|---|---|---|---|---|',
  ];
  let right = 0;
  let compared = 0;
  let close = 0;
  let withSignal = 0;
  for (const kind of chosen) {
    const own = results.filter((result) => result.kind === kind.name);
    const correct = own.filter((result) => result.found === result.expected);
    const measured = own.filter((result) => result.lnLBehindTruth !== null);
    const near = measured.filter((result) => result.lnLBehindTruth! > -0.1);
    if (kind.companions > 0) {
      withSignal += own.length;
      right += correct.length;
      compared += measured.length;
      close += near.length;
    }
    const seconds = own.reduce((sum, result) => sum + result.seconds, 0) / Math.max(1, own.length);
    lines.push(
      `| ${kind.name} | ${own.length} | ${correct.length} | ${kind.companions > 0 ? `${near.length} of ${measured.length}` : '-'} | ${seconds.toFixed(2)} |`,
    );
  }
  lines.push(
    `| all with companions | ${withSignal} | ${right} (${((100 * right) / withSignal).toFixed(1)} %) | ${close} of ${compared} | |`,
  );
  process.stdout.write(`${lines.join('\n')}\n\n`);
  for (const result of results) {
    const missed = result.lnLBehindTruth !== null && result.lnLBehindTruth <= -0.1;
    if (result.found === result.expected && !missed) continue;
    process.stdout.write(
      `${result.kind} #${result.index} seed ${result.seed}: found ${result.found} of ${result.expected}, P ${result.periods.map((p) => p.toFixed(3)).join(' ')} (true ${result.truePeriods.map((p) => p.toFixed(3)).join(' ')}), e ${result.eccentricities.map((e) => e.toFixed(2)).join(' ')} (true ${result.trueEccentricities.map((e) => e.toFixed(2)).join(' ')}), ln L over truth start ${result.lnLBehindTruth?.toFixed(2) ?? '-'}, last FAP ${result.lastFalseAlarm?.toExponential(1) ?? '-'} dBIC ${result.lastDeltaBic?.toFixed(1) ?? '-'}\n`,
    );
  }
}
