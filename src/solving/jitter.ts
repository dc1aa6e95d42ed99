/** Jitter of one instrument by maximum likelihood at given residuals. */
import type { VelocityData } from '../signals/velocity-term.js';
import type { JitterSetting } from './model-structure.js';

/**
 * Maximises -1/2 sum [r^2/(sigma^2 + s^2) + ln(sigma^2 + s^2)] (and the prior, if any) over s in the allowed range for
 * every instrument.
 *
 * @param residualsMps - (n), observed minus model
 * @param jittersMps - one per instrument, overwritten
 */
export function updateJitters(
  data: VelocityData,
  residualsMps: Float64Array,
  settings: readonly JitterSetting[],
  jittersMps: Float64Array,
): void {
  for (let instrument = 0; instrument < data.instrumentCount; instrument++) {
    const setting = settings[instrument]!;
    jittersMps[instrument] =
      setting.highMps > setting.lowMps ? bestJitter(data, residualsMps, setting, instrument) : setting.lowMps;
  }
}

/** Derivative of the log-density by v = s^2. */
function slopeByVariance(
  data: VelocityData,
  residualsMps: Float64Array,
  setting: JitterSetting,
  instrument: number,
  variance: number,
): number {
  let slope = 0;
  for (let i = 0; i < residualsMps.length; i++) {
    if (data.instrumentOf[i] !== instrument) continue;
    const total = data.sigmasMps[i]! * data.sigmasMps[i]! + variance;
    slope += (residualsMps[i]! * residualsMps[i]!) / (total * total) - 1 / total;
  }
  slope *= 0.5;
  if (setting.prior !== null) {
    const s = Math.sqrt(Math.max(variance, 1e-12));
    slope -= (s - setting.prior.centre) / (setting.prior.sigma ** 2 * 2 * s);
  }
  return slope;
}

function bestJitter(
  data: VelocityData,
  residualsMps: Float64Array,
  setting: JitterSetting,
  instrument: number,
): number {
  let largest = 0;
  for (let i = 0; i < residualsMps.length; i++) {
    if (data.instrumentOf[i] === instrument) largest = Math.max(largest, Math.abs(residualsMps[i]!));
  }
  let low = setting.lowMps ** 2;
  let high = Math.min(setting.highMps, largest + (setting.prior?.centre ?? 0)) ** 2;
  if (high <= low) return setting.lowMps;
  const slopeAt = (variance: number): number =>
    slopeByVariance(data, residualsMps, setting, instrument, variance);
  if (slopeAt(low) <= 0) return setting.lowMps;
  if (slopeAt(high) >= 0) return Math.sqrt(high);
  // The slope changes sign once between the bounds: regula falsi with the Illinois correction.
  let slopeLow = slopeAt(low);
  let slopeHigh = slopeAt(high);
  let side = 0;
  for (let step = 0; step < 200 && high - low > 1e-13 * high; step++) {
    let middle = (low * slopeHigh - high * slopeLow) / (slopeHigh - slopeLow);
    if (!(middle > low && middle < high) || step % 4 === 3) middle = 0.5 * (low + high);
    const slope = slopeAt(middle);
    if (slope === 0) return Math.sqrt(middle);
    if (slope > 0) {
      low = middle;
      slopeLow = slope;
      if (side === 1) slopeHigh *= 0.5;
      side = 1;
    } else {
      high = middle;
      slopeHigh = slope;
      if (side === -1) slopeLow *= 0.5;
      side = -1;
    }
  }
  return Math.sqrt(0.5 * (low + high));
}
