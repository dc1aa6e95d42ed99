/** Our side of box-search.bench.ts, in a process of its own: INPUT.json REPEATS joined|exact. */
import { readFileSync } from 'node:fs';
import { BoxSearch } from '../../src/solving/dips/box-search.js';
import type { BoxSearchInput } from './box-search.bench.js';
import { callTimesMs, requireFinite } from './measure.js';

const [input, repeats, joining] = process.argv.slice(2);
const given = JSON.parse(readFileSync(input!, 'utf8')) as BoxSearchInput;
const series = {
  timesDays: Float64Array.from(given.timesDays),
  values: Float64Array.from(given.flux, (flux) => flux - 1),
  weights: Float64Array.from(given.sigmas, (sigma) => 1 / (sigma * sigma)),
};
const durations = given.durationsDays;
const grid = {
  frequenciesPerDay: Float64Array.from(given.frequenciesPerDay),
  durationsAt: (_period: number, out: Float64Array): number => {
    out.set(durations);
    return durations.length;
  },
};
let search: BoxSearch | null = null;
const timesMs = callTimesMs(Number(repeats), () => {
  search = new BoxSearch(series, grid, joining === 'exact' ? 'exact' : 'joined');
});
const { signalResidue, totalWeight } = search!;
requireFinite('signal residue', signalResidue);
let best = 0;
for (let j = 0; j < signalResidue.length; j++) if (signalResidue[j]! > signalResidue[best]!) best = j;
process.stdout.write(
  JSON.stringify({
    timesMs,
    periodDays: 1 / grid.frequenciesPerDay[best]!,
    signalToNoise: signalResidue[best]! * Math.sqrt(totalWeight),
  }),
);
