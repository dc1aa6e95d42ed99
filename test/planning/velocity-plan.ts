/** Velocities that the tests ask for, and the rows of the tables made from the plan. */
import type { MockInstrument, MockPlan } from '../../src/observations/types.js';
import type { MockTable } from '../../src/planning/mock.js';

export const NORTH: MockInstrument = {
  name: 'north', table: 'north.csv', unit: 'm/s', count: 700, zeroPointMps: 118, jitterMps: 1.8,
  errorMps: 2.3, errorScatter: 0.25, from: 2455000.5, to: 2459000.5,
}; // prettier-ignore

/** Enough nights for a few dozen observations. */
export const TWO_SEASONS = { from: 2457000.5, to: 2457600.5 };

export function plan(changes: Partial<MockPlan> = {}, north: Partial<MockInstrument> = {}): MockPlan {
  return {
    site: { name: 'Aallokko Point', latitudeDeg: 38.2, longitudeEastDeg: -12.4, elevationM: 310 },
    target: { rightAscensionDeg: 318.4, declinationDeg: 17.6 },
    weatherLoss: 0.35,
    maximumAirmass: 1.8,
    twilightDeg: -15,
    instruments: [{ ...NORTH, ...north }],
    companions: [
      { periodDays: 41.627, eccentricity: 0.352, argPeriastronStarDeg: 128, timePeriastronBjdTdb: 2460412.83, semiAmplitudeMps: 38.4 },
    ],
    slopeMpsPerYear: -4.2,
    curvatureMpsPerYear2: 0.6,
    epochBjdTdb: 2457000.5,
    ...changes,
  }; // prettier-ignore
}

export interface Row {
  readonly time: number;
  readonly velocity: number;
  readonly error: number;
  readonly airmass: number;
}

export function rowsOf(table: MockTable): Row[] {
  const lines = table.text
    .trimEnd()
    .split('\n')
    .filter((line) => !line.startsWith('#'));
  return lines.slice(1).map((line) => {
    const [time, velocity, error, airmass] = line.split(',').map(Number);
    return { time: time!, velocity: velocity!, error: error!, airmass: airmass! };
  });
}
