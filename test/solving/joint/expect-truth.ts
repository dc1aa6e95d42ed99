/** That a solution holds what was put in, and nothing that is not a number. */
import { expect } from 'vitest';
import type { CompanionRecord, Quantity, Solved } from '../../../src/solving/types.js';
import { expectWithin } from '../../support/expect-within.js';
import { B } from './invented-system.js';
import { orbitOf } from './simulate.js';

/** Within so many half widths of the middle of the interval: the reported point maximises the likelihood and may lie to one side. */
export function expectTruth(quantity: Quantity | undefined, truth: number, widths = 4): void {
  if (quantity === undefined || quantity.value === null || quantity.lower === null || quantity.upper === null)
    throw new Error(`no value: ${JSON.stringify(quantity)}`);
  const half = 0.5 * (quantity.upper - quantity.lower);
  expect(half).toBeGreaterThan(0);
  for (const place of [0.5 * (quantity.upper + quantity.lower), quantity.value])
    expect(Math.abs(truth - place), `${place} for ${truth}, half width ${half}`).toBeLessThan(widths * half);
}

export function expectOrbit({ elements }: CompanionRecord): void {
  expectTruth(elements.period, B.periodDays);
  const { value } = elements.timeOfInferiorConjunction;
  const cycles = Math.round((value! - B.conjunctionBjdTdb) / B.periodDays);
  expectTruth(elements.timeOfInferiorConjunction, B.conjunctionBjdTdb + cycles * B.periodDays);
}

export function expectShape({ elements }: CompanionRecord): void {
  expectTruth(elements.radiusRatio, B.radiusRatio);
  expectTruth(elements.scaledSemiMajorAxis, orbitOf(B).scaledSemiMajorAxis);
  expectTruth(elements.impactParameter, B.impactParameter);
}

/** Paths of numbers that JSON cannot hold. */
export function notFinite(value: unknown, path = 'record'): string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [path];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => notFinite(inner, `${path}.${key}`));
}

export function expectSound({ record, photometry }: Solved): void {
  expect(notFinite(record)).toEqual([]);
  expect(JSON.parse(JSON.stringify(record))).toEqual(JSON.parse(JSON.stringify(record)));
  expect(record.fit.status).toBe('converged');
  expect(record.fit.usable).toBe(true);
  // Noise is white and known: chi-square over its degrees of freedom is 1 within a few root(2/n).
  const freedom = record.fit.degreesOfFreedom;
  expectWithin(record.fit.chiSquare / freedom, 1, { abs: 4.5 * Math.sqrt(2 / freedom), unit: '1', why: 'white noise of known size' }); // prettier-ignore
  for (const curve of photometry!.fitted) {
    const n = curve.timesBjdTdb.length;
    for (const own of [curve.flux, curve.sigmas, curve.baseline, curve.transit]) {
      expect(own).toHaveLength(n);
      expect(own.every(Number.isFinite)).toBe(true);
    }
  }
}
