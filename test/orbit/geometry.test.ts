import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import {
  apastronDistanceAu,
  apastronSpeedKmps,
  areaSwept,
  AU_M,
  bodiesAboutBarycentre,
  equalTimeSectors,
  focusDistanceAu,
  GM_SUN_M3_S2,
  periastronDistanceAu,
  periastronSpeedKmps,
  positionAtTrueAnomaly,
  positionInOrbit,
  relativeSemiMajorAxisAu,
  SECONDS_PER_DAY,
  semiMinorAxisAu,
  solveKepler,
  speedAtDistanceKmps,
  timeBetweenDays,
  timeFromPeriastronDays,
  trueAnomalyAfterPeriastron,
  TWO_PI,
} from '../../src/orbit/index.js';
import { expectWithin } from '../support/expect-within.js';

const ECCENTRICITIES = [0, 0.05, 0.3, 0.7, 0.95, 0.999];

describe("Kepler's first law", () => {
  it('distances to the two foci add up to 2 a all around, and one focus is the origin', () => {
    for (const e of ECCENTRICITIES) {
      const otherFocus = -2 * focusDistanceAu(1, e);
      for (let i = 0; i < 48; i++) {
        const { x, y } = positionInOrbit((TWO_PI * i) / 48, e);
        const sum = Math.hypot(x, y) + Math.hypot(x - otherFocus, y);
        expectWithin(sum, 2, { abs: 2e-15, unit: 'a', why: 'a few roundings' });
      }
      expectWithin(positionInOrbit(0, e).x, periastronDistanceAu(1, e), {
        abs: 1e-16,
        unit: 'a',
        why: 'definition',
      });
      expectWithin(positionInOrbit(Math.PI, e).x, -apastronDistanceAu(1, e), {
        abs: 5e-16,
        unit: 'a',
        why: 'roundings',
      });
      expectWithin(positionInOrbit(Math.PI / 2, e).y, semiMinorAxisAu(1, e), {
        abs: 2e-16,
        unit: 'a',
        why: 'definition',
      });
      // Pythagoras in the triangle centre, focus, end of the minor axis.
      expectWithin(Math.hypot(semiMinorAxisAu(3, e), focusDistanceAu(3, e)), 3, {
        abs: 1e-15,
        unit: 'a',
        why: 'roundings',
      });
    }
  });

  it('a true anomaly points where it says', () => {
    for (const e of ECCENTRICITIES) {
      for (const nu of [-3, -1.2, 0, 0.4, 2.9]) {
        const { x, y } = positionAtTrueAnomaly(nu, e);
        expectWithin(Math.atan2(y, x), nu, {
          abs: 1e-13,
          unit: 'rad',
          why: 'stretch of up to 45 at e = 0.999',
        });
        expectWithin(Math.hypot(x, y), (1 - e * e) / (1 + e * Math.cos(nu)), {
          rel: 1e-13,
          unit: 'a',
          why: 'as above',
        });
      }
    }
  });

  it('both bodies go around the barycentre, which stays between them', () => {
    const { star, companion } = bodiesAboutBarycentre(1.1, 0.4, 0.9, 0.3);
    const relative = positionInOrbit(1.1, 0.4);
    const bound = { abs: 1e-15, unit: 'a', why: 'roundings' };
    expectWithin(0.9 * star.x + 0.3 * companion.x, 0, bound);
    expectWithin(0.9 * star.y + 0.3 * companion.y, 0, bound);
    expectWithin(companion.x - star.x, relative.x, bound);
    expectWithin(companion.y - star.y, relative.y, bound);
  });
});

