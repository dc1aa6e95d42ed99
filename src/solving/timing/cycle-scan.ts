/**
 * Which period counts the cycles of a set of times. A period is judged by the density of the phases that it gives: with r
 * the residuals of the best straight line, S = n ln P - 1/2 sum [r^2/v + ln 2 pi v], v = sigma^2 + jitter^2 with the jitter
 * at its best. The term n ln P is what keeps short periods, to which any time is near, from winning.
 */
import { TWO_PI } from '../../orbit/constants.js';

export interface CountedPeriod {
  readonly periodDays: number;
  /** Time of cycle 0 of `cycles`. */
  readonly timeDays: number;
  readonly cycles: Int32Array;
  /** S. */
  readonly score: number;
  /** Root mean square of the residuals over the period. */
  readonly phaseScatter: number;
}

/** Times of one kind (all transits, or all occultations), ascending. */
export interface CountableTimes {
  readonly timesDays: Float64Array;
  readonly sigmasDays: Float64Array;
}

/** Two times nearer than this are taken for one event. */
const SAME_EVENT_DAYS = 0.05;
const SAMPLES_PER_RESOLUTION = 10;
/** Bound on trials times data. */
const MOST_WORK = 1e8;
/** Phases that scatter more than this are no clockwork. */
const LARGEST_PHASE_SCATTER = 0.1;
/** A candidate needs phases concentrated at least so much (length of the mean unit vector). */
const LEAST_CONCENTRATION = 0.6;
/** Periods whose S falls short of the best by more than this are dismissed. */
export const DISMISSED_BELOW = 7;
const FRESH_EVERY = 256;

/** Smallest spacing of different events, days; Infinity with fewer than two events. */
export function smallestSpacingDays({ timesDays, sigmasDays }: CountableTimes): number {
  let smallest = Infinity;
  for (let i = 1; i < timesDays.length; i++) {
    const spacing = timesDays[i]! - timesDays[i - 1]!;
    const same = Math.max(SAME_EVENT_DAYS, 5 * Math.hypot(sigmasDays[i]!, sigmasDays[i - 1]!));
    if (spacing > same) smallest = Math.min(smallest, spacing);
  }
  return smallest;
}

/**
 * Periods that fit, best first. Periods that only divide a better one (all its cycles are multiples of theirs) are left out.
 *
 * @param range - longest and shortest period to look at, days; the scan ends sooner where no shorter period could win
 */
export function countCycles(
  times: CountableTimes,
  range: { readonly longestDays: number; readonly shortestDays: number },
): readonly CountedPeriod[] {
  const { timesDays, sigmasDays } = times;
  const n = timesDays.length;
  const span = timesDays[n - 1]! - timesDays[0]!;
  const step = 1 / (SAMPLES_PER_RESOLUTION * span);
  const low = 1 / range.longestDays;
  const most = Math.min(Math.ceil((1 / range.shortestDays - low) / step) + 2, Math.floor(MOST_WORK / n));
  // S of a perfect fit at a period of one day.
  let perfect = -0.5 * n * Math.log(TWO_PI);
  for (const sigma of sigmasDays) perfect -= Math.log(sigma);
  const turns = phaseTurns(timesDays, step);
  let found: CountedPeriod[] = [];
  let best = -Infinity;
  let before = 0;
  let middle = 0;
  for (let k = -1; k <= most; k++) {
    const frequency = low + k * step;
    if ((k + 1) % FRESH_EVERY === 0) turns.restart(frequency);
    const after = turns.concentration();
    turns.advance();
    // A maximum in the middle of three neighbours.
    if (k >= 1 && middle >= LEAST_CONCENTRATION && middle >= before && middle >= after) {
      const candidate = settled(times, 1 / (frequency - step));
      if (candidate !== null && candidate.score > best - DISMISSED_BELOW) {
        best = Math.max(best, candidate.score);
        found = [...found.filter(({ score }) => score > best - DISMISSED_BELOW), candidate];
      }
    }
    before = middle;
    middle = after;
    if (perfect - n * Math.log(frequency) < best - DISMISSED_BELOW) break;
  }
  found.sort((a, b) => b.score - a.score);
  const distinct: CountedPeriod[] = [];
  for (const candidate of found)
    if (!distinct.some((better) => dividesInto(better, candidate))) distinct.push(candidate);
  return distinct;
}

