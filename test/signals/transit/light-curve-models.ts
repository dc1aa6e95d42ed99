/** Transiting models by their shape, and what the kernel says of them at given times. */
import { expect } from 'vitest';
import { meanFromTrueAnomaly } from '../../../src/orbit/index.js';
import {
  LIGHT_CURVE_PARTIALS,
  LightCurveKernel,
  TRANSIT_COORDINATES,
} from '../../../src/signals/transit/light-curve-kernel.js';

export const NAMES = [
  'ln P',
  'lambda0',
  'k',
  'h',
  'radius ratio',
  'b',
  'ln a/R',
  'u1',
  'u2',
  'occultation depth',
];

export interface Model {
  readonly coordinates: readonly number[];
  readonly u1: number;
  readonly u2: number;
  readonly depth: number;
}

export interface Setting {
  readonly times: Float64Array;
  readonly exposure?: number;
  readonly light?: number;
}

export function model(e: number, omega: number, more: Partial<Record<string, number>> = {}): Model {
  const { period = 3, ratio = 0.1, b = 0.3, axis = 8, longitude = Math.PI / 2, depth = 1e-3 } = more;
  return {
    coordinates: [
      Math.log(period),
      longitude,
      e * Math.cos(omega),
      e * Math.sin(omega),
      ratio,
      b,
      Math.log(axis),
    ],
    u1: 0.4,
    u2: 0.3,
    depth,
  };
}

export function evaluated(one: Model, { times, exposure = 0, light = 0 }: Setting): LightCurveKernel {
  const kernel = new LightCurveKernel({
    timesDays: times,
    exposureDays: exposure,
    starRadiusLightDays: light,
  });
  const coordinates = Float64Array.of(NaN, ...one.coordinates);
  expect(kernel.evaluate(coordinates, 1, one.u1, one.u2, one.depth, true)).toBe(true);
  return kernel;
}

/** Loss and partial derivatives at every time. */
export function everywhere(one: Model, setting: Setting): { loss: Float64Array; partials: Float64Array } {
  const kernel = evaluated(one, setting);
  const loss = new Float64Array(setting.times.length);
  const partials = new Float64Array(setting.times.length * LIGHT_CURVE_PARTIALS);
  for (let entry = 0; entry < kernel.touchedCount; entry++) {
    const i = kernel.touched[entry]!;
    loss[i] = kernel.loss[entry]!;
    const row = entry * LIGHT_CURVE_PARTIALS;
    partials.set(kernel.partials.subarray(row, row + LIGHT_CURVE_PARTIALS), i * LIGHT_CURVE_PARTIALS);
  }
  return { loss, partials };
}

export function moved(one: Model, which: number, step: number): Model {
  const values = [...one.coordinates, one.u1, one.u2, one.depth];
  values[which]! += step;
  const [u1, u2, depth] = values.slice(TRANSIT_COORDINATES) as [number, number, number];
  return { coordinates: values.slice(0, TRANSIT_COORDINATES), u1, u2, depth };
}

/** Inferior conjunction of `model(e, omega)` with a period of 3 d. */
export function conjunctionTime(e: number, omega: number, longitude: number = Math.PI / 2): number {
  return ((meanFromTrueAnomaly(Math.PI / 2 - omega, e) + omega - longitude) * 3) / (2 * Math.PI);
}

export const grid = (from: number, to: number, count: number): Float64Array =>
  Float64Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
