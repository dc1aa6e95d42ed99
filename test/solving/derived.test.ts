import { describe, expect, it } from 'vitest';
import type { Case } from '../../src/observations/types.js';
import { RandomStream } from '../../src/numerics/random.js';
import { deriveAll, derivedLack, derivedUnit, type StarDraw } from '../../src/solving/derived.js';
import type { ElementValues } from '../../src/solving/elements-report.js';
import { centralInterval } from '../../src/solving/quantities.js';
import { solveCase } from '../../src/solving/solve-case.js';
import { DERIVED_KEYS, type DerivedKey } from '../../src/solving/types.js';
import published from '../orbit/published-orbits.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated } from './helpers.js';

const SUN: StarDraw = { massSolar: 1, radiusSolar: 1, effectiveTemperatureK: 5772, inclinationDeg: null };

function elementsOf(change: Partial<ElementValues>): ElementValues {
  return {
    period: 365.25,
    eccentricity: 0,
    argumentOfPeriastron: 90,
    timeOfPeriastron: 10,
    timeOfInferiorConjunction: 10,
    semiAmplitude: 1,
    ...change,
  };
}

function derive(
  elements: Partial<ElementValues>,
  star: StarDraw,
  lastObservationDays = 0,
): Record<DerivedKey, number> {
  const values = deriveAll({ elements: elementsOf(elements), star, lastObservationDays }, DERIVED_KEYS);
  return Object.fromEntries(DERIVED_KEYS.map((key, k) => [key, values[k]!])) as Record<DerivedKey, number>;
}

const computed = (unit: string): { rel: number; unit: string; why: string } => ({
  rel: 1e-12,
  unit,
  why: 'closed form, a few roundings',
});

