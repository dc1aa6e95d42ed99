import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import {
  coordinatesToElements,
  type RelativeElements,
} from '../../src/solving/parametrisations/parametrisation.js';
import { regularParametrisation } from '../../src/solving/parametrisations/regular.js';
import { expectWithin } from '../support/expect-within.js';
import { checkMap, coordinatesOf, near } from './orbit-coordinates.js';

const TWO_PI = 2 * Math.PI;

function expectSameOrbit(got: RelativeElements, want: RelativeElements): void {
  const [a, b] = [coordinatesOf(got), coordinatesOf(want)];
  [0, 2, 3, 4].forEach((j) => {
    expectWithin(a[j]!, b[j]!, near('a few roundings'));
  });
  expectWithin(Math.sin(0.5 * (a[1]! - b[1]!)), 0, near('the longitude, but for whole turns', 1e-9));
}

function randomElements(random: RandomStream, eccentricity: number): RelativeElements {
  const periodDays = Math.exp(random.uniformBetween(0, 7));
  return {
    periodDays,
    eccentricity,
    argPeriastronStarRad: random.uniformBetween(0, TWO_PI),
    timePeriastronDays: random.uniformBetween(-0.5, 0.5) * periodDays,
    semiAmplitudeMps: Math.exp(random.uniformBetween(0, 6)),
  };
}

describe('coordinatesToElements', () => {
  it('gives back the elements from which coordinates were made, passage nearest to the epoch', () => {
    const random = RandomStream.fromSeed(1);
    for (let turn = 0; turn < 400; turn++) {
      const elements = randomElements(random, turn % 7 === 0 ? 1e-6 : random.uniform() * 0.99);
      const got = coordinatesToElements(Float64Array.from([7, 7, ...coordinatesOf(elements)]), 2);
      expectSameOrbit(got, elements);
      expect(Math.abs(got.timePeriastronDays)).toBeLessThanOrEqual(0.5 * got.periodDays * (1 + 1e-12));
      expect(got.argPeriastronStarRad).toBeGreaterThanOrEqual(0);
      expect(got.argPeriastronStarRad).toBeLessThan(TWO_PI);
    }
  });

  it('turns a negative amplitude into the same velocities with a positive one', () => {
    for (const [k, h] of [
      [0.3, -0.2],
      [0, 0],
      [-0.6, 0.5],
    ] as const) {
      const got = coordinatesToElements(Float64Array.of(Math.log(30), 0.8, k, h, -12));
      expect(got.semiAmplitudeMps).toBe(12);
      const e = Math.hypot(k, h);
      // K -> -K, omega -> omega + 180 deg, same passage: -K [cos(nu + omega) + e cos omega] is unchanged.
      const omega = e > 0 ? Math.atan2(h, k) : Math.PI / 2;
      const passage = (-(0.8 - omega) * 30) / TWO_PI;
      const turns = (got.timePeriastronDays - passage) / 30 + (e > 0 ? 0 : 0.5);
      expectWithin(turns - Math.round(turns), 0, near('whole revolutions'));
      if (e > 0) expectWithin(Math.cos(got.argPeriastronStarRad - omega), -1, near('half a turn'));
      else expect(got.argPeriastronStarRad).toBe(Math.PI / 2);
    }
  });

  it('a circular orbit has its argument at 90 degrees, so that periastron is inferior conjunction', () => {
    const got = coordinatesToElements(Float64Array.of(Math.log(8), 0.3, 0, 0, 5));
    expect(got.eccentricity).toBe(0);
    expect(got.argPeriastronStarRad).toBe(Math.PI / 2);
    // At conjunction the star crosses zero velocity towards approach: longitude 90 degrees.
    expectWithin(0.3 + (TWO_PI * got.timePeriastronDays) / 8, Math.PI / 2, near('K cos(longitude) = 0'));
  });
});

describe('the regular parametrisation', () => {
  it('round trips elements, circular ones with three parameters', () => {
    const random = RandomStream.fromSeed(2);
    for (const circular of [false, true]) {
      const parametrisation = regularParametrisation(circular);
      expect(parametrisation.size).toBe(circular ? 3 : 5);
      const elements = randomElements(random, circular ? 0 : 0.4);
      const free = new Float64Array(9).fill(-7);
      parametrisation.fromElements(elements, free, 2);
      const coordinates = new Float64Array(5).fill(NaN);
      const jacobian = new Float64Array(5 * parametrisation.size).fill(NaN);
      expect(parametrisation.toCoordinates(free, 2, coordinates, jacobian)).toBe(true);
      expectSameOrbit(coordinatesToElements(coordinates), elements);
      expect(
        [...free.slice(0, 2), ...free.slice(2 + parametrisation.size)].every((value) => value === -7),
      ).toBe(true);
      checkMap(parametrisation, free.slice(2, 2 + parametrisation.size));
    }
  });
});
