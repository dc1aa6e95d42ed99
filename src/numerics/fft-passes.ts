/**
 * The passes of the Fourier transform in fft.ts: each reads the pair x and writes the pair y (equal lengths, different arrays).
 * With `stride` = 4^pass, butterfly p, k takes x at stride·(p + j·quarter) + k and leaves its j-th output at stride·(4p + j) + k,
 * which sorts the frequencies on the way.
 */

// `| 0` on indices keeps V8 from guarding each addition against overflow (5-8 % here).

/** Stride 1: neighbouring butterflies have different twiddles, so there is no inner loop to share them. */
export function firstRadix4Pass(
  xr: Float64Array,
  xi: Float64Array,
  yr: Float64Array,
  yi: Float64Array,
  quarter: number,
  wr: Float64Array,
  wi: Float64Array,
): void {
  for (let p = 0; p < quarter; p = (p + 1) | 0) {
    const p2 = (p + p) | 0;
    const p3 = (p2 + p) | 0;
    const i1 = (p + quarter) | 0;
    const i2 = (i1 + quarter) | 0;
    const i3 = (i2 + quarter) | 0;
    const o = p << 2;
    const sumEvenRe = xr[p]! + xr[i2]!;
    const sumEvenIm = xi[p]! + xi[i2]!;
    const difEvenRe = xr[p]! - xr[i2]!;
    const difEvenIm = xi[p]! - xi[i2]!;
    const sumOddRe = xr[i1]! + xr[i3]!;
    const sumOddIm = xi[i1]! + xi[i3]!;
    const turnedRe = xi[i1]! - xi[i3]!; // -i times the odd difference
    const turnedIm = xr[i3]! - xr[i1]!;
    yr[o] = sumEvenRe + sumOddRe;
    yi[o] = sumEvenIm + sumOddIm;
    const ar = difEvenRe + turnedRe;
    const ai = difEvenIm + turnedIm;
    yr[o | 1] = ar * wr[p]! - ai * wi[p]!;
    yi[o | 1] = ar * wi[p]! + ai * wr[p]!;
    const br = sumEvenRe - sumOddRe;
    const bi = sumEvenIm - sumOddIm;
    yr[o | 2] = br * wr[p2]! - bi * wi[p2]!;
    yi[o | 2] = br * wi[p2]! + bi * wr[p2]!;
    const cr = difEvenRe - turnedRe;
    const ci = difEvenIm - turnedIm;
    yr[o | 3] = cr * wr[p3]! - ci * wi[p3]!;
    yi[o | 3] = cr * wi[p3]! + ci * wr[p3]!;
  }
}

/** The general pass: `quarter` groups of `stride` butterflies, one set of twiddles per group. */
export function radix4Pass(
  xr: Float64Array,
  xi: Float64Array,
  yr: Float64Array,
  yi: Float64Array,
  quarter: number,
  stride: number,
  wr: Float64Array,
  wi: Float64Array,
): void {
  const step = quarter * stride;
  for (let p = 0; p < quarter; p++) {
    const t = p * stride;
    const w1r = wr[t]!;
    const w1i = wi[t]!;
    const w2r = wr[2 * t]!;
    const w2i = wi[2 * t]!;
    const w3r = wr[3 * t]!;
    const w3i = wi[3 * t]!;
    const i1 = t + step;
    const i2 = i1 + step;
    const i3 = i2 + step;
    const o = 4 * t;
    const o1 = o + stride;
    const o2 = o1 + stride;
    const o3 = o2 + stride;
    for (let k = 0; k < stride; k = (k + 1) | 0) {
      const x0r = xr[(t + k) | 0]!;
      const x0i = xi[(t + k) | 0]!;
      const x1r = xr[(i1 + k) | 0]!;
      const x1i = xi[(i1 + k) | 0]!;
      const x2r = xr[(i2 + k) | 0]!;
      const x2i = xi[(i2 + k) | 0]!;
      const x3r = xr[(i3 + k) | 0]!;
      const x3i = xi[(i3 + k) | 0]!;
      const sumEvenRe = x0r + x2r;
      const sumEvenIm = x0i + x2i;
      const difEvenRe = x0r - x2r;
      const difEvenIm = x0i - x2i;
      const sumOddRe = x1r + x3r;
      const sumOddIm = x1i + x3i;
      const turnedRe = x1i - x3i;
      const turnedIm = x3r - x1r;
      yr[(o + k) | 0] = sumEvenRe + sumOddRe;
      yi[(o + k) | 0] = sumEvenIm + sumOddIm;
      const ar = difEvenRe + turnedRe;
      const ai = difEvenIm + turnedIm;
      yr[(o1 + k) | 0] = ar * w1r - ai * w1i;
      yi[(o1 + k) | 0] = ar * w1i + ai * w1r;
      const br = sumEvenRe - sumOddRe;
      const bi = sumEvenIm - sumOddIm;
      yr[(o2 + k) | 0] = br * w2r - bi * w2i;
      yi[(o2 + k) | 0] = br * w2i + bi * w2r;
      const cr = difEvenRe - turnedRe;
      const ci = difEvenIm - turnedIm;
      yr[(o3 + k) | 0] = cr * w3r - ci * w3i;
      yi[(o3 + k) | 0] = cr * w3i + ci * w3r;
    }
  }
}

/** One group, all twiddles 1. */
export function lastRadix4Pass(
  xr: Float64Array,
  xi: Float64Array,
  yr: Float64Array,
  yi: Float64Array,
  stride: number,
): void {
  for (let k = 0; k < stride; k = (k + 1) | 0) {
    const k1 = (k + stride) | 0;
    const k2 = (k1 + stride) | 0;
    const k3 = (k2 + stride) | 0;
    const sumEvenRe = xr[k]! + xr[k2]!;
    const sumEvenIm = xi[k]! + xi[k2]!;
    const difEvenRe = xr[k]! - xr[k2]!;
    const difEvenIm = xi[k]! - xi[k2]!;
    const sumOddRe = xr[k1]! + xr[k3]!;
    const sumOddIm = xi[k1]! + xi[k3]!;
    const turnedRe = xi[k1]! - xi[k3]!;
    const turnedIm = xr[k3]! - xr[k1]!;
    yr[k] = sumEvenRe + sumOddRe;
    yi[k] = sumEvenIm + sumOddIm;
    yr[k1] = difEvenRe + turnedRe;
    yi[k1] = difEvenIm + turnedIm;
    yr[k2] = sumEvenRe - sumOddRe;
    yi[k2] = sumEvenIm - sumOddIm;
    yr[k3] = difEvenRe - turnedRe;
    yi[k3] = difEvenIm - turnedIm;
  }
}

export function lastRadix2Pass(
  xr: Float64Array,
  xi: Float64Array,
  yr: Float64Array,
  yi: Float64Array,
  stride: number,
): void {
  for (let k = 0; k < stride; k = (k + 1) | 0) {
    const k1 = (k + stride) | 0;
    yr[k] = xr[k]! + xr[k1]!;
    yi[k] = xi[k]! + xi[k1]!;
    yr[k1] = xr[k]! - xr[k1]!;
    yi[k1] = xi[k]! - xi[k1]!;
  }
}
