/** From the words of the command line to a command and its arguments; reads no file. */
import type { Command } from './command.js';
import { CommandArguments } from './command-arguments.js';
import { COMMANDS } from './commands/index.js';
import { commandHelp, programHelp } from './help.js';
import { COMMON_OPTIONS, type OptionSpec } from './options.js';
import { recordedCommand } from './recorded-command.js';
import { UsageError } from '../errors.js';
import { didYouMean, nearest } from '../observations/suggest.js';
import { plainLabel } from '../dossier/escape.js';

export type Request =
  | { readonly kind: 'help'; readonly text: string }
  | { readonly kind: 'run'; readonly command: Command; readonly given: CommandArguments };

type RawArguments = Readonly<Record<string, unknown>>;

/** yargs drops a lone dash among the operands; in its place travels a word that no file can be called. */
const DASH = '\0-';

/** What yargs says of a mistake, in the words of this program. */
function explained(message: string, command: Command | undefined): UsageError {
  const hint = `tugline ${command === undefined ? '' : `${command.name} `}--help lists what there is`;
  const unknown = /^Unknown arguments?: (.+)$/.exec(message)?.[1]?.split(', ')[0];
  if (unknown !== undefined) {
    const names = [...(command?.options ?? []), ...COMMON_OPTIONS].map((option) => option.name);
    const near = nearest(unknown, names);
    return new UsageError(`unknown option --${plainLabel(unknown, 60)}`, {
      hint: near === null ? hint : `did you mean --${near}?`,
    });
  }
  const valueless = /^Not enough arguments following: (.+)$/.exec(message)?.[1];
  if (valueless !== undefined)
    return new UsageError(`--${plainLabel(valueless, 60)} needs a value`, {
      allowed: command?.options.find((option) => option.name === valueless)?.help ?? '',
      hint: `write --${plainLabel(valueless, 60)} VALUE, in quotes if it has blanks`,
    });
  return new UsageError(plainLabel(message), { hint });
}

/** Keeps what belongs to the options; a scalar that was given twice arrives as a list and is refused. */
function optionValues(raw: RawArguments, options: readonly OptionSpec[]): Map<string, string | true> {
  const values = new Map<string, string | true>();
  for (const { name, value: placeholder } of options) {
    const found = raw[name];
    if (Array.isArray(found))
      throw new UsageError(`--${name} is given ${found.length} times`, {
        allowed: 'once',
        hint: 'keep one of them',
      });
    if (placeholder === null) {
      if (found === true) values.set(name, true);
    } else if (typeof found === 'string') values.set(name, found);
  }
  return values;
}

/** The names of files: those that yargs saw, and those after `--`, which it keeps apart. */
function operandsOf(raw: RawArguments): string[] {
  const named = Array.isArray(raw['operands']) ? (raw['operands'] as unknown[]) : [];
  const afterDashes = Array.isArray(raw['_']) ? (raw['_'] as unknown[]).slice(1) : [];
  return [...named, ...afterDashes].map((word) => (word === DASH ? '-' : String(word)));
}

function unknownCommand(word: string): UsageError {
  const names = COMMANDS.map((command) => command.name);
  if (/\.(ya?ml|csv|tsv|txt|dat)$/i.test(word))
    return new UsageError(`"${plainLabel(word, 60)}" is not a command`, {
      allowed: names.join(', '),
      hint: `tugline solve ${plainLabel(word, 60)}`,
    });
  return new UsageError(`unknown command "${plainLabel(word, 60)}"`, {
    hint: didYouMean(word, names),
  });
}

/**
 * @param argv - the words after the program's name
 * @throws UsageError for an unknown command or option, a missing value, a repeated option
 */
export async function parseCommandLine(argv: readonly string[]): Promise<Request> {
  const stop = argv.indexOf('--');
  const words = stop < 0 ? argv : argv.slice(0, stop);
  const command = COMMANDS.find((candidate) => words.includes(candidate.name));
  const first = words.find((word) => !word.startsWith('-'));
  if (words.includes('--help') || words.includes('-h')) {
    if (command === undefined && first !== undefined) throw unknownCommand(first);
    return { kind: 'help', text: command === undefined ? programHelp(COMMANDS) : commandHelp(command) };
  }
  if (command === undefined) {
    if (first === undefined)
      throw new UsageError('a command is missing', {
        allowed: COMMANDS.map((candidate) => candidate.name).join(', '),
        hint: 'tugline --help tells what each of them does',
      });
    throw unknownCommand(first);
  }
  const options = [...command.options, ...COMMON_OPTIONS];
  const { default: yargs } = await import('yargs');
  const parser = yargs()
    .scriptName('tugline')
    .locale('en')
    .help(false)
    .version(false)
    .exitProcess(false)
    .parserConfiguration({
      'boolean-negation': false,
      'camel-case-expansion': false,
      'dot-notation': false,
      'parse-numbers': false,
      'parse-positional-numbers': false,
      'short-option-groups': false,
    })
    .options(Object.fromEntries(COMMON_OPTIONS.map((option) => [option.name, { type: 'boolean' as const }])))
    .strict()
    .fail((message: string | null, error: Error | undefined) => {
      throw error instanceof UsageError ? error : explained(message ?? error?.message ?? '', command);
    });
  const found: RawArguments[] = [];
  parser.command(
    `${command.name} [operands..]`,
    command.summary,
    (builder) =>
      builder.options(
        Object.fromEntries(
          command.options.map(({ name, value }) => [
            name,
            value === null ? { type: 'boolean' as const } : { type: 'string' as const, requiresArg: true },
          ]),
        ),
      ),
    (raw) => {
      found.push(raw);
    },
  );
  await parser.parseAsync(argv.map((word) => (word === '-' ? DASH : word)));
  const [raw] = found;
  if (raw === undefined) throw unknownCommand(first ?? '');
  const given = new CommandArguments(operandsOf(raw), optionValues(raw, options), recordedCommand(argv));
  return { kind: 'run', command, given };
}