describe('derived quantities', () => {
  it('published orbits: minimum mass, axis, periastron and apastron (published-orbits.json names each paper)', () => {
    for (const orbit of published.orbits) {
      const got = derive(
        {
          period: orbit.periodDays,
          eccentricity: orbit.eccentricity,
          semiAmplitude: orbit.semiAmplitudeMps,
          argumentOfPeriastron: 30,
        },
        { ...SUN, massSolar: orbit.starMassSolar, radiusSolar: null },
      );
      expectWithin(got.minimumMass, orbit.exactMassJupiter, computed('M_jup'));
      expectWithin(got.minimumMass, orbit.publishedMassJupiter, {
        abs: orbit.publishedMassSigma,
        unit: 'M_jup',
        why: 'published uncertainty',
      });
      expectWithin(got.semiMajorAxis, orbit.semiMajorAxisAu, computed('au'));
      expectWithin(got.periastronDistance, orbit.periastronAu, computed('au'));
      expectWithin(got.apastronDistance, orbit.apastronAu, computed('au'));
      // Vis-viva with the total mass: r_peri v_peri = r_apo v_apo.
      expectWithin(
        got.periastronSpeed * got.periastronDistance,
        got.apastronSpeed * got.apastronDistance,
        computed('km/s au'),
      );
      expect(got.transitProbability).toBeNaN();
    }
  });

  it('the Earth: 278.33 K at zero albedo, irradiation 1, 1 au, speeds of 29.8 km/s, 8.95 cm/s', () => {
    // T sqrt(R/2a) with the nominal 5772 K and 695 700 km at 149 597 870.7 km.
    const got = derive({ semiAmplitude: 0.0894703 }, SUN);
    expectWithin(got.equilibriumTemperature, 5772 * Math.sqrt(695_700 / (2 * 149_597_870.7)), {
      rel: 3e-5,
      unit: 'K',
      why: '365.25 d is not exactly the Gaussian year',
    });
    expectWithin(got.equilibriumTemperature, 278.33, { abs: 0.02, unit: 'K', why: 'the same, rounded' });
    expectWithin(got.irradiation, 1, { abs: 5e-4, unit: 'S_earth', why: 'nominal 1361 W/m^2 is rounded' });
    expectWithin(got.minimumMass * 317.83, 1, {
      rel: 1e-3,
      unit: 'M_earth',
      why: 'K of the Earth (test/orbit/published-orbits.json), 317.83 Earths in Jupiter',
    });
    expectWithin(got.periastronSpeed, 29.785, {
      abs: 0.002,
      unit: 'km/s',
      why: '2 pi au per sidereal year of 365.256 d',
    });
    // Hill radius a (m/3M)^(1/3): 0.01 au.
    expectWithin(got.hillRadius, Math.cbrt(got.minimumMass / (3 * 1047.57)), {
      rel: 1e-4,
      unit: 'au',
      why: '1047.57 nominal Jupiters in the Sun',
    });
    // Radius of the star over the axis, times 1 + 1 R_jup/R_sun for any contact.
    const ratio = 71_492 / 695_700;
    expectWithin(got.transitDepth, 1e6 * ratio ** 2, {
      rel: 1e-6,
      unit: 'ppm',
      why: 'square of the ratio of nominal radii',
    });
    expect(got.transitProbability / (695_700 / 149_597_870.7)).toBeGreaterThan(0.999);
    expect(got.transitProbability / (695_700 / 149_597_870.7)).toBeLessThan(1 + 1.01 * ratio);
  });

  it('HD 209458 b: 1449 K at zero albedo (Torres et al. 2008, remembered: 1449 +- 12 K)', () => {
    // a/R = 8.76 and 6065 K as printed; P 3.52474859 d, M 1.119, R 1.155, so that a/R follows from the star.
    const got = derive(
      { period: 3.52474859, semiAmplitude: 84.67 },
      { massSolar: 1.119, radiusSolar: 1.155, effectiveTemperatureK: 6065, inclinationDeg: 86.71 },
    );
    expectWithin(got.equilibriumTemperature, 1449, { abs: 12, unit: 'K', why: 'published uncertainty' });
    expectWithin(got.mass * Math.sin((86.71 * Math.PI) / 180), got.minimumMass, {
      rel: 1e-3,
      unit: 'M_jup',
      why: 'm sin i, but for m/M in the cubic',
    });
  });

  it('next passages are the first after the last observation, whichever passage is reported', () => {
    for (const last of [-20, 0, 9.999, 10, 10.001, 47, 730.5, 1e5]) {
      const { nextInferiorConjunction, nextPeriastron } = derive(
        { period: 37, timeOfInferiorConjunction: 10, timeOfPeriastron: -3 },
        SUN,
        last,
      );
      for (const [next, from] of [
        [nextInferiorConjunction, 10],
        [nextPeriastron, -3],
      ] as const) {
        const turns = (next - from) / 37;
        expectWithin(turns - Math.round(turns), 0, { abs: 1e-9, unit: 'revolutions', why: 'the same orbit' });
        expect(next).toBeGreaterThan(last);
        expect(next - last).toBeLessThanOrEqual(37 + 1e-9);
      }
    }
  });

  it('every key has a unit or is a pure number, and says what it lacks', () => {
    const nothing: StarDraw = {
      massSolar: null,
      radiusSolar: null,
      effectiveTemperatureK: null,
      inclinationDeg: null,
    };
    const known = DERIVED_KEYS.filter((key) => derivedLack(key, nothing) === null);
    expect(known).toEqual([
      'starOrbitSemiMajorAxis',
      'massFunction',
      'nextInferiorConjunction',
      'nextPeriastron',
      'astrometricSignature',
    ]);
    const got = derive({}, nothing);
    for (const key of DERIVED_KEYS) {
      expect(Number.isNaN(got[key])).toBe(!known.includes(key));
      if (key !== 'transitProbability') expect(derivedUnit(key)).not.toBe('');
    }
    expect(derivedLack('equilibriumTemperature', nothing)).toMatch(/mass.*radius.*temperature/);
  });

  it('an orbit inside its star has no transit and breaks nothing', () => {
    const got = derive({ period: 0.1, eccentricity: 0.3 }, { ...SUN, radiusSolar: 5 });
    for (const key of DERIVED_KEYS) expect(got[key]).not.toBe(Infinity);
    expect(got.massFunction).toBeGreaterThan(0);
  });
});

describe('uncertainties by draws', () => {
  it('equal linear propagation when errors are small: minimum mass and axis from P, K, e and star mass', () => {
    const random = RandomStream.fromSeed(71);
    const set = simulated(random, {
      times: scatteredTimes(random, 120, 900),
      companions: [{ periodDays: 61, eccentricity: 0.3, argPeriastronStarRad: 1, timePeriastronBjdTdb: 2459010, semiAmplitudeMps: 60 }],
      sigmaMps: 1,
    }); // prettier-ignore
    const theCase: Case = {
      ...BARE_CASE,
      star: { massSolar: { value: 1.1, sigma: 0.02 }, radiusSolar: null, effectiveTemperatureK: null },
    };
    const { record } = solveCase(theCase, set, OPTIONS);
    const { elements, derived } = record.companions[0]!;
    const { names, matrix } = record.fit.covariance;
    const letter = record.companions[0]!.letter;
    const at = (name: string): number => names.indexOf(`companions.${letter}.${name}`);
    const covariance = (a: string, b: string): number => matrix[at(a)]![at(b)]!;
    const [p, e, k] = [elements.period.value!, elements.eccentricity.value!, elements.semiAmplitude.value!];
    // m sin i ~ K sqrt(1 - e^2) P^(1/3) M^(2/3) for a light companion: relative derivatives.
    const byName: Record<string, number> = {
      period: 1 / (3 * p),
      eccentricity: -e / (1 - e * e),
      semiAmplitude: 1 / k,
    };
    let variance = ((2 / 3) * (0.02 / 1.1)) ** 2;
    for (const a of Object.keys(byName))
      for (const b of Object.keys(byName)) variance += byName[a]! * byName[b]! * covariance(a, b);
    const limit = {
      rel: 0.05,
      unit: '1',
      why: '4000 draws: a standard deviation to 1.1 %, drawn star masses likewise',
    };
    expectWithin(derived.minimumMass.sigma! / derived.minimumMass.value!, Math.sqrt(variance), limit);
    expectWithin(derived.semiMajorAxis.sigma! / derived.semiMajorAxis.value!, 0.02 / 1.1 / 3, limit);
    // The Gaussian interval: half its width is sigma.
    expectWithin((derived.minimumMass.upper! - derived.minimumMass.lower!) / 2, derived.minimumMass.sigma!, {
      rel: 0.06,
      unit: 'M_jup',
      why: 'quantiles of 4000 draws',
    });
    for (const key of ['period', 'semiAmplitude', 'eccentricity'] as const) {
      expectWithin(elements[key].sigma!, Math.sqrt(covariance(key, key)), {
        rel: 0.06,
        unit: key,
        why: 'draws against linear propagation',
      });
    }
  });
});

