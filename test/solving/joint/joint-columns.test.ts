/** What is named among the draws of a joint model. */
import { describe, expect, it } from 'vitest';
import { jointReadings } from '../../../src/solving/joint/joint-columns.js';
import { JointDensity } from '../../../src/solving/joint/joint-density.js';
import { companion, recipe } from './recipes.js';

function keysOf(isPeriodUnknown: boolean): string[] {
  const parts = { companions: [companion(0, { isPeriodUnknown, longestPeriodDays: 1e4 })] };
  const density = new JointDensity(recipe(parts), 'all');
  return jointReadings(density, ['b'], [], 0).map(({ key }) => key.replace('companions.b.elements.', ''));
}

describe('jointReadings', () => {
  it('names period, semi-major axis and inclination of a companion whose period is known', () => {
    expect(keysOf(false)).toEqual(expect.arrayContaining(['period', 'scaledSemiMajorAxis', 'inclination']));
  });

  it('leaves out what a lone event does not tell, since its draws are those of the prior', () => {
    const keys = keysOf(true);
    for (const key of ['period', 'scaledSemiMajorAxis', 'inclination']) expect(keys).not.toContain(key);
    expect(keys).toEqual(
      expect.arrayContaining(['timeOfInferiorConjunction', 'radiusRatio', 'impactParameter']),
    );
  });
});
