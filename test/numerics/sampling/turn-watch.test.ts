import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { TurnWatch } from '../../../src/numerics/sampling/turn-watch.js';

type Momenta = readonly Float64Array[];

function dot(a: Float64Array, b: Float64Array): number {
  return a.reduce((sum, value, j) => sum + value * b[j]!, 0);
}

function sumOf(momenta: Momenta): Float64Array {
  return momenta[0]!.map((_, j) => momenta.reduce((sum, p) => sum + p[j]!, 0));
}

/** The criterion as the definition reads: the sum points along the momenta at both ends. */
function goesOn(momenta: Momenta): boolean {
  const sum = sumOf(momenta);
  return dot(sum, momenta[0]!) > 0 && dot(sum, momenta.at(-1)!) > 0;
}

/** By recursion over plain lists: both halves, the whole, and each half with its neighbour's nearest point. */
function neverTurns(momenta: Momenta): boolean {
  if (momenta.length === 1) return true;
  const half = momenta.length / 2;
  return neverTurns(momenta.slice(0, half)) && neverTurns(momenta.slice(half)) && joins(momenta, half);
}

function joins(momenta: Momenta, half: number): boolean {
  return goesOn(momenta) && goesOn(momenta.slice(0, half + 1)) && goesOn(momenta.slice(half - 1));
}

describe('TurnWatch', () => {
  it('judges every sub-tree as the recursive definition does (3000 random trajectories of up to 64 points, grown both ways)', () => {
    const random = RandomStream.fromSeed(11);
    const seen = { inside: 0, joint: 0, 'goes on': 0 };
    for (let round = 0; round < 3000; round++) {
      const rate = random.uniformBetween(0, 0.25);
      const noise = random.uniformBetween(0, 0.8);
      // Momenta that turn slowly, with noise, as a function of the place on the time line.
      const momentumAt = (k: number): Float64Array =>
        Float64Array.of(
          Math.cos(rate * k) + noise * random.normal(),
          Math.sin(rate * k) + noise * random.normal(),
          noise * random.normal(),
        );
      const watch = new TurnWatch(3, 6);
      let timeLine: Momenta = [momentumAt(0)];
      let backwardSteps = 0;
      watch.start(timeLine[0]!);
      while (timeLine.length <= 32) {
        const count = timeLine.length;
        const isForward = random.uniform() < 0.5;
        const from = isForward ? count - backwardSteps : -backwardSteps - 1;
        const added = Array.from({ length: count }, (_, leaf) =>
          momentumAt(isForward ? from + leaf : from - leaf),
        );
        let isUnbroken = true;
        for (let leaf = 0; leaf < count && isUnbroken; leaf++)
          isUnbroken = watch.addLeaf(added[leaf]!, leaf, count);
        expect(isUnbroken).toBe(neverTurns(added));
        if (!isUnbroken) {
          seen.inside++;
          break;
        }
        timeLine = isForward ? [...timeLine, ...added] : [...added.reverse(), ...timeLine];
        if (!isForward) backwardSteps += count;
        const isJoined = joins(timeLine, count);
        expect(watch.joinToTree(isForward)).toBe(isJoined);
        seen[isJoined ? 'goes on' : 'joint']++;
        if (!isJoined) break;
      }
    }
    // Every branch must have been met often, or the comparison says nothing.
    for (const times of Object.values(seen)) expect(times).toBeGreaterThan(300);
  });

  it('stops a trajectory that runs straight into its own beginning', () => {
    const watch = new TurnWatch(1, 3);
    watch.start(Float64Array.of(1));
    watch.addLeaf(Float64Array.of(-1.5), 0, 1);
    expect(watch.joinToTree(true)).toBe(false);
  });
});
