/** When, during warm-up, the covariance is learnt and when only the step size is. */

/** Draws before this share of the warm-up find the bulk; draws after the last window settle the step size. */
const OPENING_SHARE = 0.1;
const CLOSING_SHARE = 0.15;
/** Each window is twice as long as the one before, so that early, poor draws are forgotten. */
const FIRST_WINDOW = 25;

export interface WarmupPlan {
  /** Index of the first draw that counts for the covariance. */
  readonly opening: number;
  /** Ascending indices of draws after which the covariance is renewed; empty when the warm-up is too short to learn one. */
  readonly windowEnds: readonly number[];
}

/** @param draws - length of the warm-up, >= 0 */
export function planWarmup(draws: number): WarmupPlan {
  const opening = Math.ceil(OPENING_SHARE * draws);
  const last = draws - Math.ceil(CLOSING_SHARE * draws);
  const windowEnds: number[] = [];
  let length = FIRST_WINDOW;
  let end = opening;
  while (end + length <= last) {
    // A rest too short for the next window goes to this one.
    end = end + 3 * length > last ? last : end + length;
    windowEnds.push(end - 1);
    length *= 2;
  }
  return { opening, windowEnds };
}
