/** The whole way, from velocities, light curves and mid-times together to the record, on small invented sets. */
import { beforeAll, describe, expect, it } from 'vitest';
import { meanFromTrueAnomaly } from '../../../src/orbit/anomalies.js';
import type { Solved } from '../../../src/solving/types.js';
import { expectWithin } from '../../support/expect-within.js';
import { scatteredTimes } from '../helpers.js';
import { expectOrbit, expectShape, expectSound, expectTruth, notFinite } from './expect-truth.js';
import { B, midTimes, night, solve, survey } from './invented-system.js';
import { seeded } from './recipes.js';
import { midTimeTable, velocitiesOf } from './simulate.js';

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
