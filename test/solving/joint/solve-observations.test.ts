/** The whole way, from observations to the record, on small invented sets; uncertainties from the curvature. */
import { beforeAll, describe, expect, it } from 'vitest';
import { InputDataError } from '../../../src/errors.js';
import type { LightCurveTable, Observations } from '../../../src/observations/photometry-types.js';
import type { Case, CompanionChoice, ElementChoice } from '../../../src/observations/types.js';
import { meanFromTrueAnomaly } from '../../../src/orbit/anomalies.js';
import { epochOfAll, solveObservations } from '../../../src/solving/joint/solve-observations.js';
import type { CompanionRecord, Quantity, Solved } from '../../../src/solving/types.js';
import { expectWithin } from '../../support/expect-within.js';
import { scatteredTimes } from '../helpers.js';
import { seeded } from './recipes.js';
import {
  cadence,
  caseOf,
  lightCurve,
  midTimeTable,
  observed,
  orbitOf,
  QUICK,
  STAR_DENSITY,
  START_BJD,
  velocitiesOf,
  type CurvePlan,
  type TrueCompanion,
} from './simulate.js';

const B: TrueCompanion = {
  periodDays: 3.31,
  conjunctionBjdTdb: START_BJD + 1.234,
  radiusRatio: 0.1,
  impactParameter: 0.35,
  semiAmplitudeMps: 60,
};
/** Mass and radius that mean the density of the invented star: 1.41 M/R^3 g/cm3. */
const STAR: Case['star'] = {
  massSolar: { value: 1, sigma: 0.04 },
  radiusSolar: { value: Math.cbrt(1.41 / STAR_DENSITY), sigma: 0.02 },
  effectiveTemperatureK: { value: 5700, sigma: 80 },
};
const HALF_HOUR = 1 / 48;

function survey(seed: number, more: Partial<CurvePlan> = {}): LightCurveTable {
  return lightCurve(seeded(seed), {
    name: 'survey',
    timesBjdTdb: cadence(START_BJD, START_BJD + 27, HALF_HOUR),
    exposureDays: HALF_HOUR,
    sigma: 4e-4,
    companions: [B],
    ...more,
  });
}

/** A night on transit `cycle`, through air that dims by 1 % per airmass. */
function night(seed: number, cycle: number, name: string, more: Partial<CurvePlan> = {}): LightCurveTable {
  const middle = B.conjunctionBjdTdb + cycle * B.periodDays;
  const airmass = (time: number): number => 1.1 + 12 * (time - middle + 0.05) ** 2;
  return lightCurve(seeded(seed), {
    name,
    band: 'R',
    timesBjdTdb: cadence(middle - 0.13, middle + 0.12, 2 / 1440),
    exposureDays: 1.5 / 1440,
    sigma: 1e-3,
    companions: [B],
    airmass,
    baseline: (time) => 1 + 0.01 * airmass(time) + 0.002 * (time - middle),
    ...more,
  });
}

function midTimes(seed: number, cycles: readonly number[]): ReturnType<typeof midTimeTable> {
  const random = seeded(seed);
  const sigma = 4e-4;
  return midTimeTable(
    cycles.map((cycle) => B.conjunctionBjdTdb + B.periodDays * cycle + sigma * random.normal()),
    sigma,
  );
}

function stated(elements: Partial<Record<string, ElementChoice>>): readonly CompanionChoice[] {
  return [{ letter: 'b', circular: 'auto', elements, inclinationDeg: null }];
}

const solve = (observations: Partial<Observations>, theCase: Partial<Case> = {}): Promise<Solved> =>
  solveObservations(caseOf({ star: STAR, ...theCase }), observed(observations), QUICK);

/** Within so many half widths of the middle of the interval: the reported point maximises the likelihood and may lie to one side. */
function expectTruth(quantity: Quantity | undefined, truth: number, widths = 4): void {
  if (quantity === undefined || quantity.value === null || quantity.lower === null || quantity.upper === null)
    throw new Error(`no value: ${JSON.stringify(quantity)}`);
  const half = 0.5 * (quantity.upper - quantity.lower);
  expect(half).toBeGreaterThan(0);
  for (const place of [0.5 * (quantity.upper + quantity.lower), quantity.value])
    expect(Math.abs(truth - place), `${place} for ${truth}, half width ${half}`).toBeLessThan(widths * half);
}

