/** Notices when a trajectory turns back, at every scale of its binary tree, without recursion or allocation. */

/**
 * Keeps sums and end momenta of the complete sub-trees of the doubling under way, one waiting sub-tree per level,
 * merged like the carries of a binary counter. All momenta are whitened, so the generalised criterion of
 * Betancourt 2017 (arXiv:1701.02434) - the summed momentum must point along both end momenta - is a pair of
 * scalar products. It is also applied to each half with the nearest point of the other: otherwise a trajectory of
 * a nearly Gaussian density can close on itself between two checks.
 */
export class TurnWatch {
  private readonly size: number;
  private readonly tree: SubTree;
  /** waiting[k]: a complete sub-tree of 2^k points that has no partner yet. */
  private readonly waiting: readonly SubTree[];
  private readonly current: SubTree;

  /** @param levels - largest number of doublings */
  constructor(size: number, levels: number) {
    this.size = size;
    this.tree = makeSubTree(size);
    this.current = makeSubTree(size);
    this.waiting = Array.from({ length: Math.max(levels, 1) }, () => makeSubTree(size));
  }

  /** Begins a trajectory of one point. */
  start(momentum: Float64Array): void {
    setLeaf(this.tree, momentum);
  }

  /**
   * Adds point number `leaf` (0 .. count - 1) of a doubling by `count` = 2^k points.
   * @returns false when a sub-tree that it completes turns back
   */
  addLeaf(momentum: Float64Array, leaf: number, count: number): boolean {
    const { size, waiting, current } = this;
    setLeaf(current, momentum);
    let level = 0;
    for (let bits = leaf; (bits & 1) === 1; bits >>= 1) {
      const earlier = waiting[level]!;
      if (turnsBack(earlier, current, size)) return false;
      for (let j = 0; j < size; j++) {
        current.sum[j]! += earlier.sum[j]!;
        current.first[j] = earlier.first[j]!;
      }
      level++;
    }
    if (leaf + 1 < count) copySubTree(current, waiting[level]!);
    return true;
  }

  /**
   * Joins the doubling just completed to the trajectory.
   * @returns false when the whole turns back
   */
  joinToTree(isForward: boolean): boolean {
    const { tree, current, size } = this;
    // A doubling backwards met its points in falling order of time: seen from there, the old trajectory lies behind it.
    if (!isForward) exchangeEnds(tree);
    const goesOn = !turnsBack(tree, current, size);
    for (let j = 0; j < size; j++) {
      tree.sum[j]! += current.sum[j]!;
      tree.last[j] = current.last[j]!;
    }
    if (!isForward) exchangeEnds(tree);
    return goesOn;
  }
}

interface SubTree {
  readonly sum: Float64Array;
  first: Float64Array;
  last: Float64Array;
}

function makeSubTree(size: number): SubTree {
  return { sum: new Float64Array(size), first: new Float64Array(size), last: new Float64Array(size) };
}

function setLeaf(tree: SubTree, momentum: Float64Array): void {
  const { sum, first, last } = tree;
  for (let j = 0; j < momentum.length; j++) {
    const p = momentum[j]!;
    sum[j] = p;
    first[j] = p;
    last[j] = p;
  }
}

function copySubTree(from: SubTree, to: SubTree): void {
  for (let j = 0; j < from.sum.length; j++) {
    to.sum[j] = from.sum[j]!;
    to.first[j] = from.first[j]!;
    to.last[j] = from.last[j]!;
  }
}

function exchangeEnds(tree: SubTree): void {
  const { first } = tree;
  tree.first = tree.last;
  tree.last = first;
}

/** Whether two neighbouring sub-trees, in order of travel, turn back: as a whole, or either one with its nearest neighbour. */
function turnsBack(a: SubTree, b: SubTree, size: number): boolean {
  let wholeFirst = 0;
  let wholeLast = 0;
  let nearFirst = 0;
  let nearJoint = 0;
  let farJoint = 0;
  let farLast = 0;
  for (let j = 0; j < size; j++) {
    const sumA = a.sum[j]!;
    const sumB = b.sum[j]!;
    const first = a.first[j]!;
    const beforeJoint = a.last[j]!;
    const afterJoint = b.first[j]!;
    const last = b.last[j]!;
    const whole = sumA + sumB;
    const near = sumA + afterJoint;
    const far = sumB + beforeJoint;
    wholeFirst += whole * first;
    wholeLast += whole * last;
    nearFirst += near * first;
    nearJoint += near * afterJoint;
    farJoint += far * beforeJoint;
    farLast += far * last;
  }
  return !(wholeFirst > 0 && wholeLast > 0 && nearFirst > 0 && nearJoint > 0 && farJoint > 0 && farLast > 0);
}
