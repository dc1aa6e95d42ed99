/**
 * Small dense symmetric systems. Matrices are row-major Float64Arrays of n·n elements, both triangles stored.
 * Sizes here are tens, not thousands: plain loops beat blocked ones.
 */

/**
 * Overwrites a symmetric positive definite matrix with its lower Cholesky factor L, a = L·L^T (upper triangle zeroed).
 *
 * @param a - n·n, row-major; only the lower triangle is read
 * @returns false when a pivot is not positive (or not finite); `a` is then half overwritten
 */
export function choleskyInPlace(a: Float64Array, n: number): boolean {
  for (let i = 0; i < n; i++) {
    const rowI = i * n;
    for (let j = 0; j < i; j++) {
      const rowJ = j * n;
      let sum = a[rowI + j]!;
      for (let k = 0; k < j; k++) sum -= a[rowI + k]! * a[rowJ + k]!;
      a[rowI + j] = sum / a[rowJ + j]!;
      a[rowJ + i] = 0;
    }
    let pivot = a[rowI + i]!;
    for (let k = 0; k < i; k++) pivot -= a[rowI + k]! * a[rowI + k]!;
    if (!(pivot > 0) || pivot === Infinity) return false;
    a[rowI + i] = Math.sqrt(pivot);
  }
  return true;
}

/**
 * Solves L·L^T·x = b in place.
 *
 * @param l - lower factor of `choleskyInPlace`, n·n; read only
 * @param b - length n (longer is allowed); overwritten by x
 */
export function choleskySolveInPlace(l: Float64Array, n: number, b: Float64Array): void {
  for (let i = 0; i < n; i++) {
    const row = i * n;
    let sum = b[i]!;
    for (let k = 0; k < i; k++) sum -= l[row + k]! * b[k]!;
    b[i] = sum / l[row + i]!;
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i]!;
    for (let k = i + 1; k < n; k++) sum -= l[k * n + i]! * b[k]!;
    b[i] = sum / l[i * n + i]!;
  }
}

/**
 * Inverse of a symmetric positive definite matrix, e.g. a covariance from J^T·J.
 * The matrix is brought to unit diagonal first, so parameters of very different units (days, m/s) do no harm.
 *
 * @param a - n·n, row-major; read only
 * @returns a fresh, exactly symmetric n·n array; `null` when the matrix is not positive definite to rounding
 */
export function invertSymmetricPositive(a: Float64Array, n: number): Float64Array | null {
  const scale = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const diagonal = a[i * n + i]!;
    if (!(diagonal > 0) || diagonal === Infinity) return null;
    scale[i] = 1 / Math.sqrt(diagonal);
  }
  const factor = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) factor[i * n + j] = a[i * n + j]! * scale[i]! * scale[j]!;
  }
  if (!choleskyInPlace(factor, n)) return null;
  const inverse = new Float64Array(n * n);
  const column = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    column.fill(0);
    column[j] = 1;
    choleskySolveInPlace(factor, n, column);
    for (let i = j; i < n; i++) {
      const value = column[i]! * scale[i]! * scale[j]!;
      if (!Number.isFinite(value)) return null;
      inverse[i * n + j] = value;
      inverse[j * n + i] = value;
    }
  }
  return inverse;
}

export interface SymmetricEigen {
  /** Ascending, length n. */
  readonly values: Float64Array;
  /** n·n, row-major; column j (elements i·n + j) is the unit vector that belongs to values[j]. */
  readonly vectors: Float64Array;
}

/**
 * Eigenvalues and vectors of a symmetric matrix by cyclic Jacobi rotations.
 *
 * @param a - n·n, row-major, symmetric, finite; read only
 * @throws RangeError when an element is not finite
 */
