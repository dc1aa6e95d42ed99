import { describe, expect, test } from 'vitest';
import { ModelDomainError, UsageError } from '../../src/errors.js';
import { RandomStream } from '../../src/numerics/random.js';
import type {
  MockMidTimes,
  MockNight,
  MockPhotometry,
  MockSurvey,
} from '../../src/observations/mock-types.js';
import type { MockPlan } from '../../src/observations/types.js';
import { quasiPeriodic, redNoise } from '../../src/planning/mock-noise.js';
import { simulateObservations, type MockTable } from '../../src/planning/mock.js';
import { expectWithin } from '../support/expect-within.js';

const PERIOD = 3.2;
const MID_TRANSIT = 2460500.3;
const RATIO = 0.1;
const IMPACT = 0.3;

const SURVEY: MockSurvey = {
  kind: 'survey', table: 'survey.csv', band: 'flat', unit: 'relative', level: 1, cadenceDays: 1 / 144, exposureDays: 0,
  noise: 1e-4, redNoise: null, fromBjdTdb: 2460499, spanDays: 40, gaps: [{ afterDays: 10, lengthDays: 2 }], variability: null, flagged: 0,
}; // prettier-ignore

const NIGHT: MockNight = {
  kind: 'night', table: 'night.csv', band: 'flat', unit: 'relative', level: 1, cadenceDays: 30 / 86400, exposureDays: 0,
  noise: 1e-3, redNoise: null, companion: 0, afterBjdTdb: 2460560, marginDays: 0.08, airmassTrend: -0.02, positionTrend: 0, widthTrend: 0,
}; // prettier-ignore

const MID_TIMES: MockMidTimes = {
  table: 'times.csv', companion: 0, count: 300, errorDays: 0.001, errorScatter: 0.3, fromBjdTdb: 2457000, toBjdTdb: 2460500,
  sources: ['the pier', 'the "old, red" boat'],
}; // prettier-ignore

