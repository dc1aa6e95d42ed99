import { describe, expect, it } from 'vitest';
import { solveKepler } from '../../src/orbit/kepler.js';
import { PATH_COORDINATES, ProjectedOrbit } from '../../src/orbit/projected-orbit.js';
import reference from '../reference/transit/path.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

type Coordinates = [number, number, number, number, number, number];

function placed(coordinates: Coordinates, light: number, timeDays: number): ProjectedOrbit {
  const orbit = new ProjectedOrbit();
  expect(orbit.prepare(...coordinates, light)).toBe(true);
  const advance = orbit.rate * timeDays;
  const anomaly = solveKepler(orbit.longitude + advance - orbit.omega, orbit.eccentricity);
  orbit.place(Math.sin(anomaly), Math.cos(anomaly), advance, true);
  return orbit;
}

describe('separation on the sky against 50-digit elements', () => {
  it.each(reference.cases.map((one) => [one.name, one] as const))('%s', (_, one) => {
    for (const row of one.rows) {
      const [t, z, inFront, ...derivatives] = row as [number, number, boolean, ...number[]];
      const orbit = placed(one.coordinates as Coordinates, one.starRadiusLightDays, t);
      // A time of 600 d is 1100 rad of mean longitude: its rounding is 1e-13 rad, and z changes by up to 100 per rad.
      const rounding = Math.abs(t) > 100 ? 2e-11 : 5e-13;
      expectWithin(orbit.separation, z, { rel: rounding, unit: 'R_star', why: 'rounding of the longitude' });
      expect(orbit.inFront).toBe(inFront);
      for (let i = 0; i < PATH_COORDINATES; i++)
        expectWithin(orbit.halfGradient[i]! / orbit.separation, derivatives[i]!, {
          abs: 20 * rounding * (10 + Math.abs(derivatives[i]!)),
          unit: 'R_star',
          why: `by ${reference.coordinates[i]!} at t = ${t}; 50-digit quotient`,
        });
    }
  });
});

describe('the path by eccentric longitude', () => {
  const orbit = new ProjectedOrbit();
  const coordinates: Coordinates = [1.2, 0.7, 0.3 * Math.cos(1.1), 0.3 * Math.sin(1.1), 0.6, 2.1];

  it('meets the path by time', () => {
    for (const light of [0, 1e-4]) {
      for (let place = -3; place < 3; place += 0.31) {
        expect(orbit.prepare(...coordinates, light)).toBe(true);
        orbit.placeAt(place);
        const { separation, inFront } = orbit;
        const timeDays = (orbit.observedLongitude(place) - orbit.longitude) / orbit.rate;
        const byTime = placed(coordinates, light, timeDays);
        expectWithin(byTime.separation, separation, { rel: 1e-12, unit: 'R_star', why: 'rounding' });
        expect(byTime.inFront).toBe(inFront);
      }
    }
  });

  it('slope and bend are the derivatives of z^2 / 2', () => {
    expect(orbit.prepare(...coordinates, 0)).toBe(true);
    const halfSquare = (place: number): number => {
      orbit.placeAt(place);
      return 0.5 * orbit.separation ** 2;
    };
    for (let place = -3; place < 3; place += 0.31) {
      const [h, at] = [1e-3, halfSquare(place)];
      orbit.placeAt(place);
      const { slope, bend } = orbit;
      const why = 'central difference, h^2 times the fourth derivative';
      expectWithin(slope, (halfSquare(place + h) - halfSquare(place - h)) / (2 * h), {
        abs: 1e-4,
        unit: '1',
        why,
      });
      expectWithin(bend, (halfSquare(place + h) - 2 * at + halfSquare(place - h)) / (h * h), {
        abs: 1e-4,
        unit: '1',
        why,
      });
    }
  });

  it('finds where a reach is attained, in front and behind', () => {
    for (const [e, omega] of [
      [0, 0],
      [0.5, 2.2],
      [0.7, -1.6],
    ] as const) {
      expect(orbit.prepare(1, 0, e * Math.cos(omega), e * Math.sin(omega), 0, Math.log(9), 0)).toBe(true);
      for (const reach of [-1.1, 0, 0.4, 1.1]) {
        for (const front of [true, false]) {
          orbit.placeAt(orbit.longitudeAtReach(reach, front));
          expectWithin(orbit.separation, Math.abs(reach), {
            abs: 2e-14,
            unit: 'R_star',
            why: 'rounding at rho = 9',
          });
          expect(orbit.inFront).toBe(front);
        }
      }
    }
  });
});

describe('domain', () => {
  const good: Coordinates = [1, 0, 0.1, 0.1, 0.3, 2];
  const changed = (index: number, value: number): boolean => {
    const moved: Coordinates = [...good];
    moved[index] = value;
    return new ProjectedOrbit().prepare(...moved, 0);
  };

  it('is said by the result', () => {
    expect(new ProjectedOrbit().prepare(...good, 0)).toBe(true);
    expect(new ProjectedOrbit().prepare(...good, -1e-5)).toBe(false);
    expect(new ProjectedOrbit().prepare(...good, NaN)).toBe(false);
    expect(new ProjectedOrbit().prepare(...good, 10)).toBe(false);
    for (let index = 0; index < PATH_COORDINATES; index++) {
      expect(changed(index, NaN)).toBe(false);
      expect(changed(index, Infinity)).toBe(false);
    }
    expect(changed(2, 1)).toBe(false);
    expect(changed(4, 8)).toBe(false);
    expect(changed(4, -8)).toBe(false);
    expect(changed(5, 0)).toBe(false);
  });
});