describe("Kepler's second law", () => {
  /** Area of the sector seen from the focus, from thin triangles of the path itself. */
  function pathArea(e: number, fromE: number, toE: number): number {
    const steps = 3000;
    let area = 0;
    let last = positionInOrbit(fromE, e);
    for (let i = 1; i <= steps; i++) {
      const point = positionInOrbit(fromE + ((toE - fromE) * i) / steps, e);
      area += 0.5 * (last.x * point.y - last.y * point.x);
      last = point;
    }
    return area;
  }

  it('sectors of equal time have equal areas, measured on the path', () => {
    for (const e of ECCENTRICITIES) {
      const bounds = equalTimeSectors(e, 7);
      expect(bounds).toHaveLength(8);
      expect([bounds[0], bounds[7]]).toEqual([0, TWO_PI]);
      const whole = Math.PI * semiMinorAxisAu(1, e);
      for (let i = 0; i < 7; i++) {
        expect(bounds[i + 1]!).toBeGreaterThan(bounds[i]!);
        expectWithin(pathArea(e, bounds[i]!, bounds[i + 1]!), whole / 7, {
          rel: 2e-5,
          unit: 'a^2',
          why: 'triangles cut the corners: (0.002 rad)^2 / 6, more where E is much of the sector',
        });
      }
    }
    expect(() => equalTimeSectors(0.1, 0)).toThrow(ModelDomainError);
    expect(() => equalTimeSectors(0.1, 2.5)).toThrow(ModelDomainError);
  });

  it('time and area between true anomalies are integrals of r^2, with no use of the equation', () => {
    for (const e of [0, 0.05, 0.3, 0.7, 0.95]) {
      for (const [from, to] of [
        [0, 1],
        [-2, 2.5],
        [1, 7],
        [2.9, 3.4],
      ] as const) {
        const steps = 20_000;
        const h = (to - from) / steps;
        const square = (nu: number): number => ((1 - e * e) / (1 + e * Math.cos(nu))) ** 2;
        let area = 0;
        for (let i = 0; i < steps; i++) {
          const nu = from + i * h;
          area += (h / 12) * (square(nu) + 4 * square(nu + h / 2) + square(nu + h)); // Simpson, half r^2
        }
        const bound = { rel: 1e-9, why: 'Simpson with 20000 steps' };
        expectWithin(areaSwept(from, to, e), area, { ...bound, unit: 'a^2' });
        const share = area / (Math.PI * Math.sqrt(1 - e * e));
        expectWithin(timeBetweenDays(from, to, 40, e), 40 * share, { ...bound, unit: 'd' });
      }
    }
  });

  it('time from periastron and back, whole periods counted', () => {
    for (const e of ECCENTRICITIES) {
      for (const days of [-75.5, -3, 0, 1e-6, 10, 20, 39, 123]) {
        const nu = trueAnomalyAfterPeriastron(days, 40, e);
        expectWithin(timeFromPeriastronDays(nu, 40, e), days, {
          abs: 1e-12,
          unit: 'd',
          why: 'roundings of angles up to 20 rad',
        });
      }
    }
  });
});

