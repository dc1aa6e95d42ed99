import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { checkGradient } from '../../../src/numerics/sampling/gradient-check.js';
import type { SmoothDensity } from '../../../src/numerics/sampling/density.js';
import type { PortablePoint } from '../../../src/solving/model-builder.js';
import type { PosteriorDensity } from '../../../src/solving/posterior/posterior-density.js';
import { densityFor, EPOCH, wiggle, type DensityChoices } from './densities.js';

const data = wiggle(RandomStream.fromSeed(71), 30);
const twoInstruments = wiggle(RandomStream.fromSeed(72), 30, 2);
const eccentric = { circular: false };
const circular = { circular: true };

function instrument(jitterMps: NonNullable<DensityChoices['instruments']>[string]['jitterMps']): {
  north: NonNullable<DensityChoices['instruments']>[string];
} {
  return { north: { zeroPointMps: null, jitterMps } };
}

const KINDS: readonly (readonly [string, DensityChoices])[] = [
  ['circular', { data, companions: [circular] }],
  ['eccentric', { data, companions: [eccentric] }],
  ['two companions', { data, companions: [eccentric, circular] }],
  ['two companions, both eccentric', { data, companions: [eccentric, eccentric] }],
  ['no companion', { data, companions: [] }],
  ['linear drift', { data, companions: [eccentric], drift: 1 }],
  ['quadratic drift', { data, companions: [circular], drift: 2 }],
  ['two instruments with a drift', { data: twoInstruments, companions: [eccentric], drift: 1 }],
  ['fixed jitter', { data, companions: [eccentric], instruments: instrument({ kind: 'fixed', value: 1.5 }) }],
  [
    'jitter under a Gaussian prior',
    { data, companions: [eccentric], instruments: instrument({ kind: 'prior', value: 2, sigma: 0.5 }) },
  ],
  [
    'jitter in a range',
    { data, companions: [eccentric], instruments: instrument({ kind: 'range', low: 0.1, high: 40 }) },
  ],
  [
    'zero point under a prior, the other fixed',
    {
      data: twoInstruments,
      companions: [eccentric],
      instruments: {
        north: { zeroPointMps: { kind: 'prior', value: 4, sigma: 1 }, jitterMps: null },
        south: { zeroPointMps: { kind: 'fixed', value: 6 }, jitterMps: null },
      },
    },
  ],
  [
    'period under a Gaussian prior',
    {
      data,
      companions: [{ ...eccentric, elements: { period: { kind: 'prior', value: 20.2, sigma: 0.05 } } }],
    },
  ],
  [
    'eccentricity under a prior, argument fixed, time in a range',
    {
      data,
      companions: [
        {
          ...eccentric,
          elements: {
            eccentricity: { kind: 'prior', value: 0.3, sigma: 0.1 },
            argumentOfPeriastron: { kind: 'fixed', value: 70 },
            timeOfInferiorConjunction: { kind: 'range', low: EPOCH - 8, high: EPOCH + 8 },
          },
        },
      ],
    },
  ],
  [
    'amplitude in a range, circular',
    {
      data,
      companions: [
        {
          ...circular,
          elements: {
            semiAmplitude: { kind: 'range', low: 1, high: 60 },
            period: { kind: 'range', low: 15, high: 30 },
          },
        },
      ],
    },
  ],
];

/** A random place in the middle of the domain. */
function somewhere(random: RandomStream, choices: DensityChoices): PortablePoint {
  const instruments = choices.data.instrumentCount;
  return {
    companions: choices.companions.map((companion, c) => ({
      periodDays: (c === 0 ? 20 : 57) * Math.exp(0.02 * random.normal()),
      eccentricity: companion.circular ? 0 : random.uniformBetween(0.02, 0.7),
      argPeriastronStarRad: companion.circular ? Math.PI / 2 : random.uniformBetween(0, 2 * Math.PI),
      timePeriastronDays: random.uniformBetween(-7, 7),
      semiAmplitudeMps: random.uniformBetween(3, 40),
    })),
    zeroPointsMps: Float64Array.from({ length: instruments }, () => random.uniformBetween(2, 8)),
    drift: [0.01 * random.normal(), 1e-4 * random.normal()],
    jittersMps: Float64Array.from({ length: instruments }, () => random.uniformBetween(0.3, 6)),
  };
}

/** Steps of 1e-3 in every coordinate, which are small beside all widths, except for the drift, whose widths are small themselves. */
function stepsFor(density: PosteriorDensity, choices: DensityChoices): Float64Array {
  const steps = new Float64Array(density.size).fill(1e-3);
  const drift = choices.drift ?? 0;
  const jitters = density.size - jitterStart(choices, density);
  if (drift > 0) steps[density.size - jitters - drift] = 1e-4;
  if (drift > 1) steps[density.size - jitters - 1] = 1e-6;
  return steps;
}

function jitterStart(choices: DensityChoices, density: PosteriorDensity): number {
  const fixed = choices.instruments?.['north']?.jitterMps?.kind === 'fixed' ? 1 : 0;
  return density.size - (choices.data.instrumentCount - fixed);
}

describe('gradient of the posterior against difference quotients', () => {
  it.each(KINDS)('%s: ten random places', (name, choices) => {
    const random = RandomStream.fromSeed(1234);
    const density = densityFor(choices);
    // What a case states is differentiated numerically inside; elsewhere the gradient is analytic.
    const isStated = choices.companions.some(({ elements }) => elements !== undefined);
    for (let place = 0; place < 10; place++) {
      const position = density.position(somewhere(random, choices));
      const check = checkGradient(density, position, stepsFor(density, choices));
      expect(check.worstRelativeError, `${name}, place ${place}, coordinate ${check.index}`).toBeLessThan(
        isStated ? 1e-5 : 1e-6,
      );
    }
  });

  it('on the mirrored side of the jitter', () => {
    const choices: DensityChoices = { data, companions: [eccentric] };
    const density = densityFor(choices);
    const position = density.position(somewhere(RandomStream.fromSeed(5), choices));
    position[position.length - 1]! *= -1;
    expect(checkGradient(density, position, stepsFor(density, choices)).worstRelativeError).toBeLessThan(
      1e-6,
    );
  });

  it('catches a poisoned gradient in every coordinate', () => {
    const choices: DensityChoices = { data, companions: [eccentric], drift: 1 };
    const density = densityFor(choices);
    const position = density.position(somewhere(RandomStream.fromSeed(6), choices));
    for (let wrong = 0; wrong < density.size; wrong++) {
      const poisoned: SmoothDensity = {
        size: density.size,
        evaluate(at, gradient) {
          const value = density.evaluate(at, gradient);
          gradient[wrong]! *= 1.01;
          return value;
        },
      };
      const check = checkGradient(poisoned, position, stepsFor(density, choices));
      expect(check.index).toBe(wrong);
      expect(check.worstRelativeError).toBeGreaterThan(1e-4);
    }
  });
});
