/** Photometry that the tests ask for: the plan, the tables made from it, and the flux that they should scatter about. */
import type {
  MockMidTimes,
  MockNight,
  MockPhotometry,
  MockSurvey,
} from '../../src/observations/mock-types.js';
import type { MockPlan } from '../../src/observations/types.js';
import { simulateObservations, type MockTable } from '../../src/planning/mock.js';

export const PERIOD = 3.2;
export const MID_TRANSIT = 2460500.3;
export const RATIO = 0.1;
export const IMPACT = 0.3;

export const SURVEY: MockSurvey = {
  kind: 'survey', table: 'survey.csv', band: 'flat', unit: 'relative', level: 1, cadenceDays: 1 / 144, exposureDays: 0,
  noise: 1e-4, redNoise: null, fromBjdTdb: 2460499, spanDays: 40, gaps: [{ afterDays: 10, lengthDays: 2 }], variability: null, flagged: 0,
}; // prettier-ignore

export const NIGHT: MockNight = {
  kind: 'night', table: 'night.csv', band: 'flat', unit: 'relative', level: 1, cadenceDays: 30 / 86400, exposureDays: 0,
  noise: 1e-3, redNoise: null, companion: 0, afterBjdTdb: 2460560, marginDays: 0.08, airmassTrend: -0.02, positionTrend: 0, widthTrend: 0,
}; // prettier-ignore

export const MID_TIMES: MockMidTimes = {
  table: 'times.csv', companion: 0, count: 300, errorDays: 0.001, errorScatter: 0.3, fromBjdTdb: 2457000, toBjdTdb: 2460500,
  sources: ['the pier', 'the "old, red" boat'],
}; // prettier-ignore

export function plan(photometry: Partial<MockPhotometry>, changes: Partial<MockPlan> = {}): MockPlan {
  return {
    site: { name: 'Aallokko Point', latitudeDeg: 38.2, longitudeEastDeg: -12.4, elevationM: 310 },
    target: { rightAscensionDeg: 330, declinationDeg: 17.6 },
    weatherLoss: 0.35,
    maximumAirmass: 2.2,
    twilightDeg: -12,
    instruments: [],
    companions: [
      {
        periodDays: PERIOD, eccentricity: 0, argPeriastronStarDeg: 90, timePeriastronBjdTdb: MID_TRANSIT, semiAmplitudeMps: 50,
        transit: { radiusRatio: RATIO, path: { kind: 'impact-parameter', value: IMPACT } },
      },
    ],
    slopeMpsPerYear: 0,
    curvatureMpsPerYear2: 0,
    epochBjdTdb: MID_TRANSIT,
    photometry: {
      star: { massSolar: 1, radiusSolar: 1 },
      bands: { flat: { u1: 0, u2: 0 } },
      lightCurves: [],
      midTimes: [],
      ...photometry,
    },
    ...changes,
  }; // prettier-ignore
}

/** Columns by label. */
export function columnsOf(table: MockTable): Map<string, string[]> {
  const [header, ...rows] = table.text
    .trimEnd()
    .split('\n')
    .filter((line) => !line.startsWith('#'))
    .map((line) => line.split(','));
  return new Map(header!.map((label, column) => [label, rows.map((row) => row[column]!)]));
}

export function numbersOf(table: MockTable, label: string): number[] {
  return columnsOf(table).get(label)!.map(Number);
}

export const make = (photometry: Partial<MockPhotometry>, seed = 1): MockTable[] =>
  simulateObservations(plan(photometry), seed);

/**
 * Flux of a star without limb darkening on a circular orbit, from plane geometry: Kepler's third law with the nominal
 * constants of the Sun, and the lens of two circles. Shares no code with the program.
 */
export function flatFlux(time: number): number {
  const axis = Math.cbrt((1.3271244e20 * (PERIOD * 86400) ** 2) / (4 * Math.PI ** 2)) / 6.957e8;
  const phase = (2 * Math.PI * (time - MID_TRANSIT)) / PERIOD;
  if (Math.cos(phase) < 0) return 1;
  const z = Math.hypot(axis * Math.sin(phase), IMPACT * Math.cos(phase));
  if (z >= 1 + RATIO) return 1;
  if (z <= 1 - RATIO) return 1 - RATIO ** 2;
  const alpha = Math.acos((z * z + RATIO ** 2 - 1) / (2 * z * RATIO));
  const beta = Math.acos((z * z + 1 - RATIO ** 2) / (2 * z));
  const kite = 0.5 * Math.sqrt(4 * z * z - (1 + z * z - RATIO ** 2) ** 2);
  return 1 - (RATIO ** 2 * alpha + beta - kite) / Math.PI;
}

export function meanOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
