/** `tugline solve`: velocities in; orbit, mass and dossier out. */
import { availableParallelism } from 'node:os';
import { join } from 'node:path';

import type { RunFacts } from '../../dossier/run-record.js';
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import {
  DRAW_LIMIT_OPTION, FORCE_OPTION, INPUT_OPTIONS, MODEL_OPTIONS, outOption, QUICK_OPTION, SEARCH_OPTIONS, SEED_OPTION, STAR_OPTIONS, TARGET_OPTION,
} from '../options.js'; // prettier-ignore
import { withInterrupt } from '../interrupt.js';
import { withProgress } from '../progress.js';
import { solvingChoices } from '../solving-options.js';
import type { Terminal } from '../terminal.js';

/** What `run.json` records; `started` is when the command began. */
function runFacts(started: number): RunFacts {
  return {
    date: new Date().toISOString(),
    durationSeconds: Math.round((performance.now() - started) / 10) / 100,
    machine: { system: process.platform, architecture: process.arch, processors: availableParallelism() },
  };
}

/** One chain a thread; there are four chains. */
const MOST_THREADS = 4;

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const started = performance.now();
  const choices = solvingChoices(given);
  const { readVelocities, requestedCase } = await import('../inputs.js');
  const { checkDestination, dossierFiles, fileNameFrom, solutionJson, writeDossier } =
    await import('../../dossier/index.js');

  const theCase = await requestedCase(given);
  const folder = given.folder() ?? `dossier-${fileNameFrom(theCase.target, 'target')}`;
  const writing = { force: given.isOn('force') };
  await checkDestination(folder, writing);
  const velocities = await readVelocities(theCase, given, terminal);

  const solved = await withProgress(terminal, given.isOn('quiet'), async (onProgress) => {
    const { solveWithPosterior } = await import('../../solving/solve-with-posterior.js');
    const threads = Math.min(MOST_THREADS, availableParallelism());
    const solution = await withInterrupt(terminal, (signal) =>
      solveWithPosterior(theCase, velocities, { ...choices, threads, signal, onProgress }),
    );
    onProgress('drawing charts', 0);
    const { renderCharts } = await import('../../dossier/charts/index.js');
    const files = dossierFiles(solution, await renderCharts(solution), () => runFacts(started));
    await writeDossier(folder, files, writing);
    return solution;
  });

  if (given.isOn('json')) terminal.print(solutionJson(solved.record).trimEnd());
  else {
    const { solutionScreen } = await import('../screens/solution-screen.js');
    terminal.print(solutionScreen(solved, join(folder, '/'), terminal.paint));
  }
  return solved.record.fit.usable ? 0 : 1;
}

export const solve: Command = {
  name: 'solve',
  operands: 'CASE|TABLE...',
  summary: 'the main job: companions, orbits, masses, and the dossier',
  description: [
    'Finds the companions in the velocities, fits their orbits, derives their masses, samples the posterior, and writes a dossier: solution, report, tables and charts.',
    'Takes one case (.yaml) or any number of tables; - reads one table from standard input. Options win over the case. Ctrl-C while the posterior is sampled ends the sampling and gives the result so far, marked as interrupted.',
  ],
  options: [
    ...INPUT_OPTIONS,
    TARGET_OPTION,
    ...STAR_OPTIONS,
    ...MODEL_OPTIONS,
    ...SEARCH_OPTIONS,
    QUICK_OPTION,
    DRAW_LIMIT_OPTION,
    SEED_OPTION,
    outOption('folder of the dossier (default: dossier- and the name of the target)'),
    FORCE_OPTION,
  ],
  examples: [
    ['tugline solve data-samples/vellamo.yaml', 'everything from the case; the dossier goes to dossier-vellamo'],
    ['tugline solve data-samples/north.csv data-samples/south.csv --star-mass "0.94 +- 0.03"', 'two bare tables and the mass of the star'],
    ['tugline solve data-samples/vellamo.yaml --quick --json --out quick-look', 'a first look within seconds, as JSON for a script'],
  ], // prettier-ignore
  run,
};
