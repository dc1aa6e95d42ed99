import { describe, expect, it } from 'vitest';
import {
  occultationContacts,
  RAD_PER_DEG,
  transitContacts,
  transitDistance,
} from '../../../src/orbit/index.js';
import { LIGHT_CURVE_PARTIALS } from '../../../src/signals/transit/light-curve-kernel.js';
import exposures from '../../reference/transit/exposure.json' with { type: 'json' };
import { expectWithin } from '../../support/expect-within.js';
import { conjunctionTime, evaluated, everywhere, grid, model, NAMES } from './light-curve-models.js';

describe('instantaneous loss', () => {
  // Circular, P = 3 d, a/R = 8, b = 0.3, k = 0.1, u = 0.4, 0.3: flux by 30-digit quadrature at the separations of the times
  it.each([
    [-0.075, 1],
    [-0.06, 0.9987539756230484],
    [-0.055, 0.9950280597472202],
    [-0.05077408014745085, 0.9919388606363689],
    [-0.04, 0.9897520542503009],
    [-0.02, 0.9883400908423241],
    [0, 0.9880038872133856],
    [0.03, 0.9888403318040431],
  ])('at t = %f d the flux is %f', (t, flux) => {
    const { loss } = everywhere(model(0, 0), { times: Float64Array.of(t) });
    expectWithin(1 - loss[0]!, flux, { abs: 1e-14, unit: 'flux', why: '30-digit quadrature; rounding of t' });
  });

  it('touches exactly what lies between the contacts, in order, for any order of times', () => {
    const one = model(0.35, 2.1);
    const orbit = {
      scaledSemiMajorAxis: 8,
      eccentricity: 0.35,
      argPeriastronStarRad: 2.1,
      periodDays: 3,
      radiusRatio: 0.1,
      starRadiusLightDays: 2e-5,
    };
    const inclinationRad = Math.acos(0.3 / transitDistance(orbit));
    const transit = transitContacts({ ...orbit, inclinationRad });
    const behind = occultationContacts({ ...orbit, inclinationRad });
    const conjunction = conjunctionTime(0.35, 2.1);
    const all = grid(-4.5, 4.5, 9001);
    const { loss } = everywhere(one, { times: all, light: 2e-5 });
    let inside = 0;
    loss.forEach((value, i) => {
      const since = all[i]! - conjunction;
      const within = [-3, 0, 3].some(
        (cycle) =>
          (since - cycle > transit.firstDays! && since - cycle < transit.fourthDays!) ||
          (since - cycle > behind.firstDays! && since - cycle < behind.fourthDays!),
      );
      if (within) inside++;
      expect(value > 0).toBe(within);
    });
    expect(inside).toBeGreaterThan(500);

    const shuffled = Float64Array.from(all, (_, i) => all[(i * 4001) % 9001]!);
    const kernel = evaluated(one, { times: shuffled, light: 2e-5 });
    for (let entry = 1; entry < kernel.touchedCount; entry++)
      expect(kernel.touched[entry]!).toBeGreaterThan(kernel.touched[entry - 1]!);
    const again = everywhere(one, { times: shuffled, light: 2e-5 }).loss;
    again.forEach((value, i) => {
      expect(value).toBe(loss[(i * 4001) % 9001]);
    });
  });

  it('an occultation hides the companion and nothing else', () => {
    const full = everywhere(model(0, 0, { depth: 2e-4 }), {
      times: Float64Array.of(1.5, -1.5, 1.5 + 0.0571),
    }).loss;
    expectWithin(full[0]!, 2e-4, { rel: 1e-14, unit: 'flux', why: 'fully hidden' });
    expectWithin(full[1]!, 2e-4, { rel: 1e-14, unit: 'flux', why: 'fully hidden' });
    expect(full[2]!).toBeGreaterThan(0);
    expect(full[2]!).toBeLessThan(2e-4);
    const larger = everywhere(model(0, 0, { depth: 0.5, ratio: 2 }), { times: Float64Array.of(1.5) }).loss;
    expectWithin(larger[0]!, 0.125, {
      rel: 1e-14,
      unit: 'flux',
      why: 'a star half as large hides a quarter',
    });
    const none = evaluated(model(0, 0, { depth: 0 }), { times: Float64Array.of(1.5, 0) });
    expect(none.touchedCount).toBe(1);
  });

  it('no transit when the orbit passes by, no loss of a point', () => {
    expect(evaluated(model(0.2, 1, { b: 1.11 }), { times: grid(-3, 3, 500) }).touchedCount).toBe(0);
    expect(evaluated(model(0.2, 1, { ratio: 0 }), { times: grid(-3, 3, 500) }).touchedCount).toBe(0);
  });

  it('is the same for the mirrored path and after whole turns of the longitude', () => {
    const times = grid(-0.1, 0.1, 101);
    const { loss } = everywhere(model(0.1, 0.4, { b: 0.5, longitude: 1.7 }), { times });
    const mirrored = everywhere(model(0.1, 0.4, { b: -0.5, longitude: 1.7 - 4 * Math.PI }), { times }).loss;
    loss.forEach((value, i) => {
      expectWithin(mirrored[i]!, value, { abs: 1e-15, unit: 'flux', why: 'rounding of the longitude' });
    });
  });
});

