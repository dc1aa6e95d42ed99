/** One invented signal, and what every record must keep to however poor the data. */
import { expect } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { OrbitElements } from '../../src/orbit/elements.js';
import type { Quantity, Solved } from '../../src/solving/types.js';
import { scatteredTimes, simulated } from './helpers.js';

export const ORBIT: OrbitElements = { periodDays: 43, eccentricity: 0.3, argPeriastronStarRad: 1.2, timePeriastronBjdTdb: 2459020, semiAmplitudeMps: 25 }; // prettier-ignore

export const oneSignal = (
  seed: number,
  count = 40,
  orbit: OrbitElements = ORBIT,
): ReturnType<typeof simulated> => {
  const random = RandomStream.fromSeed(seed);
  return simulated(random, { times: scatteredTimes(random, count, 400), companions: [orbit], sigmaMps: 2 });
};

export const codes = (solved: Solved): string[] => solved.record.warnings.map(({ code }) => code);

/** No NaN or infinity anywhere in a record; every unknown says why. */
export function expectHonest(solved: Solved): void {
  const walk = (value: unknown, path: string): void => {
    if (typeof value === 'number') {
      if (!Number.isFinite(value)) throw new Error(`${path} is ${value}`);
    } else if (Array.isArray(value)) {
      value.forEach((item, i) => {
        walk(item, `${path}[${i}]`);
      });
    } else if (value !== null && typeof value === 'object') {
      if ('unit' in value && 'sigma' in value) {
        const quantity = value as Quantity;
        if (quantity.value === null || (quantity.sigma === null && quantity.fixed !== true)) {
          if ((quantity.why ?? '') === '') throw new Error(`${path} has no why: ${JSON.stringify(quantity)}`);
        }
        if (quantity.lower !== null) {
          expect(quantity.lower).toBeLessThanOrEqual(quantity.upper!);
          expect(quantity.sigma).toBeGreaterThan(0);
        }
      }
      for (const [key, item] of Object.entries(value)) walk(item, `${path}.${key}`);
    }
  };
  walk(solved.record, 'record');
  expect(JSON.parse(JSON.stringify(solved.record))).toEqual(solved.record);
}
