/** All files of a dossier, ready to be written. */
import type { Solved } from '../solving/types.js';
import { elementsTable } from './elements-table.js';
import { solutionJson } from './json.js';
import { lightCurveTable } from './light-curve-table.js';
import { midTimesTable } from './mid-times-table.js';
import { modelTable } from './model-table.js';
import { report } from './report.js';
import { residualsTable } from './residuals-table.js';
import { hasVelocities } from './observed.js';
import { posteriorTable, thinningOf } from './posterior-table.js';
import { runJson, type RunFacts } from './run-record.js';
import type { DossierFile } from './write-dossier.js';

function hasAny(list: readonly unknown[] | undefined): boolean {
  return list !== undefined && list.length > 0;
}

/** Texts and tables by name, `null` leaves one out; a new output format is one file and its line here. */
const WRITERS: readonly (readonly [string, (solved: Solved) => string | null])[] = [
  ['solution.json', ({ record }) => solutionJson(record)],
  ['elements.csv', ({ record }) => elementsTable(record)],
  ['residuals.csv', (solved) => (hasVelocities(solved) ? residualsTable(solved) : null)],
  ['model.csv', (solved) => (hasVelocities(solved) ? modelTable(solved) : null)],
  ['light-curve.csv', ({ photometry }) => (hasAny(photometry?.fitted) ? lightCurveTable(photometry!) : null)],
  ['mid-times.csv', ({ photometry }) => (hasAny(photometry?.midTimes) ? midTimesTable(photometry!) : null)],
  ['posterior.csv', ({ posterior }) => (posterior === null ? null : posteriorTable(posterior))],
];

/**
 * @param charts - finished charts by their bare names; they go to the folder `charts`
 * @param run - facts that differ between runs; called last, so that the duration covers the rest
 */
export function dossierFiles(
  solved: Solved,
  charts: readonly { readonly name: string; readonly bytes: Uint8Array; readonly caption: string }[],
  run: () => RunFacts,
): DossierFile[] {
  const files: DossierFile[] = WRITERS.flatMap(([name, write]) => {
    const bytes = write(solved);
    return bytes === null ? [] : [{ name, bytes }];
  });
  for (const chart of charts) files.push({ name: `charts/${chart.name}`, bytes: chart.bytes });
  const names = [...files.map((file) => file.name), 'report.md', 'run.json'];
  const shown = charts.map((chart) => ({ path: `charts/${chart.name}`, caption: chart.caption }));
  files.push({ name: 'report.md', bytes: report(solved, { charts: shown, files: names }) });
  files.push({
    name: 'run.json',
    bytes: runJson(
      run(),
      solved.record.provenance.version,
      names.filter((name) => name !== 'run.json'),
      solved.posterior === null ? 1 : thinningOf(solved.posterior),
    ),
  });
  return files;
}