describe("Kepler's third law", () => {
  // Mean elements at J2000 (Standish, JPL, "Keplerian elements for approximate positions of the major planets",
  // fit 1800-2050): a (au), mean longitude rate (deg per century); inverse masses of IAU 1976. All remembered.
  const planets = [
    { name: 'Mercury', axisAu: 0.38709927, degPerCentury: 149472.67411175, inverseMass: 6023600 },
    { name: 'Venus', axisAu: 0.72333566, degPerCentury: 58517.81538729, inverseMass: 408523.71 },
    { name: 'Earth and Moon', axisAu: 1.00000261, degPerCentury: 35999.37244981, inverseMass: 328900.56 },
    { name: 'Mars', axisAu: 1.52371034, degPerCentury: 19140.30268499, inverseMass: 3098708 },
    { name: 'Jupiter', axisAu: 5.202887, degPerCentury: 3034.74612775, inverseMass: 1047.3486 },
    { name: 'Saturn', axisAu: 9.53667594, degPerCentury: 1222.49362201, inverseMass: 3497.898 },
    { name: 'Uranus', axisAu: 19.18916464, degPerCentury: 428.48202785, inverseMass: 22902.98 },
    { name: 'Neptune', axisAu: 30.06992276, degPerCentury: 218.45945325, inverseMass: 19412.24 },
  ];
  const periodOf = (planet: { degPerCentury: number }): number => (360 * 36525) / planet.degPerCentury;

  it('a^3 / P^2 / (M + m) is one number from Mercury to Neptune', () => {
    for (const planet of planets) {
      const axisAu = relativeSemiMajorAxisAu(1 + 1 / planet.inverseMass, periodOf(planet));
      expectWithin((planet.axisAu / axisAu) ** 3, 1, {
        abs: planet.axisAu < 6 ? 1e-4 : 1.3e-3,
        unit: '1',
        why: 'mean elements carry the pull of the other planets; beyond Jupiter its mass adds up to 1e-3 to that of the Sun',
      });
    }
  });

  it("needs the planet's own mass: without it Jupiter misses by nine parts in ten thousand", () => {
    const jupiter = planets[4]!;
    const massless = relativeSemiMajorAxisAu(1, periodOf(jupiter));
    expectWithin((jupiter.axisAu / massless) ** 3 - 1, 1 / 1047.35, {
      rel: 0.1,
      unit: '1',
      why: 'pull of Saturn',
    });
  });
});

describe('speeds', () => {
  it('are the change of place, and obey energy (vis-viva with G M)', () => {
    const [periodDays, totalSolar] = [365.25, 1.3];
    const axisAu = relativeSemiMajorAxisAu(totalSolar, periodDays);
    for (const e of [0, 0.3, 0.7, 0.95]) {
      for (const mean of [0, 0.02, 1, 2.5, Math.PI]) {
        const place = (m: number) => positionInOrbit(solveKepler(m, e), e);
        const step = 1e-5 * (1 - e) ** 1.5;
        const [before, after] = [place(mean - step), place(mean + step)];
        const auPerRad = (Math.hypot(after.x - before.x, after.y - before.y) / (2 * step)) * axisAu;
        const kmps = (auPerRad * TWO_PI * AU_M) / (periodDays * SECONDS_PER_DAY) / 1000;
        const here = place(mean);
        const distanceAu = axisAu * Math.hypot(here.x, here.y);
        const got = speedAtDistanceKmps(axisAu, periodDays, distanceAu);
        expectWithin(got, kmps, { rel: 1e-8, unit: 'km/s', why: 'difference quotient' });
        const energy = GM_SUN_M3_S2 * totalSolar * (2 / (distanceAu * AU_M) - 1 / (axisAu * AU_M));
        expectWithin(got, Math.sqrt(energy) / 1000, { rel: 1e-12, unit: 'km/s', why: 'roundings' });
      }
      const ends = [
        [periastronSpeedKmps(axisAu, periodDays, e), periastronDistanceAu(axisAu, e)],
        [apastronSpeedKmps(axisAu, periodDays, e), apastronDistanceAu(axisAu, e)],
      ] as const;
      for (const [speed, distanceAu] of ends) {
        const want = speedAtDistanceKmps(axisAu, periodDays, distanceAu);
        expectWithin(speed, want, { rel: 1e-13, unit: 'km/s', why: 'roundings, 1 - e cancels' });
      }
    }
    expect(() => speedAtDistanceKmps(1, 365, 2.1)).toThrow(ModelDomainError);
    expect(() => speedAtDistanceKmps(1, 365, 0)).toThrow(ModelDomainError);
  });

  it('are 30.29 and 29.29 km/s for the Earth at its apsides (NASA Earth fact sheet, remembered)', () => {
    const bound = { abs: 0.01, unit: 'km/s', why: 'printed to 0.01' };
    expectWithin(periastronSpeedKmps(1, 365.256, 0.0167), 30.29, bound);
    expectWithin(apastronSpeedKmps(1, 365.256, 0.0167), 29.29, bound);
  });
});
