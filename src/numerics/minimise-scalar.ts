/** Minimum of a function of one variable. */

export interface ScalarMinimum {
  readonly position: number;
  readonly value: number;
  readonly iterations: number;
}

const GOLDEN = (3 - Math.sqrt(5)) / 2;

/**
 * A local minimum between two bounds, by Brent's combination of parabolas and golden sections (Brent 1973,
 * Algorithms for Minimization without Derivatives, Prentice-Hall).
 *
 * @param f - finite or +Infinity everywhere between the bounds
 * @param lower - smaller bound; `upper` - larger bound, both finite
 * @param tolerance - of the position, absolute part; rounding limits it to about 1e-8 of the position; default 0
 * @throws RangeError when the bounds are not finite and in order
 */
export function minimiseScalar(
  f: (x: number) => number,
  lower: number,
  upper: number,
  tolerance = 0,
): ScalarMinimum {
  if (!(Number.isFinite(lower) && Number.isFinite(upper) && lower < upper)) {
    throw new RangeError(`bounds ${lower} and ${upper} must be finite and in order`);
  }
  let a = lower;
  let b = upper;
  let best = a + GOLDEN * (b - a);
  let second = best;
  let third = best;
  let fBest = f(best);
  let fSecond = fBest;
  let fThird = fBest;
  let step = 0;
  let stepBeforeLast = 0;
  let iterations = 0;
  for (; iterations < 200; iterations++) {
    const middle = (a + b) / 2;
    const reach = 1.5e-8 * Math.abs(best) + tolerance / 3 + 1e-300;
    if (Math.abs(best - middle) <= 2 * reach - (b - a) / 2) break;
    let useGolden = true;
    if (Math.abs(stepBeforeLast) > reach) {
      const r = (best - second) * (fBest - fThird);
      const q0 = (best - third) * (fBest - fSecond);
      let p = (best - third) * q0 - (best - second) * r;
      let q = 2 * (q0 - r);
      if (q > 0) p = -p;
      q = Math.abs(q);
      const previous = stepBeforeLast;
      stepBeforeLast = step;
      if (Math.abs(p) < Math.abs(0.5 * q * previous) && p > q * (a - best) && p < q * (b - best)) {
        step = p / q;
        const next = best + step;
        if (next - a < 2 * reach || b - next < 2 * reach) step = best < middle ? reach : -reach;
        useGolden = false;
      }
    }
    if (useGolden) {
      stepBeforeLast = best < middle ? b - best : a - best;
      step = GOLDEN * stepBeforeLast;
    }
    const x = best + (Math.abs(step) >= reach ? step : Math.sign(step) * reach);
    const fx = f(x);
    if (fx <= fBest) {
      if (x < best) b = best;
      else a = best;
      [third, fThird] = [second, fSecond];
      [second, fSecond] = [best, fBest];
      [best, fBest] = [x, fx];
    } else {
      if (x < best) a = x;
      else b = x;
      if (fx <= fSecond || second === best) {
        [third, fThird] = [second, fSecond];
        [second, fSecond] = [x, fx];
      } else if (fx <= fThird || third === best || third === second) {
        [third, fThird] = [x, fx];
      }
    }
  }
  return { position: best, value: fBest, iterations };
}
