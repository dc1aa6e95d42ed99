/** Evidence for each companion, for its eccentricity, and where the uncertainties come from. */
import type {
  CompanionRecord,
  Evidence,
  MarginalComparison,
  PosteriorRecord,
  SolutionRecord,
  Solved,
} from '../../solving/types.js';
import { escapeMarkdown } from '../escape.js';
import { logBayesFactor, oddsOf, SCALE_SENTENCE, strengthOf } from '../evidence-words.js';
import { formatProbability, formatQuantity, significant, typographicMinus } from '../numbers.js';
import { scatterParts } from '../observed.js';
import {
  divergenceSentence,
  energySentence,
  essText,
  missedRequirements,
  rHatText,
} from '../posterior-words.js';
import { listed } from '../titles.js';
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
        `periastron of ${formatQuantity(shape.eccentricFit.argumentOfPeriastron, 'markdown')}; ${shape.deltaBic > 0 ? 'the circular orbit is reported because it was asked for' : 'the data do not pay for it, so the circular orbit is reported'}.`;
  return `${balance}${lucySweeney}.${other}`;
}

function evidenceParagraph(companion: CompanionRecord, sampled: boolean): string {
  const { evidence } = companion;
  if (evidence.deltaBic === 0 && evidence.deltaLogLikelihood === 0)
    return `**Companion ${companion.letter}.** Evidence for its presence: ${escapeMarkdown(evidence.falseAlarmMethod)}.`;
  return (
    `**Companion ${companion.letter}.** Adding it raises ln L by ${tenths(evidence.deltaLogLikelihood)} and improves the BIC by ` +
    `${tenths(evidence.deltaBic)}; its false-alarm probability is ${probability(evidence.falseAlarmProbability)}. ` +
    `How that probability was obtained: ${escapeMarkdown(evidence.falseAlarmMethod)}. ${shapeSentence(evidence, companion.circular)}` +
    (sampled ? bayesSentence(evidence) : '')
  );
}

function fitParagraph(solved: Solved): string {
  const { fit } = solved.record;
  const state =
    fit.status === 'converged'
      ? 'The fit converged'
      : fit.status === 'iteration-limit'
        ? 'The fit stopped at its limit of iterations'
        : 'The fit failed';
  const scatter = listed(scatterParts(solved));
  const aicc = fit.aicc === null ? '' : `, AICc ${tenths(fit.aicc)}`;
  return (
    `${state} (${escapeMarkdown(fit.reason)}). With ${fit.freeParameters} free parameters it leaves a scatter of ` +
    `${scatter} (rms), χ² = ${tenths(fit.chiSquare)} for ${fit.degreesOfFreedom} degrees of freedom with the jitters counted ` +
    `as noise, ln L = ${tenths(fit.logLikelihood)} and BIC = ${tenths(fit.bic)}${aicc}.`
  );
}

/** Both comparisons of a companion; one that is missing says so. */
function bayesSentence(evidence: Evidence): string {
  const presence = factorClause(evidence.marginal, 'the companion', 'no companion here');
  const shape = factorClause(evidence.eccentricity?.marginal ?? null, 'an eccentric orbit', 'a circular one');
  const parts = [
    ...(presence === null ? [] : [` With the companion against without it: ${presence}.`]),
    ...(shape === null ? [] : [` An eccentric orbit against a circular one: ${shape}.`]),
  ];
  if (parts.length < 2)
    parts.push(
      ` ln B is not given for ${presence === null ? 'its presence' : ''}${presence === null && shape === null ? ' and ' : ''}` +
        `${shape === null ? 'its eccentricity' : ''}: it could not be computed reliably, or the case leaves no choice.`,
    );
  return parts.join('');
}