/** Unit vectors exp(2 pi i f t), turned from one frequency to the next. */
function phaseTurns(
  timesDays: Float64Array,
  step: number,
): { restart(frequency: number): void; concentration(): number; advance(): void } {
  const n = timesDays.length;
  const cosines = new Float64Array(n);
  const sines = new Float64Array(n);
  const turnCosines = timesDays.map((time) => Math.cos(TWO_PI * step * time));
  const turnSines = timesDays.map((time) => Math.sin(TWO_PI * step * time));
  return {
    restart(frequency): void {
      for (let i = 0; i < n; i++) {
        cosines[i] = Math.cos(TWO_PI * frequency * timesDays[i]!);
        sines[i] = Math.sin(TWO_PI * frequency * timesDays[i]!);
      }
    },
    concentration(): number {
      let c = 0;
      let s = 0;
      for (let i = 0; i < n; i++) {
        c += cosines[i]!;
        s += sines[i]!;
      }
      return Math.hypot(c, s) / n;
    },
    advance(): void {
      for (let i = 0; i < n; i++) {
        const c = cosines[i]!;
        const s = sines[i]!;
        cosines[i] = c * turnCosines[i]! - s * turnSines[i]!;
        sines[i] = s * turnCosines[i]! + c * turnSines[i]!;
      }
    },
  };
}

/** The cycles are those of `other`'s times a whole number (and a shift): they fit equally by construction. */
function dividesInto(longer: CountedPeriod, other: CountedPeriod): boolean {
  const factor = Math.round(longer.periodDays / other.periodDays);
  const shift = other.cycles[0]! - factor * longer.cycles[0]!;
  return longer.cycles.every((cycle, i) => other.cycles[i] === factor * cycle + shift);
}

/** Cycles by rounding and the straight line through them, in turn until nothing changes. */
function settled(times: CountableTimes, startDays: number): CountedPeriod | null {
  const { timesDays, sigmasDays } = times;
  const n = timesDays.length;
  let periodDays = startDays;
  let timeDays = startPhase(timesDays, periodDays);
  let cycles = new Int32Array(n);
  for (let round = 0; round < 12; round++) {
    const next = Int32Array.from(timesDays, (time) => Math.round((time - timeDays) / periodDays));
    const line = straightLine(next, timesDays, sigmasDays);
    if (line === null || !(line.periodDays > 0)) return null;
    const same = round > 0 && next.every((cycle, i) => cycle === cycles[i]);
    cycles = next;
    ({ periodDays, timeDays } = line);
    if (same) break;
  }
  const first = cycles[0]!;
  timeDays += first * periodDays;
  cycles = cycles.map((cycle) => cycle - first);
  const residuals = timesDays.map((time, i) => time - timeDays - periodDays * cycles[i]!);
  let square = 0;
  for (const residual of residuals) square += residual * residual;
  const phaseScatter = Math.sqrt(square / n) / periodDays;
  if (phaseScatter > LARGEST_PHASE_SCATTER) return null;
  return {
    periodDays,
    timeDays,
    cycles,
    phaseScatter,
    score: n * Math.log(periodDays) + bestLogLikelihood(residuals, sigmasDays),
  };
}

/** Time of the mean phase. */
function startPhase(timesDays: Float64Array, periodDays: number): number {
  let c = 0;
  let s = 0;
  for (const time of timesDays) {
    c += Math.cos((TWO_PI * time) / periodDays);
    s += Math.sin((TWO_PI * time) / periodDays);
  }
  return (Math.atan2(s, c) / TWO_PI) * periodDays;
}

function straightLine(
  cycles: Int32Array,
  timesDays: Float64Array,
  sigmasDays: Float64Array,
): { readonly periodDays: number; readonly timeDays: number } | null {
  let w = 0;
  let meanCycle = 0;
  let meanTime = 0;
  for (let i = 0; i < cycles.length; i++) {
    const weight = 1 / sigmasDays[i]! ** 2;
    w += weight;
    meanCycle += weight * cycles[i]!;
    meanTime += weight * timesDays[i]!;
  }
  meanCycle /= w;
  meanTime /= w;
  let xx = 0;
  let xy = 0;
  for (let i = 0; i < cycles.length; i++) {
    const weight = 1 / sigmasDays[i]! ** 2;
    const x = cycles[i]! - meanCycle;
    xx += weight * x * x;
    xy += weight * x * (timesDays[i]! - meanTime);
  }
  if (!(xx > 0)) return null;
  const periodDays = xy / xx;
  return { periodDays, timeDays: meanTime - periodDays * meanCycle };
}

/** ln L at the best common jitter, by golden steps in its logarithm. */
function bestLogLikelihood(residuals: Float64Array, sigmasDays: Float64Array): number {
  const at = (variance: number): number => {
    let sum = 0;
    for (let i = 0; i < residuals.length; i++) {
      const v = sigmasDays[i]! ** 2 + variance;
      sum += residuals[i]! ** 2 / v + Math.log(TWO_PI * v);
    }
    return -0.5 * sum;
  };
  let smallest = Infinity;
  let largest = 0;
  for (let i = 0; i < residuals.length; i++) {
    smallest = Math.min(smallest, sigmasDays[i]!);
    largest = Math.max(largest, Math.abs(residuals[i]!));
  }
  let best = at(0);
  const steps = 32;
  const low = Math.log(0.1 * smallest);
  const high = Math.log(Math.max(largest, 0.2 * smallest));
  for (let k = 0; k <= steps; k++)
    best = Math.max(best, at(Math.exp(2 * (low + ((high - low) * k) / steps))));
  return best;
}
