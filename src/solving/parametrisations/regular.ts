/** The coordinates themselves as parameters: regular at e = 0. With `circular`, k and h stay 0. */
import type { Parametrisation, RelativeElements } from './parametrisation.js';

const ECCENTRIC = [0, 1, 2, 3, 4] as const;
const CIRCULAR = [0, 1, 4] as const;

export function regularParametrisation(circular: boolean): Parametrisation {
  const used: readonly number[] = circular ? CIRCULAR : ECCENTRIC;
  return {
    size: used.length,
    circular,
    coordinateOf: used,
    priorCount: 0,
    toCoordinates(free, offset, coordinates, jacobian): boolean {
      coordinates.fill(0);
      for (let j = 0; j < used.length; j++) coordinates[used[j]!] = free[offset + j]!;
      if (jacobian !== null) {
        jacobian.fill(0);
        for (let j = 0; j < used.length; j++) jacobian[used[j]! * used.length + j] = 1;
      }
      return true;
    },
    priors(): void {
      // No priors: the coordinates are free.
    },
    logSlopes: () => 0,
    fromElements(elements: RelativeElements, free: Float64Array, offset: number): void {
      const { periodDays, eccentricity: e, argPeriastronStarRad: omega } = elements;
      const longitude = omega - (2 * Math.PI * elements.timePeriastronDays) / periodDays;
      const all = [
        Math.log(periodDays),
        longitude,
        e * Math.cos(omega),
        e * Math.sin(omega),
        elements.semiAmplitudeMps,
      ];
      for (let j = 0; j < used.length; j++) free[offset + j] = all[used[j]!]!;
    },
  };
}
