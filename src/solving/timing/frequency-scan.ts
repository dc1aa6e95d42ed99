/** Scan of a model's frequency with everything linear refitted at every trial, and the mesh on which it is integrated. */
import { minimiseScalar } from '../../numerics/minimise-scalar.js';
import { bestJitter, type JitterScale } from './jitter-profile.js';
import type { LinearSolver } from './linear-solver.js';

/** Frequencies per cycle, uniform. */
export interface FrequencyRange {
  readonly low: number;
  readonly high: number;
  readonly step: number;
  readonly count: number;
}

/** Samples per resolution element, 1 over the range of the cycles. */
const SAMPLES_PER_RESOLUTION = 10;
/** Bounds on the trials, and on trials times data. */
const MOST_TRIALS = 200_000;
const MOST_WORK = 6e7;

/**
 * The frequencies from `low` to `high`, fine enough for the range of the cycles; cut short where they would be too many.
 *
 * @throws RangeError unless 0 < low < high
 */
export function frequencyRange(
  low: number,
  high: number,
  rangeOfCycles: number,
  dataCount: number,
): FrequencyRange {
  if (!(low > 0 && low < high)) throw new RangeError(`frequencies from ${low} to ${high} are no range`);
  const wanted = Math.ceil((high - low) * SAMPLES_PER_RESOLUTION * rangeOfCycles) + 1;
  const most = Math.min(MOST_TRIALS, Math.ceil(MOST_WORK / dataCount));
  const count = Math.min(most, Math.max(wanted, 16));
  const step = 1 / (SAMPLES_PER_RESOLUTION * rangeOfCycles);
  const reached = wanted > most ? low + step * (count - 1) : high;
  return { low, high: reached, step: (reached - low) / (count - 1), count };
}

export interface BestFrequency {
  readonly frequency: number;
  readonly jitterDays: number;
  readonly logLikelihood: number;
}

/** ln L at the solver's present jitter; -Infinity where the model means nothing. */
function valueAt(solver: LinearSolver, frequency: number): number {
  solver.setFrequency(frequency);
  const value = solver.solve();
  return solver.form.isSound(solver.beta) ? value : -Infinity;
}

function scan(solver: LinearSolver, range: FrequencyRange): Float64Array {
  const values = new Float64Array(range.count);
  for (let k = 0; k < range.count; k++) values[k] = valueAt(solver, range.low + k * range.step);
  return values;
}

/** Indices of the highest local maxima (ends included), best first. */
function peaksOf(values: Float64Array, most: number): number[] {
  const peaks: number[] = [];
  for (let k = 0; k < values.length; k++) {
    const value = values[k]!;
    if (value > -Infinity && value >= (values[k - 1] ?? -Infinity) && value > (values[k + 1] ?? -Infinity))
      peaks.push(k);
  }
  return peaks.sort((a, b) => values[b]! - values[a]!).slice(0, most);
}

/** The maximum within one step of a frequency, at the present jitter. */
function refined(solver: LinearSolver, range: FrequencyRange, near: number): number {
  const low = Math.max(range.low, near - range.step);
  const high = Math.min(range.high, near + range.step);
  const found = minimiseScalar((f) => -valueAt(solver, f), low, high, 1e-6 * range.step);
  const ends = [low, high].filter((f) => valueAt(solver, f) > -found.value);
  return ends[0] ?? found.position;
}

const PEAKS_TRIED = 30;
const ROUNDS = 4;
/** A jitter that moved by less than this share of its prior's scale makes a second scan needless. */
const SAME_JITTER = 0.1;

/**
 * Frequency and jitter of highest ln L. The first scan has the jitter of the model without frequency, the second that of
 * the best peak of the first; the highest peaks of both get a jitter of their own.
 *
 * @returns the best, and ln L on the grid at its jitter; `null` where no trial is sound
 */