function expectOrbit({ elements }: CompanionRecord): void {
  expectTruth(elements.period, B.periodDays);
  const { value } = elements.timeOfInferiorConjunction;
  const cycles = Math.round((value! - B.conjunctionBjdTdb) / B.periodDays);
  expectTruth(elements.timeOfInferiorConjunction, B.conjunctionBjdTdb + cycles * B.periodDays);
}

function expectShape({ elements }: CompanionRecord): void {
  expectTruth(elements.radiusRatio, B.radiusRatio);
  expectTruth(elements.scaledSemiMajorAxis, orbitOf(B).scaledSemiMajorAxis);
  expectTruth(elements.impactParameter, B.impactParameter);
}

/** Paths of numbers that JSON cannot hold. */
function notFinite(value: unknown, path = 'record'): string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [path];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => notFinite(inner, `${path}.${key}`));
}

function expectSound({ record, photometry }: Solved): void {
  expect(notFinite(record)).toEqual([]);
  expect(JSON.parse(JSON.stringify(record))).toEqual(JSON.parse(JSON.stringify(record)));
  expect(record.fit.status).toBe('converged');
  expect(record.fit.usable).toBe(true);
  // Noise is white and known: chi-square over its degrees of freedom is 1 within a few root(2/n).
  const freedom = record.fit.degreesOfFreedom;
  expectWithin(record.fit.chiSquare / freedom, 1, { abs: 4.5 * Math.sqrt(2 / freedom), unit: '1', why: 'white noise of known size' }); // prettier-ignore
  for (const curve of photometry!.fitted) {
    const n = curve.timesBjdTdb.length;
    for (const own of [curve.flux, curve.sigmas, curve.baseline, curve.transit]) {
      expect(own).toHaveLength(n);
      expect(own.every(Number.isFinite)).toBe(true);
    }
  }
}

describe('a survey light curve alone', () => {
  let solved: Solved;
  beforeAll(async () => {
    solved = await solve({ lightCurves: [survey(1)] });
  });

  it('gives orbit, shape and density of the star within their errors, though exposures take half an hour', () => {
    expect(solved.record.companions).toHaveLength(1);
    const [b] = solved.record.companions;
    expectSound(solved);
    expectOrbit(b!);
    expectShape(b!);
    expectTruth(solved.record.photometry!.starDensity, STAR_DENSITY);
    expect(solved.record.photometry!.starDensityTension!).toBeLessThan(3);
    expect(solved.record.photometry!.detections[0]).toMatchObject({ letter: 'b', how: 'search', events: 8 });
  });

  it('says that nothing is known of its mass, and why', () => {
    const [b] = solved.record.companions;
    for (const quantity of [b!.elements.semiAmplitude, b!.derived.mass, b!.derived.minimumMass, b!.derived.meanDensity])
      expect(quantity).toMatchObject({ value: null, why: 'no velocities show its pull' });
    expect(solved.record.assumptions.join(' ')).toContain('circular');
  }); // prettier-ignore

  it('gives radius and duration of what was put in', () => {
    const [b] = solved.record.companions;
    // A solar radius is 9.73 of Jupiter's (IAU 2015 B3: 695 700 km and 71 492 km).
    expectTruth(b!.derived.radius, B.radiusRatio * STAR.radiusSolar!.value * (695_700 / 71_492));
    const { scaledSemiMajorAxis: axis } = orbitOf(B);
    const chord = Math.sqrt((1 + B.radiusRatio) ** 2 - B.impactParameter ** 2);
    const sinI = Math.sqrt(1 - (B.impactParameter / axis) ** 2);
    // Seager and Mallen-Ornelas 2003, ApJ 585, 1038, equation 3.
    expectTruth(b!.derived.totalDuration, (24 * B.periodDays * Math.asin(chord / (axis * sinI))) / Math.PI);
  });

  it('gives the same bytes twice', async () => {
    const again = await solve({ lightCurves: [survey(1)] });
    expect(JSON.stringify(again.record)).toBe(JSON.stringify(solved.record));
    expect(again.photometry).toEqual(solved.photometry);
  });

  it('contradicts a star that is given three times as dense', async () => {
    const radiusSolar = { value: STAR.radiusSolar!.value * Math.cbrt(1 / 4), sigma: 0.01 };
    const dense = await solve({ lightCurves: [survey(1)] }, { star: { ...STAR, radiusSolar } });
    expect(dense.record.photometry!.starDensityTension!).toBeGreaterThan(3);
    expect(dense.record.warnings.map(({ code }) => code)).toContain('star-density-contradicts');
    expect(solved.record.warnings.map(({ code }) => code)).not.toContain('star-density-contradicts');
  });
});

