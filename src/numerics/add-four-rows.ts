/** A symmetric rank-four update: four rows and two columns at a time, for few loads and stores per product. */

/**
 * sum += X^T·X, lower triangle, for four rows X of p columns; the inner loop of every least-squares step.
 *
 * @param sum - p·p, row-major; updated
 * @param x - 4p: the four elements of column j stand together at 4j; read only
 */
export function addFourRows(sum: Float64Array, x: Float64Array, p: number): void {
  let j = 0;
  for (; j + 1 < p; j += 2) {
    const at = 4 * j;
    const a0 = x[at]!;
    const a1 = x[at + 1]!;
    const a2 = x[at + 2]!;
    const a3 = x[at + 3]!;
    const b0 = x[at + 4]!;
    const b1 = x[at + 5]!;
    const b2 = x[at + 6]!;
    const b3 = x[at + 7]!;
    const rowA = j * p;
    const rowB = rowA + p;
    for (let k = 0; k <= j; k++) {
      const from = 4 * k;
      const c0 = x[from]!;
      const c1 = x[from + 1]!;
      const c2 = x[from + 2]!;
      const c3 = x[from + 3]!;
      sum[rowA + k]! += a0 * c0 + a1 * c1 + a2 * c2 + a3 * c3;
      sum[rowB + k]! += b0 * c0 + b1 * c1 + b2 * c2 + b3 * c3;
    }
    sum[rowB + j + 1]! += b0 * b0 + b1 * b1 + b2 * b2 + b3 * b3;
  }
  if (j < p) {
    const at = 4 * j;
    for (let k = 0; k <= j; k++) {
      const from = 4 * k;
      sum[j * p + k]! +=
        x[at]! * x[from]! + x[at + 1]! * x[from + 1]! + x[at + 2]! * x[from + 2]! + x[at + 3]! * x[from + 3]!;
    }
  }
}
