/** False-alarm probability by permuting what the background leaves, within each instrument. */
import { RandomStream } from '../numerics/random.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { makeBackground } from './linear-background.js';
import { Periodogram } from './periodogram.js';
import { backgroundOf } from './search-stage.js';

export interface PermutationResult {
  readonly probability: number;
  readonly count: number;
  readonly exceeding: number;
}

/**
 * Highest periodogram peak of each of `count` permutations of what the model `base` leaves.
 *
 * Residuals are exchanged within instruments and in units of their own error, so that the weights stay with the times.
 */
export function permutedMaxima(
  explorer: Explorer,
  base: PlannedFit,
  count: number,
  seed: number,
): Float64Array {
  const background = backgroundOf(base.fit);
  const { instrumentOf, instrumentCount } = explorer.builder.data;
  const random = RandomStream.fromSeed(seed, 50);
  const periodogram = new Periodogram(explorer.range.grid);
  periodogram.prepare(background);
  const n = background.timesDays.length;
  const groups = Array.from({ length: instrumentCount }, (_, g) =>
    Uint32Array.from(Array.from({ length: n }, (_, i) => i).filter((i) => instrumentOf[i] === g)),
  );
  const shuffled = new Float64Array(n);
  const powers = new Float64Array(explorer.range.grid.count);
  return Float64Array.from({ length: count }, () => {
    for (const group of groups) {
      const order = Uint32Array.from(group);
      random.shuffle(order);
      group.forEach((to, k) => {
        const from = order[k]!;
        shuffled[to] =
          background.residuals[from]! * Math.sqrt(background.weights[from]! / background.weights[to]!);
      });
    }
    const again = makeBackground(background.timesDays, shuffled, background.weights, background.basis);
    periodogram.powerOf(background, again.residuals, again.chiSquare, powers);
    let highest = 0;
    for (const value of powers) if (value > highest) highest = value;
    return highest;
  });
}

/** Share of permutations that reach `power`, (exceeding + 1)/(count + 1). */
export function permutationFalseAlarm(maxima: Float64Array, power: number): PermutationResult {
  const count = maxima.length;
  const exceeding = maxima.reduce((sum, highest) => sum + (highest >= power ? 1 : 0), 0);
  return { probability: (exceeding + 1) / (count + 1), count, exceeding };
}
