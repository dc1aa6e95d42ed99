/** One transition of the no-U-turn sampler: a trajectory that doubles until it turns back, and a point drawn from it. */
import type { RandomStream } from '../random.js';
import { copyPhasePoint, makePhasePoint, type Flow, type PhasePoint } from './flow.js';
import { TurnWatch } from './turn-watch.js';

/** An energy error beyond this says that the step is far too long for the place, not merely inaccurate. */
const DIVERGENCE_ENERGY = 1000;
/** Weights are kept relative to a reference energy, moved when a point is better than it by e^this. */
const LARGEST_EXPONENT = 200;

/**
 * Multinomial no-U-turn transitions with preallocated storage [HoffmanGelman2014; Betancourt 2017,
 * arXiv:1701.02434]. Inside a doubling, points are chosen by weight; between doublings the newer half is favoured
 * (biased progressive sampling).
 */
export class Trajectory {
  /** Present point of the chain; `momentum` is overwritten by every transition. */
  state: PhasePoint;
  /** Facts about the last transition. */
  depth = 0;
  isDivergent = false;
  /** Mean over the new points of min(1, weight relative to the start). */
  acceptance = 0;

  private readonly flow: Flow;
  private readonly random: RandomStream;
  private readonly maximumDepth: number;
  private readonly backward: PhasePoint;
  private readonly forward: PhasePoint;
  /** Choice inside the present doubling. */
  private candidate: PhasePoint;
  private readonly watch: TurnWatch;
  private startEnergy = 0;
  private referenceLogWeight = 0;
  private treeWeight = 1;
  private candidateWeight = 0;
  private acceptanceSum = 0;
  private points = 0;

  constructor(flow: Flow, random: RandomStream, maximumDepth: number) {
    this.flow = flow;
    this.random = random;
    this.maximumDepth = maximumDepth;
    this.state = makePhasePoint(flow.size);
    this.backward = makePhasePoint(flow.size);
    this.forward = makePhasePoint(flow.size);
    this.candidate = makePhasePoint(flow.size);
    this.watch = new TurnWatch(flow.size, maximumDepth);
  }

  /** Fresh standard normal momentum for the present state, with the energy that goes with it. */
  private refreshMomentum(): void {
    const { momentum, logDensity } = this.state;
    let twiceKinetic = 0;
    for (let j = 0; j < momentum.length; j++) {
      const p = this.random.normal();
      momentum[j] = p;
      twiceKinetic += p * p;
    }
    this.state.energy = 0.5 * twiceKinetic - logDensity;
  }

  /** Energy after one step from the present state with a fresh momentum, less the energy before. The state stays. */
  energyChangeOfOneStep(step: number): number {
    this.refreshMomentum();
    copyPhasePoint(this.state, this.forward);
    this.flow.step(this.forward, step);
    return this.forward.energy - this.state.energy;
  }

  /**
   * Moves `state` on by one transition.
   * @param step - length of a leapfrog step, > 0
   */
  advance(step: number): void {
    const { watch, random } = this;
    this.refreshMomentum();
    copyPhasePoint(this.state, this.backward);
    copyPhasePoint(this.state, this.forward);
    watch.start(this.state.momentum);
    this.startEnergy = this.state.energy;
    this.referenceLogWeight = 0;
    this.treeWeight = 1;
    this.acceptanceSum = 0;
    this.points = 0;
    this.isDivergent = false;
    this.depth = 0;
    while (this.depth < this.maximumDepth) {
      const isForward = random.uniform() < 0.5;
      const end = isForward ? this.forward : this.backward;
      if (!this.double(end, isForward ? step : -step)) break;
      this.depth++;
      // The first try of a longer trajectory replaces the point with a probability that favours moving away.
      if (random.uniform() * this.treeWeight < this.candidateWeight) {
        const replaced = this.state;
        this.state = this.candidate;
        this.candidate = replaced;
      }
      this.treeWeight += this.candidateWeight;
      if (!watch.joinToTree(isForward)) break;
    }
    this.acceptance = this.points > 0 ? this.acceptanceSum / this.points : 0;
  }

  /** Adds as many points at one end as the trajectory has; false when they turn back among themselves or diverge. */
  private double(end: PhasePoint, step: number): boolean {
    const { flow, watch, random } = this;
    const count = 2 ** this.depth;
    this.candidateWeight = 0;
    for (let leaf = 0; leaf < count; leaf++) {
      flow.step(end, step);
      this.points++;
      const logWeight = this.startEnergy - end.energy;
      // Written so that NaN (outside the domain) counts as a divergence too.
      if (!(logWeight > -DIVERGENCE_ENERGY)) {
        this.isDivergent = true;
        return false;
      }
      if (logWeight > this.referenceLogWeight + LARGEST_EXPONENT) this.moveReference(logWeight);
      const weight = Math.exp(logWeight - this.referenceLogWeight);
      this.acceptanceSum += logWeight >= 0 ? 1 : this.referenceLogWeight === 0 ? weight : Math.exp(logWeight);
      this.candidateWeight += weight;
      if (leaf === 0 || random.uniform() * this.candidateWeight < weight) copyPhasePoint(end, this.candidate);
      if (!watch.addLeaf(end.momentum, leaf, count)) return false;
    }
    return true;
  }

  private moveReference(logWeight: number): void {
    const factor = Math.exp(this.referenceLogWeight - logWeight);
    this.treeWeight *= factor;
    this.candidateWeight *= factor;
    this.referenceLogWeight = logWeight;
  }
}
