import { describe, expect, it } from 'vitest';

import { parseCommandLine } from '../../src/cli/command-line.js';
import { COMMANDS } from '../../src/cli/commands/index.js';
import { commandHelp } from '../../src/cli/help.js';
import { COMMON_OPTIONS, OPTION_GROUPS } from '../../src/cli/options.js';
import { recordedCommand } from '../../src/cli/recorded-command.js';
import { programVersion } from '../../src/cli/version.js';
import { tugline } from './listening-terminal.js';
import manifest from '../../package.json' with { type: 'json' };

/** Words of a command line in which double quotes hold blanks together. */
function words(call: string): string[] {
  return Array.from(call.matchAll(/"([^"]*)"|(\S+)/g), (match) => match[1] ?? match[2]!);
}

describe('help', () => {
  it('lists every command, on standard output, with exit code 0', async () => {
    const { exitCode, stdout, stderr } = await tugline(['--help']);
    expect(exitCode).toBe(0);
    expect(stderr).toBe('');
    for (const command of COMMANDS) expect(stdout).toContain(`\n  ${command.name} ${command.operands}`);
    expect(stdout).toMatch(/Exit codes: 0 .*1 .*2 /s);
  });

  describe.each(COMMANDS)('of $name', (command) => {
    const text = commandHelp(command);
    const lines = text.split('\n');

    it('names every option that the parser takes, under its group', () => {
      const options = [...command.options, ...COMMON_OPTIONS];
      for (const option of options) {
        const at = lines.findIndex((line) => new RegExp(`^ {2}--${option.name}( |$)`).test(line));
        expect(at, option.name).toBeGreaterThan(0);
        const groups = lines
          .slice(0, at)
          .filter((line) => (OPTION_GROUPS as readonly string[]).includes(line));
        expect(groups.at(-1), option.name).toBe(option.group);
      }
      const inHelp = lines.filter((line) => line.startsWith('  --')).length;
      expect(inHelp).toBe(options.length);
    });

    it('says the default of every option that takes a value', () => {
      const valued = command.options.filter((option) => option.value !== null);
      for (const option of valued) expect(option.help, option.name).toMatch(/\(default: /);
    });

    it('fits 80 columns, examples and quoted lists aside', () => {
      const examples = lines.indexOf('Examples');
      const tooLong = lines
        .slice(0, examples)
        .filter((line) => line.length > 80 && line.trim().includes(' '));
      expect(tooLong).toEqual([]);
    });

    it('ends with three examples that the parser accepts', async () => {
      expect(command.examples.length).toBe(3);
      for (const [call] of command.examples) {
        const request = await parseCommandLine(words(call).slice(1));
        expect(request.kind).toBe('run');
        if (request.kind === 'run') expect(request.command).toBe(command);
      }
    });

    it('is printed by --help after the command', async () => {
      const { exitCode, stdout } = await tugline([command.name, '--help']);
      expect(exitCode).toBe(0);
      expect(stdout).toBe(`${text}\n`);
    });
  });
});

describe('the words of a call', () => {
  it('become operands and options, wherever the options stand', async () => {
    const request = await parseCommandLine(['--json', 'solve', 'a.csv', '--seed', '7', 'b.csv', '--quick']);
    if (request.kind !== 'run') throw new Error('expected a command');
    expect(request.command.name).toBe('solve');
    expect(request.given.operands).toEqual(['a.csv', 'b.csv']);
    expect(request.given.wholeNumber('seed', 0, 100)).toBe(7);
    expect(request.given.isOn('json') && request.given.isOn('quick')).toBe(true);
    expect(request.given.isOn('force')).toBe(false);
    expect(request.given.command).toEqual(['tugline', 'solve', 'a.csv', '--seed', '7', 'b.csv', '--quick']);
  });

  it('keep a lone dash, words after --, and numbers as text', async () => {
    const request = await parseCommandLine(['solve', '-', '2024', '--', '-strange.csv']);
    if (request.kind !== 'run') throw new Error('expected a command');
    expect(request.given.operands).toEqual(['-', '2024', '-strange.csv']);
  });

  it('keep a value that begins with a minus sign or holds an equals sign', async () => {
    const request = await parseCommandLine([
      'solve',
      'a.csv',
      '--seed=-3',
      '--columns',
      'time=BJD,velocity=2',
    ]);
    if (request.kind !== 'run') throw new Error('expected a command');
    expect(request.given.text('columns')).toBe('time=BJD,velocity=2');
    expect(() => request.given.wholeNumber('seed', 0, 9)).toThrow(/--seed is "-3"/);
  });
});

describe('recordedCommand', () => {
  it('leaves out what only says where and how the result is shown', () => {
    const shown = ['solve', 'a.csv', '--out', 'd', '--force', '--json', '--seed', '2', '--quiet', '--out=e'];
    expect(recordedCommand(shown)).toEqual(['tugline', 'solve', 'a.csv', '--seed', '2']);
    expect(recordedCommand(['solve', '--', '--force'])).toEqual(['tugline', 'solve', '--', '--force']);
  });
});

describe('a wrong request ends with exit code 2, an error line and a way out', () => {
  it.each([
    [[], 'error: a command is missing', 'tugline --help'],
    [['slove', 'a.csv'], 'error: unknown command "slove"', 'did you mean "solve"?'],
    [['vellamo.yaml'], 'error: "vellamo.yaml" is not a command', 'tugline solve vellamo.yaml'],
    [
      ['solve', 'a.csv', '--companoins', '2'],
      'error: unknown option --companoins',
      'did you mean --companions?',
    ],
    [['check', 'a.csv', '--quick'], 'error: unknown option --quick', 'tugline check --help'],
    [['solve', 'a.csv', '--out'], 'error: --out needs a value', 'write --out VALUE'],
    [['solve', 'a.csv', '--out', ''], 'error: --out is ""', 'the name of a folder'],
    [['solve', 'a.csv', '--seed', '1', '--seed', '2'], 'error: --seed is given 2 times', 'keep one'],
    [['solve', 'a.csv', '--seed', 'abc'], 'error: --seed is "abc"', 'a whole number from 0'],
    [['solve', 'a.csv', '--seed', '-1'], 'error: --seed is "-1"', 'a whole number from 0'],
    [['solve', 'a.csv', '--seed', '1.5'], 'error: --seed is "1.5"', 'a whole number from 0'],
    [['solve', 'a.csv', '--seed', 'NaN'], 'error: --seed is "NaN"', 'a whole number from 0'],
    [['solve', 'a.csv', '--seed', ''], 'error: --seed is ""', 'a whole number from 0'],
    [['solve', 'a.csv', '--permutations', '-5'], 'error: --permutations is "-5"', 'from 0'],
    [['solve', 'a.csv', '--draw-limit', '10'], 'error: --draw-limit is "10"', 'from 1000'],
    [
      ['solve', 'a.csv', '--quick', '--draw-limit', '2000'],
      'error: --draw-limit and --quick',
      'leave --quick out',
    ],
    [['solve', 'a.csv', '--companions', '-1'], 'error: --companions is "-1"', 'from 0 to 20'],
    [['solve', 'a.csv', '--drift', 'cubic'], 'error: --drift is "cubic"', 'quadratic'],
    [['solve', 'a.csv', '--unit', 'mph'], 'error: --unit is "mph"', 'm/s, km/s'],
    [['solve', 'a.csv', '--time-scale', 'XJD'], 'error: --time-scale is "XJD"', 'BJD_TDB'],
    [['solve', 'a.csv', '--star-mass', 'heavy'], 'error: --star-mass', 'try'],
    [['solve', 'a.csv', '--star-mass', '-0.9'], 'error: --star-mass is "-0.9"', 'above 0'],
    [['solve', 'a.csv', '--star-mass', '3 kg'], 'error: --star-mass: found the unit "kg"', 'M_sun'],
    [['solve', 'a.csv', '--shortest-period', '0'], 'error: --shortest-period is "0"', 'above 0'],
    [
      ['solve', 'a.csv', '--shortest-period', '9', '--longest-period', '3'],
      'error: the shortest period',
      'change',
    ],
    [['solve', 'a.csv', '--columns', 'time'], 'error: --columns has "time"', 'MEANING=COLUMN'],
    [['solve', 'a.csv', '--columns', 'time=1,time=2'], 'a second time', 'MEANING=COLUMN'],
    [['solve'], 'error: no case and no table is named', 'one or more tables'],
    [['solve', 'a.yaml', 'b.csv'], 'error: a case and tables are named together', 'inside the case'],
    [['solve', 'a.yaml', 'b.yaml'], 'error: 2 cases are named', 'one case'],
    [['solve', '-', '-'], 'error: standard input (-) is named more than once', 'once'],
    [['mock'], 'error: no case is named', 'mock block'],
    [['mock', 'a.csv'], 'error: mock takes one case', 'mock block'],
  ])('%j', async (argv, message, remedy) => {
    const { exitCode, stdout, stderr } = await tugline(argv);
    expect(stderr.split('\n')[0]).toContain(message);
    expect(stderr).toContain(remedy);
    expect(stderr).not.toMatch(/\n {4}at |\.[jt]s:\d/);
    expect(stdout).toBe('');
    expect(exitCode).toBe(2);
  });

  it('shows hostile words without their control characters', async () => {
    const { stderr } = await tugline(['solve', 'a.csv', '--\u001b[31mred']);
    expect(stderr).not.toContain('\u001b');
  });
});

describe('--version', () => {
  it('is the version of the package', async () => {
    expect(programVersion()).toBe(manifest.version);
    expect(await tugline(['--version'])).toEqual({
      exitCode: 0,
      stdout: `${manifest.version}\n`,
      stderr: '',
    });
  });
});
