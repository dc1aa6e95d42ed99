import { describe, expect, test } from 'vitest';
import { ModelDomainError } from '../../src/errors.js';
import { RandomStream } from '../../src/numerics/random.js';
import { clearNights } from '../../src/planning/weather.js';
import { expectWithin } from '../support/expect-within.js';

const NIGHTS = 200_000;

describe('spells of weather', () => {
  // Two-state chain: stationary fraction lost f, lag-one correlation r = 1 - 1/L - f / ((1 - f) L), mean lost spell L nights;
  // the mean of n nights has variance f (1 - f) / n * (1 + r) / (1 - r). (Any text on Markov chains; derived by hand.)
  test.each([
    { lossFraction: 0.1, spellNights: 4 },
    { lossFraction: 0.35, spellNights: 4 },
    { lossFraction: 0.6, spellNights: 4 },
    { lossFraction: 0.9, spellNights: 9 },
  ])('lose $lossFraction of the nights, $spellNights at a time', ({ lossFraction, spellNights }) => {
    const clear = clearNights(NIGHTS, lossFraction, RandomStream.fromSeed(11));
    let lost = 0;
    let spells = 0;
    let bothLost = 0;
    for (let night = 0; night < NIGHTS; night += 1) {
      lost += 1 - clear[night]!;
      if (night === 0) continue;
      if (clear[night] === 0 && clear[night - 1] === 1) spells += 1;
      if (clear[night] === 0 && clear[night - 1] === 0) bothLost += 1;
    }
    const correlation = 1 - 1 / spellNights - lossFraction / ((1 - lossFraction) * spellNights);
    const spread = Math.sqrt(
      (lossFraction * (1 - lossFraction) * (1 + correlation)) / (1 - correlation) / NIGHTS,
    );
    const why = 'four standard errors of the sample';
    expectWithin(lost / NIGHTS, lossFraction, { abs: 4 * spread, unit: '1', why });
    // spell lengths are geometric: standard deviation sqrt(L (L - 1))
    expectWithin(lost / spells, spellNights, {
      abs: 4 * Math.sqrt((spellNights * (spellNights - 1)) / spells),
      unit: 'nights',
      why,
    });
    const fraction = lost / NIGHTS;
    const sampled = (bothLost / NIGHTS - fraction ** 2) / (fraction * (1 - fraction));
    // its error is that of the two transition probabilities, the rarer state counting most
    const transition = Math.sqrt(0.25 / (NIGHTS * Math.min(lossFraction, 1 - lossFraction)));
    expectWithin(sampled, correlation, { abs: 4 * Math.SQRT2 * transition, unit: '1', why });
  });

  test('none or all can be lost', () => {
    expect(clearNights(500, 0, RandomStream.fromSeed(1)).every((night) => night === 1)).toBe(true);
    expect(clearNights(500, 1, RandomStream.fromSeed(1)).every((night) => night === 0)).toBe(true);
    expect(clearNights(0, 0.5, RandomStream.fromSeed(1))).toHaveLength(0);
  });

  test.each([-0.1, 1.1, NaN])('a fraction of %d is refused', (fraction) => {
    expect(() => clearNights(10, fraction, RandomStream.fromSeed(1))).toThrow(ModelDomainError);
  });
});
