import { describe, expect, it } from 'vitest';
import { checkGradient } from '../../../src/numerics/sampling/index.js';
import { densityOf } from './densities.js';

/** ln of a skewed density whose gradient can be spoilt in one coordinate. */
function skewed(poison: (slope: number[]) => void = () => undefined): ReturnType<typeof densityOf> {
  return densityOf(3, ([x, y, z]) => {
    const slope = [
      1 - Math.exp(x!),
      -4 * y! ** 3 - Math.cos(y! * z!) * z!,
      -2 * (z! - 2459000.5) - Math.cos(y! * z!) * y!,
    ];
    poison(slope);
    return [x! - Math.exp(x!) - y! ** 4 - Math.sin(y! * z!) - (z! - 2459000.5) ** 2, slope];
  });
}

const place = Float64Array.of(0.4, -0.7, 2459000.9);
const steps = Float64Array.of(0.1, 1e-7, 0.1);

describe('checkGradient', () => {
  it('passes a right gradient, with an epoch among the coordinates', () => {
    expect(checkGradient(skewed(), place, steps).worstRelativeError).toBeLessThan(1e-5);
  });

  it('passes at a maximum, where the gradient is zero and only rounding is left', () => {
    const bell = densityOf(2, ([x, y]) => [-0.5 * x! ** 2 - 50 * y! ** 2 + 1e3, [-x!, -100 * y!]]);
    expect(checkGradient(bell, new Float64Array(2)).worstRelativeError).toBeLessThan(1e-6);
  });

  it('finds the poisoned coordinate: a factor 1.01, a wrong sign, a forgotten term, NaN', () => {
    const spoilt = [
      (slope: number[]) => (slope[0]! *= 1.01),
      (slope: number[]) => (slope[1]! *= -1),
      (slope: number[]) => (slope[2]! += 0.02),
      (slope: number[]) => (slope[0] = NaN),
    ];
    spoilt.forEach((poison, k) => {
      const density = skewed((slope) => {
        poison(slope);
      });
      const found = checkGradient(density, place, steps);
      expect(found.index).toBe([0, 1, 2, 0][k]);
      expect(found.worstRelativeError).toBeGreaterThan(0.003);
    });
  });

  it('passes over steps that leave the domain, and says so when none is left', () => {
    const logarithm = densityOf(1, ([x]) => [x! > 0 ? Math.log(x!) - x! : NaN, [1 / x! - 1]]);
    const near = Float64Array.of(0.01);
    expect(checkGradient(logarithm, near, Float64Array.of(1)).worstRelativeError).toBeLessThan(1e-6);
    expect(() => checkGradient(logarithm, near, Float64Array.of(1e5))).toThrow(/cannot be evaluated beside/);
    expect(() => checkGradient(logarithm, Float64Array.of(-1))).toThrow(/ln density is NaN at the point/);
    expect(() => checkGradient(logarithm, new Float64Array(2))).toThrow(/must have 1 elements/);
  });
});
