/** Companions near a resonance of first order, and how far their mid-times then swing. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import {
  nearestResonance,
  nearResonantVariation,
  resonanceCoefficients,
  resonanceDistance,
  superPeriodDays,
  type NearResonantVariation,
} from '../../orbit/interaction/near-resonance.js';
import type { PredictedCompanion } from '../timing/interaction-predict.js';
import { FARTHEST_RESONANCE } from '../timing/interaction-starts.js';
import type { PredictedInteractionRecord } from '../transit-types.js';

const SMALL_ECCENTRICITY = 0.01;

interface Pair {
  readonly inner: PredictedCompanion;
  readonly outer: PredictedCompanion;
  readonly j: number;
  readonly delta: number;
}

/** Neighbours in period that are near a resonance of first order, the nearest first. */
function resonantPairs(companions: readonly PredictedCompanion[]): Pair[] {
  const order = [...companions].sort((a, b) => a.periodDays - b.periodDays);
  return order
    .slice(1)
    .flatMap((outer, at) => {
      const inner = order[at]!;
      const j = nearestResonance(inner.periodDays, outer.periodDays, FARTHEST_RESONANCE);
      if (j === null) return [];
      return [{ inner, outer, j, delta: resonanceDistance(inner.periodDays, outer.periodDays, j) }];
    })
    .sort((a, b) => Math.abs(a.delta) - Math.abs(b.delta));
}

export function resonanceOf(
  companions: readonly PredictedCompanion[],
): Pick<PredictedInteractionRecord, 'nearResonance' | 'superPeriod'> {
  const pair = resonantPairs(companions)[0];
  if (pair === undefined || pair.delta === 0) return { nearResonance: null, superPeriod: null };
  const { inner, outer, j, delta } = pair;
  return {
    nearResonance: { letters: [inner.letter, outer.letter], ratio: `${j}:${j - 1}`, distance: delta },
    superPeriod: superPeriodDays(inner.periodDays, outer.periodDays, j),
  };
}

/**
 * Amplitudes by [Lithwick2012], with the eccentricities of the solution as free ones, and by how much they change when an
 * eccentricity changes by 0.01 in the worst direction; the larger ones where a companion has two partners.
 */
export function superPeriodSwings(
  companions: readonly PredictedCompanion[],
): Pick<PredictedInteractionRecord, 'superPeriodAmplitudeMinutes' | 'eccentricityLeverMinutes'> {
  const amplitude: Record<string, number> = {};
  const lever: Record<string, number> = {};
  for (const pair of resonantPairs(companions)) {
    const { inner, outer, j, delta } = pair;
    if (delta === 0) continue;
    const { f, g } = resonanceCoefficients(j);
    const re = f * sine(inner) + g * sine(outer);
    const im = -f * cosine(inner) - g * cosine(outer);
    const found = variationOf(pair, re, im);
    const other = variationOf(pair, re + SMALL_ECCENTRICITY * Math.max(Math.abs(f), Math.abs(g)), im);
    for (const [{ letter }, v, w] of [
      [inner, found.innerDays, other.innerDays],
      [outer, found.outerDays, other.outerDays],
    ] as const) {
      amplitude[letter] = Math.max(amplitude[letter] ?? 0, MINUTES_PER_DAY * Math.hypot(v.re, v.im));
      lever[letter] = Math.max(lever[letter] ?? 0, MINUTES_PER_DAY * Math.hypot(w.re - v.re, w.im - v.im));
    }
  }
  return { superPeriodAmplitudeMinutes: amplitude, eccentricityLeverMinutes: lever };
}

function sine({ eccentricity, argPeriastronStarRad }: PredictedCompanion): number {
  return eccentricity * Math.sin(argPeriastronStarRad);
}

function cosine({ eccentricity, argPeriastronStarRad }: PredictedCompanion): number {
  return eccentricity * Math.cos(argPeriastronStarRad);
}

function variationOf({ inner, outer, j }: Pair, re: number, im: number): NearResonantVariation {
  return nearResonantVariation({
    innerPeriodDays: inner.periodDays,
    outerPeriodDays: outer.periodDays,
    innerMassRatio: inner.massRatio,
    outerMassRatio: outer.massRatio,
    j,
    freeEccentricity: { re, im },
  });
}
