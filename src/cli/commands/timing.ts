/** `tugline timing`: mid-times in; ephemeris, changes of the period and predictions out. */
import { join } from 'node:path';

import { UsageError } from '../../errors.js';
import type { Observations } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import type { CompanionTables } from '../../solving/timing/solve-timing-system.js';
import type { TimingChoices } from '../../solving/timing/solve-timing.js';
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import {
  FORCE_OPTION, INPUT_OPTIONS, outOption, QUICK_OPTION, SEED_OPTION, STAR_OPTIONS, TARGET_OPTION, type OptionSpec,
} from '../options.js'; // prettier-ignore
import { withProgress } from '../progress.js';
import { seedOf } from '../solving-options.js';
import type { Terminal } from '../terminal.js';
import { programVersion } from '../version.js';
import { refuseOptionsOfOne, timingOfSeveral } from './timing-of-several.js';

const TIMING_OPTIONS: readonly OptionSpec[] = [
  { name: 'companion', group: 'Input', value: 'LETTER', help: 'whose mid-times, where a case has those of several companions (default: all, and how they pull at each other)' },
  { name: 'period', group: 'Model', value: 'DAYS', help: 'about the period, days, good to 2 %: counts the cycles of tables without them (default: from the spacings)' },
  { name: 'renumber', group: 'Model', value: null, help: 'count the cycles from the times, whatever the tables say' },
  { name: 'mass-ratio', group: 'Model', value: 'Q', help: 'mass of the companion over that of the star, for the tidal quality factor (default: unknown)' },
  { name: 'scaled-axis', group: 'Model', value: 'A', help: 'semi-major axis in radii of the star, for the tidal quality factor (default: unknown)' },
  { name: 'proper-motion', group: 'Model', value: 'MAS', help: 'proper motion, mas/yr; with --distance the part of a period change that it explains (default: unknown)' },
  { name: 'distance', group: 'Model', value: 'PARSECS', help: 'distance, pc (default: unknown)' },
  { name: 'shortest-modulation', group: 'Search', value: 'DAYS', help: 'shortest period of a sinusoid in the times, days (default: two cycles)' },
  { name: 'longest-modulation', group: 'Search', value: 'DAYS', help: 'longest period of a sinusoid in the times, days (default: 1.5 times the span)' },
  { name: 'next', group: 'Output', value: 'N', help: 'how many events to predict, 1 to 10000 (default: 10)' },
  { name: 'after', group: 'Output', value: 'DATE', help: 'predict events after this date, BJD_TDB (default: the last mid-time)' },
]; // prettier-ignore

const DEFAULT_NEXT = 10;
const MOST_NEXT = 10_000;
const READING_OPTIONS = ['columns', 'holds', 'time-scale'];

function timingChoices(given: CommandArguments, theCase: Case): TimingChoices {
  const number = (name: string): number | null => given.quantity(name, 'number')?.value ?? null;
  const low = given.quantity('shortest-modulation', 'period')?.value ?? null;
  const high = given.quantity('longest-modulation', 'period')?.value ?? null;
  if (low !== null && high !== null && low >= high)
    throw new UsageError(`the shortest modulation, ${low} d, is not below the longest, ${high} d`, {
      hint: 'change --shortest-modulation or --longest-modulation',
    });
  return {
    target: theCase.target,
    periodDays: given.quantity('period', 'period')?.value ?? null,
    renumber: given.isOn('renumber'),
    facts: {
      massRatio: number('mass-ratio'),
      scaledSemiMajorAxis: number('scaled-axis'),
      semiMajorAxisAu: null,
      properMotionMasPerYear: number('proper-motion'),
      distanceParsec: number('distance'),
    },
    starMassSolar: theCase.star.massSolar?.value ?? null,
    modulationDays: { low, high },
    next: given.wholeNumber('next', 1, MOST_NEXT) ?? DEFAULT_NEXT,
    afterBjdTdb: given.quantity('after', 'date')?.value ?? null,
    seed: seedOf(given),
    provenance: { version: programVersion(), node: process.versions.node, command: given.command },
  };
}

/**
 * The tables by companion, in the order of the case: all of them, or those of the letter alone.
 *
 * @throws UsageError when there are none, or the letter has none, or some of several are not named
 */
