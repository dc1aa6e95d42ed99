/** `tugline mock`: the tables that a case's instruments would have brought home. */
import { basename } from 'node:path';

import { UsageError } from '../../errors.js';
import type { MockTable } from '../../planning/mock.js';
import type { CommandArguments } from '../command-arguments.js';
import type { Command } from '../command.js';
import { FORCE_OPTION, outOption, SEED_OPTION } from '../options.js';
import { seedOf } from '../solving-options.js';
import type { Terminal } from '../terminal.js';

async function run(given: CommandArguments, terminal: Terminal): Promise<number> {
  const seed = seedOf(given);
  const [path] = given.operands;
  if (path === undefined || given.operands.length > 1 || !/\.ya?ml$/i.test(path))
    throw new UsageError(path === undefined ? 'no case is named' : 'mock takes one case', {
      allowed: 'one .yaml file with a mock block',
      hint: 'tugline mock data-samples/vellamo.yaml --out simulated',
    });
  const { readCase } = await import('../../observations/index.js');
  const { fileNameFrom, plainLabel, stableJson, writeFiles } = await import('../../dossier/index.js');
  const { simulateObservations } = await import('../../planning/mock.js');

  const theCase = await readCase(path);
  if (theCase.mock === null)
    throw new UsageError(`the case "${plainLabel(path)}" has no mock block`, {
      allowed: 'a block mock: with the site, the instruments and the true orbits',
      hint: 'data-samples/vellamo.yaml shows one',
    });
  const tables = simulateObservations(theCase.mock, seed, basename(path));
  const folder = given.folder() ?? `mock-${fileNameFrom(theCase.target, 'target')}`;
  const files = tables.map((table) => ({ name: table.fileName, bytes: table.text }));
  const paths = await writeFiles(folder, files, { force: given.isOn('force') });

  if (given.isOn('json'))
    terminal.print(
      stableJson({
        seed,
        tables: tables.map((table, index) => ({ path: paths[index], holds: table.holds, rows: table.rows })),
      }).trimEnd(),
    );
  else
    for (const [index, table] of tables.entries())
      terminal.print(
        `${plainLabel(paths[index] ?? '')}: ${table.rows} simulated ${ROWS_OF[table.holds]} (seed ${seed})`,
      );
  return 0;
}

const ROWS_OF: Readonly<Record<MockTable['holds'], string>> = {
  velocities: 'velocities',
  'light curve': 'points of a light curve',
  'mid-times': 'mid-times',
};

export const mock: Command = {
  name: 'mock',
  operands: 'CASE',
  summary: 'simulated observations of a case',
  description: [
    'Simulates the tables that the instruments of a case would have brought home, had the orbits been those of its mock block: nights of the site, weather, errors and jitter included; light curves of a survey and of nights around a transit, and tables of mid-times, where the block asks for them. The same seed gives the same tables.',
  ],
  options: [
    SEED_OPTION,
    outOption('folder of the tables (default: mock- and the name of the target)'),
    FORCE_OPTION,
  ],
  examples: [
    ['tugline mock data-samples/vellamo.yaml --out simulated', 'writes simulated/north.csv and simulated/south.csv'],
    ['tugline mock data-samples/lainehtar.yaml --out simulated-transits', 'velocities, a survey light curve, two nights at the telescope and a table of mid-times'],
    ['tugline mock data-samples/vellamo.yaml --seed 7 --out simulated --force', 'the same nights with other weather and noise, over the old tables'],
  ], // prettier-ignore
  run,
};
