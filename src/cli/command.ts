/** What a command of the program is made of: words for the help, options, and the work itself. */
import type { CommandArguments } from './command-arguments.js';
import type { OptionSpec } from './options.js';
import type { Terminal } from './terminal.js';

export interface Command {
  readonly name: string;
  /** What follows the name, e.g. `CASE|TABLE...`. */
  readonly operands: string;
  /** One line for the list of commands. */
  readonly summary: string;
  /** A few lines for the command's own help. */
  readonly description: readonly string[];
  readonly options: readonly OptionSpec[];
  /** Three real calls on the sample data. */
  readonly examples: readonly (readonly [call: string, effect: string])[];
  /** @returns the exit code: 0 a usable result, 1 none */
  readonly run: (given: CommandArguments, terminal: Terminal) => Promise<number>;
}