function companionsOf({ midTimes }: Observations, letter: string | null): CompanionTables[] {
  if (midTimes.length === 0)
    throw new UsageError('there are no mid-times among the tables', {
      allowed: 'tables with a column of mid-times and one of their errors',
      hint: 'tugline check TABLE says what a table was taken for',
    });
  const letters = [...new Set(midTimes.map(({ companion }) => companion ?? ''))];
  const named = letters.filter((name) => name !== '');
  const of = (name: string): CompanionTables => ({
    letter: name,
    tables: midTimes.filter(({ companion }) => (companion ?? '') === name),
  });
  if (letter === null) {
    if (letters.length === 1 || named.length === letters.length) return letters.map(of);
    throw new UsageError(
      `there are mid-times of companion ${named.join(', ')} and of one that is not named (${of('')
        .tables.map(({ path }) => `"${path}"`)
        .join(', ')})`,
      {
        allowed: 'those of one companion, or a letter for every table',
        hint: `companion: LETTER beside each table of the case, or --companion ${named[0] ?? 'b'}`,
      },
    );
  }
  if (named.length === 0) return [{ letter, tables: midTimes }];
  if (named.includes(letter)) return [of(letter)];
  throw new UsageError(`no table has mid-times of a companion "${letter}"`, { allowed: named.join(', ') });
}

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const { readObservations, requestedCase } = await import('../inputs.js');
  const { fileNameFrom, plainLabel, stableJson, writeFiles } = await import('../../dossier/index.js');

  const theCase = await requestedCase(given);
  const choices = timingChoices(given, theCase);
  const observations = await readObservations(theCase, given, terminal);
  const companions = companionsOf(observations, given.text('companion'));
  const letters = companions.map(({ letter }) => letter);
  if (companions.length > 1) refuseOptionsOfOne(given, letters);
  const unused = (observations.velocities === null ? 0 : 1) + observations.lightCurves.length;
  if (unused > 0 && !given.isOn('quiet'))
    terminal.note(
      `${terminal.paint('caution', 'note:', 'note')} velocities and light curves are not used by timing`,
    );
  const folder = given.folder() ?? `timing-${fileNameFrom(theCase.target, 'target')}`;

  if (companions.length > 1) return timingOfSeveral(given, terminal, theCase, companions, choices, folder);
  if (given.isOn('quick') && !given.isOn('quiet'))
    terminal.note(
      `${terminal.paint('caution', 'note:', 'note')} --quick changes nothing: the mid-times are those of one companion`,
    );

  const solved = await withProgress(terminal, given.isOn('quiet'), async (onProgress) => {
    const { solveTiming } = await import('../../solving/timing/solve-timing.js');
    const solution = solveTiming(companions[0]!.tables, { ...choices, onProgress });
    onProgress('drawing charts', 0.95);
    const { renderTimingCharts } = await import('../../dossier/charts/render-timing.js');
    const { timingFiles } = await import('../../dossier/timing/timing-files.js');
    const files = timingFiles(solution, await renderTimingCharts(solution));
    await writeFiles(folder, files, { force: given.isOn('force') });
    return solution;
  });

  if (given.isOn('json')) terminal.print(stableJson(solved.record).trimEnd());
  else {
    const { timingScreen } = await import('../screens/timing-screen.js');
    terminal.print(timingScreen(solved.record, join(plainLabel(folder), '/'), terminal.paint));
  }
  return 0;
}

export const timing: Command = {
  name: 'timing',
  operands: 'CASE|TABLE...',
  summary: 'ephemeris, changes of the period and predictions from mid-times',
  description: [
    'Counts or checks the cycles of mid-transit (and mid-occultation) times, fits a constant period, a changing one, a sinusoid and a precessing orbit, says which of them the times ask for, and predicts what comes next.',
    'Where a case has mid-times of two to five companions, each gets its ephemeris, and orbits that pull at each other are integrated and fitted to all of them: masses and eccentricities follow.',
    'Writes a folder: solution, report, tables of O - C, charts.',
  ],
  options: [
    ...INPUT_OPTIONS.filter(({ name }) => READING_OPTIONS.includes(name)),
    TARGET_OPTION,
    ...TIMING_OPTIONS,
    ...STAR_OPTIONS.filter(({ name }) => name === 'star-mass'),
    {
      ...QUICK_OPTION,
      help: 'of several companions: masses without posterior, their uncertainties from the curvature at the solution',
    },
    SEED_OPTION,
    outOption('folder of the files (default: timing- and the name of the target)'),
    FORCE_OPTION,
  ],
  examples: [
    ['tugline timing data-samples/lainehtar-mid-times.csv', 'everything; the files go to timing-lainehtar-mid-times'],
    ['tugline timing data-samples/lainehtar-mid-times.csv --renumber --period 3.74 --next 20 --out counted', 'counts the cycles with a stated period, predicts 20 events'],
    ['tugline timing data-samples/lainehtar.yaml --mass-ratio 0.0005 --scaled-axis 10.2 --json --out tides', 'the mid-times of a case, with the tidal quality factor; the answer as JSON'],
  ], // prettier-ignore
  run,
};