describe('velocities, a survey, a night in another band, and mid-times', () => {
  // Only every thirteenth transit was timed: the times alone could as well be those of 13 P.
  const everyThirteenth = midTimes(3, [-100, -87, -74, -61, -48, -35, -22, -9]);
  let solved: Solved;
  beforeAll(async () => {
    solved = await solve({
      velocities: velocitiesOf(seeded(5), [B], scatteredTimes(seeded(6), 20, 60), 3),
      lightCurves: [survey(1), night(2, 40, 'night')],
      midTimes: [everyThirteenth],
    });
  });

  it('are one companion, with everything known of it', () => {
    expect(solved.record.companions.map(({ letter }) => letter)).toEqual(['b']);
    const [b] = solved.record.companions;
    expectSound(solved);
    expectOrbit(b!);
    expectShape(b!);
    expectTruth(b!.elements.semiAmplitude, 60);
    for (const key of ['mass', 'minimumMass', 'radius', 'meanDensity', 'surfaceGravity', 'timeOfOccultation'] as const)
      expect(b!.derived[key]?.value, key).toBeGreaterThan(0);
  }); // prettier-ignore

  it('share one ephemeris: its period is far better than that of the survey alone', () => {
    // Mid-times of 4e-4 d over 91 cycles and a night at cycle 40: sigma(P) well below 4e-4/91.
    expect(solved.record.companions[0]!.elements.period.sigma!).toBeLessThan(4e-4 / 91);
    expect(solved.record.photometry!.midTimes).toMatchObject([{ letter: 'b', count: 8 }]);
    expect(solved.record.photometry!.midTimes[0]!.rms).toBeLessThan(2 * 4e-4 * 1440);
  });

  it('have limb darkening per band and a baseline per table', () => {
    const { bands, lightCurves, events } = solved.record.photometry!;
    expect(bands.map(({ name, prior }) => [name, prior])).toEqual([
      ['V', 'triangular'],
      ['R', 'triangular'],
    ]);
    expect(lightCurves.map(({ name, baseline }) => [name, baseline])).toEqual([
      ['survey', ['constant']],
      ['night', ['constant', 'airmass']],
    ]);
    const own = events.find(({ table }) => table === 'night')!;
    expect(Math.abs(own.oMinusC.value!)).toBeLessThan(4 * own.oMinusC.sigma!);
  });

  it('name all inputs', () => {
    expect(solved.record.provenance.inputs.map(({ path }) => path)).toEqual([
      'vellamo.csv',
      'survey.csv',
      'night.csv',
      'mid-times.csv',
    ]);
  });
});

