/** `tugline check`: says what it understood of each table before anything is fitted. */
import type { AnyTable } from '../../observations/any-table.js';
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import { INPUT_OPTIONS } from '../options.js';
import type { Terminal } from '../terminal.js';

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const { readAllTables, requestedCase } = await import('../inputs.js');
  const { describeLightCurve, describeMidTimes, describeTable } = await import('../../observations/index.js');
  const { tableJson, tableScreen } = await import('../screens/table-screen.js');
  const { lightCurveJson, lightCurveScreen, midTimeJson, midTimeScreen } =
    await import('../screens/photometry-screens.js');
  const { stableJson } = await import('../../dossier/json.js');

  const recordOf = (table: AnyTable): object => {
    if (table.content === 'light curve') return lightCurveJson(table, describeLightCurve(table));
    if (table.content === 'mid-times') return midTimeJson(table, describeMidTimes(table));
    return tableJson(table, describeTable(table));
  };
  const screenOf = (table: AnyTable): string => {
    if (table.content === 'light curve')
      return lightCurveScreen(table, describeLightCurve(table), terminal.paint);
    if (table.content === 'mid-times') return midTimeScreen(table, describeMidTimes(table), terminal.paint);
    return tableScreen(table, describeTable(table), terminal.paint);
  };
  const theCase = await requestedCase(given);
  const { tables, failure } = await readAllTables(theCase.tables, terminal);
  if (given.isOn('json')) {
    if (failure !== null) throw failure;
    const records = tables.map(recordOf);
    terminal.print(stableJson({ schema: 'tugline/tables', version: 1, tables: records }).trimEnd());
    return 0;
  }
  const screens = tables.map(screenOf);
  if (screens.length > 0) terminal.print(screens.join('\n\n'));
  if (failure !== null) throw failure;
  return 0;
}

export const check: Command = {
  name: 'check',
  operands: 'TABLE...',
  summary: 'what is understood of each table, before anything is fitted',
  description: [
    'Says for each table what it holds (velocities, a light curve or mid-times), which column was taken for what and why, units, time scale, instruments or band, span, cadence, gaps, exposure and scatter, and lists suspicious rows with their lines. A case may stand in place of the tables.',
  ],
  options: INPUT_OPTIONS,
  examples: [
    ['tugline check data-samples/north.csv data-samples/south.csv', 'both tables of the demonstration'],
    ['tugline check data-samples/lainehtar-night-1.csv --exposure "60 s" --band red', 'a light curve; says what its header does not'],
    ['tugline check data-samples/north.csv --columns "time=1,velocity=2,velocity-error=3" --json', 'columns by number; the answer as JSON'],
  ], // prettier-ignore
  run,
};
