import { describe, expect, it } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import type { ElementChoice, ElementName } from '../../src/observations/types.js';
import {
  coordinatesToElements,
  type RelativeElements,
} from '../../src/solving/parametrisations/parametrisation.js';
import { statedParametrisation } from '../../src/solving/parametrisations/stated.js';
import { expectWithin } from '../support/expect-within.js';
import { checkMap, coordinatesOf, near } from './orbit-coordinates.js';

const EPOCH = 2459000.5;
const TWO_PI = 2 * Math.PI;

/** Inferior conjunction by bisection of the true anomaly, written out here: nu(t) + omega = 90 deg. */
function conjunctionAfterPeriastron(e: number, omega: number, periodDays: number): number {
  const wanted = (((Math.PI / 2 - omega) % TWO_PI) + TWO_PI) % TWO_PI;
  let [low, high] = [0, TWO_PI];
  for (let step = 0; step < 80; step++) {
    const middle = 0.5 * (low + high);
    const nu =
      2 * Math.atan2(Math.sqrt(1 + e) * Math.sin(middle / 2), Math.sqrt(1 - e) * Math.cos(middle / 2));
    if ((nu + TWO_PI) % TWO_PI > wanted) high = middle;
    else low = middle;
  }
  return ((low - e * Math.sin(low)) / TWO_PI) * periodDays;
}

const ELEMENTS: RelativeElements = {
  periodDays: 41.7,
  eccentricity: 0.37,
  argPeriastronStarRad: 2.2,
  timePeriastronDays: 11.3,
  semiAmplitudeMps: 23,
};
const DELAY = conjunctionAfterPeriastron(0.37, 2.2, 41.7);

/** What a case may say of each element (in the units of a case) so that ELEMENTS is inside it. */
function choices(name: ElementName): readonly (ElementChoice | undefined)[] {
  const value = {
    period: 41.7,
    eccentricity: 0.37,
    argumentOfPeriastron: (2.2 * 180) / Math.PI,
    timeOfPeriastron: EPOCH + 11.3,
    timeOfInferiorConjunction: EPOCH + 11.3 + DELAY,
    semiAmplitude: 23,
  }[name];
  return [
    undefined,
    { kind: 'fixed', value },
    {
      kind: 'range',
      low: 0.9 * value - (name.startsWith('time') ? -0.1 * value + 2 : 0),
      high: name.startsWith('time') ? value + 3 : 1.2 * value,
    },
    { kind: 'prior', value: value + 0.01, sigma: 0.2 },
  ];
}

