/**
 * Posterior density of masses and eccentricities of interacting companions. Straight lines (period and epoch of each
 * companion) are integrated out in closed form, jitters by quadrature: both are independent between the tables once
 * masses and eccentricities are given.
 *
 * Priors: mass ratios uniform above zero; e cos omega and e sin omega normal; jitters log-uniform above a fifth of the
 * median error (uniform in u, s = scale·sinh u); periods and epochs flat.
 */
import { upperMedian } from '../../numerics/summary.js';
import type { RandomStream } from '../../numerics/random.js';
import { COORDINATES } from './interaction-model.js';
import type { InteractionModel } from './interaction-model.js';
import { logEccentricityPrior } from './interaction-search.js';

/** Scale of a jitter's prior in units of the median error of its table. */
const JITTER_SCALE = 0.2;
/** u of the largest jitter: 60 times the median error. */
const LARGEST_U = Math.asinh(300);
const NODES = 32;

export class InteractionDensity {
  readonly model: InteractionModel;
  private readonly eccentricityScale: number;
  /** Days, one per table. */
  private readonly scales: readonly number[];
  /** Middle of each cell of u. */
  private readonly jittersDays: readonly Float64Array[];
  private readonly residuals: readonly Float64Array[];
  private readonly logs: Float64Array = new Float64Array(NODES);

  constructor(model: InteractionModel, eccentricityScale: number) {
    this.model = model;
    this.eccentricityScale = eccentricityScale;
    this.residuals = model.observedDays.map((times) => new Float64Array(times.length));
    this.scales = model.likelihoods.map(
      ({ baseWeights }) => JITTER_SCALE / Math.sqrt(upperMedian(baseWeights)!),
    );
    this.jittersDays = this.scales.map((scale) =>
      Float64Array.from({ length: NODES }, (_, k) => scale * Math.sinh((LARGEST_U * (k + 0.5)) / NODES)),
    );
  }

  /** ln posterior density in the coordinates of the model, up to a constant; -Infinity outside. */
  logDensity(point: Float64Array): number {
    const { model } = this;
    if (!model.predict(point)) return -Infinity;
    let sum = logEccentricityPrior(point, this.eccentricityScale);
    for (let c = 0; c < point.length; c += COORDINATES) sum += point[c]!;
    for (let t = 0; t < model.companionCount; t++) sum += this.tabulate(t);
    return sum;
  }

  /** Jitters (days) and corrections of line level and slope per cycle of each table, drawn at the model's present prediction. */
  drawNuisances(
    random: RandomStream,
  ): { readonly jitterDays: number; readonly level: number; readonly slope: number }[] {
    return this.model.likelihoods.map((likelihood, t) => {
      const total = this.tabulate(t);
      let left = random.uniform();
      let k = 0;
      while (k < NODES - 1 && (left -= Math.exp(this.logs[k]! - total) / NODES) > 0) k++;
      const jitterDays = this.scales[t]! * Math.sinh((LARGEST_U * (k + random.uniform())) / NODES);
      likelihood.evaluate(this.residuals[t]!, jitterDays);
      const [c00, c01, c11] = likelihood.lineCovariance as unknown as [number, number, number];
      const a = random.normal() * Math.sqrt(c00);
      const b = (c01 / c00) * a + random.normal() * Math.sqrt(Math.max(0, c11 - (c01 * c01) / c00));
      return {
        jitterDays,
        level: likelihood.line[0]! + a,
        slope: (likelihood.line[1]! + b) / likelihood.cycleScale,
      };
    });
  }

  /** ln of the mean of the likelihood of one table over its jitter's prior; `logs` holds the likelihoods. */
  private tabulate(table: number): number {
    const { model, logs } = this;
    const observed = model.observedDays[table]!;
    const predicted = model.predictedDays[table]!;
    const values = this.residuals[table]!;
    const likelihood = model.likelihoods[table]!;
    for (let i = 0; i < values.length; i++) values[i] = observed[i]! - predicted[i]!;
    let top = -Infinity;
    for (let k = 0; k < NODES; k++) {
      logs[k] = likelihood.evaluate(values, this.jittersDays[table]![k]!);
      top = Math.max(top, logs[k]!);
    }
    let sum = 0;
    for (let k = 0; k < NODES; k++) sum += Math.exp(logs[k]! - top);
    return top + Math.log(sum / NODES);
  }
}
