/** Robust local regression at one time. */
import { firstAtOrAfter, medianInPlace, robustScatterInPlace } from './order-statistics.js';

/** Medians of narrow bins, with the number of points in each. */
export interface LocalBins {
  /** Ascending, days. */
  readonly times: Float64Array;
  readonly values: Float64Array;
  readonly counts: Float64Array;
}

/** First so many iterations from above, in which low bins count little: else a dip bends the first parabola and stays in it. */
const FROM_ABOVE = 8;
const WEIGHT_BELOW = 0.01;
/** The scatter about the curve is taken to be at most so many times that of neighbouring bins: dips inflate the one, not the other. */
const MOST_DIFFERENCES = 3;
const ITERATIONS = FROM_ABOVE + 6;
/** Biweight: bins farther than this many robust standard deviations have no say; 95 % efficient for normal noise. */
const TUNING = 4.685;
/** A parabola needs bins out to this share of the window on both sides. */
const SIDE_SHARE = 0.3;
const FEWEST_FOR_PARABOLA = 8;
const FEWEST_FOR_LINE = 5;

/** Robust scatter of single bins from the differences of neighbours; `Infinity` where that is zero or there are few. */
function scatterOfNeighbours(values: Float64Array): number {
  if (values.length < FEWEST_FOR_PARABOLA) return Infinity;
  const differences = new Float64Array(values.length - 1);
  for (let i = 0; i < differences.length; i++) differences[i] = (values[i + 1]! - values[i]!) * Math.SQRT1_2;
  const scatter = robustScatterInPlace(differences);
  return scatter > 0 ? scatter : Infinity;
}

/** @returns value and slope of the local curve at `time`; of the nearest bins where none is within half a window */
export function localFit(
  bins: LocalBins,
  time: number,
  windowDays: number,
): { level: number; slopePerDay: number } {
  const half = 0.5 * windowDays;
  let from = firstAtOrAfter(bins.times, time - half);
  let to = firstAtOrAfter(bins.times, time + half);
  // Inside a long masked stretch, or with few bins: the nearest ones.
  while (to - from < Math.min(FEWEST_FOR_LINE, bins.times.length)) {
    const before = from > 0 ? time - bins.times[from - 1]! : Infinity;
    const after = to < bins.times.length ? bins.times[to]! - time : Infinity;
    if (before <= after) from--;
    else to++;
  }
  const n = to - from;
  const values = bins.values.subarray(from, to);
  const before = time - bins.times[from]!;
  const after = bins.times[to - 1]! - time;
  const reach = Math.max(half, before, after) * 1.001;
  const sided = Math.min(before, after) >= SIDE_SHARE * windowDays;
  const terms = sided && n >= FEWEST_FOR_PARABOLA ? 3 : n >= FEWEST_FOR_LINE ? 2 : 1;
  const kernel = new Float64Array(n);
  const offsets = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const u = (bins.times[from + i]! - time) / reach;
    offsets[i] = u;
    kernel[i] = bins.counts[from + i]! * (1 - Math.abs(u) ** 3) ** 3;
  }
  let c0 = medianInPlace(values.slice());
  let c1 = 0;
  let c2 = 0;
  const work = new Float64Array(n);
  const largestScatter = MOST_DIFFERENCES * scatterOfNeighbours(values);
  for (let iteration = 0; iteration < ITERATIONS; iteration++) {
    for (let i = 0; i < n; i++) {
      const u = offsets[i]!;
      work[i] = values[i]! - c0 - u * (c1 + u * c2);
    }
    const cut = TUNING * Math.min(robustScatterInPlace(work), largestScatter);
    // Moments about c0, so that levels near 1 lose no digits.
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let s3 = 0;
    let s4 = 0;
    let y0 = 0;
    let y1 = 0;
    let y2 = 0;
    const base = c0;
    for (let i = 0; i < n; i++) {
      const u = offsets[i]!;
      const residual = values[i]! - base - u * (c1 + u * c2);
      const off = cut > 0 ? residual / cut : 0;
      const isFirst = iteration < FROM_ABOVE;
      if (!isFirst && Math.abs(off) >= 1) continue;
      const w = kernel[i]! * (isFirst ? (residual < 0 ? WEIGHT_BELOW : 1) : (1 - off * off) ** 2);
      const y = values[i]! - base;
      s0 += w;
      s1 += w * u;
      s2 += w * u * u;
      s3 += w * u * u * u;
      s4 += w * u * u * u * u;
      y0 += w * y;
      y1 += w * u * y;
      y2 += w * u * u * y;
    }
    if (!(s0 > 0)) break;
    const d2 = s0 * s2 - s1 * s1;
    const d3 = s0 * (s2 * s4 - s3 * s3) - s1 * (s1 * s4 - s2 * s3) + s2 * (s1 * s3 - s2 * s2);
    if (terms === 3 && d3 > 1e-12 * s0 * s0 * s0) {
      c2 = (y0 * (s1 * s3 - s2 * s2) - y1 * (s0 * s3 - s1 * s2) + y2 * d2) / d3;
      c1 = (y0 * (s2 * s3 - s1 * s4) + y1 * (s0 * s4 - s2 * s2) - y2 * (s0 * s3 - s1 * s2)) / d3;
      c0 = base + (y0 - c1 * s1 - c2 * s2) / s0;
    } else if (terms >= 2 && d2 > 1e-10 * s0 * s0) {
      c2 = 0;
      c1 = (s0 * y1 - s1 * y0) / d2;
      c0 = base + (y0 - c1 * s1) / s0;
    } else {
      c2 = 0;
      c1 = 0;
      c0 = base + y0 / s0;
    }
  }
  return { level: c0, slopePerDay: c1 / reach };
}
