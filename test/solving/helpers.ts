/** What the tests of the solver share: sets of velocities, cases, and a dense least-squares solve of their own. */
import type { RandomStream } from '../../src/numerics/random.js';
import type { Case, VelocitySet } from '../../src/observations/types.js';
import type { OrbitElements } from '../../src/orbit/elements.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import type { SolveOptions } from '../../src/solving/solve-case.js';

export const BARE_CASE: Case = {
  path: null,
  target: 'Vellamo',
  star: { massSolar: null, radiusSolar: null, effectiveTemperatureK: null },
  tables: [],
  companions: 'auto',
  maximumCompanions: 5,
  drift: 'auto',
  circular: 'auto',
  instruments: {},
  periodRangeDays: { low: null, high: null },
  mock: null,
};

export const OPTIONS: SolveOptions = {
  seed: 1,
  quick: true,
  permutations: 0,
  provenance: { version: '0.0.0', node: '20', command: ['tugline', 'solve', 'vellamo.csv'] },
};

export interface Rows {
  readonly times: ArrayLike<number>;
  readonly velocities: ArrayLike<number>;
  readonly sigmas: ArrayLike<number>;
  readonly instruments?: ArrayLike<number>;
}

/** @param rows - ascending in time, as the readers deliver them */
export function velocitySet(rows: Rows): VelocitySet {
  const count = rows.times.length;
  const instrumentOf = Uint16Array.from({ length: count }, (_, i) => rows.instruments?.[i] ?? 0);
  return {
    count,
    timesBjdTdb: Float64Array.from(rows.times),
    velocitiesMps: Float64Array.from(rows.velocities),
    sigmasMps: Float64Array.from(rows.sigmas),
    instrumentOf,
    instruments: ['north', 'south', 'dome', 'lake'].slice(0, 1 + Math.max(0, ...instrumentOf)),
    tableOf: new Uint16Array(count),
    lines: Uint32Array.from({ length: count }, (_, i) => i + 2),
    tables: [{ path: 'vellamo.csv', sha256: 'ab'.repeat(32), rows: count, used: count }],
    timeScale: 'BJD_TDB',
    notices: [],
  };
}

export interface Recipe {
  readonly times: Float64Array;
  readonly companions: readonly OrbitElements[];
  readonly sigmaMps: number;
  readonly zeroPointsMps?: readonly number[];
  readonly slopeMpsPerDay?: number;
  readonly curvatureMpsPerDay2?: number;
  /** Factor on the noise; 0 for exact velocities. Default 1. */
  readonly noise?: number;
  readonly jitterMps?: number;
}

/** Velocities of a recipe; rows go to the instruments in turn. */
export function simulated(random: RandomStream, recipe: Recipe): VelocitySet {
  const { times, sigmaMps } = recipe;
  const zeroPoints = recipe.zeroPointsMps ?? [0];
  const epochBjdTdb = Math.round(times[0]! + times.at(-1)!) / 2;
  const model = evaluateVelocity(
    {
      companions: recipe.companions,
      letters: [],
      zeroPointsMps: new Float64Array(0),
      jittersMps: new Float64Array(0),
      epochBjdTdb,
      slopeMpsPerDay: recipe.slopeMpsPerDay ?? 0,
      curvatureMpsPerDay2: recipe.curvatureMpsPerDay2 ?? 0,
    },
    times,
  );
  const scatter = (recipe.noise ?? 1) * Math.hypot(sigmaMps, recipe.jitterMps ?? 0);
  return velocitySet({
    times,
    velocities: model.map((v, i) => v + zeroPoints[i % zeroPoints.length]! + scatter * random.normal()),
    sigmas: times.map(() => sigmaMps),
    instruments: times.map((_, i) => i % zeroPoints.length),
  });
}

/** Ascending times spread at random over a span. */
export function scatteredTimes(random: RandomStream, count: number, spanDays: number): Float64Array {
  const inside = Array.from({ length: count - 2 }, () => random.uniformBetween(0, spanDays));
  return Float64Array.from([0, ...inside, spanDays], (t) => 2459000.5 + t).sort();
}

/**
 * Weighted least squares by Householder reflections, written for these tests so that nothing of the program is trusted.
 *
 * @returns the smallest sum of w (data - columns x)^2, and x
 */
export function denseFit(
  columns: readonly ArrayLike<number>[],
  data: ArrayLike<number>,
  weights: ArrayLike<number>,
): { chiSquare: number; solution: number[] } {
  const n = data.length;
  const p = columns.length;
  const root = Array.from({ length: n }, (_, i) => Math.sqrt(weights[i]!));
  const a = columns.map((column) => root.map((r, i) => r * column[i]!));
  const scales = a.map((column) => Math.hypot(...column));
  a.forEach((column, j) => {
    for (let i = 0; i < n; i++) column[i]! /= scales[j]!;
  });
  const y = root.map((r, i) => r * data[i]!);
  for (let j = 0; j < p; j++) {
    const pivot = a[j]!;
    const norm = Math.hypot(...pivot.slice(j));
    const alpha = pivot[j]! > 0 ? -norm : norm;
    const reflector = pivot.slice(j);
    reflector[0]! -= alpha;
    const square = reflector.reduce((sum, value) => sum + value * value, 0);
    for (const target of [...a.slice(j), y]) {
      let dot = 0;
      for (let i = 0; i < reflector.length; i++) dot += reflector[i]! * target[j + i]!;
      for (let i = 0; i < reflector.length; i++) target[j + i]! -= (2 * dot * reflector[i]!) / square;
    }
  }
  const solution = new Array<number>(p).fill(0);
  for (let j = p - 1; j >= 0; j--) {
    let sum = y[j]!;
    for (let k = j + 1; k < p; k++) sum -= a[k]![j]! * solution[k]!;
    solution[j] = sum / a[j]![j]!;
  }
  return {
    chiSquare: y.slice(p).reduce((sum, value) => sum + value * value, 0),
    solution: solution.map((value, j) => value / scales[j]!),
  };
}

/** Inverse of a symmetric (n, n) matrix by Gauss-Jordan elimination with pivoting, after scaling the diagonal to one. */
export function inverse(matrix: Float64Array, n: number): number[][] {
  const scale = Array.from({ length: n }, (_, j) => Math.sqrt(Math.abs(matrix[j * n + j]!)));
  const rows = scale.map((s, j) => [
    ...scale.map((t, k) => matrix[j * n + k]! / (s * t)),
    ...scale.map((_, k) => (k === j ? 1 : 0)),
  ]);
  for (let j = 0; j < n; j++) {
    const best = rows
      .slice(j)
      .reduce((top, row, i) => (Math.abs(row[j]!) > Math.abs(rows[top]![j]!) ? j + i : top), j);
    [rows[j], rows[best]] = [rows[best]!, rows[j]!];
    const pivot = rows[j]![j]!;
    rows[j] = rows[j]!.map((value) => value / pivot);
    rows.forEach((row, i) => {
      if (i === j) return;
      const factor = row[j]!;
      rows[i] = row.map((value, k) => value - factor * rows[j]![k]!);
    });
  }
  return rows.map((row, j) => row.slice(n).map((value, k) => value / (scale[j]! * scale[k]!)));
}
