import { describe, expect, it } from 'vitest';
import { CONTOUR_SHARES, densityMap } from '../../../src/dossier/charts/density-map.js';
import type { DrawnQuantity } from '../../../src/dossier/charts/posterior-quantities.js';
import { spreadOf } from '../../../src/dossier/charts/spread-of-draws.js';
import { randomSource } from '../../support/solved-fixture.js';

const N = 5000;

function quantity(values: Float64Array, changes: Partial<DrawnQuantity> = {}): DrawnQuantity {
  const bounds = [-Infinity, Infinity] as const;
  return { key: 'x', symbol: [], unit: '', values, reported: null, bounds, cycle: 0, ...changes };
}

function mapOf(x: DrawnQuantity, y: DrawnQuantity): ReturnType<typeof densityMap> {
  const [xSpread, ySpread] = [spreadOf(x, x.values), spreadOf(y, y.values)];
  const bounded = (one: DrawnQuantity, { low, high }: typeof xSpread): boolean =>
    low === one.bounds[0] || high === one.bounds[1];
  return densityMap({
    x: x.values,
    y: y.values,
    xSpread,
    ySpread,
    xBounded: bounded(x, xSpread),
    yBounded: bounded(y, ySpread),
  });
}

/** Winding number of closed lines about a point, by counting crossings of a ray: not 0 means inside. */
function winding(lines: readonly Float64Array[], x: number, y: number): number {
  let turns = 0;
  for (const line of lines) {
    for (let k = 0; k < line.length; k += 2) {
      const next = (k + 2) % line.length;
      const [x0, y0, x1, y1] = [line[k]!, line[k + 1]!, line[next]!, line[next + 1]!];
      if (y0 <= y === y1 <= y) continue;
      if (x < x0 + ((y - y0) * (x1 - x0)) / (y1 - y0)) turns += y1 > y0 ? 1 : -1;
    }
  }
  return turns;
}

function shareInside(lines: readonly Float64Array[], x: Float64Array, y: Float64Array): number {
  let count = 0;
  x.forEach((value, i) => {
    if (winding(lines, value, y[i]!) !== 0) count += 1;
  });
  return count / x.length;
}

/** Pairs of draws of two quantities by what they look like. */
function shapes(): Record<string, readonly [DrawnQuantity, DrawnQuantity]> {
  const random = randomSource(11);
  const gauss = (): Float64Array => Float64Array.from({ length: N }, () => random.gauss());
  const [a, b] = [gauss(), gauss()];
  const ridge = a.map((value, i) => 3e6 + 0.2 * (0.999 * value + Math.sqrt(1 - 0.999 ** 2) * b[i]!));
  const banana = a.map((value, i) => 3 * value * value + 0.4 * b[i]!);
  const eccentricity = a.map((value) => Math.abs(0.03 + 0.04 * value));
  const angle = eccentricity.map((e, i) => {
    const away = ((90 * b[i]!) / Math.max(0.3, 30 * e) + 540) % 360;
    return away < 0 ? away + 360 - 180 : away - 180;
  });
  const twins = a.map((value, i) => (i % 3 === 0 ? 8 : 0) + value);
  return {
    'two independent Gaussians': [quantity(a), quantity(b)],
    'a correlation of 0.999 at an epoch of seven digits': [quantity(a), quantity(ridge)],
    'a banana': [quantity(a), quantity(banana)],
    'an eccentricity at its bound': [quantity(eccentricity, { bounds: [0, 1] }), quantity(b)],
    'the bound on the other axis': [
      quantity(b.map((value, i) => value + 20 * eccentricity[i]!)),
      quantity(eccentricity, { bounds: [0, 1] }),
    ],
    'an angle that wanders all around': [
      quantity(eccentricity, { bounds: [0, 1] }),
      quantity(angle, { cycle: 360, reported: 0 }),
    ],
    'two islands': [quantity(twins), quantity(b)],
    'heavy tails': [quantity(a.map((value, i) => value / (0.05 + Math.abs(b[i]!)))), quantity(gauss())],
  };
}