describe('exposures', () => {
  it.each(exposures.cases.map((one) => [one.name, one] as const))(
    '%s: means by 25-digit quadrature',
    (_, one) => {
      const times = Float64Array.from(one.rows as [number, number][], (row) => row[0]);
      const law = {
        ...model(0, 0, { period: one.period, axis: one.axis, b: one.b, ratio: one.k }),
        u1: one.u1,
        u2: one.u2,
      };
      const { loss } = everywhere(law, { times, exposure: one.exposure });
      (one.rows as [number, number][]).forEach(([t, mean], i) => {
        expectWithin(loss[i]!, mean, {
          abs: 1e-8,
          unit: 'flux',
          why: `the bound that is promised, t = ${t}`,
        });
      });
    },
  );

  // Exposures of 30 min, otherwise as above: 24-point Gauss-Legendre between the contacts at 30 digits
  it.each([
    [-0.0633932030002194, 0.9986368084649977],
    [-0.06, 0.9973824446600782],
    [-0.05077408014745085, 0.9932220271648818],
    [-0.02, 0.988383667677154],
    [0, 0.9880324409834611],
  ])('at t = %f d the mean flux is %f', (t, flux) => {
    const { loss } = everywhere(model(0, 0), { times: Float64Array.of(t), exposure: 1 / 48 });
    expectWithin(1 - loss[0]!, flux, { abs: 1e-9, unit: 'flux', why: 'quadrature at 30 digits' });
  });

  it('any orbit, any length: the mean of 20 000 instants', () => {
    let state = 31_337;
    const next = (): number => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
    let compared = 0;
    for (let trial = 0; trial < 60; trial++) {
      const ratio = 0.02 + 0.3 * next() ** 2;
      const e = next() < 0.3 ? 0 : 0.6 * next();
      const one = model(e, 6.28 * next(), {
        ratio,
        b: (1 + ratio) * next(),
        axis: 4 + 20 * next(),
        depth: 1e-3,
      });
      const instants = evaluated(one, { times: grid(-1.5, 1.5, 3001) });
      if (instants.touchedCount === 0) continue;
      const middle = -1.5 + 0.001 * instants.touched[Math.floor(next() * instants.touchedCount)]!;
      const exposure = 0.3 * next() ** 2;
      const count = 20_000;
      const many = everywhere(one, {
        times: Float64Array.from({ length: count }, (_, i) => middle + exposure * ((i + 0.5) / count - 0.5)),
      });
      const mean = many.loss.reduce((sum, value) => sum + value, 0) / count;
      const got = everywhere(one, { times: Float64Array.of(middle), exposure });
      compared++;
      expectWithin(got.loss[0]!, mean, {
        abs: 1e-8,
        unit: 'flux',
        why: 'promised bound; the sum is good to 1e-10',
      });
      for (let which = 0; which < LIGHT_CURVE_PARTIALS; which++) {
        let sum = 0;
        let size = 0;
        for (let at = which; at < many.partials.length; at += LIGHT_CURVE_PARTIALS) {
          sum += many.partials[at]! / count;
          size = Math.max(size, Math.abs(many.partials[at]!));
        }
        expectWithin(got.partials[which]!, sum, {
          abs: 1e-4 * size + 1e-9,
          unit: 'flux',
          why: NAMES[which]!,
        });
      }
    }
    expect(compared).toBeGreaterThan(40);
  });

  it('longer than a period: every event counts', () => {
    const one = model(0, 0, { period: 0.9, axis: 4, depth: 0 });
    const instants = everywhere(one, { times: grid(-2, 2, 400_001) }).loss;
    const mean = instants.reduce((sum, value) => sum + value, 0) / 400_000;
    const { loss } = everywhere(one, { times: Float64Array.of(0), exposure: 4 });
    expectWithin(loss[0]!, mean, {
      abs: 1e-8,
      unit: 'flux',
      why: 'rectangle rule of 1e-5 d, zero at both ends',
    });
  });

  it('so short that it does not matter: one instant', () => {
    const times = grid(-0.1, 0.1, 501);
    const short = everywhere(model(0.1, 1), { times, exposure: 0.1 / 86_400 }).loss;
    const instant = everywhere(model(0.1, 1), { times }).loss;
    expect(short).toEqual(instant);
    const longer = everywhere(model(0.1, 1), { times, exposure: 1 / 86_400 }).loss;
    longer.forEach((value, i) => {
      expectWithin(value, instant[i]!, {
        abs: 4e-8,
        unit: 'flux',
        why: 'half a second of an ingress of 30 min',
      });
    });
  });
});

it('a published orbit, impact parameter from the inclination: durations as by contacts', () => {
  // Torres, Winn & Holman 2008, ApJ 677, 1324 (P, a/R, i, k; from memory): T14 = 0.1288018 d by root finding (scipy brentq)
  const b = 8.76 * Math.cos(86.71 * RAD_PER_DEG);
  const times = grid(-0.07, 0.07, 14_001);
  const kernel = evaluated(model(0, 0, { period: 3.52474859, axis: 8.76, ratio: 0.12086, b, depth: 0 }), {
    times,
  });
  const inside = kernel.touched.subarray(0, kernel.touchedCount);
  expectWithin((inside.at(-1)! - inside[0]!) * 1e-5, 0.12880182467511353, {
    abs: 2e-5,
    unit: 'd',
    why: 'spacing',
  });
});
