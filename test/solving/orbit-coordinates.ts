/** Orbit coordinates by their definition, and derivatives of a parametrisation against difference quotients. */
import { expect } from 'vitest';
import type {
  Parametrisation,
  RelativeElements,
} from '../../src/solving/parametrisations/parametrisation.js';
import { expectWithin } from '../support/expect-within.js';

const TWO_PI = 2 * Math.PI;

/** Coordinates by their definition. */
export function coordinatesOf(elements: RelativeElements): number[] {
  const { periodDays, eccentricity: e, argPeriastronStarRad: omega } = elements;
  return [
    Math.log(periodDays),
    omega - (TWO_PI * elements.timePeriastronDays) / periodDays,
    e * Math.cos(omega),
    e * Math.sin(omega),
    elements.semiAmplitudeMps,
  ];
}

export const near = (why: string, abs = 1e-10): { abs: number; unit: string; why: string } => ({
  abs,
  unit: '1',
  why,
});

/** The map's Jacobian and the prior rows against central differences with one extrapolation. */
export function checkMap(parametrisation: Parametrisation, free: Float64Array): void {
  const { size, priorCount } = parametrisation;
  const jacobian = new Float64Array(5 * size).fill(NaN);
  const rowJacobian = new Float64Array(priorCount * size).fill(NaN);
  expect(parametrisation.toCoordinates(free, 0, new Float64Array(5), jacobian)).toBe(true);
  parametrisation.priors(free, 0, new Float64Array(priorCount), rowJacobian);
  const at = (moved: Float64Array): Float64Array => {
    const coordinates = new Float64Array(5);
    expect(parametrisation.toCoordinates(moved, 0, coordinates, null)).toBe(true);
    const rows = new Float64Array(priorCount);
    parametrisation.priors(moved, 0, rows, null);
    return Float64Array.from([...coordinates, ...rows]);
  };
  for (let j = 0; j < size; j++) {
    const central = (h: number): Float64Array => {
      const [above, below] = [1, -1].map((sign) =>
        at(free.map((value, k) => (k === j ? value + sign * h : value))),
      );
      return above!.map((value, i) => (value - below![i]!) / (2 * h));
    };
    const [coarse, fine] = [central(2e-4), central(1e-4)];
    fine.forEach((value, i) => {
      const want = (4 * value - coarse[i]!) / 3;
      const got = i < 5 ? jacobian[i * size + j]! : rowJacobian[(i - 5) * size + j]!;
      expectWithin(got, want, {
        abs: 3e-8 * (1 + Math.abs(want)),
        unit: '1',
        why: 'rounding of longitudes of up to 1e4 rad over a step of 1e-4',
      });
    });
  }
}
