/** Every file of a solution of mid-times of several companions, in the order of the folder. */
import type { TimingSystemSolved } from '../../solving/timing/system-types.js';
import { interactionTable } from '../interaction-report.js';
import { stableJson } from '../json.js';
import type { DossierFile } from '../write-dossier.js';
import { oMinusCTable } from './o-minus-c-table.js';
import { systemReport } from './system-report.js';

/** @param charts - drawn ones, by bare name; `letter` says of which companion, `null` those of the interacting orbits */
export function systemFiles(
  system: TimingSystemSolved,
  charts: readonly {
    readonly name: string;
    readonly bytes: Uint8Array;
    readonly caption: string;
    readonly letter: string | null;
  }[],
): DossierFile[] {
  const shown = charts.map(({ name, caption, letter }) => ({ path: name, caption, letter }));
  return [
    { name: 'timing.json', bytes: stableJson(system.record) },
    ...(system.interaction === null
      ? []
      : [{ name: 'interaction.csv', bytes: interactionTable(system.interaction.fit) }]),
    ...system.companions.map(({ letter, solved }) => ({
      name: `o-minus-c-${letter}.csv`,
      bytes: oMinusCTable(solved),
    })),
    ...charts.map(({ name, bytes }) => ({ name, bytes })),
    { name: 'report.md', bytes: systemReport(system, shown) },
  ];
}
