import { describe, expect, test } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import { observableWindows } from '../../src/planning/observing-nights.js';
import type { SkyPlan } from '../../src/planning/observing-nights.js';
import { expectWithin } from '../support/expect-within.js';
import astropySky from './reference/astropy-sky.json' with { type: 'json' };

const { twilightDeg, maximumAirmass } = astropySky;

function plan(changes: Partial<SkyPlan> = {}): SkyPlan {
  return {
    site: { name: 'Aallokko Point', latitudeDeg: 38.2, longitudeEastDeg: -12.4, elevationM: 310 },
    target: { rightAscensionDeg: 318.4, declinationDeg: 17.6 },
    twilightDeg: -15,
    maximumAirmass: 1.8,
    ...changes,
  };
}

describe('windows of a night', () => {
  test.each(astropySky.nights)(
    'agree with astropy: $site.name from JD $noonJdUtc (reference/astropy-sky.json)',
    ({ site, target, noonJdUtc, windowsBjdTdb }) => {
      const wanted = Math.round(noonJdUtc + site.longitudeEastDeg / 360);
      const nights = observableWindows(
        { site, target, twilightDeg, maximumAirmass },
        noonJdUtc - 2,
        noonJdUtc + 3,
      );
      const windows = nights.find(({ night }) => night === wanted)?.windows ?? [];
      expect(windows).toHaveLength(windowsBjdTdb.length);
      for (const [index, [start, end]] of windowsBjdTdb.entries()) {
        const bound = {
          abs: 20 / 86400,
          unit: 'd',
          why: 'measured 6 s; 0.01 deg of altitude at a slant, and the clock to 10 s',
        };
        expectWithin(windows[index]!.startBjdTdb, start!, bound);
        expectWithin(windows[index]!.endBjdTdb, end!, bound);
      }
    },
  );

  test('there are nights with no, one and two windows among those compared', () => {
    const counts = new Set(astropySky.nights.map(({ windowsBjdTdb }) => windowsBjdTdb.length));
    expect([...counts].sort()).toEqual([0, 1, 2]);
  });

  test('the best moment is inside its window; seasons come and go with the Sun', () => {
    const nights = observableWindows(plan(), 2459905.5, 2459905.5 + 365);
    for (const { windows } of nights)
      for (const window of windows) {
        expect(window.endBjdTdb).toBeGreaterThan(window.startBjdTdb);
        expect(window.bestBjdTdb).toBeGreaterThanOrEqual(window.startBjdTdb);
        expect(window.bestBjdTdb).toBeLessThanOrEqual(window.endBjdTdb);
      }
    const gaps = nights.slice(1).map(({ night }, index) => night - nights[index]!.night);
    // the Sun passes the target's right ascension early in February, when no window is left for weeks
    expect(gaps.filter((gap) => gap > 1)).toHaveLength(1);
    expect(Math.max(...gaps)).toBeGreaterThan(45);
  });

  test('at 60 deg north it never gets dark about midsummer', () => {
    const site = { name: 'far north', latitudeDeg: 60, longitudeEastDeg: 20, elevationM: 0 };
    const around = (jd: number): number =>
      observableWindows(plan({ site, twilightDeg: -12 }), jd, jd + 10).length;
    expect(around(2458651.5)).toBe(0); // 2019 June 17
    expect(around(2458721.5)).toBeGreaterThan(8); // 2019 August 26
  });

  test('a target that never rises has no night, one that never sets in the polar night is open all day', () => {
    const south = { rightAscensionDeg: 10, declinationDeg: -80 };
    expect(observableWindows(plan({ target: south }), 2459000.5, 2459365.5)).toEqual([]);
    const site = { name: 'polar', latitudeDeg: 89, longitudeEastDeg: 0, elevationM: 0 };
    const target = { rightAscensionDeg: 10, declinationDeg: 85 };
    const nights = observableWindows(plan({ site, target }), 2459204.5, 2459207.5); // 2020 December 21 to 24
    const open = nights
      .flatMap(({ windows }) => windows)
      .reduce((sum, w) => sum + w.endBjdTdb - w.startBjdTdb, 0);
    expectWithin(open, 3, { abs: 1e-3, unit: 'd', why: 'consecutive nights meet to a few seconds' });
  });

  test('windows are cut at the given dates', () => {
    const [whole] = observableWindows(plan(), 2460200, 2460201)[0]!.windows;
    const middle = (whole!.startBjdTdb + whole!.endBjdTdb) / 2;
    const [first] = observableWindows(plan(), 2460200, middle)[0]!.windows;
    const [second] = observableWindows(plan(), middle, 2460201)[0]!.windows;
    expect(first!.endBjdTdb).toBe(middle);
    expect(second!.startBjdTdb).toBe(middle);
    expect(first!.startBjdTdb).toBe(whole!.startBjdTdb);
  });

  test('impossible dates are refused', () => {
    expect(() => observableWindows(plan(), 2460000, 2459999)).toThrow(ModelDomainError);
    expect(() => observableWindows(plan(), NaN, 2459999)).toThrow(ModelDomainError);
    expect(() => observableWindows(plan(), 2460000, Infinity)).toThrow(ModelDomainError);
  });
});
