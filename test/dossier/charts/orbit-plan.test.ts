import { describe, expect, it } from 'vitest';
import { planOrbit, planOrbits, SECTOR_COUNT, squareView } from '../../../src/dossier/charts/orbit-plan.js';
import { evaluateVelocity } from '../../../src/signals/evaluate-velocity.js';
import { expectWithin } from '../../support/expect-within.js';
import { highlyEccentric, threeCompanions } from '../../support/solved-cases.js';

const orbitOf = (eccentricity: number, argPeriastronStarRad: number): Parameters<typeof planOrbit>[0] => ({
  periodDays: 100,
  eccentricity,
  argPeriastronStarRad,
  timePeriastronBjdTdb: 2_459_000,
  semiAmplitudeMps: 30,
});

/** Area of a polygon by the shoelace formula, positive when it runs counterclockwise. */
function area(points: readonly { readonly x: number; readonly y: number }[]): number {
  return points.reduce((sum, p, i) => {
    const q = points[(i + 1) % points.length]!;
    return sum + (p.x * q.y - q.x * p.y) / 2;
  }, 0);
}

describe.each([0, 0.2, 0.6, 0.93])('an orbit of eccentricity %f', (e) => {
  it.each([0.3, 1.9, 4.4])('seen with omega = %f rad', (omega) => {
    const a = 2.5;
    const plan = planOrbit(orbitOf(e, omega), 'b', a, e === 0);
    const b = a * Math.sqrt(1 - e * e);

    // Kepler's second law: each of the equal times sweeps the same part of pi a b.
    expect(plan.sectors).toHaveLength(SECTOR_COUNT);
    for (const sector of plan.sectors) {
      expectWithin(area(sector), (Math.PI * a * b) / SECTOR_COUNT, {
        rel: 0.002,
        unit: 'area',
        why: 'a polygon of 40 sides inside an arc; measured 0.06 % at e = 0.93',
      });
    }

    // Kepler's first law: distances from both foci add up to 2 a, the star at one of them (the origin).
    const [px, py] = [plan.periastron.x, plan.periastron.y];
    const far = e === 0 ? 0 : (-2 * a * e) / Math.hypot(px, py);
    for (const { x, y } of plan.path) {
      expectWithin(Math.hypot(x, y) + Math.hypot(x - px * far, y - py * far), 2 * a, {
        rel: 1e-12,
        unit: 'a',
        why: 'rounding',
      });
    }
    expectWithin(Math.hypot(px, py), a * (1 - e), { rel: 1e-12, unit: 'a', why: 'rounding' });

    // Inferior conjunction: companion between the star and the observer, who is towards negative y.
    expectWithin(plan.inferiorConjunction.x, 0, { abs: 1e-12, unit: 'a', why: 'rounding' });
    expect(plan.inferiorConjunction.y).toBeLessThan(0);
  });
});

it('moves away from the observer as the velocities say: the star recedes when the companion approaches', () => {
  const omega = 0.8;
  const e = 0.4;
  const orbit = orbitOf(e, omega);
  const { path } = planOrbit(orbit, 'b', 1, false);
  const n = path.length - 1;
  const time = (i: number): number => {
    const E = (2 * Math.PI * i) / n;
    return orbit.timePeriastronBjdTdb + ((E - e * Math.sin(E)) * orbit.periodDays) / (2 * Math.PI);
  };
  const best = {
    companions: [orbit],
    letters: ['b'],
    zeroPointsMps: new Float64Array(0),
    jittersMps: new Float64Array(0),
    epochBjdTdb: 2_459_000,
    slopeMpsPerDay: 0,
    curvatureMpsPerDay2: 0,
  };
  // The star mirrors the companion about the barycentre, so its velocity is proportional to -dy/dt of the companion,
  // with K = (n a / sqrt(1 - e^2)) for a relative orbit of a = 1 scaled to the given semi-amplitude.
  const scale = (30 * Math.sqrt(1 - e * e) * orbit.periodDays) / (2 * Math.PI);
  for (let i = 1; i < n; i += 7) {
    const rate = (path[i + 1]!.y - path[i - 1]!.y) / (time(i + 1) - time(i - 1));
    const velocity = evaluateVelocity(best, Float64Array.of((time(i + 1) + time(i - 1)) / 2))[0]!;
    expectWithin(-scale * rate, velocity, {
      abs: 0.02,
      unit: 'm/s',
      why: 'difference quotient over 2 degrees of 30 m/s; measured 0.0034',
    });
  }
});

it('scales several orbits by Kepler III when sizes in au are unknown', () => {
  const solved = threeCompanions();
  const unknown = {
    ...solved,
    record: { ...solved.record, companions: highlyEccentric().record.companions },
  };
  const plan = planOrbits(unknown, 2);
  expect(plan.unit).toBe('semi-major axes of d');
  const [b, , d] = plan.orbits;
  // a^3 / P^2 is one number for all companions of one star (Kepler's third law, light companions).
  const periods = solved.best.companions.map((one) => one.periodDays);
  expectWithin(b!.semiMajorAxis ** 3 / periods[0]! ** 2, d!.semiMajorAxis ** 3 / periods[2]! ** 2, {
    rel: 1e-12,
    unit: 'a^3/d^2',
    why: 'rounding',
  });
  expect(planOrbits(solved, 2).unit).toBe('au');
});

it('squareView is a square that holds every point', () => {
  const { orbits } = planOrbits(threeCompanions(), 2);
  const view = squareView(orbits);
  expectWithin(view.x.max - view.x.min, view.y.max - view.y.min, { rel: 1e-12, unit: 'au', why: 'rounding' });
  for (const { x, y } of orbits.flatMap((one) => one.path)) {
    expect(x > view.x.min && x < view.x.max && y > view.y.min && y < view.y.max).toBe(true);
  }
});
