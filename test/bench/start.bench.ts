/** Start-up: `tugline --version` and `--help` against the bare runtime, and against it loading a command-line parser. */
import { join } from 'node:path';
import { processTimesMs, ROOT, verdict } from './measure.js';

const ROUNDS = 15;
const WANTED_RATIO = 1.5;

export function benchStart(): string[] {
  const program = join(ROOT, 'bin/tugline.js');
  const [version, help, bare, parser] = processTimesMs(
    [
      [program, '--version'],
      [program, '--help'],
      ['-e', '0'],
      ['-e', "import('yargs')"],
    ],
    ROUNDS,
  );
  return [
    `start: --version ${version!.toFixed(0)} ms, --help ${help!.toFixed(0)} ms, node -e 0 ${bare!.toFixed(0)} ms, with yargs ${parser!.toFixed(0)} ms; ` +
      `--version / node with yargs ${verdict(version! / parser!, WANTED_RATIO, 'lower')}; --version / node ${(version! / bare!).toFixed(2)}`,
  ];
}
