/** The best joint fit from several starts. */
import type { JointRecipe } from './joint-data.js';
import { JointDensity } from './joint-density.js';
import { IMPACT_STARTS, naturalStart, type CompanionStart, type NoiseStart } from './joint-start.js';
import { BRIEF, FULL, maximise, type Maximum } from './maximise.js';

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

/** The fit at a maximum; leaves the density at that point. `null` where it is not finite. */
export function fitOf(recipe: JointRecipe, density: JointDensity, maximum: Maximum): JointFit | null {
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