function plan(photometry: Partial<MockPhotometry>, changes: Partial<MockPlan> = {}): MockPlan {
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
function columnsOf(table: MockTable): Map<string, string[]> {
  const [header, ...rows] = table.text
    .trimEnd()
    .split('\n')
    .filter((line) => !line.startsWith('#'))
    .map((line) => line.split(','));
  return new Map(header!.map((label, column) => [label, rows.map((row) => row[column]!)]));
}

function numbersOf(table: MockTable, label: string): number[] {
  return columnsOf(table).get(label)!.map(Number);
}

const make = (photometry: Partial<MockPhotometry>, seed = 1): MockTable[] =>
  simulateObservations(plan(photometry), seed);

/**
 * Flux of a star without limb darkening on a circular orbit, from plane geometry: Kepler's third law with the nominal
 * constants of the Sun, and the lens of two circles. Shares no code with the program.
 */
function flatFlux(time: number): number {
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

function meanOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

describe('a survey', () => {
  const [table] = make({ lightCurves: [SURVEY] });
  const times = numbersOf(table!, 'BJD_TDB');
  const flux = numbersOf(table!, 'flux');
  const sigma = numbersOf(table!, 'flux error');

  test('scatters about the star with its transits as its errors say', () => {
    // Light crosses the orbit in under a second and a half, a loss of less than 1e-5 at the contacts.
    const pulls = times.map((time, i) => (flux[i]! - flatFlux(time)) / sigma[i]!);
    const why = 'four standard errors of a normal sample';
    const n = pulls.length;
    expectWithin(meanOf(pulls), 0, { abs: 4 / Math.sqrt(n), unit: '1', why });
    expectWithin(meanOf(pulls.map((pull) => pull * pull)), 1, { abs: 4 * Math.sqrt(2 / n), unit: '1', why });
    const wrong = times.map((time, i) => (flux[i]! - flatFlux(time + 0.01)) / sigma[i]!);
    expect(meanOf(wrong.map((pull) => pull * pull))).toBeGreaterThan(2);
  });

  test('has its cadence, its span and its gap', () => {
    expect(times).toHaveLength((40 - 2) * 144);
    const steps = times.slice(1).map((time, i) => time - times[i]!);
    expect(steps.filter((step) => step > 1.5 / 144)).toHaveLength(1);
    expectWithin(Math.max(...steps), 2 + 1 / 144, { abs: 2e-5, unit: 'd', why: 'printed to 1e-5 d' });
    for (const time of times) expect(time < 2460509 || time > 2460511).toBe(true);
  });

  test('in counts: the same light at another level, with as many digits as the error needs', () => {
    const [counts] = make({ lightCurves: [{ ...SURVEY, unit: 'counts', level: 5e4 }] });
    expect([...columnsOf(counts!).keys()]).toEqual([
      'BJD_TDB',
      'flux (counts)',
      'flux error (counts)',
      'quality',
    ]);
    const found = numbersOf(counts!, 'flux (counts)');
    for (let i = 0; i < found.length; i += 50)
      expectWithin(found[i]! / 5e4, flux[i]!, { abs: 2e-6, unit: '1', why: 'rounding of both tables' });
  });

  test('flags about the share of rows that it should, and those are the disturbed ones', () => {
    const [flagged] = make({ lightCurves: [{ ...SURVEY, flagged: 0.1 }] });
    const flags = numbersOf(flagged!, 'quality');
    // spells of six rows on the average: the scatter of the share is sqrt(2 * 6) that of single rows
    const sigmaShare = Math.sqrt((0.1 * 0.9 * 12) / flags.length);
    expectWithin(meanOf(flags), 0.1, { abs: 4 * sigmaShare, unit: '1', why: 'four standard errors' });
    const good = numbersOf(flagged!, 'flux').filter((value, i) => {
      return flags[i] === 0 && Math.abs(value - flatFlux(times[i]!)) > 6e-4;
    });
    expect(good).toEqual([]);
  });
});

describe('noise and variability', () => {
  const days = Float64Array.from({ length: 4000 }, (_, i) => i * 0.25);

  test('red noise has its size and forgets exponentially', () => {
    const noise = redNoise({ size: 3, timeDays: 1 }, days, RandomStream.fromSeed(4));
    const product = (lag: number): number =>
      meanOf(Array.from(noise.subarray(lag), (value, i) => value * noise[i]!));
    // variance of the mean of n squares with memory rho: 2/n (1 + rho^2)/(1 - rho^2), rho = e^-0.25
    const tolerance = 4 * 9 * Math.sqrt((2 / days.length) * ((1 + Math.exp(-0.5)) / (1 - Math.exp(-0.5))));
    const why = 'four standard errors';
    expectWithin(product(0), 9, { abs: tolerance, unit: '1', why });
    expectWithin(product(4), 9 * Math.exp(-1), { abs: tolerance, unit: '1', why });
    expectWithin(product(40), 0, { abs: tolerance, unit: '1', why });
  });

  test('variability has its size over many stars, and its period comes back', () => {
    const wanted = { size: 2, periodDays: 10, lifetimeDays: 60 };
    const stars = Array.from({ length: 60 }, (_, star) =>
      quasiPeriodic(wanted, days.subarray(0, 400), RandomStream.fromSeed(100 + star)),
    );
    const product = (lag: number): number =>
      meanOf(stars.flatMap((star) => Array.from(star.subarray(lag), (value, i) => value * star[i]!)));
    const memory = (lagDays: number): number => {
      const decay = Math.exp(-(lagDays ** 2) / (2 * 60 ** 2));
      const tone = (2 * Math.PI * lagDays) / 10;
      return 4 * decay * (0.75 * Math.cos(tone) + 0.25 * Math.cos(2 * tone));
    };
    // each star of 100 d carries about three independent squares
    const why = 'four standard errors of 60 stars';
    for (const lag of [0, 20, 40])
      // 0, 5 and 10 d
      expectWithin(product(lag), memory(lag * 0.25), {
        abs: (4 * 4 * Math.SQRT2) / Math.sqrt(180),
        unit: '1',
        why,
      });
  });
});

describe('a night at the telescope', () => {
  const [table] = make({ lightCurves: [NIGHT] });
  const times = numbersOf(table!, 'BJD_TDB');
  const flux = numbersOf(table!, 'flux');
  const sigma = numbersOf(table!, 'flux error');
  const airmass = numbersOf(table!, 'airmass');

  test('covers one whole transit after its date, within the airmass limit', () => {
    const cycle = Math.round((meanOf(times) - MID_TRANSIT) / PERIOD);
    const mid = MID_TRANSIT + cycle * PERIOD;
    expect(mid).toBeGreaterThan(NIGHT.afterBjdTdb);
    expect(flatFlux(times[0]!)).toBe(1);
    expect(flatFlux(times.at(-1)!)).toBe(1);
    expect(times[0]).toBeLessThan(mid);
    expect(times.at(-1)).toBeGreaterThan(mid);
    expect(Math.max(...airmass)).toBeLessThan(2.21);
    const dips = times.filter((time) => flatFlux(time) < 1).length;
    expect(dips).toBeGreaterThan(150);
  });

  test('scatters as its errors say once the trend with airmass is taken out', () => {
    const least = Math.min(...airmass);
    const pulls = times.map(
      (time, i) => (flux[i]! - flatFlux(time) * (1 - 0.02 * (airmass[i]! - least))) / sigma[i]!,
    );
    const n = pulls.length;
    const why = 'four standard errors';
    expectWithin(meanOf(pulls), 0, { abs: 4 / Math.sqrt(n), unit: '1', why });
    expectWithin(meanOf(pulls.map((pull) => pull * pull)), 1, { abs: 4 * Math.sqrt(2 / n), unit: '1', why });
  });

  test('errors grow as airmass^1.75', () => {
    for (let i = 0; i < sigma.length; i += 20)
      expectWithin(sigma[i]!, 1e-3 * airmass[i]! ** 1.75, { abs: 6e-6, unit: '1', why: 'printed to 1e-5' });
  });

  test('position and width of the image are told, and the trends follow them', () => {
    const [moved] = make({ lightCurves: [{ ...NIGHT, airmassTrend: 0, widthTrend: 0.01, noise: 1e-5 }] });
    const width = numbersOf(moved!, 'width');
    const found = numbersOf(moved!, 'flux');
    const rows = times.map((time, i) => ({ light: found[i]! / flatFlux(time), width: width[i]! }));
    const meanWidth = meanOf(width);
    const slope =
      rows.reduce((sum, row) => sum + (row.width - meanWidth) * row.light, 0) /
      rows.reduce((sum, row) => sum + (row.width - meanWidth) ** 2, 0);
    expectWithin(slope, 0.01, {
      rel: 0.01,
      unit: 'per pixel',
      why: 'widths are printed to 0.001 of about 4 pixels',
    });
    for (const label of ['x', 'y']) expect(new Set(numbersOf(moved!, label)).size).toBeGreaterThan(50);
  });

  test('a transit that cannot be followed is refused', () => {
    const south = plan({ lightCurves: [NIGHT] }, { target: { rightAscensionDeg: 330, declinationDeg: -80 } });
    expect(() => simulateObservations(south, 1)).toThrow(UsageError);
  });
});

describe('mid-times', () => {
  const [table] = make({ midTimes: [MID_TIMES] });
  const times = numbersOf(table!, 'BJD_TDB');
  const errors = numbersOf(table!, 'error (d)');
  const cycles = numbersOf(table!, 'cycle');

  test('scatter about the transits as their errors say, each transit once, cycles counted', () => {
    const first = Math.round((times[0]! - MID_TRANSIT) / PERIOD);
    const pulls = times.map((time, i) => (time - MID_TRANSIT - (first + cycles[i]!) * PERIOD) / errors[i]!);
    const n = pulls.length;
    const why = 'four standard errors';
    expectWithin(meanOf(pulls), 0, { abs: 4 / Math.sqrt(n), unit: '1', why });
    expectWithin(meanOf(pulls.map((pull) => pull * pull)), 1, { abs: 4 * Math.sqrt(2 / n), unit: '1', why });
    expect(cycles[0]).toBe(0);
    expect(new Set(cycles).size).toBe(300);
    expect([...times].sort((a, b) => a - b)).toEqual(times);
  });

  test('name their sources in cells that no comma or quote breaks', () => {
    const sources = new Set(columnsOf(table!).get('source'));
    expect(sources).toEqual(new Set(['the pier', 'the old red boat']));
  });

  test('more than there are transits are refused', () => {
    const few = { ...MID_TIMES, fromBjdTdb: 2460400 };
    expect(() => make({ midTimes: [few] })).toThrow(/only 31 transits/);
  });
});

describe('the plan', () => {
  test('the same seed gives the same bytes, another one other noise; tables do not depend on one another', () => {
    const all = make({ lightCurves: [SURVEY, NIGHT], midTimes: [MID_TIMES] }, 7);
    expect(make({ lightCurves: [SURVEY, NIGHT], midTimes: [MID_TIMES] }, 7)).toEqual(all);
    expect(make({ midTimes: [MID_TIMES] }, 7)[0]).toEqual(all[2]);
    expect(make({ lightCurves: [{ ...SURVEY, noise: 2e-4 }, NIGHT] }, 7)[1]).toEqual(all[1]);
    expect(make({ lightCurves: [SURVEY] }, 8)[0]!.text).not.toBe(all[0]!.text.replace('seed 7', 'seed 8'));
    expect(all.map(({ holds, rows }) => [holds, rows > 0])).toEqual([
      ['light curve', true],
      ['light curve', true],
      ['mid-times', true],
    ]);
  });

  test('an inclination does what its impact parameter does', () => {
    const axis = Math.cbrt((1.3271244e20 * (PERIOD * 86400) ** 2) / (4 * Math.PI ** 2)) / 6.957e8;
    const deg = (Math.acos(IMPACT / axis) * 180) / Math.PI;
    const tilted = plan({ lightCurves: [SURVEY] });
    const companions = tilted.companions.map((companion) => ({
      ...companion,
      transit: { radiusRatio: RATIO, path: { kind: 'inclination' as const, deg } },
    }));
    expect(simulateObservations({ ...tilted, companions }, 1)).toEqual(make({ lightCurves: [SURVEY] }));
  });

  test.each<[string, Partial<MockPhotometry>, RegExp]>([
    [
      'a band without limb darkening',
      { lightCurves: [{ ...SURVEY, band: 'blue' }] },
      /"blue" has no limb darkening/,
    ],
    ['no star', { lightCurves: [SURVEY], star: null }, /mass and the radius/],
    [
      'two tables of one name',
      { lightCurves: [SURVEY, { ...NIGHT, table: 'Survey.csv' }] },
      /already writes/,
    ],
    [
      'a folder in a name',
      { midTimes: [{ ...MID_TIMES, table: '../times.csv' }] },
      /cannot be the file name/,
    ],
    ['a companion that does not transit', { lightCurves: [{ ...NIGHT, companion: 3 }] }, /does not transit/],
    [
      'a gap that leaves nothing',
      { lightCurves: [{ ...SURVEY, gaps: [{ afterDays: 0, lengthDays: 50 }] }] },
      /leave nothing/,
    ],
  ])('%s is refused in words', (_, photometry, words) => {
    expect(() => make(photometry)).toThrow(UsageError);
    expect(() => make(photometry)).toThrow(words);
  });

  test('a companion that would touch its star is refused', () => {
    const giant = { star: { massSolar: 1, radiusSolar: 12 }, lightCurves: [SURVEY] };
    expect(() => make(giant)).toThrow(ModelDomainError);
    expect(() => make({ lightCurves: [{ ...SURVEY, exposureDays: 1 }] })).toThrow(ModelDomainError);
  });
});