/** `ln B = 12.3 ± 0.1, odds of 2 × 10⁵ : 1 for the companion (very strong)`. */
function factorClause(comparison: MarginalComparison | null, favoured: string, other: string): string | null {
  if (comparison === null) return null;
  const side = comparison.logBayesFactor >= 0 ? favoured : other;
  return (
    `ln B = ${logBayesFactor(comparison, 'markdown')}, odds of ${oddsOf(comparison, 'markdown')} for ${side} ` +
    `(${strengthOf(comparison.logBayesFactor)})`
  );
}

function hasFactor({ evidence }: CompanionRecord): boolean {
  return evidence.marginal !== null || (evidence.eccentricity?.marginal ?? null) !== null;
}

function uncertaintyParagraphs({ posterior }: SolutionRecord): string[] {
  if (posterior === null)
    return [
      'Uncertainties come from the curvature of the likelihood at the solution. That is right while the likelihood is close to a Gaussian ' +
        'there; small eccentricities, jitters near zero and periods longer than the data are not of that kind.',
    ];
  const { chains, draws, warmup } = posterior;
  return [
    `Uncertainties are those of ${draws} draws from the posterior in ${chains} chains (${escapeMarkdown(posterior.method)}), ` +
      `after ${warmup} draws of warm-up in each chain. ${convergenceSentence(posterior)} ${divergenceSentence(posterior)} ${energySentence(posterior)}`,
  ];
}

function convergenceSentence(posterior: PosteriorRecord): string {
  if (posterior.status === 'converged')
    return (
      `The chains have converged: the largest rank-normalised R̂ is ${rHatText(posterior)} (below 1.01), and the smallest effective sample sizes are ` +
      `${essText(posterior.bulkEssMin)} (bulk) and ${essText(posterior.tailEssMin)} (tails), above 400 (Vehtari et al. 2021).`
    );
  const why =
    posterior.status === 'interrupted'
      ? 'Sampling was interrupted before the chains agreed'
      : 'Sampling stopped at the limit of draws before the chains agreed';
  const remedy =
    posterior.status === 'interrupted'
      ? 'Run it again without interruption before citing them.'
      : 'Run it again with a larger `--draw-limit`, or look whether the data determine all elements.';
  const missed = missedRequirements(posterior);
  const numbers = missed.length === 0 ? '' : `: ${listed(missed)}`;
  return `**${why}**${numbers} (Vehtari et al. 2021). Values stand, but intervals and limits are provisional: they may be too narrow. ${remedy}`;
}

/** What the search left behind: the highest peak of the last periodogram. */
function leftoverParagraph(stages: Solved['stages']): string[] {
  const last = stages.at(-1);
  const peak = last?.peaks[0];
  if (last === undefined || peak === undefined) return [];
  const model = last.companionsFitted === 0 ? 'no companion' : 'these companions';
  return [
    `With ${model} in the model the highest peak that is left is at ${significant(peak.periodDays, 5)} d, with a false-alarm probability of ` +
      `${probability(peak.falseAlarmProbability)}.${last.refusal === undefined ? '' : ` The best fit to what is left was refused: ${last.refusal}.`} A companion is fitted when its false-alarm probability is below 0.1 % and it improves the BIC by more than 10; ` +
      'one that clears only 1 % and 5 is listed as a candidate.',
  ];
}

export const certainty: ReportSection = {
  heading: 'How sure this is',
  blocks: (solved, context) => {
    const { record, stages, posterior } = solved;
    const sampled = record.posterior !== null;
    return [
      ...record.companions.map((companion) => evidenceParagraph(companion, sampled)),
      ...(record.companions.some(hasFactor) ? [SCALE_SENTENCE] : []),
      ...leftoverParagraph(stages),
      fitParagraph(solved),
      ...uncertaintyParagraphs(record),
      'Intervals are central and hold 68.3 % of the probability; sides that differ by less than 10 % of their mean are written as one ± with that mean ' +
        `(solution.json has both). ${posterior === null ? 'A limit marked 84 % is the upper end of such an interval.' : 'A limit marked 95 % has 95 % of the draws below it.'}`,
      ...chartBlocks(context, /^(periodogram|marginals$|pairs-|shape-|chains$)/),
    ];
  },
};