export function searchFrequency(
  solver: LinearSolver,
  range: FrequencyRange,
  scale: JitterScale,
  firstJitterDays: number,
): { readonly best: BestFrequency; readonly values: Float64Array } | null {
  let best: BestFrequency | null = null;
  let jitterDays = firstJitterDays;
  let values: Float64Array = new Float64Array(0);
  for (let pass = 0; pass < 2; pass++) {
    solver.setJitter(jitterDays);
    values = scan(solver, range);
    for (const peak of peaksOf(values, PEAKS_TRIED)) {
      solver.setJitter(jitterDays);
      let frequency = range.low + peak * range.step;
      let own = { jitterDays, logLikelihood: -Infinity };
      for (let round = 0; round < ROUNDS; round++) {
        solver.setJitter(own.logLikelihood === -Infinity ? jitterDays : own.jitterDays);
        frequency = refined(solver, range, frequency);
        solver.setFrequency(frequency);
        const next = bestJitter(solver, scale);
        const gain = next.logLikelihood - own.logLikelihood;
        own = next;
        if (gain < 1e-6 || (best !== null && own.logLikelihood < best.logLikelihood - 10)) break;
      }
      if (best === null || own.logLikelihood > best.logLikelihood) best = { frequency, ...own };
    }
    if (best === null) return null;
    const isSame = Math.abs(best.jitterDays - jitterDays) < SAME_JITTER * scale.scaleDays;
    jitterDays = best.jitterDays;
    if (isSame) break;
  }
  solver.setJitter(jitterDays);
  return best === null ? null : { best, values };
}

export interface FrequencyMesh {
  readonly frequencies: Float64Array;
  /** ln of the prior's share of each: uniform in ln f over the range, trapezoid rule. */
  readonly logShares: Float64Array;
  /** By how much ln L at the solver's jitter falls short of the best. */
  readonly depths: Float64Array;
}

/** Frequencies this far below the best in ln L carry nothing. */
const NEGLIGIBLE = 16;
const PEAKS_RESOLVED = 60;

/**
 * The grid, with every peak that matters resolved by nodes at 0.4 of its own width; what carries nothing is left out.
 *
 * @param values - ln L on the grid, at the solver's present jitter
 */
export function frequencyMesh(
  solver: LinearSolver,
  range: FrequencyRange,
  values: Float64Array,
  best: BestFrequency,
): FrequencyMesh {
  const nodes: { frequency: number; value: number }[] = Array.from(values, (value, k) => ({
    frequency: range.low + k * range.step,
    value,
  }));
  const top = valueAt(solver, best.frequency);
  const centres = [best.frequency];
  for (const peak of peaksOf(values, PEAKS_RESOLVED)) {
    const centre = refined(solver, range, range.low + peak * range.step);
    if (Math.abs(centre - best.frequency) > 0.1 * range.step && valueAt(solver, centre) > top - NEGLIGIBLE)
      centres.push(centre);
  }
  for (const centre of centres) {
    const width = peakWidth(solver, range, centre);
    if (width > 1.5 * range.step) continue;
    for (let k = -15; k <= 15; k++) {
      const frequency = centre + 0.4 * k * width;
      if (frequency <= range.low || frequency >= range.high) continue;
      nodes.push({ frequency, value: valueAt(solver, frequency) });
    }
  }
  nodes.sort((a, b) => a.frequency - b.frequency);
  const span = Math.log(range.high / range.low);
  const kept = nodes.flatMap((node, k) => {
    if (node.value < top - NEGLIGIBLE) return [];
    const before = nodes[k - 1]?.frequency ?? node.frequency;
    const after = nodes[k + 1]?.frequency ?? node.frequency;
    const share = (after - before) / 2 / node.frequency / span;
    return share > 0
      ? [{ frequency: node.frequency, logShare: Math.log(share), depth: top - node.value }]
      : [];
  });
  return {
    frequencies: Float64Array.from(kept, ({ frequency }) => frequency),
    logShares: Float64Array.from(kept, ({ logShare }) => logShare),
    depths: Float64Array.from(kept, ({ depth }) => depth),
  };
}

/** Standard deviation of the frequency from the curvature of ln L at a maximum; Infinity where it is flat. */
function peakWidth(solver: LinearSolver, range: FrequencyRange, centre: number): number {
  const top = valueAt(solver, centre);
  // The step shrinks until the fall is about one unit: a difference quotient over many widths says nothing.
  for (let reach = 0.5 * range.step; reach > 1e-6 * range.step; reach /= 2) {
    const fall = top - (valueAt(solver, centre - reach) + valueAt(solver, centre + reach)) / 2;
    if (fall < 2) return fall > 1e-9 ? reach / Math.sqrt(2 * fall) : Infinity;
  }
  return 1e-6 * range.step;
}
