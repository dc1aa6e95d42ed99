/** `tugline periods`: which periods are in the data, and which the sampling itself puts there. */
import { UsageError } from '../../errors.js';
import type { LightCurveTable } from '../../observations/photometry-types.js';
import type { Case, VelocitySet } from '../../observations/types.js';
import type { TableDips } from '../../solving/dips/search-tables.js';
import type { PeriodsOptions, PeriodsReport } from '../../solving/search-periods.js';
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import {
  FORCE_OPTION, INPUT_OPTIONS, MODEL_OPTIONS, outOption, SEARCH_OPTIONS, SEED_OPTION, STAR_OPTIONS, TARGET_OPTION,
} from '../options.js'; // prettier-ignore
import { withProgress } from '../progress.js';
import { solvingChoices } from '../solving-options.js';
import type { Terminal } from '../terminal.js';

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const choices = solvingChoices(given);
  const { readObservations, requestedCase } = await import('../inputs.js');
  const theCase = await requestedCase(given);
  const observations = await readObservations(theCase, given, terminal);
  const { velocities, lightCurves } = observations;
  if (velocities === null && lightCurves.length === 0)
    throw new UsageError('mid-times alone hold no period that could be searched', {
      allowed: 'tables of velocities, light curves, or both',
      hint: 'tugline timing fits ephemerides to mid-times',
    });
  const found = await withProgress(terminal, given.isOn('quiet'), async (onProgress) => ({
    periods: velocities === null ? null : await periodsOf(theCase, velocities, { ...choices, onProgress }),
    dips: lightCurves.length === 0 ? null : await dipsOf(theCase, lightCurves, onProgress),
  }));
  const written = await drawn(theCase.target, found, given);
  await print(theCase.target, velocities, found, written, given, terminal);
  const hasPeriod =
    found.periods !== null &&
    (found.periods.stage.peaks.length > 0 || found.periods.stage.eccentricPeak !== null);
  return hasPeriod || (found.dips !== null && found.dips.search.candidates.length > 0) ? 0 : 1;
}

interface Found {
  readonly periods: PeriodsReport | null;
  readonly dips: TableDips | null;
}

async function periodsOf(
  theCase: Case,
  velocities: VelocitySet,
  options: PeriodsOptions,
): Promise<PeriodsReport> {
  const { searchPeriods } = await import('../../solving/search-periods.js');
  return searchPeriods(theCase, velocities, options);
}

async function dipsOf(
  theCase: Case,
  lightCurves: readonly LightCurveTable[],
  onProgress: (stage: string, fraction: number) => void,
): Promise<TableDips> {
  const { searchTables } = await import('../../solving/dips/search-tables.js');
  return searchTables(theCase, lightCurves, onProgress);
}

/** Draws what was found, where a folder is named. */
async function drawn(
  target: string,
  { periods: report, dips }: Found,
  given: CommandArguments,
): Promise<readonly string[]> {
  const folder = given.folder();
  if (folder === null) return [];
  const { writeFiles } = await import('../../dossier/index.js');
  const { renderDipsCharts, renderPeriodsCharts } = await import('../../dossier/charts/index.js');
  const charts = [
    ...(report === null ? [] : await renderPeriodsCharts([report.stage], report.window, target)),
    ...(dips === null ? [] : await renderDipsCharts(dips.search.stages, target)),
  ];
  return writeFiles(folder, charts, { force: given.isOn('force') });
}

async function print(
  target: string,
  velocities: VelocitySet | null,
  { periods: report, dips }: Found,
  written: readonly string[],
  given: CommandArguments,
  terminal: Terminal,
): Promise<void> {
  const { plainLabel, stableJson } = await import('../../dossier/index.js');
  const { periodsJson, periodsScreen } = await import('../screens/periods-screen.js');
  const { dipsJson, dipsScreen } = await import('../screens/dips-screen.js');
  if (given.isOn('json')) {
    const base =
      report === null ? { schema: 'tugline/periods', version: 1, target } : periodsJson(target, report);
    terminal.print(stableJson(dips === null ? base : { ...base, dips: dipsJson(dips) }).trimEnd());
    return;
  }
  if (report !== null && velocities !== null)
    terminal.print(periodsScreen(target, velocities, report, terminal.paint));
  if (report !== null && dips !== null) terminal.print('');
  if (dips !== null) terminal.print(dipsScreen(target, dips, terminal.paint));
  for (const path of written) terminal.print(`   chart ${plainLabel(path)}`);
}

export const periods: Command = {
  name: 'periods',
  operands: 'CASE|TABLE...',
  summary: 'periods of velocities, dips in light curves; false alarms and aliases',
  description: [
    'Lists the strongest periods of velocities with power, false-alarm probability and what they are seen from the strongest one, and the peaks of the window function. Zero points and drift are refitted at each frequency.',
    'In light curves it looks for box-shaped dips, and lists those that noise does not make: period, mid-time, duration, depth, events, odd against even ones, and what stands at other phases. A dip that is seen once has no period. Periods up to half the span are tried there unless --longest-period says otherwise (at most the span); mass and radius of the star narrow the durations that are tried.',
  ],
  options: [
    ...INPUT_OPTIONS,
    TARGET_OPTION,
    ...STAR_OPTIONS.filter((option) => option.name !== 'star-temperature'),
    ...MODEL_OPTIONS.filter((option) => option.name === 'drift'),
    ...SEARCH_OPTIONS,
    SEED_OPTION,
    outOption('folder for the charts of the periodogram and of the dips (default: no charts)'),
    FORCE_OPTION,
  ],
  examples: [
    ['tugline periods data-samples/vellamo.yaml', 'the periods of a case'],
    ['tugline periods data-samples/north.csv --shortest-period 1.1 --longest-period 300', 'one table, periods from 1.1 to 300 days'],
    ['tugline periods data-samples/lainehtar-survey.csv --star-mass 0.97 --star-radius 0.99 --out dips', 'dips in a survey light curve, and the charts'],
  ], // prettier-ignore
  run,
};
