/** `tugline periods`: which periods are in the data, and which the sampling itself puts there. */
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import {
  FORCE_OPTION, INPUT_OPTIONS, MODEL_OPTIONS, outOption, SEARCH_OPTIONS, SEED_OPTION, TARGET_OPTION,
} from '../options.js'; // prettier-ignore
import { withProgress } from '../progress.js';
import { solvingChoices } from '../solving-options.js';
import type { Terminal } from '../terminal.js';

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const choices = solvingChoices(given);
  const { readVelocities, requestedCase } = await import('../inputs.js');
  const { plainLabel, stableJson, writeFiles } = await import('../../dossier/index.js');

  const theCase = await requestedCase(given);
  const velocities = await readVelocities(theCase, given, terminal);
  const folder = given.folder();
  const { found, written } = await withProgress(terminal, given.isOn('quiet'), async (onProgress) => {
    const { searchPeriods } = await import('../../solving/search-periods.js');
    const report = searchPeriods(theCase, velocities, { ...choices, onProgress });
    if (folder === null) return { found: report, written: [] };
    const { renderPeriodsCharts } = await import('../../dossier/charts/index.js');
    const charts = await renderPeriodsCharts([report.stage], report.window, theCase.target);
    return { found: report, written: await writeFiles(folder, charts, { force: given.isOn('force') }) };
  });

  const { periodsJson, periodsScreen } = await import('../screens/periods-screen.js');
  if (given.isOn('json')) terminal.print(stableJson(periodsJson(theCase.target, found)).trimEnd());
  else {
    terminal.print(periodsScreen(theCase.target, velocities, found, terminal.paint));
    for (const path of written) terminal.print(`   chart ${plainLabel(path)}`);
  }
  return found.stage.peaks.length > 0 || found.stage.eccentricPeak !== null ? 0 : 1;
}

export const periods: Command = {
  name: 'periods',
  operands: 'CASE|TABLE...',
  summary: 'periods in the data, their false-alarm probabilities and aliases',
  description: [
    'Lists the strongest periods with power, false-alarm probability and what they are seen from the strongest one, and the peaks of the window function. Zero points and drift are refitted at each frequency.',
  ],
  options: [
    ...INPUT_OPTIONS,
    TARGET_OPTION,
    ...MODEL_OPTIONS.filter((option) => option.name === 'drift'),
    ...SEARCH_OPTIONS,
    SEED_OPTION,
    outOption('folder for the charts of the periodogram (default: no charts)'),
    FORCE_OPTION,
  ],
  examples: [
    ['tugline periods data-samples/vellamo.yaml', 'the periods of a case'],
    ['tugline periods data-samples/north.csv --shortest-period 1.1 --longest-period 300', 'one table, periods from 1.1 to 300 days'],
    ['tugline periods data-samples/vellamo.yaml --permutations 500 --out periodogram', 'false-alarm probabilities by shuffling, and the charts'],
  ], // prettier-ignore
  run,
};
