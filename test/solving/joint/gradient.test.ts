import { describe, expect, it } from 'vitest';
import { checkGradient } from '../../../src/numerics/sampling/gradient-check.js';
import type { SmoothDensity } from '../../../src/numerics/sampling/density.js';
import { curvatureOfDensity } from '../../../src/solving/posterior/density-curvature.js';
import { JointDensity } from '../../../src/solving/joint/joint-density.js';
import type { JointRecipe } from '../../../src/solving/joint/joint-data.js';
import {
  companion,
  curve,
  EPOCH,
  midTimes,
  naturalPoint,
  recipe,
  seeded,
  stated,
  velocities,
} from './recipes.js';

const light = curve(seeded(1));
const pulls = velocities(seeded(2));
const times = midTimes(seeded(3), false);
const bothTimes = midTimes(seeded(4), true);
const eccentric = { circular: false, pulls: true };
const band = (u1: readonly [number, number] | null, u2: readonly [number, number] | null) =>
  [u1, u2].map((pair) => (pair === null ? null : { value: pair[0], sigma: pair[1] }));
const bandOf = (
  u1: readonly [number, number] | null,
  u2: readonly [number, number] | null,
): JointRecipe['bands'] => [{ name: 'V', u1: band(u1, u2)[0]!, u2: band(u1, u2)[1]! }];

const withElements = (elements: Parameters<typeof stated>[0]): JointRecipe =>
  recipe({
    curves: [light],
    velocities: pulls,
    midTimes: [bothTimes],
    companions: [companion(0, { ...eccentric, choice: stated(elements) })],
  });

const KINDS: readonly (readonly [string, JointRecipe])[] = [
  ['a circular orbit seen in transit', recipe({ curves: [light] })],
  ['an eccentric orbit seen in transit', recipe({ curves: [light], companions: [companion(0, { circular: false })] })],
  [
    'a circular orbit with velocities and drift',
    recipe({ curves: [light], velocities: pulls, drift: 1, companions: [companion(0, { pulls: true })] }),
  ],
  [
    'an eccentric orbit with velocities, curvature and mid-times',
    recipe({ curves: [light], velocities: pulls, drift: 2, midTimes: [times], companions: [companion(0, eccentric)] }),
  ],
  [
    'mid-times of occultations beside transits, light time counted',
    recipe({ curves: [light], midTimes: [bothTimes], starRadiusLightDays: 3e-4, companions: [companion(0, { circular: false })] }),
  ],
  ['mid-times alone', recipe({ midTimes: [bothTimes], companions: [companion(0, { circular: false, transits: false })] })],
  [
    'the depth of occultations',
    recipe({ curves: [{ ...light, timesDays: light.timesDays.map((t, i) => (i < 60 ? t - 1.63 : t)) }], companions: [companion(0, { occultation: true })] }),
  ],
  ['dilution under a prior', recipe({ curves: [{ ...light, dilution: { value: 0.1, sigma: 0.03 } }] })],
  ['limb darkening under priors', recipe({ curves: [light], bands: bandOf([0.4, 0.1], [0.2, 0.1]) })],
  ['one coefficient fixed, the other free', recipe({ curves: [light], bands: bandOf([0.4, 0], null) })],
  ['correlated noise', recipe({ curves: [{ ...light, noise: 'correlated' }] })],
  ['stated extra scatter', recipe({ curves: [{ ...light, jitter: { kind: 'prior', value: 4e-4, sigma: 1e-4 } }] })],
  ['extra scatter in a range', recipe({ curves: [{ ...light, jitter: { kind: 'range', low: 1e-5, high: 1e-2 } }] })],
  ['a star of stated density', recipe({ curves: [light], starDensityGcc: { value: 1.2, sigma: 0.2 } })],
  ['the period under a prior', withElements({ period: { kind: 'prior', value: 3.3, sigma: 1e-3 } })],
  ['the period in a range', withElements({ period: { kind: 'range', low: 3.2, high: 3.4 } })],
  ['the period fixed', withElements({ period: { kind: 'fixed', value: 3.3001 } })],
  ['e under a prior', withElements({ eccentricity: { kind: 'prior', value: 0.13, sigma: 0.02 } })],
  ['e in a range, omega fixed', withElements({ eccentricity: { kind: 'range', low: 0, high: 0.4 }, argumentOfPeriastron: { kind: 'fixed', value: -32 } })],
  ['omega under a prior', withElements({ argumentOfPeriastron: { kind: 'prior', value: 330, sigma: 12 } })],
  ['omega in a range, e fixed', withElements({ argumentOfPeriastron: { kind: 'range', low: -80, high: 40 }, eccentricity: { kind: 'fixed', value: 0.12 } })],
  ['conjunction under a prior', withElements({ timeOfInferiorConjunction: { kind: 'prior', value: EPOCH + 0.02, sigma: 4e-3 } })],
  ['periastron under a prior', withElements({ timeOfPeriastron: { kind: 'prior', value: EPOCH - 1.1, sigma: 0.3 } })],
  ['periastron in a range', withElements({ timeOfPeriastron: { kind: 'range', low: EPOCH - 2.5, high: EPOCH + 0.5 } })],
  ['periastron fixed, period under a prior', withElements({ timeOfPeriastron: { kind: 'fixed', value: EPOCH - 1.02 }, period: { kind: 'prior', value: 3.3, sigma: 1e-3 } })],
  ['K under a prior', withElements({ semiAmplitude: { kind: 'prior', value: 17, sigma: 2 } })],
  ['K in a range', withElements({ semiAmplitude: { kind: 'range', low: 5, high: 40 } })],
  ['K fixed', withElements({ semiAmplitude: { kind: 'fixed', value: 20 } })],
  [
    'radius ratio under a prior',
    recipe({ curves: [light], companions: [companion(0, { choice: stated({}, { radiusRatio: { kind: 'prior', value: 0.1, sigma: 0.01 } }) })] }),
  ],
  [
    'stated zero points and jitters',
    recipe({
      curves: [light],
      velocities: pulls,
      companions: [companion(0, eccentric)],
      zeroPoints: [{ kind: 'prior', value: 1, sigma: 0.5 }, { kind: 'fixed', value: 0.4 }],
      velocityJitters: [{ kind: 'fixed', value: 2 }, { kind: 'range', low: 0.5, high: 9 }],
    }),
  ],
  [
    'an unknown period',
    recipe({
      curves: [curveOfOneEvent()],
      companions: [companion(0, { isPeriodUnknown: true, shortestPeriodDays: 0.4, longestPeriodDays: 1e4 })],
    }),
  ],
  [
    'two transiting companions, one of which pulls',
    recipe({
      curves: [light, { ...light, name: 'night', band: 1, timesDays: light.timesDays.map((t) => t + 3.3) }],
      bands: [{ name: 'V', u1: null, u2: null }, { name: 'R', u1: null, u2: { value: 0.2, sigma: 0 } }],
      velocities: pulls,
      midTimes: [bothTimes, midTimes(seeded(5), false, 1)],
      companions: [companion(0, eccentric), companion(1, { circular: false })],
    }),
  ],
  [
    'a transiting companion beside one of the velocities alone',
    recipe({
      curves: [light],
      velocities: pulls,
      companions: [companion(0, eccentric), companion(1, { circular: false, pulls: true, transits: false })],
    }),
  ],
]; // prettier-ignore

