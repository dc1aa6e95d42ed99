/**
 * A dip whose time is roughly known: its middle, duration and depth from a scan of trapezoids, with a straight baseline (and
 * airmass where there is one) refitted under every trial. Where nights begin or end in transit no search of a folded
 * curve would do.
 */
import { orthonormalise, projectOut } from '../../numerics/linear-algebra.js';

export interface KnownDip {
  readonly midTimeDays: number;
  readonly durationDays: number;
  readonly depth: number;
  /** What the dip gains in chi-square, in units of the scatter that is left. */
  readonly gain: number;
  /** Events with data. */
  readonly events: number;
}

/** Points of one event: a run of one light curve. */
export interface DipRun {
  readonly timesDays: Float64Array;
  readonly flux: Float64Array;
  readonly sigmas: Float64Array;
  /** Airmass per point, or `null`. */
  readonly airmass: Float64Array | null;
  /** Expected middle. */
  readonly midTimeDays: number;
}

const SLOPE_SHARE = 0.15;
const DURATION_STEP = 1.2;
const SHIFTS_PER_DURATION = 8;
const FEWEST = 8;

/** Trapezoid of unit depth at `offset` days from its middle. */
function trapezoid(offset: number, duration: number): number {
  const inside = 0.5 * duration - Math.abs(offset);
  return inside <= 0 ? 0 : Math.min(1, inside / (SLOPE_SHARE * duration));
}

interface Prepared {
  readonly run: DipRun;
  /** Weighted residuals of the baseline alone, and an orthonormal basis of the weighted baseline. */
  readonly residual: Float64Array;
  readonly basis: readonly Float64Array[];
}

function prepare(run: DipRun): Prepared {
  const n = run.timesDays.length;
  const middle = 0.5 * (run.timesDays[0]! + run.timesDays[n - 1]!);
  const raw = [new Float64Array(n).fill(1), run.timesDays.map((time) => time - middle)];
  if (run.airmass !== null) raw.push(Float64Array.from(run.airmass));
  const weighted = (column: Float64Array): Float64Array => column.map((value, i) => value / run.sigmas[i]!);
  const basis = orthonormalise(raw.map(weighted), new Float64Array(n).fill(1));
  const residual = weighted(run.flux);
  projectOut(residual, basis);
  return { run, residual, basis };
}

/**
 * @param runs - events of one companion, each with its own baseline
 * @param searchDays - how far the middle may lie from where it is expected
 * @param longestDays - longest duration tried
 * @returns `null` where no run has enough points or no dip gains anything
 */
export function findKnownDip(
  runs: readonly DipRun[],
  searchDays: number,
  longestDays: number,
): KnownDip | null {
  const usable = runs.filter((run) => run.timesDays.length >= FEWEST).map(prepare);
  if (usable.length === 0) return null;
  const step = Math.min(
    ...usable.map(({ run }) => (run.timesDays.at(-1)! - run.timesDays[0]!) / run.timesDays.length),
  );
  let best: Omit<KnownDip, 'events'> | null = null;
  for (let duration = Math.max(0.015, 4 * step); duration <= longestDays; duration *= DURATION_STEP) {
    const stride = duration / SHIFTS_PER_DURATION;
    const half = Math.ceil(searchDays / stride);
    for (let s = -half; s <= half; s++) {
      const shift = s * stride;
      let numerator = 0;
      let denominator = 0;
      for (const prepared of usable) {
        const [a, b] = projected(prepared, shift, duration);
        numerator += a;
        denominator += b;
      }
      if (!(denominator > 0) || !(numerator < 0)) continue;
      const gain = (numerator * numerator) / denominator;
      if (best === null || gain > best.gain)
        best = { midTimeDays: shift, durationDays: duration, depth: -numerator / denominator, gain };
    }
  }
  if (best === null) return null;
  const { midTimeDays: shift, durationDays, depth, gain } = best;
  return {
    midTimeDays: usable[0]!.run.midTimeDays + shift,
    durationDays,
    depth,
    gain: gain / noiseLeft(usable, shift, durationDays, depth),
    events: usable.length,
  };
}

/** Products of the trapezoid, freed of the baseline, with the residuals and with itself. */
function projected({ run, residual, basis }: Prepared, shift: number, duration: number): [number, number] {
  const centre = run.midTimeDays + shift;
  let withData = 0;
  let withItself = 0;
  const onBasis = new Float64Array(basis.length);
  for (let i = 0; i < residual.length; i++) {
    const shape = trapezoid(run.timesDays[i]! - centre, duration);
    if (shape === 0) continue;
    const value = shape / run.sigmas[i]!;
    withData += value * residual[i]!;
    withItself += value * value;
    for (let j = 0; j < basis.length; j++) onBasis[j]! += value * basis[j]![i]!;
  }
  for (const product of onBasis) withItself -= product * product;
  return withItself > 0 ? [withData, withItself] : [0, 0];
}

/** Reduced chi-square that is left with the dip in place. */
function noiseLeft(usable: readonly Prepared[], shift: number, duration: number, depth: number): number {
  let chiSquare = 0;
  let count = 0;
  for (const { run, residual, basis } of usable) {
    const left = residual.map(
      (value, i) =>
        value + (depth * trapezoid(run.timesDays[i]! - run.midTimeDays - shift, duration)) / run.sigmas[i]!,
    );
    projectOut(left, basis);
    for (const value of left) chiSquare += value * value;
    count += left.length - basis.length;
  }
  return Math.max(1e-12, chiSquare / Math.max(1, count - 3));
}
