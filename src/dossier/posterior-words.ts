/** What the diagnostics of a posterior mean, in plain words; the report and the screen say the same. */
import type { PosteriorMode, PosteriorRecord } from '../solving/types.js';
import { formatProbability, significant, type NumberStyle } from './numbers.js';

/** What is asked of a posterior before it is called converged (Vehtari et al. 2021). */
const LARGEST_R_HAT = 1.01;
const SMALLEST_ESS = 400;
/** Below this the sampler hardly moves between energies (Betancourt 2016, arXiv:1604.00695). */
const SMALLEST_EBFMI = 0.3;
/** Modes that weigh less are counted, not listed. */
const SMALLEST_SHOWN_WEIGHT = 0.01;

/** R̂ to three decimals, cut off and not rounded where rounding would hide that the limit is missed. */
export function rHatText({ rHatMax }: PosteriorRecord): string {
  const rounded = rHatMax.toFixed(3);
  return rHatMax >= LARGEST_R_HAT || Number(rounded) < LARGEST_R_HAT ? rounded : '1.009';
}

/** Effective sizes as whole draws, rounded down: 399.8 is not yet 400. */
export function essText(size: number): string {
  return String(Math.floor(size));
}

/** The requirements that were missed, each with its number; empty for a converged posterior. */
export function missedRequirements(posterior: PosteriorRecord): string[] {
  if (posterior.status === 'converged') return [];
  const missed: string[] = [];
  if (!(posterior.rHatMax < LARGEST_R_HAT))
    missed.push(`R̂ is ${rHatText(posterior)} where less than ${LARGEST_R_HAT} is required`);
  const sizes: readonly (readonly [string, number])[] = [
    ['bulk', posterior.bulkEssMin],
    ['tails', posterior.tailEssMin],
  ];
  for (const [name, size] of sizes)
    if (!(size > SMALLEST_ESS))
      missed.push(
        `the effective sample size (${name}) is ${essText(size)} where more than ${SMALLEST_ESS} are required`,
      );
  return missed;
}

/** One sentence about divergent draws. */
export function divergenceSentence({ divergences, draws }: PosteriorRecord): string {
  if (divergences === 0) return 'No draw diverged.';
  return (
    `${divergences === 1 ? 'One draw' : `${divergences} draws`} of ${draws} diverged: there the density bends too sharply for the sampler, ` +
    'and that corner of the posterior may be under-represented.'
  );
}

/** One sentence about the energies. */
export function energySentence({ ebfmiMin }: PosteriorRecord): string {
  const value = ebfmiMin.toFixed(2);
  return ebfmiMin >= SMALLEST_EBFMI
    ? `The chains move freely between the middle and the tails (E-BFMI ${value} at least, above ${SMALLEST_EBFMI}).`
    : `The chains move slowly between the middle and the tails (E-BFMI ${value}, below ${SMALLEST_EBFMI}): the tails may be wider than the draws show.`;
}

/** Modes worth showing when there is more than one of them; else none. */
export function shownModes(posterior: PosteriorRecord | null): readonly PosteriorMode[] {
  const shown = (posterior?.modes ?? []).filter((mode) => mode.weight > SMALLEST_SHOWN_WEIGHT);
  return shown.length > 1 ? shown : [];
}

/** `41.62 d (82 %)`; with several companions `3.1 d + 41.62 d (82 %)`. */
export function modeText({ periods, weight }: PosteriorMode, style: Exclude<NumberStyle, 'csv'>): string {
  return `${periods.map((period) => `${significant(period, 6)} d`).join(' + ')} (${formatProbability(weight, style)})`;
}
