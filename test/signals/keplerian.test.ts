import { describe, expect, it } from 'vitest';
import { KeplerianKernel, MAXIMUM_ECCENTRICITY, ORBIT_COORDINATES } from '../../src/signals/keplerian.js';
import samples from '../orbit/velocity-samples.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

const TIMES = Float64Array.from({ length: 41 }, (_, i) => -61.3 + 3.07 * i + 0.4 * Math.sin(7 * i));
const NAMES = ['ln P', 'mean longitude', 'k', 'h', 'K'] as const;

function velocities(coordinates: Float64Array, times: Float64Array = TIMES): Float64Array {
  const sum = new Float64Array(times.length);
  expect(new KeplerianKernel(times).add(coordinates, 0, sum, null, 0, 0)).toBe(true);
  return sum;
}

function analytic(coordinates: Float64Array): Float64Array {
  const partials = new Float64Array(TIMES.length * ORBIT_COORDINATES);
  new KeplerianKernel(TIMES).add(
    coordinates,
    0,
    new Float64Array(TIMES.length),
    partials,
    ORBIT_COORDINATES,
    0,
  );
  return partials;
}

/** Central differences at h, h/2 and h/4, extrapolated to h = 0 (Richardson); h follows the width of the periastron swing. */
function quotients(coordinates: Float64Array, column: number): Float64Array {
  const e = Math.hypot(coordinates[2]!, coordinates[3]!);
  const period = Math.exp(coordinates[0]!);
  const swing = (1 - e) ** 1.5;
  const step = [(4e-3 * swing * period) / 400, 4e-3 * swing, 4e-3 * (1 - e), 4e-3 * (1 - e), 1][column]!;
  const central = (h: number): Float64Array => {
    const [above, below] = [1, -1].map((sign) => {
      const moved = Float64Array.from(coordinates);
      moved[column]! += sign * h;
      return velocities(moved);
    });
    return above!.map((value, i) => (value - below![i]!) / (2 * h));
  };
  const [first, second, third] = [central(step), central(step / 2), central(step / 4)];
  return first.map((d, i) => {
    const coarse = (4 * second[i]! - d) / 3;
    const fine = (4 * third[i]! - second[i]!) / 3;
    return (16 * fine - coarse) / 15;
  });
}

/** Largest difference over the times, in units of the column's largest quotient. */
function worstDifference(partials: Float64Array, coordinates: Float64Array, column: number): number {
  const want = quotients(coordinates, column);
  const size = Math.max(...want.map(Math.abs));
  return Math.max(
    ...want.map((value, i) => Math.abs(partials[i * ORBIT_COORDINATES + column]! - value) / size),
  );
}

const LIMIT = { abs: 3e-8, unit: '1', why: 'rounding of the quotients, largest at e = 0.97' };

describe('partial derivatives of the Keplerian velocity', () => {
  for (const e of [0, 1e-8, 1e-4, 0.1, 0.5, 0.9, 0.97]) {
    it(`equal difference quotients at e = ${e}, all around in omega and longitude`, () => {
      for (const omega of [0, 0.7, Math.PI / 2, 2.4, Math.PI, 4.1, (3 * Math.PI) / 2, 6.2]) {
        for (const longitude of [-3, 0, 0.9, 2.2, 5]) {
          for (const period of [5.3, 47, 900]) {
            const coordinates = Float64Array.from([
              Math.log(period),
              longitude,
              e * Math.cos(omega),
              e * Math.sin(omega),
              42,
            ]);
            const partials = analytic(coordinates);
            NAMES.forEach((_, column) => {
              expectWithin(worstDifference(partials, coordinates, column), 0, LIMIT);
            });
          }
        }
      }
    });
  }

  it('a wrong one is caught: each column made wrong by 1e-5 of itself', () => {
    const coordinates = Float64Array.from([Math.log(47), 0.9, 0.3, -0.4, 42]);
    const partials = analytic(coordinates);
    NAMES.forEach((_, column) => {
      const poisoned = partials.map((value, at) =>
        at % ORBIT_COORDINATES === column ? value * (1 + 1e-5) : value,
      );
      expect(worstDifference(poisoned, coordinates, column)).toBeGreaterThan(100 * LIMIT.abs);
    });
  });

  it('are written where they are asked for, and nowhere else', () => {
    const coordinates = Float64Array.from([NaN, 3, Math.log(47), 0.9, 0.3, -0.4, 42]);
    const [stride, column] = [9, 3];
    const partials = new Float64Array(TIMES.length * stride).fill(-7);
    const sum = new Float64Array(TIMES.length).fill(100);
    expect(new KeplerianKernel(TIMES).add(coordinates, 2, sum, partials, stride, column)).toBe(true);
    const own = analytic(coordinates.slice(2));
    const alone = velocities(coordinates.slice(2));
    TIMES.forEach((_, i) => {
      expect([...partials.subarray(i * stride, (i + 1) * stride)]).toEqual([
        -7,
        -7,
        -7,
        ...own.subarray(5 * i, 5 * i + 5),
        -7,
      ]);
      expectWithin(sum[i]!, 100 + alone[i]!, { abs: 1e-13, unit: 'm/s', why: 'one rounding of 100' });
    });
  });
});

