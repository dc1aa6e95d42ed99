/** `tugline solve`: velocities, light curves and mid-times in; orbit, mass, radius and dossier out. */
import { availableParallelism } from 'node:os';
import { basename, dirname, join } from 'node:path';

import type { RunFacts } from '../../dossier/run-record.js';
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import {
  DRAW_LIMIT_OPTION, FORCE_OPTION, INPUT_OPTIONS, MODEL_OPTIONS, outOption, QUICK_OPTION, SEARCH_OPTIONS, SEED_OPTION, STAR_OPTIONS, TARGET_OPTION, TIMINGS_OPTION,
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
  const { readObservations, requestedCase } = await import('../inputs.js');
  const {
    checkDestination,
    checkFiles,
    dossierFiles,
    fileNameFrom,
    solutionJson,
    timingsTables,
    writeDossier,
    writeFiles,
  } = await import('../../dossier/index.js');

  const theCase = await requestedCase(given);
  const folder = given.folder() ?? `dossier-${fileNameFrom(theCase.target, 'target')}`;
  const writing = { force: given.isOn('force') };
  await checkDestination(folder, writing);
  const timings = given.text('timings-out') ?? null;
  if (timings !== null) await checkFiles(dirname(timings), [basename(timings)], writing);
  const observations = await readObservations(theCase, given, terminal);

  const solved = await withProgress(terminal, given.isOn('quiet'), async (onProgress) => {
    const { solveObservations } = await import('../../solving/joint/solve-observations.js');
    const threads = Math.min(MOST_THREADS, availableParallelism());
    const solution = await withInterrupt(terminal, (signal) =>
      solveObservations(theCase, observations, { ...choices, threads, signal, onProgress }),
    );
    onProgress('drawing charts', 0);
    const { renderCharts } = await import('../../dossier/charts/index.js');
    const files = dossierFiles(solution, await renderCharts(solution), () => runFacts(started));
    await writeDossier(folder, files, writing);
    if (timings !== null)
      await writeFiles(dirname(timings), timingsTables(solution, basename(timings)), writing);
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
  summary: 'the main job: companions, orbits, masses, radii, and the dossier',
  description: [
    'Finds the companions in velocities, light curves and mid-times, in whatever mix there is, fits everything together, derives masses and radii, samples the posterior, and writes a dossier: solution, report, tables and charts.',
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
    TIMINGS_OPTION,
    outOption('folder of the dossier (default: dossier- and the name of the target)'),
    FORCE_OPTION,
  ],
  examples: [
    ['tugline solve data-samples/vellamo.yaml', 'everything from the case; the dossier goes to dossier-vellamo'],
    ['tugline solve data-samples/north.csv data-samples/south.csv --star-mass "0.94 +- 0.03"', 'two bare tables and the mass of the star'],
    ['tugline solve data-samples/lainehtar.yaml --quick --json --out quick-look', 'velocities, light curves and mid-times: a first look within seconds, as JSON for a script'],
  ], // prettier-ignore
  run,
};
