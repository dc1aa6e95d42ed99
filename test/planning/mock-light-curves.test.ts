import { describe, expect, test } from 'vitest';
import { UsageError } from '../../src/errors.js';
import { simulateObservations } from '../../src/planning/mock.js';
import { expectWithin } from '../support/expect-within.js';
import {
  columnsOf,
  flatFlux,
  make,
  meanOf,
  MID_TRANSIT,
  NIGHT,
  numbersOf,
  PERIOD,
  plan,
  SURVEY,
} from './photometry-plan.js';

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
