/** The whole way, from observations to the record, on small invented sets of mostly one kind; uncertainties from the curvature. */
import { beforeAll, describe, expect, it } from 'vitest';
import { InputDataError } from '../../../src/errors.js';
import { epochOfAll } from '../../../src/solving/joint/solve-observations.js';
import type { Solved } from '../../../src/solving/types.js';
import { scatteredTimes } from '../helpers.js';
import { expectOrbit, expectShape, expectSound, expectTruth, notFinite } from './expect-truth.js';
import { B, midTimes, night, solve, STAR, stated, survey } from './invented-system.js';
import { seeded } from './recipes.js';
import { observed, orbitOf, STAR_DENSITY, START_BJD, velocitiesOf } from './simulate.js';

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
