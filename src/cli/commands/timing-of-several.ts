/** `tugline timing` where a case has mid-times of several companions: all of them, and how they pull at each other. */
import { join } from 'node:path';

import { UsageError } from '../../errors.js';
import type { Case } from '../../observations/types.js';
import type { CompanionTables } from '../../solving/timing/solve-timing-system.js';
import type { TimingChoices } from '../../solving/timing/solve-timing.js';
import type { CommandArguments } from '../command-arguments.js';
import { withProgress } from '../progress.js';
import type { Terminal } from '../terminal.js';

/** What is stated of a single companion. */
const OF_ONE = ['period', 'mass-ratio', 'scaled-axis'];

/** @throws UsageError for options that cannot be meant for all companions */
export function refuseOptionsOfOne(given: CommandArguments, letters: readonly string[]): void {
  const words = OF_ONE.filter((name) => given.text(name) !== null).map((name) => `--${name}`);
  if (words.length > 0)
    throw new UsageError(
      `${words.join(', ')} ${words.length === 1 ? 'belongs' : 'belong'} to one companion, and there are mid-times of ${letters.join(', ')}`,
      {
        allowed: 'these options with --companion; the periods of several companions in the case',
        hint: `--companion ${letters[0]!}, or leave ${words.length === 1 ? 'it' : 'them'} out`,
      },
    );
}

/** Periods that the case states of its companions well enough to count cycles with, by letter. */
function statedPeriods({ companions }: Case): Record<string, number> {
  if (typeof companions !== 'object') return {};
  return Object.fromEntries(
    companions.flatMap(({ letter, elements: { period } }) =>
      period === undefined || period.kind === 'range' ? [] : [[letter, period.value]],
    ),
  );
}

/** @returns the exit code: 1 where the interacting orbits were fitted and cannot be used */
export async function timingOfSeveral(
  given: CommandArguments,
  terminal: Terminal,
  theCase: Case,
  companions: readonly CompanionTables[],
  choices: TimingChoices,
  folder: string,
): Promise<number> {
  const { plainLabel, stableJson, writeFiles } = await import('../../dossier/index.js');
  const system = await withProgress(terminal, given.isOn('quiet'), async (onProgress) => {
    const { solveTimingSystem } = await import('../../solving/timing/solve-timing-system.js');
    const solution = solveTimingSystem(companions, {
      ...choices,
      periodsDays: statedPeriods(theCase),
      starMass: theCase.star.massSolar,
      quick: given.isOn('quick'),
      onProgress,
    });
    onProgress('drawing charts', 0.95);
    const { renderSystemCharts } = await import('../../dossier/charts/render-timing-system.js');
    const { systemFiles } = await import('../../dossier/timing/system-files.js');
    const files = systemFiles(solution, await renderSystemCharts(solution));
    await writeFiles(folder, files, { force: given.isOn('force') });
    return solution;
  });

  if (given.isOn('json')) terminal.print(stableJson(system.record).trimEnd());
  else {
    const { timingSystemScreen } = await import('../screens/timing-system-screen.js');
    terminal.print(timingSystemScreen(system.record, join(plainLabel(folder), '/'), terminal.paint));
  }
  return system.hasFailed ? 1 : 0;
}
