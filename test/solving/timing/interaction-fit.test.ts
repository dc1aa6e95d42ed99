import { describe, expect, it } from 'vitest';
import { UsageError } from '../../../src/errors.js';
import { SOLAR_MASS_IN_EARTH } from '../../../src/orbit/constants.js';
import { fitInteraction } from '../../../src/solving/timing/interaction-fit.js';
import type { InteractionFit } from '../../../src/solving/timing/interaction-types.js';
import { expectWithin } from '../../support/expect-within.js';
import { simulateInteraction } from './simulate-interaction.js';

const TRUTH = [
  { massRatio: 2e-5, periodDays: 10, eCosOmega: 0.02, eSinOmega: -0.01 },
  { massRatio: 4e-5, periodDays: 20.4, eCosOmega: -0.01, eSinOmega: 0.015 },
] as const;
/** Half a minute. */
const SIGMA_DAYS = 0.00035;

function expectMassesWithin(fit: InteractionFit, sigmas: number): void {
  fit.companions.forEach(({ massRatio, letter }, c) => {
    const error = Math.max(massRatio.sigma!, 0.5 * (massRatio.upper! - massRatio.lower!));
    expectWithin(massRatio.value!, TRUTH[c]!.massRatio, {
      abs: sigmas * error,
      unit: '1',
      why: `${sigmas} standard errors of ${letter}`,
    });
  });
}

describe('two companions near the 2:1 resonance', () => {
  const tables = simulateInteraction(TRUTH, 420, SIGMA_DAYS, 11);
  const quick = fitInteraction(tables, { massSolar: 0.9, massSolarSigma: 0.02 }, { draws: 0 });
  const sampled = fitInteraction(tables, { massSolar: null }, { seed: 4 });

  it('recovers the masses within their errors, by curvature and by sampling', () => {
    expect(quick.status).toBe('converged');
    expect(sampled.status).toBe('converged');
    expectMassesWithin(quick, 3);
    expectMassesWithin(sampled, 3);
  });

  it('leaves residuals like the errors, where straight lines leave hundreds of times as much', () => {
    const { chiSquare, degreesOfFreedom, chiSquareLines, deltaBic } = quick;
    // Twice the number of degrees of freedom is the variance of chi-square; jitter can only lower it.
    expect(chiSquare).toBeLessThan(degreesOfFreedom + 4 * Math.sqrt(2 * degreesOfFreedom));
    expect(chiSquareLines).toBeGreaterThan(50 * chiSquare);
    expect(deltaBic).toBeGreaterThan(100);
  });

  it('gives masses in Earth masses with the star’s error, or says why not', () => {
    const { mass, massRatio } = quick.companions[0]!;
    expectWithin(mass.value!, massRatio.value! * 0.9 * SOLAR_MASS_IN_EARTH, {
      rel: 1e-12,
      unit: 'M_earth',
      why: 'rounding',
    });
    expect(mass.sigma! / mass.value!).toBeGreaterThan(massRatio.sigma! / massRatio.value!);
    expect(sampled.companions[0]!.mass.value).toBeNull();
    expect(sampled.companions[0]!.mass.why).toMatch(/mass of the star/);
  });

  it('reports the degeneracy of masses and eccentricities', () => {
    expect(sampled.resonances).toHaveLength(1);
    expect(sampled.resonances[0]!.j).toBe(2);
    expectWithin(sampled.resonances[0]!.superPeriodDays!, 520, {
      abs: 15,
      unit: 'd',
      why: '1/|2/P - 1/p| of the mean periods',
    });
    for (const { massEccentricityCorrelation, massRatioRange95, massRatio } of sampled.companions) {
      expect(massEccentricityCorrelation).toBeLessThan(-0.7);
      expect(massRatioRange95![0]).toBeLessThan(massRatio.value!);
      expect(massRatioRange95![1]).toBeGreaterThan(massRatio.value!);
    }
    expect(sampled.massCorrelation[0]![1]).toBeGreaterThan(0.5);
    expect(sampled.warnings.map(({ code }) => code)).toContain('mass-eccentricity-degenerate');
  });

  it('samples until enough draws carry the posterior', () => {
    expect(sampled.posterior!.status).toBe('converged');
    expect(sampled.posterior!.effectiveDraws).toBeGreaterThan(1200);
    expect(quick.posterior).toBeNull();
  });

  it('predicts mid-times beyond the data as the exact motion goes on', () => {
    const later = simulateInteraction(TRUTH, 510, 0, 1);
    sampled.predictions.forEach(({ cycles, timesDays, sigmasDays }, c) => {
      const last = tables[c]!.cycles.length;
      const row = cycles.indexOf(last - 10 + 2);
      expect(row).toBeGreaterThan(0);
      const truth = later[c]!.timesDays[last + 2]!;
      expectWithin(timesDays[row]!, truth, {
        abs: 4 * sigmasDays[row]!,
        unit: 'd',
        why: 'four standard errors of the prediction',
      });
    });
    expect(sampled.modelErrorSeconds).toBeLessThan(0.1);
  });

  it('is the same again with the same seed', () => {
    expect(fitInteraction(tables, { massSolar: 0.9, massSolarSigma: 0.02 }, { draws: 0 })).toEqual(quick);
  });
});

describe('companions that hardly pull', () => {
  it('gives no masses away: straight lines do as well', () => {
    const faint = TRUTH.map((companion) => ({ ...companion, massRatio: 1e-9 }));
    const fit = fitInteraction(
      simulateInteraction(faint, 150, SIGMA_DAYS, 7),
      { massSolar: 1 },
      { draws: 800 },
    );
    expect(fit.deltaBic).toBeLessThan(10);
    expect(fit.warnings.map(({ code }) => code)).toContain('interaction-not-needed');
    expect(fit.warnings.map(({ code }) => code)).toContain('mass-range-wide');
  });
});

describe('tables that cannot be used', () => {
  const [b, c] = simulateInteraction(TRUTH, 120, SIGMA_DAYS, 1) as [never, never];

  it('names every problem at once', () => {
    const short = { letter: 'c', cycles: [0, 1, 1.5], timesDays: [1, 2, NaN], sigmasDays: [1, 0, 1] };
    expect(() => fitInteraction([b, short], { massSolar: 1 })).toThrow(
      /3 cycles.*not whole numbers.*no number.*not above zero/,
    );
    expect(() => fitInteraction([b], { massSolar: 1 })).toThrow(UsageError);
  });

  it('asks for different periods', () => {
    expect(() => fitInteraction([c, c], { massSolar: 1 })).toThrow(/same period/);
  });
});
