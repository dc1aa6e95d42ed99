/**
 * The way through the program: words to a request, request to a result, result to an exit code.
 * Modules are loaded when they are needed, so that `--version` and `--help` cost next to nothing.
 */
import { processTerminal, type Terminal } from './terminal.js';

/**
 * @param argv - the words after the program's name
 * @param terminal - where results and messages go; the process's own streams unless a test listens
 * @returns the exit code: 0 a usable result; 1 the data were read but gave none; 2 the request or the input was wrong
 */
export async function main(argv: readonly string[], terminal: Terminal = processTerminal()): Promise<number> {
  if (argv.length === 1 && argv[0] === '--version') {
    const { programVersion } = await import('./version.js');
    terminal.print(programVersion());
    return 0;
  }
  try {
    const { parseCommandLine } = await import('./command-line.js');
    const request = await parseCommandLine(argv);
    if (request.kind === 'help') {
      terminal.print(request.text);
      return 0;
    }
    return await request.command.run(request.given, terminal);
  } catch (error) {
    const { describeFailure } = await import('./failure.js');
    const failure = describeFailure(error);
    for (const line of failure.lines) terminal.note(line);
    return failure.exitCode;
  }
}
