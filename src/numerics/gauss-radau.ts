/** Initial-value problems y'' = f(y) of smooth motion, to rounding. */
import {
  END_POSITION_WEIGHTS,
  END_VELOCITY_WEIGHTS,
  MONOMIALS,
  NODES,
  NODE_COUNT,
  POSITION_WEIGHTS,
  nodePolynomial,
} from './radau-tables.js';

export interface SecondOrderSystem {
  readonly componentCount: number;
  /** Components of one body: step control compares within such a group, so that a slow body is not judged by a fast one. */
  readonly groupSize: number;
  /** Overwrites `out` (length componentCount) by f(positions). */
  accelerations(positions: Float64Array, out: Float64Array): void;
}

/** Iteration of a step ends when no acceleration changes by more than this part of the largest of its body. */
const ITERATION_GOAL = 3e-15;
const MOST_ITERATIONS = 25;
/** Steps are kept while they are within this range of the wanted one: the extrapolation to the next step is then tabulated. */
const KEEP_FROM = 0.8;
const KEEP_TO = 1.4;
const LONGEST_GROWTH = 2.5;
const FIRST_GUESS_TOLERANCE = 1e-3;

/**
 * Integrator of order 15 on eight Radau nodes, the accelerations interpolated by a polynomial of degree 7 and found by
 * iteration [Everhart1985; ReinSpiegel2015, the mathematics]. Positions within the last step come from the same
 * polynomial (order 9).
 *
 * Step control: the seventh divided difference of the accelerations over a step, as part of the accelerations, is held
 * near `tolerance`. Time may run backwards. The same start gives the same numbers.
 */
export class GaussRadau {
  readonly positions: Float64Array;
  readonly velocities: Float64Array;
  /** Time at which `positions` and `velocities` stand. */
  time = 0;
  /** Start and length of the last step taken. */
  stepStart = 0;
  stepLength = 0;
  /** Calls of the right-hand side so far. */
  evaluations = 0;

  private readonly system: SecondOrderSystem;
  private readonly tolerance: number;
  private readonly count: number;
  /** (8 x count): accelerations at the nodes of the present step. */
  private readonly nodal: Float64Array;
  private readonly predicted: Float64Array;
  private readonly startPositions: Float64Array;
  private readonly startVelocities: Float64Array;
  /** Low-order parts of the sums (Kahan). */
  private readonly positionRest: Float64Array;
  private readonly velocityRest: Float64Array;
  private readonly place: Float64Array;
  private readonly force: Float64Array;
  private readonly extrapolation: Float64Array = new Float64Array(NODE_COUNT * NODE_COUNT);
  private extrapolationRatio = 0;
  private nextStep = 0;

  constructor(system: SecondOrderSystem, tolerance: number) {
    this.system = system;
    this.tolerance = tolerance;
    this.count = system.componentCount;
    const fresh = (): Float64Array => new Float64Array(this.count);
    this.positions = fresh();
    this.velocities = fresh();
    this.startPositions = fresh();
    this.startVelocities = fresh();
    this.positionRest = fresh();
    this.velocityRest = fresh();
    this.place = fresh();
    this.force = fresh();
    this.nodal = new Float64Array(NODE_COUNT * this.count);
    this.predicted = new Float64Array(NODE_COUNT * this.count);
  }

  /**
   * @param positions - length componentCount, copied; so are the velocities
   * @param firstStep - not 0; its sign is the direction of time; corrected by the step control at once
   */
  start(time: number, positions: Float64Array, velocities: Float64Array, firstStep: number): void {
    this.time = time;
    this.positions.set(positions);
    this.velocities.set(velocities);
    this.positionRest.fill(0);
    this.velocityRest.fill(0);
    this.nextStep = firstStep;
    this.stepLength = 0;
    this.evaluations = 0;
  }

  /**
   * Takes one step, or one shorter than `longest` where that is less.
   *
   * @returns false when the motion cannot be followed: steps shrink below 1e-6 of `longest`, or numbers overflow
   */
  advance(longest: number): boolean {
    this.startPositions.set(this.positions);
    this.startVelocities.set(this.velocities);
    const sign = Math.sign(this.nextStep);
    let step = sign * Math.min(Math.abs(this.nextStep), longest);
    for (;;) {
      if (!(Math.abs(step) > 1e-6 * longest)) return false;
      this.predict(step);
      const isSolved = this.solveNodes(step);
      const wanted = isSolved ? this.wantedStep(step) : 0.5 * step;
      if (isSolved && Math.abs(wanted) >= 0.5 * Math.abs(step)) {
        this.finish(step);
        const ratio = wanted / step;
        this.nextStep = ratio > KEEP_FROM && ratio < KEEP_TO ? step : step * Math.min(ratio, LONGEST_GROWTH);
        return true;
      }
      step = Math.abs(wanted) < 0.9 * Math.abs(step) ? wanted : 0.5 * step;
      this.stepLength = 0;
    }
  }

  /**
   * Polynomial of one component over the last step: coefficients of s^0 .. s^9, s = (time - stepStart) / stepLength.
   *
   * @param out - length 10, overwritten
   */
  polynomial(component: number, out: Float64Array): void {
    const { count, nodal, stepLength } = this;
    out[0] = this.startPositions[component]!;
    out[1] = stepLength * this.startVelocities[component]!;
    const square = stepLength * stepLength;
    for (let k = 0; k < NODE_COUNT; k++) {
      let sum = 0;
      for (let j = 0; j < NODE_COUNT; j++)
        sum += MONOMIALS[k * NODE_COUNT + j]! * nodal[j * count + component]!;
      out[k + 2] = (square * sum) / ((k + 1) * (k + 2));
    }
  }

