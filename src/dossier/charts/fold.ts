/** Velocities folded on one companion, and their weighted means in bins of phase. */
import { evaluateVelocity } from '../../signals/evaluate-velocity.js';
import type { Solved } from '../../solving/types.js';

/** Phase 0 is periastron; result in [-0.5, 0.5). */
export function orbitalPhase(timeBjdTdb: number, timePeriastronBjdTdb: number, periodDays: number): number {
  const turns = (timeBjdTdb - timePeriastronBjdTdb) / periodDays;
  const phase = turns - Math.floor(turns + 0.5);
  // The subtraction can round up to one half.
  return phase >= 0.5 ? phase - 1 : phase;
}

/** All velocities of a solution folded on one companion; arrays in the order of the velocities. */
export interface FoldedVelocities {
  readonly phases: Float64Array;
  /** Observed, less zero points, drift and the other companions, m/s. */
  readonly velocitiesMps: Float64Array;
  readonly residualsMps: Float64Array;
}

/** Folds on the companion with this index. */
export function foldOn(solved: Solved, companion: number): FoldedVelocities {
  const orbit = solved.best.companions[companion]!;
  const times = solved.velocities.timesBjdTdb;
  const own = evaluateVelocity(solved.best, times, { companions: [companion], drift: false });
  return {
    phases: times.map((time) => orbitalPhase(time, orbit.timePeriastronBjdTdb, orbit.periodDays)),
    velocitiesMps: own.map((value, index) => value + solved.residualsMps[index]!),
    residualsMps: solved.residualsMps,
  };
}

/** A weighted mean of neighbours in phase. */
export interface PhaseBin {
  readonly phase: number;
  readonly residualMps: number;
  /** Standard error that follows from the weights, m/s. */
  readonly sigmaMps: number;
  readonly count: number;
}

const FEWEST_FOR_BINS = 24;
const FEWEST_IN_A_BIN = 3;

/**
 * Weighted means of residuals in equal bins of phase, with weights 1/sigma^2. Residuals, not velocities: a mean over a
 * steep part of the curve would lie beside the curve although every point lies on it.
 *
 * @param phases - (n), in [-0.5, 0.5)
 * @param residualsMps - (n), m/s
 * @param sigmasMps - (n), m/s, jitter included, above 0
 * @returns ascending in phase; empty for fewer than 24 points; bins with fewer than 3 points are left out
 */
export function binResiduals(
  phases: Float64Array,
  residualsMps: Float64Array,
  sigmasMps: Float64Array,
): PhaseBin[] {
  const n = phases.length;
  if (n < FEWEST_FOR_BINS) return [];
  const bins = Math.min(20, Math.max(6, Math.round(n / 6)));
  const sums = Array.from({ length: bins }, () => ({ weight: 0, phase: 0, residual: 0, count: 0 }));
  for (let i = 0; i < n; i += 1) {
    const bin = sums[Math.min(bins - 1, Math.max(0, Math.floor((phases[i]! + 0.5) * bins)))]!;
    const weight = 1 / sigmasMps[i]! ** 2;
    bin.weight += weight;
    bin.phase += weight * phases[i]!;
    bin.residual += weight * residualsMps[i]!;
    bin.count += 1;
  }
  return sums
    .filter((bin) => bin.count >= FEWEST_IN_A_BIN && bin.weight > 0 && Number.isFinite(bin.weight))
    .map((bin) => ({
      phase: bin.phase / bin.weight,
      residualMps: bin.residual / bin.weight,
      sigmaMps: 1 / Math.sqrt(bin.weight),
      count: bin.count,
    }));
}
