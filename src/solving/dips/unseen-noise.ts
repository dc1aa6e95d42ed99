/**
 * Noise of a depth where the trend has not seen the dip: stretches as long as the dip are masked one after the other all over the
 * light curve, the trend is taken without them, and their means are compared with what independent points would give [Pont2006].
 * The trend removes red noise from what it sees, but not from a masked dip, so that the usual scatter of means would flatter it.
 */
import { detrended, weightedSeries } from './detrend.js';
import { redNoiseFactor, scatterOfMeans } from './noise.js';
import type { SearchSettings } from './search-settings.js';
import type { DipData } from './types.js';

/** Masked stretches stand this many durations apart, in so many passes shifted against each other. */
const APART = 3;
const PASSES = 2;
/** A tenth of the duration on either side is masked too, as around a dip. */
const MARGIN = 0.1;
/** Means over these shares of the duration count too: all that a single night has enough of. */
const SHORTER = [0.5, 0.25, 0.125] as const;

/**
 * @param isMasked - dips, which do not count as noise
 * @returns scatter of the means in units of that of white noise, >= 1; from shorter stretches too where the data hold few
 */
export function unseenNoiseFactor(
  data: DipData,
  settings: SearchSettings,
  isMasked: Uint8Array,
  durationDays: number,
): number {
  const { timesDays } = data;
  const totals: number[] = [];
  const sums: number[] = [];
  let factor = 1;
  for (let pass = 0; pass < PASSES; pass++) {
    const origin = timesDays[0]! + (pass * APART * durationDays) / PASSES;
    const masked = isMasked.slice();
    const placeOf = (time: number): number => (time - origin) / durationDays;
    for (let i = 0; i < masked.length; i++) {
      const place = placeOf(timesDays[i]!);
      if (place - APART * Math.floor(place / APART) < 1 + 2 * MARGIN) masked[i] = 1;
    }
    const light = detrended(data, masked, settings.windowDays, settings.loneLow);
    const series = weightedSeries(timesDays, light, isMasked);
    if (pass === 0)
      for (const share of SHORTER) factor = Math.max(factor, redNoiseFactor(series, share * durationDays));
    let stretch = -Infinity;
    for (let i = 0; i < masked.length; i++) {
      const w = series.weights[i]!;
      const place = placeOf(timesDays[i]!);
      const number = Math.floor(place / APART);
      const within = place - APART * number;
      if (!(w > 0) || within < MARGIN || within > 1 + MARGIN) continue;
      if (number !== stretch) {
        stretch = number;
        totals.push(0);
        sums.push(0);
      }
      totals[totals.length - 1]! += w;
      sums[sums.length - 1]! += w * series.values[i]!;
    }
  }
  return Math.max(factor, scatterOfMeans(totals, sums));
}
