/** What a fit of interacting companions assumes, and what must be known before its masses are believed. */
import { BIC_THRESHOLD } from './compare-models.js';
import {
  COORDINATES,
  LARGEST_ECCENTRICITY,
  LARGEST_MASS_RATIO,
  LEAST_MASS_RATIO,
} from './interaction-model.js';
import type { InteractionFit } from './interaction-types.js';

type Remark = InteractionFit['warnings'][number];
type Fit = Omit<InteractionFit, 'assumptions' | 'warnings'>;

export function interactionAssumptions(eccentricityScale: number, isSampled: boolean): string[] {
  return [
    'The star and the companions are points that follow Newton’s law; no other body takes part. Tides, general relativity and light time across the system are left out.',
    'All orbits lie in one plane seen edge-on.',
    `Priors: mass ratios uniform above zero; e cos ω and e sin ω normal with width ${eccentricityScale}; periods and epochs flat; jitters log-uniform above a fifth of the median error.`,
    'Values are those of highest likelihood under the prior of the eccentricities; elements are osculating, relative to the star, at the epoch stated.',
    isSampled
      ? 'Intervals are the central 68.3 % of the posterior, sampled by adaptive importance sampling that started from every solution found.'
      : 'Intervals are those of the curvature at the best fit: they do not follow a bent degeneracy of mass and eccentricity, and held 47 % of 36 simulated masses where sampled ones held 72 %.',
  ];
}

export function interactionWarnings(fit: Fit, points: readonly Float64Array[], best: Float64Array): Remark[] {
  const warnings: Remark[] = [];
  const add = (code: string, message: string): number => warnings.push({ code, message });
  if (fit.status !== 'converged')
    add(
      'interaction-not-converged',
      'the fit of the interacting orbits stopped before it had converged: its masses are not to be used',
    );
  if (fit.deltaBic < BIC_THRESHOLD)
    add(
      'interaction-not-needed',
      `straight lines describe the times nearly as well (BIC ${fit.deltaBic.toFixed(1)} in favour of interaction; ${BIC_THRESHOLD} or more would count): masses are upper limits at best`,
    );
  fit.companions.forEach(({ letter, massEccentricityCorrelation, massRatioRange95 }, c) => {
    const mass = Math.exp(best[COORDINATES * c]!);
    const eccentricity = Math.hypot(best[COORDINATES * c + 1]!, best[COORDINATES * c + 2]!);
    if (mass < 2 * LEAST_MASS_RATIO)
      add(
        'mass-at-bound',
        `companion ${letter}: the best mass ratio lies at the lower bound of ${LEAST_MASS_RATIO}; the times of the others need no mass here`,
      );
    if (mass > 0.8 * LARGEST_MASS_RATIO)
      add(
        'mass-at-bound',
        `companion ${letter}: the best mass ratio lies at the upper bound of ${LARGEST_MASS_RATIO}`,
      );
    if (eccentricity > 0.9 * LARGEST_ECCENTRICITY)
      add(
        'eccentricity-at-bound',
        `companion ${letter}: the best eccentricity lies at the bound of ${LARGEST_ECCENTRICITY}`,
      );
    const spread = massRatioRange95 === null ? 0 : massRatioRange95[1] / Math.max(massRatioRange95[0], 1e-12);
    if (spread > 3)
      add(
        'mass-range-wide',
        `companion ${letter}: mass ratios from ${massRatioRange95![0].toExponential(1)} to ${massRatioRange95![1].toExponential(1)} are compatible with the times (95 %)`,
      );
    if (massEccentricityCorrelation !== null && Math.abs(massEccentricityCorrelation) > 0.7)
      add(
        'mass-eccentricity-degenerate',
        `companion ${letter}: mass and free eccentricity trade against each other (correlation ${massEccentricityCorrelation.toFixed(2)}): its uncertainty is mostly that of the eccentricities, and follows their prior where the times leave them open`,
      );
  });
  for (const { superPeriodDays, letters } of fit.resonances) {
    if (superPeriodDays === null) continue;
    const spans = fit.predictions
      .filter(({ letter }) => letters.includes(letter))
      .map(({ observedSpanDays }) => observedSpanDays);
    const span = Math.max(...spans);
    if (span < superPeriodDays)
      add(
        'super-period-not-covered',
        `companions ${letters.join(' and ')}: the times span ${span.toFixed(0)} d, less than the super-period of ${superPeriodDays.toFixed(0)} d; amplitude and straight line are not independent`,
      );
  }
  if (fit.posterior !== null && fit.posterior.status !== 'converged')
    add(
      'interaction-sampling-unfinished',
      `the sampling of the interacting orbits reached its limit with ${fit.posterior.effectiveDraws.toFixed(0)} effective draws (1200 are asked for): intervals are rough`,
    );
  if (points.length === 0)
    add('interaction-uncertainty-unknown', 'no uncertainties of the masses could be had');
  const close = fit.rivals.filter(({ deltaLogLikelihood }) => deltaLogLikelihood > -5);
  if (close.length > 0)
    add(
      'interaction-rivals',
      `${close.length} other solution${close.length > 1 ? 's' : ''} within 5 in ln L of the best: see the list of rivals`,
    );
  if (fit.modelErrorSeconds > 1)
    add(
      'interaction-integration-error',
      `the fast integration of the fit departs from the exact one by ${fit.modelErrorSeconds.toFixed(1)} s`,
    );
  return warnings;
}