function curveOfOneEvent(): ReturnType<typeof curve> {
  const cut = 60;
  return {
    ...light,
    timesDays: light.timesDays.slice(0, cut),
    flux: light.flux.slice(0, cut),
    sigmas: light.sigmas.slice(0, cut),
    averaged: light.averaged.slice(0, cut),
    segments: light.segments.slice(0, 1),
  };
}

/** A thirtieth of the width along each coordinate. */
function stepsOf(density: SmoothDensity, position: Float64Array): Float64Array {
  const covariance = curvatureOfDensity(density, position);
  return position.map((_, j) =>
    Math.min(0.02, 0.03 * Math.sqrt(Math.abs(covariance[j * density.size + j]!))),
  );
}

describe('the gradient of the joint density is that of difference quotients', () => {
  for (const use of ['all', 'stated'] as const)
    for (const [name, of] of KINDS)
      it(`${name}, ${use === 'all' ? 'all priors' : 'stated priors only'}`, () => {
        const density = new JointDensity(of, use);
        const position = density.coordinates.position(naturalPoint(of));
        const check = checkGradient(density, position, stepsOf(density, position));
        expect(check.worstRelativeError, JSON.stringify(check)).toBeLessThan(1e-6);
      });
});

describe('averages over exposures', () => {
  it('have their gradient as far as the average itself is right', () => {
    const of = recipe({ curves: [{ ...light, exposureDays: 0.0045 }] });
    const density = new JointDensity(of, 'all');
    const position = density.coordinates.position(naturalPoint(of));
    const check = checkGradient(density, position, stepsOf(density, position));
    // Nodes are chosen for averages that are wrong by a hundredth of the error of the mean of all points.
    expect(check.worstRelativeError, JSON.stringify(check)).toBeLessThan(1e-4);
  });
});

describe('a wrong gradient', () => {
  const of = KINDS.find(([name]) => name.startsWith('two transiting'))![1];
  const density = new JointDensity(of, 'all');
  const position = density.coordinates.position(naturalPoint(of));
  const steps = stepsOf(density, position);

  it('is caught in every coordinate', () => {
    for (let poisoned = 0; poisoned < density.size; poisoned++) {
      const wrong: SmoothDensity = {
        size: density.size,
        evaluate: (at, gradient) => {
          const value = density.evaluate(at, gradient);
          gradient[poisoned]! *= 1.001;
          gradient[poisoned]! += 1e-4 / steps[poisoned]!;
          return value;
        },
      };
      const check = checkGradient(wrong, position, steps);
      expect(check.worstRelativeError, `coordinate ${poisoned}`).toBeGreaterThan(1e-5);
      expect(check.index).toBe(poisoned);
    }
  });
});

describe('the domain of the joint density', () => {
  const of = recipe({ curves: [light], companions: [companion(0, { circular: false })] });
  const density = new JointDensity(of, 'all');
  const at = (change: (natural: Float64Array) => void): number => {
    const natural = naturalPoint(of);
    change(natural);
    return density.evaluate(density.coordinates.position(natural), new Float64Array(density.size));
  };

  it('ends where the companion would touch the star', () => {
    expect(at(() => undefined)).toBeGreaterThan(-Infinity);
    // a/R of 2 at e = 0.6: periastron at 0.8 stellar radii.
    expect(
      at((natural) => {
        natural[2] = 0.6;
        natural[density.coordinates.index.logStarDensity] = Math.log(0.01);
      }),
    ).toBe(-Infinity);
  });

  it('is the same for both signs of the impact parameter and of extra scatter', () => {
    const position = density.coordinates.position(naturalPoint(of));
    const value = density.evaluate(position, new Float64Array(density.size));
    for (const j of density.coordinates.mirrored) {
      const image = Float64Array.from(position);
      image[j]! *= -1;
      expect(density.evaluate(image, new Float64Array(density.size))).toBe(value);
      expect(density.fold(image)).toEqual(position);
    }
    expect(density.coordinates.mirrored).toHaveLength(2);
  });
});
