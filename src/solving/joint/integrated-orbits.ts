/** Orbits of a solution with masses, integrated so that their mid-transits keep the solution's periods and epochs on average. */
import { ConvergenceError, ModelDomainError } from '../../errors.js';
import {
  predictMidTimes,
  type PredictedCompanion,
  type PredictedVariation,
} from '../timing/interaction-predict.js';

/** Osculating minus mean, days. */
export interface Departure {
  readonly periodDays: number;
  readonly conjunctionDays: number;
}

const MOST_ROUNDS = 8;
/** A hundredth of a second over all cycles. */
const ALIGNED_DAYS = 1e-7;

/** From elements that hold at the epoch. `null` where the companions meet, or a draw has left the domain of the elements. */
export function followed(
  companions: readonly PredictedCompanion[],
  starMassSolar: number,
  epochDays: number,
): readonly PredictedVariation[] | null {
  try {
    const found = predictMidTimes(companions, epochDays, starMassSolar);
    return found.every(({ amplitudeMinutes }) => Number.isFinite(amplitudeMinutes)) ? found : null;
  } catch (error) {
    if (error instanceof ConvergenceError || error instanceof ModelDomainError) return null;
    throw error;
  }
}

/**
 * How osculating periods and conjunctions have to differ from the mean ones, found by going back from the line through the
 * integrated times; as far as it was found where the orbits cannot be followed.
 */
export function departuresOf(
  mean: readonly PredictedCompanion[],
  starMassSolar: number,
  epochDays: number,
): Departure[] {
  let departures: Departure[] = mean.map(() => ({ periodDays: 0, conjunctionDays: 0 }));
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const found = followed(shifted(mean, departures), starMassSolar, epochDays);
    if (found === null) break;
    const misses = mean.map((companion, i) => missOf(companion, found[i]!.timesDays));
    departures = departures.map(({ periodDays, conjunctionDays }, i) => ({
      periodDays: periodDays - misses[i]!.periodDays,
      conjunctionDays: conjunctionDays - misses[i]!.conjunctionDays,
    }));
    const largest = Math.max(
      ...misses.map(({ periodDays, conjunctionDays }, i) =>
        Math.max(Math.abs(conjunctionDays), Math.abs(periodDays) * mean[i]!.cycles.length),
      ),
    );
    if (largest < ALIGNED_DAYS) break;
  }
  return departures;
}

export function shifted(
  mean: readonly PredictedCompanion[],
  departures: readonly Departure[],
): PredictedCompanion[] {
  return mean.map((companion, i) => ({
    ...companion,
    periodDays: companion.periodDays + departures[i]!.periodDays,
    conjunctionDays: companion.conjunctionDays + departures[i]!.conjunctionDays,
  }));
}

/** Line of least squares through integrated times minus the mean ephemeris; of a single cycle the shift alone. */
function missOf(
  { cycles, periodDays, conjunctionDays }: PredictedCompanion,
  timesDays: Float64Array,
): Departure {
  const count = cycles.length;
  const middle = 0.5 * (cycles[0]! + cycles[count - 1]!);
  let level = 0;
  let slope = 0;
  let norm = 0;
  for (let k = 0; k < count; k++) {
    const place = cycles[k]! - middle;
    const off = timesDays[k]! - conjunctionDays - periodDays * cycles[k]!;
    level += off / count;
    slope += place * off;
    norm += place * place;
  }
  const period = norm > 0 ? slope / norm : 0;
  return { periodDays: period, conjunctionDays: level - period * middle };
}

/** Times and variations averaged over several integrations of the same companions at the same cycles. */
export function averaged(runs: readonly (readonly PredictedVariation[])[]): PredictedVariation[] {
  return runs[0]!.map(({ letter, timesDays }, i) => {
    const mean = (values: (run: PredictedVariation) => Float64Array): Float64Array =>
      timesDays.map((_, k) => runs.reduce((sum, run) => sum + values(run[i]!)[k]! / runs.length, 0));
    const oMinusCMinutes = mean((run) => run.oMinusCMinutes);
    const swing = Math.max(...oMinusCMinutes) - Math.min(...oMinusCMinutes);
    return {
      letter,
      timesDays: mean((run) => run.timesDays),
      oMinusCMinutes,
      amplitudeMinutes: 0.5 * swing,
    };
  });
}