export function symmetricEigen(a: Float64Array, n: number): SymmetricEigen {
  const work = a.slice(0, n * n);
  const rotated = new Float64Array(n * n);
  for (let i = 0; i < n; i++) rotated[i * n + i] = 1;
  let total = 0;
  for (const element of work) total += element * element;
  if (!Number.isFinite(total))
    throw new RangeError('a matrix with an element that is not finite has no eigenvalues');
  // Convergence is quadratic: a dozen sweeps are plenty; the limit only guards against a defect.
  for (let sweep = 0; sweep < 60; sweep++) {
    let offDiagonal = 0;
    for (let i = 0; i < n; i++) for (let j = 0; j < i; j++) offDiagonal += 2 * work[i * n + j]! ** 2;
    if (offDiagonal <= 1e-33 * total) break;
    for (let p = 0; p < n - 1; p++) for (let q = p + 1; q < n; q++) rotate(work, rotated, n, p, q);
  }
  const order = Array.from({ length: n }, (_, j) => j).sort((i, j) => work[i * n + i]! - work[j * n + j]!);
  const values = new Float64Array(n);
  const vectors = new Float64Array(n * n);
  order.forEach((from, to) => {
    values[to] = work[from * n + from]!;
    for (let i = 0; i < n; i++) vectors[i * n + to] = rotated[i * n + from]!;
  });
  return { values, vectors };
}

/** One Jacobi rotation that clears element (p, q); the vectors are carried along. */
function rotate(work: Float64Array, vectors: Float64Array, n: number, p: number, q: number): void {
  const apq = work[p * n + q]!;
  if (apq === 0) return;
  const half = (work[q * n + q]! - work[p * n + p]!) / (2 * apq);
  const t = (half >= 0 ? 1 : -1) / (Math.abs(half) + Math.hypot(half, 1));
  const c = 1 / Math.hypot(t, 1);
  const s = t * c;
  for (let k = 0; k < n; k++) {
    const kp = work[k * n + p]!;
    const kq = work[k * n + q]!;
    work[k * n + p] = c * kp - s * kq;
    work[k * n + q] = s * kp + c * kq;
  }
  for (let k = 0; k < n; k++) {
    const pk = work[p * n + k]!;
    const qk = work[q * n + k]!;
    work[p * n + k] = c * pk - s * qk;
    work[q * n + k] = s * pk + c * qk;
  }
  for (let k = 0; k < n; k++) {
    const kp = vectors[k * n + p]!;
    const kq = vectors[k * n + q]!;
    vectors[k * n + p] = c * kp - s * kq;
    vectors[k * n + q] = s * kp + c * kq;
  }
}

/** A column that keeps less than this part of its length after projection counts as dependent on its predecessors. */
const DEPENDENT_BELOW = 1e-10;

/**
 * Orthonormal basis of the span of `columns` under the inner product sum_i w_i·a_i·b_i (modified Gram-Schmidt, run twice).
 *
 * @param columns - any number of arrays of the length of `weights`; read only
 * @param weights - w_i >= 0
 * @returns fresh arrays, at most as many as `columns`: dependent, zero and non-finite columns are dropped, order is kept.
 *   Inner products of different members stay below 1e-14 in size (measured on powers of x up to the fifth).
 */
export function orthonormalise(columns: readonly Float64Array[], weights: Float64Array): Float64Array[] {
  const basis: Float64Array[] = [];
  for (const column of columns) {
    const candidate = column.slice();
    const before = Math.sqrt(weightedDot(candidate, candidate, weights));
    if (!(before > 0) || before === Infinity) continue;
    for (let pass = 0; pass < 2; pass++) {
      for (const member of basis) {
        const projection = weightedDot(candidate, member, weights);
        for (let i = 0; i < candidate.length; i++) candidate[i]! -= projection * member[i]!;
      }
    }
    const after = Math.sqrt(weightedDot(candidate, candidate, weights));
    if (after <= DEPENDENT_BELOW * before) continue;
    for (let i = 0; i < candidate.length; i++) candidate[i]! /= after;
    basis.push(candidate);
  }
  return basis;
}

/**
 * Takes off a vector, in place, what lies along the members of an orthonormal basis (unit weights), one after the other.
 *
 * @param vector - overwritten
 */
export function projectOut(vector: Float64Array, basis: readonly Float64Array[]): void {
  for (const unit of basis) {
    let product = 0;
    for (let i = 0; i < vector.length; i++) product += vector[i]! * unit[i]!;
    for (let i = 0; i < vector.length; i++) vector[i]! -= product * unit[i]!;
  }
}

function weightedDot(a: Float64Array, b: Float64Array, weights: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < weights.length; i++) sum += weights[i]! * a[i]! * b[i]!;
  return sum;
}
