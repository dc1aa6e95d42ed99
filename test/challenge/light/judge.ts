/** Whether what was found is what was put in. */
import { conjunctionsBetween } from '../../../src/planning/mock-transits.js';
import type { Truth } from './simulate.js';

/** An ephemeris as found: BJD_TDB and days; no period where only one event was seen. */
export interface FoundEphemeris {
  readonly periodDays: number | null;
  readonly midTimeBjdTdb: number;
}

/** A predicted transit is the true one when their middles are closer than this share of the duration. */
const WITHIN_DURATION = 0.5;

/**
 * The same transits all through the data: as many conjunctions between the first and the last one seen, and each less than
 * half a duration from the true one.
 */
export function areSameTransits(found: FoundEphemeris, truth: Truth): boolean {
  const { periodDays, midTimeBjdTdb } = found;
  if (periodDays === null) return false;
  const first = truth.seen[0]!;
  const last = truth.seen.at(-1)!;
  const reach = WITHIN_DURATION * truth.durationDays;
  const predicted = conjunctionsBetween(
    { periodDays, conjunctionBjdTdb: midTimeBjdTdb },
    first - reach,
    last + reach,
  );
  const count = Math.round((last - first) / truth.periodDays) + 1;
  if (predicted.length !== count) return false;
  return predicted.every(({ timeBjdTdb }, i) => Math.abs(timeBjdTdb - first - i * truth.periodDays) < reach);
}

export interface Judgement {
  /** Per companion of the truth: index of what was found of it, or -1. */
  readonly matches: readonly number[];
  /** How many that were found are nothing that was put in. */
  readonly falseClaims: number;
}

export function judge(found: readonly FoundEphemeris[], truth: readonly Truth[]): Judgement {
  const matches = truth.map((one) => found.findIndex((other) => areSameTransits(other, one)));
  const matched = new Set(matches.filter((index) => index >= 0));
  return { matches, falseClaims: found.length - matched.size };
}
