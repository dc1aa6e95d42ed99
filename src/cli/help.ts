/** The help texts, made from the same lists that the parser uses. */
import type { Command } from './command.js';
import { COMMON_OPTIONS, OPTION_GROUPS, type OptionSpec } from './options.js';

const WIDTH = 80;
const INDENT = 27;

/** Breaks words into lines of at most `width` characters. */
export function wrapped(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line];
}

function entry(left: string, right: string): string[] {
  const lines = wrapped(right, WIDTH - INDENT);
  const head = `  ${left}`;
  const rest = (from: number): string[] => lines.slice(from).map((line) => ' '.repeat(INDENT) + line);
  if (head.length >= INDENT - 1) return [head, ...rest(0)];
  return [head.padEnd(INDENT) + lines[0]!, ...rest(1)];
}

function optionLines(options: readonly OptionSpec[]): string[] {
  return OPTION_GROUPS.flatMap((group) => {
    const members = options.filter((option) => option.group === group);
    if (members.length === 0) return [];
    return [
      '',
      group,
      ...members.flatMap(({ name, value, help }) =>
        entry(`--${name}${value === null ? '' : ` ${value}`}`, help),
      ),
    ];
  });
}

const EXIT_CODES = [
  '',
  'Exit codes: 0 a usable result; 1 the data gave none; 2 the request or the input',
  'was wrong. Results go to standard output, progress and warnings to standard error.',
];

export function commandHelp(command: Command): string {
  return [
    `tugline ${command.name} ${command.operands}`,
    '',
    ...command.description.flatMap((paragraph) => wrapped(paragraph, WIDTH)),
    ...optionLines([...command.options, ...COMMON_OPTIONS]),
    '',
    'Examples',
    ...command.examples.flatMap(([call, effect]) => [`  ${call}`, `      ${effect}`]),
    ...EXIT_CODES,
  ].join('\n');
}

export function programHelp(commands: readonly Command[]): string {
  return [
    'tugline COMMAND ...',
    '',
    'Orbits, masses and radii of companions, from velocities, light curves and',
    'mid-transit times of their star.',
    '',
    'Commands',
    ...commands.flatMap((command) => entry(`${command.name} ${command.operands}`, command.summary)),
    ...optionLines(COMMON_OPTIONS),
    '',
    'Examples',
    ...commands.map((command) => `  ${command.examples[0]![0]}`),
    '',
    'tugline COMMAND --help tells more about one command.',
    ...EXIT_CODES,
  ].join('\n');
}