describe('one night', () => {
  it('alone gives no period, and says why', async () => {
    const solved = await solve({ lightCurves: [night(2, 40, 'night')] });
    expectSound(solved);
    const [b] = solved.record.companions;
    expect(b!.elements.period).toMatchObject({ value: null, sigma: null });
    expect(b!.elements.period.why).toContain('one transit only');
    expect(b!.elements.period.lower!).toBeLessThan(B.periodDays);
    for (const quantity of [b!.elements.inclination, b!.elements.scaledSemiMajorAxis, b!.derived.semiMajorAxis, b!.derived.nextInferiorConjunction, b!.derived.equilibriumTemperature])
      expect(quantity).toMatchObject({ value: null });
    expect(solved.record.photometry!.starDensity.value).toBeNull();
    expectTruth(b!.elements.timeOfInferiorConjunction, B.conjunctionBjdTdb + 40 * B.periodDays);
    expectTruth(b!.elements.radiusRatio, B.radiusRatio);
    expect(solved.record.warnings.map(({ code }) => code)).toContain('period-unknown');
  }); // prettier-ignore

  it('takes a period from the case', async () => {
    const companions = stated({ period: { kind: 'prior', value: B.periodDays, sigma: 0.002 } });
    const solved = await solve({ lightCurves: [night(2, 40, 'night')] }, { companions });
    const [b] = solved.record.companions;
    expectSound(solved);
    expectTruth(b!.elements.period, B.periodDays);
    expectTruth(b!.elements.scaledSemiMajorAxis, orbitOf(B).scaledSemiMajorAxis);
    expect(solved.record.warnings.map(({ code }) => code)).not.toContain('period-unknown');
  });

  it('with velocities takes the period from them', async () => {
    const solved = await solve({
      velocities: velocitiesOf(seeded(5), [B], scatteredTimes(seeded(6), 20, 60), 3),
      lightCurves: [night(2, 4, 'night')],
    });
    const [b] = solved.record.companions;
    expectSound(solved);
    expect(solved.record.companions).toHaveLength(1);
    expectOrbit(b!);
    expectTruth(b!.elements.semiAmplitude, 60);
    expectTruth(b!.elements.radiusRatio, B.radiusRatio);
    expect(solved.record.photometry!.detections[0]).toMatchObject({ how: 'velocities', events: 1 });
  });

  it('has its airmass in the baseline: a transit would take it for its own', async () => {
    for (let seed = 40; seed < 43; seed++) {
      const { record } = await solve({ lightCurves: [night(seed, 4, 'night')] });
      expect(record.photometry!.lightCurves[0]!.baseline).toContain('airmass');
      expectTruth(record.companions[0]!.elements.radiusRatio, B.radiusRatio);
    }
  });

  it('keeps to the baseline that its table states', async () => {
    const settings = { baseline: ['time', 'airmass'] } as const;
    const { record } = await solve({ lightCurves: [night(41, 4, 'night', { settings })] });
    expect(record.photometry!.lightCurves[0]!.baseline).toEqual(['constant', 'time', 'airmass']);
  });
});

describe('nights with an ephemeris from the case', () => {
  it('are found though it is off by a good part of the duration', async () => {
    const companions = stated({
      period: { kind: 'prior', value: B.periodDays, sigma: 1e-3 },
      timeOfInferiorConjunction: { kind: 'prior', value: B.conjunctionBjdTdb + 0.05, sigma: 0.03 },
    });
    const solved = await solve({ lightCurves: [night(2, 0, 'first'), night(12, 3, 'second')] }, { companions });
    expectSound(solved);
    expectOrbit(solved.record.companions[0]!);
    expectTruth(solved.record.companions[0]!.elements.radiusRatio, B.radiusRatio);
    expect(solved.record.photometry!.detections[0]).toMatchObject({ how: 'case', events: 2 });
  }); // prettier-ignore
});

describe('mid-times alone', () => {
  it('give period and conjunction, and nothing else', async () => {
    const solved = await solve({ midTimes: [midTimes(3, [-100, -86, -73, -61, -48, -35, -22, -9])] });
    const [b] = solved.record.companions;
    expectSound(solved);
    expectOrbit(b!);
    expect(b!.elements.radiusRatio).toBeUndefined();
    expect(b!.elements.semiAmplitude.value).toBeNull();
    expect(solved.record.photometry!.lightCurves).toEqual([]);
  });

  it('that are one only stop with what to do', async () => {
    await expect(solve({ midTimes: [midTimes(3, [4])] })).rejects.toThrow(InputDataError);
  });
});

