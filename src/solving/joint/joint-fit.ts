/** The best joint fit from several starts. */
import type { JointRecipe } from './joint-data.js';
import { JointDensity } from './joint-density.js';
import { IMPACT_STARTS, naturalStart, type CompanionStart, type NoiseStart } from './joint-start.js';
import { BRIEF, FULL, maximise, type Maximum } from './maximise.js';
import { CONJUNCTION, LOG_PERIOD } from './natural.js';

export interface JointFit {
  readonly recipe: JointRecipe;
  /** Likelihood times the priors that the case states, in the coordinates of the fit. */
  readonly density: JointDensity;
  readonly natural: Float64Array;
  readonly maximum: Maximum;
  readonly bic: number;
}

/** Number of data of all kinds. */
export function dataCount(recipe: JointRecipe): number {
  return (
    (recipe.velocities?.timesDays.length ?? 0) +
    recipe.curves.reduce((sum, curve) => sum + curve.timesDays.length, 0) +
    recipe.midTimes.reduce((sum, set) => sum + set.timesDays.length, 0)
  );
}

/** Free parameters: those that move, and the coefficients of the baselines that are solved inside. */
export function freeCount(recipe: JointRecipe, density: JointDensity): number {
  return (
    density.size +
    recipe.curves.reduce(
      (sum, curve) => sum + curve.segments.reduce((inner, segment) => inner + segment.columns, 0),
      0,
    )
  );
}

/** The maximum from one start. */
export function fitFrom(recipe: JointRecipe, natural: Float64Array): JointFit | null {
  const density = new JointDensity(recipe, 'stated');
  const maximum = maximise(density, density.coordinates.position(natural), FULL);
  return fitOf(recipe, density, maximum);
}

function fitOf(recipe: JointRecipe, density: JointDensity, maximum: Maximum): JointFit | null {
  if (!Number.isFinite(maximum.value)) return null;
  // Leaves everything that the density remembers at the maximum.
  density.evaluate(maximum.position, new Float64Array(density.size));
  const best = density.naturalAt(maximum.position)!;
  return {
    recipe,
    density,
    natural: best,
    maximum,
    bic: freeCount(recipe, density) * Math.log(dataCount(recipe)) - 2 * maximum.value,
  };
}

/**
 * The best of fits that start from central, inclined and grazing transits. With several transiting companions the
 * impact parameters are varied one companion at a time.
 */
export function fitFromStarts(
  recipe: JointRecipe,
  starts: readonly CompanionStart[],
  noise: NoiseStart | null,
): JointFit | null {
  const density = new JointDensity(recipe, 'stated');
  const transiting = recipe.companions.flatMap((companion, c) => (companion.transits ? [c] : []));
  let impacts: number[] = starts.map(() => IMPACT_STARTS[0]!);
  const attempt = (values: readonly number[]): Maximum =>
    maximise(density, density.coordinates.position(naturalStart(recipe, starts, noise, values)), BRIEF);
  const tried: { readonly impacts: readonly number[]; readonly maximum: Maximum }[] = [];
  if (transiting.length === 0) tried.push({ impacts, maximum: attempt(impacts) });
  for (const c of transiting) {
    const own = IMPACT_STARTS.map((impact) => {
      const values = impacts.map((value, other) => (other === c ? impact : value));
      return { impacts: values, maximum: attempt(values) };
    });
    tried.push(...own);
    const best = own.reduce((a, b) => (b.maximum.value > a.maximum.value ? b : a));
    impacts = [...best.impacts];
  }
  tried.sort((a, b) => b.maximum.value - a.maximum.value);
  const finals = tried
    .slice(0, 2)
    .filter(({ maximum }) => Number.isFinite(maximum.value))
    .map(({ maximum }) => fitOf(recipe, density, maximise(density, maximum.position, FULL)))
    .filter((fit) => fit !== null);
  if (finals.length === 0) return null;
  return finals.reduce((a, b) => (b.maximum.value > a.maximum.value ? b : a));
}

/** Shifts of a mid-time, and of the transits at either end of the data, in durations: neighbouring maxima lie about so far apart. */
const SHIFTS: readonly number[] = [-0.3, -0.15, 0, 0.15, 0.3];
const RESTARTS = 3;
const RESTART_ROUNDS = 3;
/** What a restart must gain in ln L to be adopted. */
const RESTART_GAIN = 1e-3;

/**
 * The same fit from other phases and periods nearby: where single transits hardly rise above the noise, ln L has several
 * maxima in both.
 *
 * @param durationDays - first to last contact
 */
export function withShiftedEphemeris(fit: JointFit, companion: number, durationDays: number): JointFit {
  let best = fit;
  const { recipe } = fit;
  const at = best.density.coordinates.index.companion(companion);
  const times = recipe.curves.flatMap(({ timesDays }) => [timesDays[0]!, timesDays.at(-1)!]);
  for (let round = 0; round < RESTART_ROUNDS; round++) {
    const { natural } = best;
    const period = Math.exp(natural[at + LOG_PERIOD]!);
    const conjunction = natural[at + CONJUNCTION]!;
    const halfCycles = Math.max(1, ...times.map((time) => Math.abs(time - conjunction) / period));
    const gradient = new Float64Array(best.density.size);
    const trials = SHIFTS.flatMap((shift) =>
      SHIFTS.flatMap((stretch) => {
        if (shift === 0 && stretch === 0) return [];
        const start = Float64Array.from(natural);
        start[at + CONJUNCTION]! += shift * durationDays;
        start[at + LOG_PERIOD] = Math.log(period + (stretch * durationDays) / halfCycles);
        const position = best.density.coordinates.position(start);
        return [{ position, value: best.density.evaluate(position, gradient) }];
      }),
    );
    trials.sort((a, b) => b.value - a.value);
    const found = trials
      .slice(0, RESTARTS)
      .map(({ position }) => maximise(best.density, position, BRIEF))
      .reduce((a, b) => (b.value > a.value ? b : a));
    const next =
      found.value > best.maximum.value + RESTART_GAIN
        ? fitOf(recipe, best.density, maximise(best.density, found.position, FULL))
        : null;
    if (next === null) break;
    best = next;
  }
  // The density remembers the last point that it was asked about.
  return fitOf(recipe, best.density, best.maximum) ?? best;
}
