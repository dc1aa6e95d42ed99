/** Tunes a step size so that the mean of a statistic reaches its target [HoffmanGelman2014, section 3.2]. */

/** The constants that the paper recommends; its target 0.65 is for another criterion and is given by the caller here. */
export const DUAL_AVERAGING: {
  /** Strength of the pull towards the starting guess. */
  readonly gamma: number;
  /** Damps the first, wildest updates. */
  readonly t0: number;
  /** Power by which early updates are forgotten, between 0.5 and 1. */
  readonly kappa: number;
  /** The starting guess is this many times the first step: long steps are cheap to try. */
  readonly startFactor: number;
} = { gamma: 0.05, t0: 10, kappa: 0.75, startFactor: 10 };

/** Stochastic approximation of the step (> 0) whose mean acceptance is `target` (between 0 and 1). */
export class DualAveraging {
  private readonly target: number;
  private centre = 0;
  private updates = 0;
  private meanShortfall = 0;
  private logStep = 0;
  private logMeanStep = 0;

  constructor(target: number, firstStep: number) {
    this.target = target;
    this.restart(firstStep);
  }

  /** Forgets everything but the step to start from. */
  restart(firstStep: number): void {
    this.centre = Math.log(DUAL_AVERAGING.startFactor * firstStep);
    this.updates = 0;
    this.meanShortfall = 0;
    this.logStep = Math.log(firstStep);
    this.logMeanStep = this.logStep;
  }

  /** Takes in the acceptance (0 .. 1) that `step` gave. */
  update(acceptance: number): void {
    const { gamma, t0, kappa } = DUAL_AVERAGING;
    this.updates++;
    const m = this.updates;
    const weight = 1 / (m + t0);
    this.meanShortfall += weight * (this.target - acceptance - this.meanShortfall);
    this.logStep = this.centre - (Math.sqrt(m) / gamma) * this.meanShortfall;
    const memory = m ** -kappa;
    this.logMeanStep += memory * (this.logStep - this.logMeanStep);
  }

  /** To be tried next. */
  get step(): number {
    return Math.exp(this.logStep);
  }

  /** Average over the updates: the one to keep. */
  get meanStep(): number {
    return Math.exp(this.logMeanStep);
  }
}
