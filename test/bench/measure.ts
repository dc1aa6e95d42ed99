/** Timing for the benches: child processes that measure themselves, medians, and ratios of what was measured side by side. */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

export const ROOT: string = fileURLToPath(new URL('../../', import.meta.url));

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

/** Runs a process to its end and gives its standard output; a process that fails ends the bench. */
export function outputOf(program: string, words: readonly string[], cwd: string = ROOT): string {
  const ran = spawnSync(program, words, { cwd, encoding: 'utf8', maxBuffer: 1 << 28 });
  if (ran.error !== undefined) throw ran.error;
  if (ran.status !== 0)
    throw new Error(`${program} ${words.join(' ')} ended with ${ran.status ?? -1}: ${ran.stderr}`);
  return ran.stdout;
}

/** A TypeScript file of the benches in a process of its own. */
export function outputOfScript(script: string, ...words: readonly string[]): string {
  return outputOf(process.execPath, ['--import', 'tsx', `${ROOT}test/bench/${script}`, ...words]);
}

/** Median wall time of each contestant as a whole process, ms; they take turns, so that a busy machine is busy for all. */
export function processTimesMs(contestants: readonly (readonly string[])[], rounds: number): number[] {
  const times: number[][] = contestants.map(() => []);
  for (let round = 0; round < rounds; round++) {
    contestants.forEach((words, i) => {
      const start = performance.now();
      outputOf(process.execPath, words);
      times[i]!.push(performance.now() - start);
    });
  }
  return times.map(median);
}

/** Times of `repeats` calls, ms, in order: the first is cold. */
export function callTimesMs(repeats: number, run: () => void): number[] {
  return Array.from({ length: repeats }, () => {
    const start = performance.now();
    run();
    return performance.now() - start;
  });
}

/** A sum over a non-finite value is not finite: a cheap check of a whole result. */
export function requireFinite(what: string, values: Float64Array): void {
  if (!Number.isFinite(values.reduce((sum, value) => sum + value, 0)))
    throw new Error(`${what}: not finite, so its time means nothing`);
}

/** `4.68, target >= 3: met`, so that a missed target is seen. */
export function verdict(ratio: number, target: number, better: 'higher' | 'lower'): string {
  const met = better === 'higher' ? ratio >= target : ratio <= target;
  return `${ratio.toFixed(2)}, target ${better === 'higher' ? '>=' : '<='} ${target}: ${met ? 'met' : 'MISSED'}`;
}