  /** First values of the nodal accelerations: those of the last step extrapolated, or the initial ones everywhere. */
  private predict(step: number): void {
    const { count, nodal, predicted } = this;
    this.evaluations++;
    if (this.stepLength === 0) {
      this.system.accelerations(this.startPositions, this.force);
      for (let j = 0; j < NODE_COUNT; j++) nodal.set(this.force, j * count);
      return;
    }
    const ratio = step / this.stepLength;
    if (ratio !== this.extrapolationRatio) this.tabulateExtrapolation(ratio);
    const e = this.extrapolation;
    for (let i = 1; i < NODE_COUNT; i++) {
      const row = i * NODE_COUNT;
      for (let c = 0; c < count; c++) {
        let sum = 0;
        for (let j = 0; j < NODE_COUNT; j++) sum += e[row + j]! * nodal[j * count + c]!;
        predicted[i * count + c] = sum;
      }
    }
    nodal.set(predicted);
    this.system.accelerations(this.startPositions, this.force);
    nodal.set(this.force, 0);
  }

  private tabulateExtrapolation(ratio: number): void {
    for (let i = 0; i < NODE_COUNT; i++) {
      const s = 1 + ratio * NODES[i]!;
      for (let j = 0; j < NODE_COUNT; j++) this.extrapolation[i * NODE_COUNT + j] = nodePolynomial(j, s);
    }
    this.extrapolationRatio = ratio;
  }

  /** Iterates the accelerations at nodes 1 .. 7, each from the newest of the others. */
  private solveNodes(step: number): boolean {
    const { count, nodal, place, force, startPositions: x, startVelocities: v } = this;
    const square = step * step;
    const size = largest(nodal, count);
    let lastChange = Infinity;
    for (let iteration = 0; iteration < MOST_ITERATIONS; iteration++) {
      let change = 0;
      for (let i = 1; i < NODE_COUNT; i++) {
        const row = i * NODE_COUNT;
        const w0 = POSITION_WEIGHTS[row]! * square;
        const w1 = POSITION_WEIGHTS[row + 1]! * square;
        const w2 = POSITION_WEIGHTS[row + 2]! * square;
        const w3 = POSITION_WEIGHTS[row + 3]! * square;
        const w4 = POSITION_WEIGHTS[row + 4]! * square;
        const w5 = POSITION_WEIGHTS[row + 5]! * square;
        const w6 = POSITION_WEIGHTS[row + 6]! * square;
        const w7 = POSITION_WEIGHTS[row + 7]! * square;
        const advance = step * NODES[i]!;
        for (let c = 0; c < count; c++) {
          const low =
            w0 * nodal[c]! + w1 * nodal[count + c]! + w2 * nodal[2 * count + c]! + w3 * nodal[3 * count + c]!;
          const high =
            w4 * nodal[4 * count + c]! +
            w5 * nodal[5 * count + c]! +
            w6 * nodal[6 * count + c]! +
            w7 * nodal[7 * count + c]!;
          place[c] = x[c]! + (advance * v[c]! + (low + high));
        }
        this.system.accelerations(place, force);
        const at = i * count;
        for (let c = 0; c < count; c++) {
          const difference = Math.abs(force[c]! - nodal[at + c]!);
          if (!(difference <= change)) change = difference;
          nodal[at + c] = force[c]!;
        }
      }
      this.evaluations += NODE_COUNT - 1;
      if (change <= ITERATION_GOAL * size) return true;
      if (!Number.isFinite(change)) return false;
      // Rounding: what no longer shrinks will not.
      if (change >= lastChange && change <= 1e-13 * size) return true;
      lastChange = change;
    }
    return false;
  }

  private wantedStep(step: number): number {
    const { count, nodal } = this;
    const { groupSize } = this.system;
    const last = NODE_COUNT * (NODE_COUNT - 1);
    let worst = 0;
    for (let group = 0; group < count; group += groupSize) {
      let top = 0;
      let size = 0;
      for (let c = group; c < group + groupSize; c++) {
        let sum = 0;
        for (let j = 0; j < NODE_COUNT; j++) {
          const a = nodal[j * count + c]!;
          sum += MONOMIALS[last + j]! * a;
          size = Math.max(size, Math.abs(a));
        }
        top = Math.max(top, Math.abs(sum));
      }
      worst = Math.max(worst, top / size);
    }
    const goal = this.stepLength === 0 ? Math.min(this.tolerance, FIRST_GUESS_TOLERANCE) : this.tolerance;
    return worst > 0 ? step * Math.min((goal / worst) ** (1 / 7), 10) : step * LONGEST_GROWTH;
  }

  private finish(step: number): void {
    const { count, nodal, positions, velocities, positionRest, velocityRest } = this;
    for (let c = 0; c < count; c++) {
      let displacement = 0;
      let push = 0;
      for (let j = NODE_COUNT - 1; j >= 0; j--) {
        displacement += END_POSITION_WEIGHTS[j]! * nodal[j * count + c]!;
        push += END_VELOCITY_WEIGHTS[j]! * nodal[j * count + c]!;
      }
      const dx = step * (this.startVelocities[c]! + step * displacement) + positionRest[c]!;
      const dv = step * push + velocityRest[c]!;
      const x = positions[c]! + dx;
      const v = velocities[c]! + dv;
      positionRest[c] = dx - (x - positions[c]!);
      velocityRest[c] = dv - (v - velocities[c]!);
      positions[c] = x;
      velocities[c] = v;
    }
    this.stepStart = this.time;
    this.stepLength = step;
    this.time += step;
  }
}

function largest(nodal: Float64Array, count: number): number {
  let size = 0;
  for (let c = 0; c < count; c++) size = Math.max(size, Math.abs(nodal[c]!));
  return size;
}
