/** The sentences that say what the numbers rest on. */
import type { Case } from '../observations/types.js';
import type { Curvature } from './curvature.js';
import type { PlannedFit } from './explorer.js';

export function assumptionsOf(
  theCase: Case,
  best: PlannedFit,
  source: Curvature['source'] | 'posterior',
): string[] {
  const priors = best.fit.problem.residualCount - best.fit.problem.data.timesDays.length;
  const sentences = [
    'Noise is Gaussian and without correlation in time; where nights hold several velocities, a companion must also be there when each night counts once.',
    'The companions move on undisturbed Keplerian orbits: their pulls on each other are neglected.',
    `The reported point maximises the likelihood${priors > 0 ? ' times the Gaussian priors stated in the case' : ', whatever the priors of the posterior'}; orbits whose periastron lies inside the star are excluded.`,
    source === 'posterior'
      ? 'Uncertainties are those of the posterior; the reported point is the maximum of the likelihood, not a mean.'
      : source === 'none'
        ? 'The curvature at the solution does not determine every parameter; no uncertainties are given.'
        : `Uncertainties come from the curvature of the log-density at the solution (${source}), carried to the elements and derived quantities by draws.`,
  ];
  if (theCase.star.massSolar !== null && theCase.star.massSolar.sigma === 0)
    sentences.push(
      'The mass of the star was given without uncertainty, so that masses and axes carry none from it.',
    );
  if (best.plan.drift > 0)
    sentences.push('A drift is taken as a polynomial in time over the observations only.');
  return sentences;
}
