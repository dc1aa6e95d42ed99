/**
 * The stations of a quick `solve` in a fresh process, timed one after another: TABLE FOLDER. Prints { station: ms }.
 * Plain JavaScript on the compiled program, so that nothing but the program itself is loaded.
 */
import { join } from 'node:path';
import { performance } from 'node:perf_hooks';
import process from 'node:process';

const [table, folder] = process.argv.slice(2);
const stations = {};
let station = 'load modules';
let since = performance.now();

function enter(next) {
  const now = performance.now();
  stations[station] = (stations[station] ?? 0) + now - since;
  station = next;
  since = now;
}

const { caseFromTables, combineTables, readTable } = await import('../../dist/observations/index.js');
const { solveCase } = await import('../../dist/solving/solve-case.js');
const { dossierFiles, writeDossier } = await import('../../dist/dossier/index.js');
const { renderCharts } = await import('../../dist/dossier/charts/index.js');

enter('read');
const theCase = caseFromTables([table]);
const velocities = combineTables(await Promise.all(theCase.tables.map((request) => readTable(request))));

const solved = solveCase(theCase, velocities, {
  seed: 1,
  quick: true,
  permutations: 0,
  provenance: { version: '0', node: process.version, command: [] },
  onProgress: (stage) => {
    enter(stage.startsWith('searching') ? 'search and fit' : stage);
  },
});
if (!solved.record.fit.usable) throw new Error('the bench found no companion: its times mean nothing');

enter('charts');
const charts = await renderCharts(solved);

enter('write');
const facts = {
  date: '2026-12-01T00:00:00.000Z',
  durationSeconds: 0,
  machine: { system: process.platform, architecture: process.arch, processors: 1 },
};
await writeDossier(
  join(folder, 'stations'),
  dossierFiles(solved, charts, () => facts),
  { force: true },
);
enter('end');
process.stdout.write(JSON.stringify(stations));
