/** Evidence for each companion, for its eccentricity, and where the uncertainties come from. */
import type { CompanionRecord, Evidence, SolutionRecord, Solved } from '../../solving/types.js';
import { escapeMarkdown } from '../escape.js';
import { formatProbability, formatQuantity, significant, typographicMinus } from '../numbers.js';
import { chartBlocks, type ReportSection } from './section.js';

/** Differences of ln L and BIC are good to a tenth at best; more digits would only look exact. */
function tenths(value: number): string {
  return typographicMinus(significant(Math.round(value * 10) / 10, 12));
}

function probability(value: number): string {
  return formatProbability(value, 'markdown');
}

function shapeSentence(evidence: Evidence, circular: boolean): string {
  const shape = evidence.eccentricity;
  if (shape === null) return 'Circular and eccentric orbits were not compared.';
  const balance =
    `An eccentric orbit gains ${tenths(shape.deltaLogLikelihood)} in ln L over a circular one, and its BIC is ` +
    (shape.deltaBic >= 0 ? `better by ${tenths(shape.deltaBic)}` : `worse by ${tenths(-shape.deltaBic)}`);
  const lucySweeney =
    shape.lucySweeneyProbability === null
      ? ''
      : `; a circular orbit would show such an eccentricity by chance with a probability of ` +
        `${probability(shape.lucySweeneyProbability)} (Lucy & Sweeney 1971)`;
  const other =
    !circular || shape.eccentricFit === null
      ? ''
      : ` The eccentric version has e = ${formatQuantity(shape.eccentricFit.eccentricity, 'markdown')} and an argument of ` +
        `periastron of ${formatQuantity(shape.eccentricFit.argumentOfPeriastron, 'markdown')}; the data do not pay for it, so the circular orbit is reported.`;
  return `${balance}${lucySweeney}.${other}`;
}

function evidenceParagraph(companion: CompanionRecord): string {
  const { evidence } = companion;
  return (
    `**Companion ${companion.letter}.** Adding it raises ln L by ${tenths(evidence.deltaLogLikelihood)} and improves the BIC by ` +
    `${tenths(evidence.deltaBic)}; its false-alarm probability is ${probability(evidence.falseAlarmProbability)}. ` +
    `How that probability was obtained: ${escapeMarkdown(evidence.falseAlarmMethod)}. ${shapeSentence(evidence, companion.circular)}`
  );
}

function fitParagraph({ fit }: SolutionRecord): string {
  const state =
    fit.status === 'converged'
      ? 'The fit converged'
      : fit.status === 'iteration-limit'
        ? 'The fit stopped at its limit of iterations'
        : 'The fit failed';
  const aicc = fit.aicc === null ? '' : `, AICc ${tenths(fit.aicc)}`;
  return (
    `${state} (${escapeMarkdown(fit.reason)}). With ${fit.freeParameters} free parameters it leaves a scatter of ` +
    `${significant(fit.rms, 3)} m/s (rms), χ² = ${tenths(fit.chiSquare)} for ${fit.degreesOfFreedom} degrees of freedom with the jitters counted ` +
    `as noise, ln L = ${tenths(fit.logLikelihood)} and BIC = ${tenths(fit.bic)}${aicc}.`
  );
}

function uncertaintyParagraph({ posterior }: SolutionRecord): string {
  if (posterior === null)
    return (
      'Uncertainties come from the curvature of the likelihood at the solution. That is right while the likelihood is close to a Gaussian ' +
      'there; small eccentricities, jitters near zero and periods longer than the data are not of that kind.'
    );
  const divergences =
    posterior.divergences === 0 ? 'none of them divergent' : `${posterior.divergences} divergent`;
  return (
    `Uncertainties are those of ${posterior.draws} draws from the posterior in ${posterior.chains} chains ` +
    `(${escapeMarkdown(posterior.method)}), ${divergences}; the largest rank-normalised R̂ is ${posterior.rHatMax.toFixed(3)}, the smallest ` +
    `effective sample sizes are ${significant(posterior.bulkEssMin, 3)} (bulk) and ${significant(posterior.tailEssMin, 3)} (tails).`
  );
}

/** What the search left behind: the highest peak of the last periodogram. */
function leftoverParagraph(stages: Solved['stages']): string[] {
  const last = stages.at(-1);
  const peak = last?.peaks[0];
  if (last === undefined || peak === undefined) return [];
  const model = last.companionsFitted === 0 ? 'no companion' : 'these companions';
  return [
    `With ${model} in the model the highest peak that is left is at ${significant(peak.periodDays, 5)} d, with a false-alarm probability of ` +
      `${probability(peak.falseAlarmProbability)}. A companion is fitted when its false-alarm probability is below 0.1 % and it improves the BIC by more than 10; ` +
      'one that clears only 1 % and 5 is listed as a candidate.',
  ];
}

export const certainty: ReportSection = {
  heading: 'How sure this is',
  blocks: ({ record, stages }, context) => [
    ...record.companions.map(evidenceParagraph),
    ...leftoverParagraph(stages),
    fitParagraph(record),
    uncertaintyParagraph(record),
    'Intervals are central and hold 68.3 % of the probability; sides that differ by less than 10 % of their mean are written as one ± with that mean ' +
      '(solution.json has both). A limit marked 84 % is the upper end of such an interval.',
    ...chartBlocks(context, /^periodogram/),
  ],
};
