import { expect, it } from 'vitest';
import { ModelDomainError } from '../../../src/errors.js';
import { relativisticPrecessionRadPerDay } from '../../../src/orbit/interaction/relativity.js';
import { expectWithin } from '../../support/expect-within.js';

it('gives the 42.98 arcsec a century of Mercury (e.g. Misner, Thorne & Wheeler 1973, Gravitation)', () => {
  const arcsecPerCentury =
    (relativisticPrecessionRadPerDay(87.9691, 0.20563, 1) * 36525 * 180 * 3600) / Math.PI;
  expectWithin(arcsecPerCentury, 42.98, { abs: 0.005, unit: 'arcsec', why: 'digits published' });
  expectWithin(arcsecPerCentury, 42.98066393319129, {
    rel: 1e-9,
    unit: 'arcsec',
    why: 'same constants, computed outside',
  });
});

it('refuses unbound orbits', () => {
  expect(() => relativisticPrecessionRadPerDay(10, 1, 1)).toThrow(ModelDomainError);
  expect(() => relativisticPrecessionRadPerDay(0, 0, 1)).toThrow(ModelDomainError);
});