describe('the stated parametrisation', () => {
  for (const timeName of ['timeOfPeriastron', 'timeOfInferiorConjunction'] as const) {
    it(`${timeName}: every combination of free, fixed, range and prior reproduces the orbit, with the right derivatives`, () => {
      let combinations = 0;
      const names: ElementName[] = [
        'period',
        'eccentricity',
        'argumentOfPeriastron',
        timeName,
        'semiAmplitude',
      ];
      const walk = (index: number, picked: Partial<Record<ElementName, ElementChoice>>): void => {
        if (index < names.length) {
          for (const choice of choices(names[index]!)) {
            walk(index + 1, choice === undefined ? picked : { ...picked, [names[index]!]: choice });
          }
          return;
        }
        combinations++;
        const parametrisation = statedParametrisation(picked, false, EPOCH);
        const kinds = Object.values(picked).map(({ kind }) => kind);
        expect(parametrisation.size).toBe(5 - kinds.filter((kind) => kind === 'fixed').length);
        expect(parametrisation.priorCount).toBe(kinds.filter((kind) => kind === 'prior').length);
        const free = new Float64Array(parametrisation.size);
        parametrisation.fromElements(ELEMENTS, free, 0);
        const coordinates = new Float64Array(5);
        expect(parametrisation.toCoordinates(free, 0, coordinates, null)).toBe(true);
        const got = coordinatesToElements(coordinates);
        const [a, b] = [coordinatesOf(got), coordinatesOf(ELEMENTS)];
        [0, 2, 3, 4].forEach((j) => {
          expectWithin(a[j]!, b[j]!, near('a few roundings, logistic maps', 1e-9));
        });
        expectWithin(Math.sin(0.5 * (a[1]! - b[1]!)), 0, near('dates of 2.46e6 d', 1e-8));
        checkMap(parametrisation, free);
      };
      walk(0, {});
      expect(combinations).toBe(4 ** 5);
    });
  }

  it('prior rows are (value - centre)/sigma in the units of the case; an angle is compared round the circle', () => {
    const parametrisation = statedParametrisation(
      {
        period: { kind: 'prior', value: 40, sigma: 0.5 },
        argumentOfPeriastron: { kind: 'prior', value: 355, sigma: 10 },
        timeOfInferiorConjunction: { kind: 'prior', value: EPOCH + 3, sigma: 0.25 },
        semiAmplitude: { kind: 'prior', value: 20, sigma: 4 },
      },
      false,
      EPOCH,
    );
    const free = new Float64Array(parametrisation.size);
    parametrisation.fromElements({ ...ELEMENTS, argPeriastronStarRad: (10 * Math.PI) / 180 }, free, 0);
    const rows = new Float64Array(parametrisation.priorCount);
    parametrisation.priors(free, 0, rows, null);
    const delay = conjunctionAfterPeriastron(0.37, (10 * Math.PI) / 180, 41.7);
    const off = 11.3 + delay - 3;
    const want = [3.4, 1.5, (off - 41.7 * Math.round(off / 41.7)) / 0.25, 0.75];
    rows.forEach((row, r) => {
      expectWithin(row, want[r]!, near('a few roundings', 1e-8));
    });
  });

  it('circular: three parameters, conjunction and periastron are one', () => {
    for (const name of ['timeOfPeriastron', 'timeOfInferiorConjunction'] as const) {
      const parametrisation = statedParametrisation(
        { [name]: { kind: 'fixed', value: EPOCH + 4 } },
        true,
        EPOCH,
      );
      expect(parametrisation.size).toBe(2);
      const free = new Float64Array(2);
      parametrisation.fromElements(
        { ...ELEMENTS, eccentricity: 0, argPeriastronStarRad: Math.PI / 2 },
        free,
        0,
      );
      const coordinates = new Float64Array(5);
      parametrisation.toCoordinates(free, 0, coordinates, null);
      const got = coordinatesToElements(coordinates);
      expect(got.eccentricity).toBe(0);
      expectWithin(got.timePeriastronDays, 4, near('the stated date', 1e-9));
    }
  });

  it('keeps to a range, however far the parameter goes', () => {
    const parametrisation = statedParametrisation(
      { eccentricity: { kind: 'range', low: 0.2, high: 0.4 } },
      false,
      EPOCH,
    );
    const free = new Float64Array(5);
    parametrisation.fromElements({ ...ELEMENTS, eccentricity: 0.9 }, free, 0);
    const coordinates = new Float64Array(5);
    for (const shift of [0, -50, 50]) {
      const moved = free.map((value, j) => (j === 1 ? value + shift : value));
      expect(parametrisation.toCoordinates(moved, 0, coordinates, null)).toBe(true);
      const e = Math.hypot(coordinates[2]!, coordinates[3]!);
      expect(e).toBeGreaterThanOrEqual(0.2 - 1e-12);
      expect(e).toBeLessThanOrEqual(0.4 + 1e-12);
    }
  });

  it('refuses two times of one companion', () => {
    const both = {
      timeOfPeriastron: { kind: 'fixed', value: EPOCH },
      timeOfInferiorConjunction: { kind: 'fixed', value: EPOCH },
    } as const;
    expect(() => statedParametrisation(both, false, EPOCH)).toThrow(ModelDomainError);
  });
});
