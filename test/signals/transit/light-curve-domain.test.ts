import { describe, expect, it } from 'vitest';
import {
  LIGHT_CURVE_PARTIALS,
  LightCurveKernel,
  TRANSIT_COORDINATES,
} from '../../../src/signals/transit/light-curve-kernel.js';
import { grid, model, moved } from './light-curve-models.js';

describe('domain', () => {
  const times = grid(-1, 1, 50);
  const outcome = (which: number, value: number): boolean => {
    const kernel = new LightCurveKernel({ timesDays: times, exposureDays: 0, starRadiusLightDays: 0 });
    const one = moved(model(0.1, 1), which, 0);
    const values = [...one.coordinates, one.u1, one.u2, one.depth];
    values[which] = value;
    const [u1, u2, depth] = values.slice(TRANSIT_COORDINATES) as [number, number, number];
    const result = kernel.evaluate(Float64Array.from(values), 0, u1, u2, depth, true);
    if (!result) expect(kernel.touchedCount).toBe(0);
    return result;
  };

  it('false for what is not finite', () => {
    for (let which = 0; which < LIGHT_CURVE_PARTIALS; which++)
      for (const value of [NaN, Infinity]) expect(outcome(which, value)).toBe(false);
  });

  it('false for what cannot be', () => {
    expect(outcome(2, 1)).toBe(false); // e >= 1
    expect(outcome(3, 0.87)).toBe(false); // bodies touch at periastron
    expect(outcome(4, -0.1)).toBe(false);
    expect(outcome(4, 6.5)).toBe(false); // bodies touch
    expect(outcome(5, 8)).toBe(false); // b beyond the orbit
    expect(outcome(6, 0)).toBe(false);
    expect(outcome(7, 3)).toBe(false); // a star without light
  });

  it('true up to there', () => {
    expect(outcome(4, 2)).toBe(true);
    expect(outcome(5, -0.4)).toBe(true);
    expect(outcome(9, -1e-3)).toBe(true);
  });
});

it('random models up to the edges of the domain: finite, between nothing and everything', () => {
  let state = 2718;
  const next = (): number => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
  let [evaluations, touched] = [0, 0];
  const times = grid(-40, 40, 200);
  const kernels = [0, 0.02, 3].map(
    (exposureDays) =>
      new LightCurveKernel({
        timesDays: times,
        exposureDays,
        starRadiusLightDays: exposureDays === 0 ? 0 : 3e-5,
      }),
  );
  for (let trial = 0; trial < 1200; trial++) {
    const kernel = kernels[trial % 3]!;
    const ratio = next() < 0.1 ? 1 : 2 * next() ** 3;
    const e = next() < 0.2 ? 0 : 1 - 10 ** (-3 * next());
    const omega = 2 * Math.PI * next();
    const axis = ((1 + ratio) / (1 - e)) * (1 + 10 ** (-6 + 7 * next()));
    const b = next() < 0.2 ? Math.abs(1 - ratio) : next() < 0.1 ? 0 : (1 + ratio) * next();
    const coordinates = Float64Array.of(
      Math.log(0.5 + 30 * next()),
      7 * next(),
      e * Math.cos(omega),
      e * Math.sin(omega),
      ratio,
      b,
      Math.log(axis),
    );
    if (!kernel.evaluate(coordinates, 0, next(), 0, 1e-3, true)) continue;
    evaluations++;
    touched += kernel.touchedCount;
    const count = kernel.touchedCount;
    const sums = kernel.partials.subarray(0, count * LIGHT_CURVE_PARTIALS);
    expect(sums.every(Number.isFinite)).toBe(true);
    expect(kernel.loss.subarray(0, count).every((value) => value > -1e-15 && value <= 1.001)).toBe(true);
  }
  expect(evaluations).toBeGreaterThan(900);
  expect(touched).toBeGreaterThan(10_000);
});
