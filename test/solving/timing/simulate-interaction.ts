/** Mid-times of invented interacting companions with Gaussian errors. */
import { RandomStream } from '../../../src/numerics/random.js';
import { conjunctionTimes } from '../../../src/orbit/interaction/conjunctions.js';
import type { InteractionTable } from '../../../src/solving/timing/interaction-types.js';

export interface InventedCompanion {
  readonly massRatio: number;
  readonly periodDays: number;
  readonly eCosOmega: number;
  readonly eSinOmega: number;
}

export function simulateInteraction(
  companions: readonly InventedCompanion[],
  spanDays: number,
  sigmaDays: number,
  seed: number,
): InteractionTable[] {
  const start = 2_458_000;
  const found = conjunctionTimes(
    {
      starMassSolar: 1,
      epochDays: start,
      companions: companions.map((companion, i) => ({
        ...companion,
        conjunctionDays: start + 1 + 3 * i,
        inclinationRad: Math.PI / 2,
        nodeRad: 0,
      })),
    },
    start,
    start + spanDays,
  );
  const random = RandomStream.fromSeed(seed);
  return found.map(({ transits }, i) => ({
    letter: 'bcdef'[i]!,
    cycles: Int32Array.from(transits, (_, k) => k - 10),
    timesDays: transits.map((time) => time + sigmaDays * random.normal()),
    sigmasDays: transits.map(() => sigmaDays),
  }));
}
