import { describe, expect, it } from 'vitest';
import { LIGHT_CURVE_PARTIALS } from '../../../src/signals/transit/light-curve-kernel.js';
import { expectWithin } from '../../support/expect-within.js';
import {
  conjunctionTime,
  everywhere,
  grid,
  model,
  moved,
  NAMES,
  type Model,
  type Setting,
} from './light-curve-models.js';

describe('partial derivatives agree with difference quotients', () => {
  const settings: readonly (readonly [string, Model, Omit<Setting, 'times'>])[] = [
    ['circular', model(0, 0), {}],
    ['eccentric', model(0.3, 1), {}],
    ['eccentric, light time', model(0.3, 1), { light: 1e-4 }],
    ['apastron in front, grazing', model(0.5, 4.4, { b: 0.95 }), {}],
    ['large companion', model(0.1, 2, { ratio: 1.4, axis: 12 }), {}],
    ['circular, exposures of 30 min, light time', model(0, 0), { exposure: 0.0208, light: 3e-5 }],
    ['eccentric, exposures of 30 min', model(0.6, 4), { exposure: 0.0208 }],
  ];

  it.each(settings)('%s', (_, one, setting) => {
    const times = grid(-3.05, 3.05, 700);
    const got = everywhere(one, { ...setting, times });
    const outside = (shift: number): boolean[] => {
      const touched = everywhere(one, { ...setting, times: times.map((t) => t + shift) }).loss;
      return Array.from(touched, (value) => value === 0);
    };
    // Within 1e-4 d of a contact a quotient of an instantaneous loss is no derivative: those points are left out.
    const [before, after] = [outside(-1e-4), outside(1e-4)];
    let compared = 0;
    for (let which = 0; which < LIGHT_CURVE_PARTIALS; which++) {
      const step = which === 0 ? 1e-6 : 1e-5;
      const [above, below] = [step, -step].map(
        (h) => everywhere(moved(one, which, h), { ...setting, times }).loss,
      );
      const size = got.partials.reduce(
        (most, value, at) => (at % LIGHT_CURVE_PARTIALS === which ? Math.max(most, Math.abs(value)) : most),
        0,
      );
      expect(size).toBeGreaterThan(0);
      times.forEach((t, i) => {
        if (before[i] !== after[i]) return;
        compared++;
        const quotient = (above![i]! - below![i]!) / (2 * step);
        expectWithin(got.partials[i * LIGHT_CURVE_PARTIALS + which]!, quotient, {
          abs: 2e-3 * size,
          unit: 'flux',
          why: `second-order error of the quotient near inner contacts, ${NAMES[which]!} at t = ${t}`,
        });
      });
    }
    expect(compared).toBeGreaterThan(6000);
  });

  it('to seven digits in the smooth middle', () => {
    const times = grid(-0.03, 0.03, 13);
    const one = model(0.25, 5.1, { longitude: 1.35 });
    const conjunction = conjunctionTime(0.25, 5.1, 1.35);
    const setting = { times: times.map((t) => t + conjunction), light: 2e-5 };
    const got = everywhere(one, setting);
    let nonzero = 0;
    for (let which = 0; which < 9; which++) {
      const central = (h: number, i: number): number =>
        (everywhere(moved(one, which, h), setting).loss[i]! -
          everywhere(moved(one, which, -h), setting).loss[i]!) /
        (2 * h);
      for (const i of [0, 5, 12]) {
        const want = (4 * central(5e-5, i) - central(1e-4, i)) / 3;
        if (Math.abs(want) > 1e-6) nonzero++;
        expectWithin(got.partials[i * LIGHT_CURVE_PARTIALS + which]!, want, {
          abs: 1e-7 * Math.max(1e-3, Math.abs(want)),
          unit: 'flux',
          why: `rounding of the quotient, ${NAMES[which]!}`,
        });
      }
    }
    expect(nonzero).toBeGreaterThan(20);
  });
});
