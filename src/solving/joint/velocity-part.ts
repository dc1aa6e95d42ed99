/** What velocities say beside transits: companions with known ephemerides listed first, others searched for. */
import { companionLetter } from '../../observations/letters.js';
import type { Case, CompanionChoice, ElementChoice, VelocitySet } from '../../observations/types.js';
import { conjunctionDelayDays } from '../../orbit/conversions.js';
import type { PortablePoint } from '../model-builder.js';
import { scalesOf } from '../posterior/sample-posterior.js';
import { settleCase, type Settled } from '../settle.js';
import { sampleAround } from '../uncertainties.js';
import type { FoundTransit } from './found-transit.js';
import type { VelocityPart } from './joint-recipe.js';

/** Errors of a searched ephemeris are widened by this where they guide the velocities. */
const WIDENED = 5;
/** A conjunction of the velocities within this many of its errors, or this share of a period, of a single transit is that transit. */
const MATCHED_SIGMAS = 4;
const MATCHED_PHASE = 0.04;

export interface SettledVelocities {
  readonly settled: Settled;
  readonly portable: PortablePoint;
  readonly part: VelocityPart;
  /** Known before the joint fit, one per companion of the velocity model; `null` for those that no transit is known of. */
  readonly founds: readonly (FoundTransit | null)[];
}

function prior(value: number, sigma: number): ElementChoice {
  return { kind: 'prior', value, sigma };
}

/** The case with transiting companions of known period listed first. */
export function caseWithTransits(
  theCase: Case,
  transits: readonly FoundTransit[],
  epochBjdTdb: number,
): Case {
  const periodic = transits.filter(({ ephemeris }) => ephemeris.periodDays !== null);
  if (periodic.length === 0) return theCase;
  const listed: readonly CompanionChoice[] = typeof theCase.companions === 'object' ? theCase.companions : [];
  const choices = periodic.map(({ ephemeris, periodSigmaDays, midTimeSigmaDays }): CompanionChoice => {
    const stated = listed.find((choice) => choice.letter === ephemeris.letter);
    const elements = stated?.elements ?? {};
    const { periodDays, midTimeDays, letter } = ephemeris;
    const hasPhase =
      elements.timeOfInferiorConjunction !== undefined || elements.timeOfPeriastron !== undefined;
    return {
      letter,
      circular: stated?.circular ?? theCase.circular,
      inclinationDeg: stated?.inclinationDeg ?? null,
      elements: {
        period: prior(periodDays!, Math.max(1e-9 * periodDays!, WIDENED * (periodSigmaDays ?? 0))),
        ...(hasPhase
          ? {}
          : {
              timeOfInferiorConjunction: prior(
                epochBjdTdb + midTimeDays,
                Math.max(1e-5, WIDENED * midTimeSigmaDays),
              ),
            }),
        ...elements,
      },
    };
  });
  const others = listed.filter(({ letter }) => !choices.some((choice) => choice.letter === letter));
  const isComplete = typeof theCase.companions !== 'string';
  const wanted = typeof theCase.companions === 'number' ? theCase.companions : choices.length + others.length;
  return {
    ...theCase,
    companions: [...choices, ...others],
    maximumCompanions: isComplete
      ? Math.max(wanted, choices.length + others.length)
      : theCase.maximumCompanions,
    ...(isComplete && wanted <= choices.length + others.length ? {} : { searchFurther: true }),
  };
}

/**
 * The search stops at a listed companion that pulls too little to be fitted. Such a one leaves the list, so that others are
 * found; the joint fit takes up its pull again.
 */
function settleWithTransits(
  theCase: Case,
  velocities: VelocitySet,
  transits: readonly FoundTransit[],
  epochBjdTdb: number,
  progress: (stage: string, fraction: number) => void,
): { readonly listed: Case; readonly periodic: readonly FoundTransit[]; readonly settled: Settled } {
  let periodic = transits.filter(({ ephemeris }) => ephemeris.periodDays !== null);
  let open = theCase;
  for (;;) {
    const listed = caseWithTransits(open, periodic, epochBjdTdb);
    const settled = settleCase(listed, velocities, progress);
    const refused = periodic[settled.best.plan.companions.length];
    if (refused === undefined) return { listed, periodic, settled };
    periodic = periodic.filter((transit) => transit !== refused);
    open = without(open, refused.ephemeris.letter);
  }
}

/** The case without one of its companions. */
function without(theCase: Case, letter: string): Case {
  const { companions } = theCase;
  if (companions === 'auto') return theCase;
  return {
    ...theCase,
    companions:
      typeof companions === 'number'
        ? Math.max(0, companions - 1)
        : companions.filter((choice) => choice.letter !== letter),
  };
}

export function settleVelocities(
  theCase: Case,
  velocities: VelocitySet,
  transits: readonly FoundTransit[],
  epochBjdTdb: number,
  seed: number,
  progress: (stage: string, fraction: number) => void,
): SettledVelocities {
  const { listed, periodic, settled } = settleWithTransits(
    theCase,
    velocities,
    transits,
    epochBjdTdb,
    progress,
  );
  const portable = settled.explorer.portable(settled.best);
  const founds: (FoundTransit | null)[] = portable.companions.map((_, c) => periodic[c] ?? null);
  const single = transits.find(({ ephemeris }) => ephemeris.periodDays === null);
  if (single !== undefined) {
    const owner = ownerOf(single, settled, portable, founds, theCase, seed);
    if (owner !== null) {
      const letter = companionLetter(owner);
      const isTaken = transits.some((other) => other !== single && other.ephemeris.letter === letter);
      founds[owner] = {
        ...single,
        how: 'velocities',
        ephemeris: {
          ...single.ephemeris,
          letter: isTaken ? single.ephemeris.letter : letter,
          periodDays: portable.companions[owner]!.periodDays,
        },
      };
    }
  }
  return {
    settled,
    portable,
    founds,
    part: {
      explorer: settled.explorer,
      plan: settled.best.plan,
      scales: scalesOf(settled, listed),
    },
  };
}

/** The companion of the velocities whose conjunction a single transit is, or `null`. */
function ownerOf(
  single: FoundTransit,
  settled: Settled,
  portable: PortablePoint,
  founds: readonly (FoundTransit | null)[],
  theCase: Case,
  seed: number,
): number | null {
  const { problem, point } = settled.best.fit;
  if (portable.companions.length === 0) return null;
  const sampled = sampleAround(problem, point, theCase, seed);
  let owner: number | null = null;
  let nearest = 1;
  portable.companions.forEach((companion, c) => {
    if (founds[c] !== null) return;
    const off = (time: number, period: number): number => {
      const phase = (single.ephemeris.midTimeDays - time) / period;
      return (phase - Math.round(phase)) * period;
    };
    const conjunction = companion.timePeriastronDays + conjunctionDelayDays(companion);
    const distance = off(conjunction, companion.periodDays);
    let square = 0;
    for (const draw of sampled.draws) {
      const own = draw.companions[c]!;
      square += (off(own.timeOfInferiorConjunction, own.period) - distance) ** 2;
    }
    const sigma = sampled.draws.length === 0 ? 0 : Math.sqrt(square / sampled.draws.length);
    const allowed = MATCHED_SIGMAS * sigma + MATCHED_PHASE * companion.periodDays;
    if (Math.abs(distance) / allowed < nearest) {
      nearest = Math.abs(distance) / allowed;
      owner = c;
    }
  });
  return owner;
}