describe('the Keplerian velocity', () => {
  it('matches velocity-samples.json (mpmath, 50 digits), e up to 0.93', () => {
    for (const row of samples.rows) {
      const [period, passage, e, omegaDeg, amplitude, zeroPoint, time, , , want] = row as [
        number, number, number, number, number, number, number, number, number, number,
      ]; // prettier-ignore
      const omega = (omegaDeg * Math.PI) / 180;
      const coordinates = Float64Array.from([
        Math.log(period),
        omega,
        e * Math.cos(omega),
        e * Math.sin(omega),
        amplitude,
      ]);
      const [got] = velocities(coordinates, Float64Array.of(time - passage));
      expectWithin(zeroPoint + got!, want, {
        abs: 2e-9 * amplitude,
        unit: 'm/s',
        why: 'a date of 2.45e6 d carries 5e-10 d, amplified near periastron of e = 0.93',
      });
    }
  });

  it('is smooth through e = 0, where omega is not defined', () => {
    const at = (k: number, h: number): Float64Array =>
      velocities(Float64Array.from([Math.log(47), 0.9, k, h, 42]));
    const circular = at(0, 0);
    for (let turn = 0; turn < 8; turn++) {
      const near = at(1e-9 * Math.cos(turn), 1e-9 * Math.sin(turn));
      near.forEach((value, i) => {
        expectWithin(value, circular[i]!, {
          abs: 42 * 4e-9,
          unit: 'm/s',
          why: 'the velocity changes by less than 4 K per unit of e',
        });
      });
    }
    circular.forEach((value, i) => {
      expectWithin(value, 42 * Math.cos(0.9 + (2 * Math.PI * TIMES[i]!) / 47), {
        abs: 1e-12,
        unit: 'm/s',
        why: 'a circular orbit is K cos(longitude)',
      });
    });
  });

  it('refuses what lies outside its domain and leaves the sum alone', () => {
    const bad = [
      [Math.log(47), 0.9, MAXIMUM_ECCENTRICITY, 0, 42],
      [Math.log(47), 0.9, 0.9, -0.9, 42],
      [NaN, 0.9, 0, 0, 42],
      [-Infinity, 0.9, 0, 0, 42],
      [Math.log(47), Infinity, 0, 0, 42],
      [Math.log(47), 0.9, NaN, 0, 42],
      [Math.log(47), 0.9, 0, 0, NaN],
    ];
    for (const coordinates of bad) {
      const sum = new Float64Array(TIMES.length).fill(3);
      const partials = new Float64Array(TIMES.length * 5).fill(-7);
      expect(new KeplerianKernel(TIMES).add(Float64Array.from(coordinates), 0, sum, partials, 5, 0)).toBe(
        false,
      );
      expect(sum.every((value) => value === 3)).toBe(true);
      expect(partials.every((value) => value === -7)).toBe(true);
    }
  });
});
