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
 * Share of permutations whose highest periodogram peak reaches `power`, (exceeding + 1)/(count + 1).
 *
 * Residuals are exchanged in units of their own error, so that the weights stay with the times.
 */
export function permutationFalseAlarm(
  explorer: Explorer,
  base: PlannedFit,
  power: number,
  count: number,
  seed: number,
): PermutationResult {
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
  let exceeding = 0;
  for (let turn = 0; turn < count; turn++) {
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
    if (highest >= power) exceeding++;
  }
  return { probability: (exceeding + 1) / (count + 1), count, exceeding };
}