describe('the next passage', () => {
  it('is one and the same for all draws when the last observation falls on a conjunction', () => {
    const random = RandomStream.fromSeed(73);
    const orbit = {
      periodDays: 40,
      eccentricity: 0,
      argPeriastronStarRad: Math.PI / 2,
      timePeriastronBjdTdb: 2459000.5,
      semiAmplitudeMps: 20,
    };
    const set = simulated(random, {
      times: scatteredTimes(random, 60, 400),
      companions: [orbit],
      sigmaMps: 3,
    });
    expect(set.timesBjdTdb.at(-1)).toBe(2459000.5 + 10 * 40);
    const { derived, elements } = solveCase({ ...BARE_CASE, circular: true, drift: 'none' }, set, OPTIONS)
      .record.companions[0]!;
    const next = derived.nextInferiorConjunction;
    expect(next.value).toBeGreaterThan(2459400.5);
    expect(next.value).toBeLessThan(2459400.5 + 41);
    // Five or six revolutions from the middle of the data: sigma^2 = sigma_t^2 + n^2 sigma_P^2 at most.
    expect(next.sigma).toBeLessThan(
      1.1 * Math.hypot(elements.timeOfInferiorConjunction.sigma!, 6 * elements.period.sigma!),
    );
    expect(next.sigma).toBeGreaterThan(elements.timeOfInferiorConjunction.sigma!);
  });
});

describe('centralInterval', () => {
  it('holds the central 68.3 % of the draws', () => {
    const draws = Float64Array.from({ length: 10001 }, (_, i) => (7919 * i) % 10001);
    const got = centralInterval(5000, draws, 'm/s');
    // Standard normal distribution function at -1 and +1: 0.158655, 0.841345.
    expectWithin(got.lower!, 1586.55, { abs: 1.1, unit: 'm/s', why: 'one draw' });
    expectWithin(got.upper!, 8413.45, { abs: 1.1, unit: 'm/s', why: 'one draw' });
    expectWithin(got.sigma!, 10001 / Math.sqrt(12), { rel: 1e-3, unit: 'm/s', why: 'uniform draws' });
  });

  it('follows an angle through the full circle', () => {
    const random = RandomStream.fromSeed(72);
    const draws = Float64Array.from({ length: 5000 }, () => (360 + 2 + 8 * random.normal()) % 360);
    const got = centralInterval(2, draws, 'deg', 360);
    expectWithin(got.sigma!, 8, { rel: 0.05, unit: 'deg', why: 'standard error of 1 % of 5000 draws' });
    expectWithin(got.lower!, -6, { abs: 0.6, unit: 'deg', why: 'quantile of 5000 draws' });
    expectWithin(got.upper!, 10, { abs: 0.6, unit: 'deg', why: 'quantile of 5000 draws' });
  });

  it('leaves out what is not a number, and says when there is nothing to go by', () => {
    const half = Float64Array.from({ length: 1000 }, (_, i) => (i % 2 === 0 ? NaN : i));
    expectWithin(centralInterval(500, half, 'd').sigma!, 1000 / Math.sqrt(12), {
      rel: 0.01,
      unit: 'd',
      why: 'uniform draws',
    });
    const few = centralInterval(5, new Float64Array(20), 'd');
    expect(few).toMatchObject({ value: 5, sigma: null, lower: null, upper: null });
    expect(few.why).not.toBe('');
    expect(centralInterval(NaN, new Float64Array(500), 'd')).toMatchObject({ value: null, unit: 'd' });
  });
});