describe('an eccentric orbit', () => {
  it('is told by velocities, transits and the phase of occultations together', async () => {
    const shape = { eccentricity: 0.25, argPeriastronStarRad: 0.6 };
    const truth = { ...B, ...shape };
    const random = seeded(77);
    // From transit to occultation, in periods: difference of the mean anomalies at true anomalies -90 deg - omega and 90 deg - omega.
    const turns = (meanFromTrueAnomaly(-Math.PI / 2 - 0.6, 0.25) - meanFromTrueAnomaly(Math.PI / 2 - 0.6, 0.25)) / (2 * Math.PI);
    const lag = turns - Math.floor(turns);
    const cycles = [30, 41, 52, 63, 74, 85, 32, 41, 50, 59, 68];
    const isOccultation = Uint8Array.from(cycles, (_, i) => (i < 6 ? 0 : 1));
    const times = cycles.map(
      (cycle, i) => truth.conjunctionBjdTdb + truth.periodDays * (cycle + lag * isOccultation[i]!) + 4e-4 * random.normal(),
    );
    const solved = await solve(
      {
        velocities: velocitiesOf(seeded(15), [truth], scatteredTimes(seeded(16), 25, 60), 3),
        lightCurves: [survey(33, { companions: [truth] })],
        midTimes: [midTimeTable(times, 4e-4, { isOccultation })],
      },
      // Light time across the orbit is not in these times.
      { star: { massSolar: null, radiusSolar: null, effectiveTemperatureK: null } },
    );
    const [b] = solved.record.companions;
    expectSound(solved);
    expect(b!.circular).toBe(false);
    expectOrbit(b!);
    expectTruth(b!.elements.eccentricity, 0.25);
    expectTruth(b!.elements.argumentOfPeriastron, (0.6 * 180) / Math.PI);
    expectTruth(b!.elements.semiAmplitude, 60);
    expectTruth(b!.elements.radiusRatio, B.radiusRatio);
    // sigma(e cos omega) = (pi/2) sigma(lag)/P: far below what velocities alone give (Winn 2010, equation 33).
    const e = b!.elements.eccentricity.value!;
    const omega = (b!.elements.argumentOfPeriastron.value! * Math.PI) / 180;
    expectWithin(e * Math.cos(omega), 0.25 * Math.cos(0.6), { abs: 1.5e-3, unit: '1', why: 'four errors of 4e-4 d/root(5) pi/(2 P), 3e-4, and second order' });
  }); // prettier-ignore
});

describe('a light curve without transits', () => {
  it('is no solution, and says so', async () => {
    const { record } = await solve({ lightCurves: [survey(7, { companions: [] })] });
    expect(record.companions).toEqual([]);
    expect(record.fit.usable).toBe(false);
    expect(record.warnings.map(({ code }) => code)).toContain('no-transit-found');
    expect(notFinite(record)).toEqual([]);
  });

  it('beside velocities leaves their solution', async () => {
    const velocities = velocitiesOf(seeded(5), [B], scatteredTimes(seeded(6), 20, 60), 3);
    const { record } = await solve({ velocities, lightCurves: [survey(7, { companions: [] })] });
    expectTruth(record.companions[0]!.elements.semiAmplitude, 60);
    expect(record.fit.usable).toBe(true);
    expect(record.warnings.map(({ code }) => code)).toContain('no-transit-found');
  });
});

describe('a transiting companion that pulls too little', () => {
  it('does not hide the one that the velocities show, and its own pull is bounded', async () => {
    const giant = { ...B, periodDays: 11.7, semiAmplitudeMps: 40 };
    const { record } = await solve({
      velocities: velocitiesOf(seeded(9), [giant], scatteredTimes(seeded(10), 30, 90), 3),
      lightCurves: [survey(1)],
    });
    const b = record.companions.find(({ letter }) => letter === 'b')!;
    const c = record.companions.find(({ letter }) => letter === 'c')!;
    expectOrbit(b);
    expectTruth(c.elements.period, 11.7);
    expectTruth(c.elements.semiAmplitude, 40);
    // A pull of b that the velocities exclude: errors of 3 m/s, 30 of them, 0.8 m/s on a semi-amplitude.
    expect(b.elements.semiAmplitude.upper!).toBeLessThan(4);
    expect(b.derived.mass.value).not.toBeUndefined();
    expect(c.elements.radiusRatio).toBeUndefined();
    expect(notFinite(record)).toEqual([]);
  });
});

describe('the epoch of a solution', () => {
  it('is in the middle of everything where there are no velocities', () => {
    const table = survey(1);
    expect(epochOfAll(observed({ lightCurves: [table] }))).toBe(START_BJD + 13.5);
    expect(() => epochOfAll(observed({ midTimes: [midTimes(3, [0, 10])] }))).not.toThrow();
  });

  it('is asked for in vain where there is nothing', async () => {
    await expect(solve({})).rejects.toThrow(InputDataError);
  });
});
