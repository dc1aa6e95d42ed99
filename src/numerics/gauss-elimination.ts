/** Small general systems of linear equations. */

/**
 * Solves A·X = B with partial pivoting.
 *
 * @param a - n·n, row-major; overwritten
 * @param b - n·columns, row-major; overwritten by X
 * @returns false when A is singular to rounding (then both hold intermediate numbers)
 */
export function solveInPlace(a: Float64Array, b: Float64Array, n: number, columns: number): boolean {
  for (let pivot = 0; pivot < n; pivot++) {
    let best = pivot;
    for (let i = pivot + 1; i < n; i++) {
      if (Math.abs(a[i * n + pivot]!) > Math.abs(a[best * n + pivot]!)) best = i;
    }
    const divisor = a[best * n + pivot]!;
    if (!(Math.abs(divisor) > 1e-300) || !Number.isFinite(divisor)) return false;
    if (best !== pivot) {
      swapRows(a, n, best, pivot);
      swapRows(b, columns, best, pivot);
    }
    for (let i = pivot + 1; i < n; i++) {
      const factor = a[i * n + pivot]! / divisor;
      if (factor === 0) continue;
      for (let j = pivot; j < n; j++) a[i * n + j]! -= factor * a[pivot * n + j]!;
      for (let j = 0; j < columns; j++) b[i * columns + j]! -= factor * b[pivot * columns + j]!;
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let c = 0; c < columns; c++) {
      let sum = b[i * columns + c]!;
      for (let j = i + 1; j < n; j++) sum -= a[i * n + j]! * b[j * columns + c]!;
      b[i * columns + c] = sum / a[i * n + i]!;
    }
  }
  return true;
}

function swapRows(matrix: Float64Array, width: number, i: number, k: number): void {
  for (let j = 0; j < width; j++) {
    const kept = matrix[i * width + j]!;
    matrix[i * width + j] = matrix[k * width + j]!;
    matrix[k * width + j] = kept;
  }
}
