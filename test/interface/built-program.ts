/** The program as it is installed: built if need be, and run as a process of its own. */
import { execFileSync, spawn } from 'node:child_process';
import { existsSync, readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

export const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const ENTRY = join(ROOT, 'dist/cli/main.js');

function newestChange(folder: string): number {
  let newest = 0;
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    const path = join(folder, entry.name);
    newest = Math.max(newest, entry.isDirectory() ? newestChange(path) : statSync(path).mtimeMs);
  }
  return newest;
}

/** Compiles `src/` unless the compiled program is newer than all of it. */
export function buildProgram(): void {
  if (existsSync(ENTRY) && statSync(ENTRY).mtimeMs >= newestChange(join(ROOT, 'src'))) return;
  execFileSync(process.execPath, [
    join(ROOT, 'node_modules/typescript/bin/tsc'),
    '-p',
    join(ROOT, 'tsconfig.json'),
  ]);
}

export interface Finished {
  readonly exitCode: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

export interface RunChoices {
  readonly cwd?: string;
  readonly env?: Readonly<Record<string, string>>;
  readonly input?: string;
  /** Close the reading end of standard output at once, as `| head -0` would. */
  readonly deafReader?: boolean;
}

/** The environment of the test run without its own wishes about colours. */
function colourless(env: NodeJS.ProcessEnv): NodeJS.ProcessEnv {
  return Object.fromEntries(Object.entries(env).filter(([name]) => !/^(NO_COLOR|FORCE_COLOR)$/.test(name)));
}

export function runProgram(argv: readonly string[], choices: RunChoices = {}): Promise<Finished> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(ROOT, 'bin/tugline.js'), ...argv], {
      cwd: choices.cwd ?? ROOT,
      env: { ...colourless(process.env), ...choices.env },
    });
    let stdout = '';
    let stderr = '';
    child.stdout.on('data', (part: Buffer) => (stdout += part.toString()));
    child.stderr.on('data', (part: Buffer) => (stderr += part.toString()));
    if (choices.deafReader === true) child.stdout.destroy();
    child.stdin.end(choices.input ?? '');
    child.on('error', reject);
    child.on('close', (exitCode) => {
      resolve({ exitCode, stdout, stderr });
    });
  });
}