describe.each(Object.entries(shapes()))('contours of %s', (_, [x, y]) => {
  it('hold the stated shares of the draws within 3 %', () => {
    const { contours } = mapOf(x, y);
    CONTOUR_SHARES.forEach((share, index) => {
      const found = shareInside(contours[index]!, x.values, y.values);
      expect(Math.abs(found - share), `${found} for ${share}`).toBeLessThan(0.03);
    });
  });
});

it('contours of a Gaussian are circles of one and two standard deviations', () => {
  const { contours } = mapOf(...shapes()['two independent Gaussians']!);
  contours.forEach((lines, index) => {
    const [line] = [...lines].sort((one, other) => other.length - one.length);
    let sum = 0;
    for (let k = 0; k < line!.length; k += 2) sum += Math.hypot(line![k]!, line![k + 1]!);
    const radius = sum / (line!.length / 2);
    // The share fixes the radius up to sampling noise of about 1 / sqrt(n), as long as the smoothed shape is round.
    expect(Math.abs(radius / (index + 1) - 1)).toBeLessThan(0.05);
  });
});

it('a ridge is not smeared: its contour is as narrow as the conditional spread', () => {
  const [x, y] = shapes()['a correlation of 0.999 at an epoch of seven digits']!;
  const { contours } = mapOf(x, y);
  const sigma = 0.2 * Math.sqrt(1 - 0.999 ** 2);
  let widest = 0;
  for (const line of contours[1]!) {
    for (let k = 0; k < line.length; k += 2)
      widest = Math.max(widest, Math.abs(line[k + 1]! - 3e6 - 0.2 * 0.999 * line[k]!));
  }
  // Two standard deviations across the ridge; the bandwidth adds some per cent, sampling noise some more.
  expect(widest / sigma).toBeGreaterThan(1.8);
  expect(widest / sigma).toBeLessThan(2.5);
});

it('a correlation does not open a gap at a bound: draws next to it lie inside where they are dense', () => {
  const [x, y] = shapes()['the bound on the other axis']!;
  const { contours } = mapOf(x, y);
  const close = Array.from(y.values.keys()).filter((i) => y.values[i]! < 0.003);
  const held = close.filter((i) => winding(contours[1]!, x.values[i]!, y.values[i]!) !== 0);
  // The true density of these draws, and the level that 86.5 % of them exceed.
  const bell = (z: number): number => Math.exp(-0.5 * z * z);
  const density = Float64Array.from(y.values, (e, i) => {
    const folded = bell((e - 0.03) / 0.04) + bell((e + 0.03) / 0.04);
    return folded * bell(x.values[i]! - 20 * e);
  });
  const level = Float64Array.from(density).sort()[Math.round((1 - CONTOUR_SHARES[1]) * N)]!;
  const wanted = close.filter((i) => density[i]! >= level).length;
  expect(Math.abs(held.length - wanted) / close.length, `${held.length} for ${wanted}`).toBeLessThan(0.03);
});

it('shares are those of Gaussian circles: 39.3 % and 86.5 %', () => {
  // chi-square distribution with two degrees of freedom at 1 and 4 (Abramowitz & Stegun, 26.4.5)
  expect(CONTOUR_SHARES.map((share) => share.toFixed(4))).toEqual(['0.3935', '0.8647']);
});

it('draws that all agree make no trouble', () => {
  const same = quantity(new Float64Array(200).fill(0.25));
  const random = randomSource(5);
  const other = quantity(Float64Array.from({ length: 200 }, () => random.gauss()));
  for (const map of [mapOf(same, other), mapOf(other, same), mapOf(same, same)]) {
    expect(map.contours.flat().every((line) => line.every(Number.isFinite))).toBe(true);
  }
});
