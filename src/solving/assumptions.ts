/** The sentences that say what the numbers rest on. */
import type { Case } from '../observations/types.js';
import type { Curvature } from './curvature.js';
import type { PlannedFit } from './explorer.js';

export function assumptionsOf(theCase: Case, best: PlannedFit, source: Curvature['source']): string[] {
  const priors = best.fit.problem.residualCount - best.fit.problem.data.timesDays.length;
  const sentences = [
    'Velocities are positive when the star recedes; the argument of periastron is that of the orbit of the star; inferior conjunction, where a transit would be, is at true anomaly 90° − ω.',
    'Each velocity has Gaussian noise with variance σ² + jitter², one jitter per instrument, and no correlation in time.',
    'The companions move on undisturbed Keplerian orbits: their pulls on each other are neglected.',
    `The reported point maximises the likelihood${priors > 0 ? ' times the Gaussian priors stated in the case' : ', with a flat density in every element'}; orbits whose periastron lies inside the star are excluded.`,
    source === 'none'
      ? 'The curvature at the solution does not determine every parameter; no uncertainties are given.'
      : `Uncertainties come from the curvature of the log-density at the solution (${source}), carried to the elements and derived quantities by draws.`,
    'Masses are exact for any mass ratio; constants are the IAU 2015 nominal values.',
  ];
  if (theCase.star.massSolar !== null && theCase.star.massSolar.sigma === 0)
    sentences.push(
      'The mass of the star was given without uncertainty, so that masses and axes carry none from it.',
    );
  if (best.plan.drift > 0)
    sentences.push('A drift is taken as a polynomial in time over the observations only.');
  return sentences;
}
