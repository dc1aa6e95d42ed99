/** Every file of a solution of mid-times, in the order of the folder. */
import type { TimingSolved } from '../../solving/timing/types.js';
import { stableJson } from '../json.js';
import type { DossierFile } from '../write-dossier.js';
import { oMinusCTable } from './o-minus-c-table.js';
import { timingReport } from './timing-report.js';

/** @param charts - drawn ones, by bare name */
export function timingFiles(
  solved: TimingSolved,
  charts: readonly { readonly name: string; readonly bytes: Uint8Array; readonly caption: string }[],
): DossierFile[] {
  const shown = charts.map(({ name, caption }) => ({ path: name, caption }));
  return [
    { name: 'timing.json', bytes: stableJson(solved.record) },
    { name: 'o-minus-c.csv', bytes: oMinusCTable(solved) },
    ...charts.map(({ name, bytes }) => ({ name, bytes })),
    { name: 'report.md', bytes: timingReport(solved.record, { charts: shown }) },
  ];
}
