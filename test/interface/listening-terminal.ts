/** A terminal that keeps what is written to it, and the program run on it inside the test's own process. */
import { main } from '../../src/cli/main.js';
import type { Terminal } from '../../src/cli/terminal.js';

export interface Heard {
  readonly exitCode: number;
  readonly stdout: string;
  readonly stderr: string;
}

export function listeningTerminal(input = ''): { terminal: Terminal; out: string[]; err: string[] } {
  const out: string[] = [];
  const err: string[] = [];
  const terminal: Terminal = {
    print: (text) => out.push(`${text}\n`),
    note: (text) => err.push(`${text}\n`),
    paint: (_kind, text) => text,
    interactive: false,
    rewrite: (text) => err.push(`\r${text}`),
    readInput: (limitBytes) =>
      Promise.resolve(
        input.length > limitBytes ? { text: '', complete: false } : { text: input, complete: true },
      ),
  };
  return { terminal, out, err };
}

export async function tugline(argv: readonly string[], input = ''): Promise<Heard> {
  const { terminal, out, err } = listeningTerminal(input);
  const exitCode = await main(argv, terminal);
  return { exitCode, stdout: out.join(''), stderr: err.join('') };
}
