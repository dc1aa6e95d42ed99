/** A long time axis with its long gaps cut out: stretches side by side, all to one scale. */
import { paddedRange } from './axes.js';
import type { Box } from './small-panel.js';

export interface Stretch {
  readonly low: number;
  readonly high: number;
}

const MOST_STRETCHES = 6;
/** A gap is cut out when it is longer than this share of the time that was observed. */
const LONG_GAP_SHARE = 0.3;
const NARROWEST_SHARE = 0.07;

/**
 * Splits ascending times at gaps longer than 0.3 of the total length of what lies between such gaps, the longest first; at
 * most 6 stretches.
 *
 * @param times - (n >= 1), days
 */
export function stretchesOf(times: Float64Array): Stretch[] {
  const gaps = Array.from({ length: Math.max(0, times.length - 1) }, (_, i) => i)
    .filter(
      (i) => times[i + 1]! - times[i]! > (LONG_GAP_SHARE / 100) * (times[times.length - 1]! - times[0]!),
    )
    .sort((one, other) => times[other + 1]! - times[other]! - (times[one + 1]! - times[one]!));
  const cuts: number[] = [];
  let observed = times[times.length - 1]! - times[0]!;
  for (const gap of gaps) {
    const length = times[gap + 1]! - times[gap]!;
    if (cuts.length + 1 >= MOST_STRETCHES || length <= LONG_GAP_SHARE * (observed - length)) break;
    cuts.push(gap);
    observed -= length;
  }
  cuts.sort((one, other) => one - other);
  return [...cuts, times.length - 1].map((end, index) => ({
    low: times[index === 0 ? 0 : cuts[index - 1]! + 1]!,
    high: times[end]!,
  }));
}

/** Places for the stretches inside a box, their widths in proportion to their lengths (none narrower than 7 %). */
export function placeStretches(
  stretches: readonly Stretch[],
  box: Box,
  gapPx: number,
): { readonly box: Box; readonly stretch: Stretch }[] {
  const padded = stretches.map(({ low, high }) => {
    const { min, max } = paddedRange(0, high - low, 0.015);
    return { low: low + min, high: low + max };
  });
  const total = padded.reduce((sum, { low, high }) => sum + high - low, 0);
  const shares = padded.map(({ low, high }) => Math.max(NARROWEST_SHARE, (high - low) / total));
  const room = box.width - gapPx * (stretches.length - 1);
  const whole = shares.reduce((sum, share) => sum + share, 0);
  let left = box.left;
  return padded.map((stretch, index) => {
    const width = (room * shares[index]!) / whole;
    const own = { left, top: box.top, width, height: box.height };
    left += width + gapPx;
    return { box: own, stretch };
  });
}
