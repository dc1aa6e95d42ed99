/** What long exercises that run on request share: reading their words, and sharing the work among processes. */
import { spawn } from 'node:child_process';

export interface RunWords {
  /** Words that are no options, in order. */
  readonly words: readonly string[];
  /** Value of `--name=value`. */
  readonly option: (name: string) => string | undefined;
}

/** @param given - what stands behind the script's name on the command line */
export function runWords(given: readonly string[]): RunWords {
  return {
    words: given.filter((word) => !word.startsWith('--')),
    option: (name) => given.find((word) => word.startsWith(`--${name}=`))?.slice(name.length + 3),
  };
}

/** The share of a part: every n-th job. */
export function jobsOfPart<Job>(jobs: readonly Job[], part: number, parts: number): Job[] {
  return jobs.filter((_, index) => index % parts === part);
}

/** Writes one result of a part, to be read by `runInParts`. */
export function tellResult(result: unknown): void {
  process.stdout.write(`${JSON.stringify(result)}\n`);
}

/**
 * Starts the same script once per part, with `--part=N` behind its own words, and gathers what the parts tell.
 *
 * @throws Error when a part ends in failure
 */
export async function runInParts<Result>(
  script: string,
  given: readonly string[],
  parts: number,
): Promise<Result[]> {
  const outputs = await Promise.all(
    Array.from({ length: parts }, (_, part) => {
      const child = spawn(process.execPath, ['--import', 'tsx', script, ...given, `--part=${part}`], {
        stdio: ['ignore', 'pipe', 'inherit'],
      });
      let text = '';
      child.stdout.on('data', (chunk: Buffer) => (text += chunk.toString()));
      return new Promise<string>((resolve, reject) => {
        child.on('error', reject);
        child.on('close', (code) => {
          if (code === 0) resolve(text);
          else reject(new Error(`part ${part} ended with code ${code ?? -1}`));
        });
      });
    }),
  );
  return outputs
    .flatMap((text) => text.split('\n'))
    .filter((line) => line !== '')
    .map((line) => JSON.parse(line) as Result);
}
