/** `tugline check`: says what it understood of each table before anything is fitted. */
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import { INPUT_OPTIONS } from '../options.js';
import type { Terminal } from '../terminal.js';

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const { readAllTables, requestedCase } = await import('../inputs.js');
  const { describeTable } = await import('../../observations/index.js');
  const { tableJson, tableScreen } = await import('../screens/table-screen.js');
  const { stableJson } = await import('../../dossier/json.js');

  const theCase = await requestedCase(given);
  const { tables, failure } = await readAllTables(theCase.tables, terminal);
  const understood = tables.map((table) => ({ table, summary: describeTable(table) }));
  if (given.isOn('json')) {
    if (failure !== null) throw failure;
    const records = understood.map(({ table, summary }) => tableJson(table, summary));
    terminal.print(stableJson({ schema: 'tugline/tables', version: 1, tables: records }).trimEnd());
    return 0;
  }
  const screens = understood.map(({ table, summary }) => tableScreen(table, summary, terminal.paint));
  if (screens.length > 0) terminal.print(screens.join('\n\n'));
  if (failure !== null) throw failure;
  return 0;
}

export const check: Command = {
  name: 'check',
  operands: 'TABLE...',
  summary: 'what is understood of each table, before anything is fitted',
  description: [
    'Says for each table which column was taken for what and why, units, time scale, instruments, span, cadence and seasons, and lists suspicious rows with their lines. A case may stand in place of the tables.',
  ],
  options: INPUT_OPTIONS,
  examples: [
    ['tugline check data-samples/north.csv data-samples/south.csv', 'both tables of the demonstration'],
    ['tugline check data-samples/south.csv --unit km/s --time-scale BJD_TDB', 'says what the header does not'],
    ['tugline check data-samples/north.csv --columns "time=1,velocity=2,velocity-error=3" --json', 'columns by number; the answer as JSON'],
  ], // prettier-ignore
  run,
};
