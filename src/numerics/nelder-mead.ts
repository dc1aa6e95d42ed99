/** Downhill simplex: a slow optimiser that needs no derivatives, to attack what a faster one reports. */

export interface NelderMeadOptions {
  /** Default 400 per parameter. */
  readonly maxEvaluations?: number;
  /** Stops when values at the corners agree to this, absolutely. Default 1e-10. */
  readonly valueTolerance?: number;
  /** Fresh simplices laid around the best point, because one may collapse. Default 2. */
  readonly restarts?: number;
}

export interface NelderMeadResult {
  readonly parameters: Float64Array;
  readonly value: number;
  readonly evaluations: number;
  readonly status: 'converged' | 'evaluation-limit';
}

/**
 * Nelder & Mead 1965 (Computer Journal 7, 308) with the dimension-dependent coefficients of Gao & Han 2012 (Computational
 * Optimization and Applications 51, 259), restarted. Both cited from memory.
 *
 * @param f - called with an array that must not be kept; NaN counts as +Infinity
 * @param start - length p; not modified
 * @param scale - first edge length per parameter, not zero
 */
export function nelderMead(
  f: (parameters: Float64Array) => number,
  start: Float64Array,
  scale: Float64Array,
  options: NelderMeadOptions = {},
): NelderMeadResult {
  const p = start.length;
  const limit = options.maxEvaluations ?? 400 * p;
  const tolerance = options.valueTolerance ?? 1e-10;
  const rounds = 1 + (options.restarts ?? 2);
  let evaluations = 0;
  const valueAt = (point: Float64Array): number => {
    evaluations++;
    const value = f(point);
    return Number.isNaN(value) ? Infinity : value;
  };
  let best = start.slice();
  let bestValue = valueAt(best);
  let converged = false;
  for (let round = 0; round < rounds; round++) {
    const simplex = [{ point: best, value: bestValue }];
    for (let j = 0; j < p; j++) {
      const point = best.slice();
      // Later simplices point the other way and are smaller.
      point[j]! += scale[j]! * (round % 2 === 0 ? 1 : -1) * 0.3 ** round;
      simplex.push({ point, value: valueAt(point) });
    }
    converged = shrinkOnto(simplex, valueAt, tolerance, () => evaluations >= limit);
    best = simplex[0]!.point;
    bestValue = simplex[0]!.value;
    if (!converged) break;
  }
  return {
    parameters: best.slice(),
    value: bestValue,
    evaluations,
    status: converged ? 'converged' : 'evaluation-limit',
  };
}

interface Corner {
  point: Float64Array;
  value: number;
}

/** Runs one simplex to its end; leaves the corners in ascending order. Returns false when `isSpent` ended it. */
function shrinkOnto(
  simplex: Corner[],
  valueAt: (point: Float64Array) => number,
  tolerance: number,
  isSpent: () => boolean,
): boolean {
  const p = simplex.length - 1;
  const expansion = 1 + 2 / p;
  const contraction = 0.75 - 1 / (2 * p);
  const shrinkage = p > 1 ? 1 - 1 / p : 0.5;
  const centre = new Float64Array(p);
  const along = (factor: number): Corner => {
    const worst = simplex[p]!.point;
    const point = centre.map((c, j) => c + factor * (c - worst[j]!));
    return { point, value: valueAt(point) };
  };
  for (;;) {
    simplex.sort((a, b) => a.value - b.value);
    const first = simplex[0]!;
    const last = simplex[p]!;
    if (last.value - first.value <= tolerance || last.value === first.value) return true;
    if (isSpent()) return false;
    centre.fill(0);
    for (let i = 0; i < p; i++) for (let j = 0; j < p; j++) centre[j]! += simplex[i]!.point[j]! / p;
    const reflected = along(1);
    if (reflected.value < first.value) {
      const expanded = along(expansion);
      simplex[p] = expanded.value < reflected.value ? expanded : reflected;
      continue;
    }
    if (reflected.value < simplex[p - 1]!.value) {
      simplex[p] = reflected;
      continue;
    }
    const contracted = along(reflected.value < last.value ? contraction : -contraction);
    if (contracted.value < Math.min(reflected.value, last.value)) {
      simplex[p] = contracted;
      continue;
    }
    for (let i = 1; i <= p; i++) {
      const corner = simplex[i]!;
      for (let j = 0; j < p; j++)
        corner.point[j] = first.point[j]! + shrinkage * (corner.point[j]! - first.point[j]!);
      corner.value = valueAt(corner.point);
    }
  }
}
