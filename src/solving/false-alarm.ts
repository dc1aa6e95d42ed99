/** How often noise alone gives a periodogram peak as high as this one. */

import { logGamma } from '../numerics/special-functions.js';

export interface FalseAlarmSetting {
  /** Number of data. */
  readonly dataCount: number;
  /** Linear parameters of the background: zero points, drift, companions. */
  readonly backgroundCount: number;
  /** f_max - f_min, 1/d. */
  readonly bandwidthPerDay: number;
  /** Weighted variance of the times, d^2. */
  readonly timeVarianceDays2: number;
}

export function weightedVariance(times: Float64Array, weights: Float64Array): number {
  let total = 0;
  let mean = 0;
  for (let i = 0; i < times.length; i++) total += weights[i]!;
  for (let i = 0; i < times.length; i++) mean += (weights[i]! / total) * times[i]!;
  let variance = 0;
  for (let i = 0; i < times.length; i++) variance += (weights[i]! / total) * (times[i]! - mean) ** 2;
  return variance;
}

/**
 * Upper bound of the false-alarm probability of a sinusoidal peak [Baluev2008], for the power normalised by the
 * residual variance of the background (the noise level is not assumed known).
 *
 * FAP = 1 - (1 - s) exp(-tau), s = (1 - z)^(N_K/2), tau = gamma W (1 - z)^((N_K - 1)/2) sqrt(N_H z/2),
 * W = bandwidth sqrt(4 pi var t), gamma = sqrt(2/N_H) Gamma(N_H/2)/Gamma((N_H - 1)/2).
 *
 * @param power - 1 - chi2/chi2_0, 0..1
 * @returns probability 0..1, accurate also when tiny
 */
export function sinusoidFalseAlarm(power: number, setting: FalseAlarmSetting): number {
  const nH = setting.dataCount - setting.backgroundCount;
  const nK = nH - 2;
  if (nK < 1) return 1;
  const z = Math.min(Math.max(power, 0), 1);
  if (z >= 1) return 0;
  const logGammaFactor = 0.5 * Math.log(2 / nH) + logGamma(nH / 2) - logGamma((nH - 1) / 2);
  const w = setting.bandwidthPerDay * Math.sqrt(4 * Math.PI * setting.timeVarianceDays2);
  const logOneMinus = Math.log1p(-z);
  const single = Math.exp((nK / 2) * logOneMinus);
  const tau = Math.exp(logGammaFactor + ((nK - 1) / 2) * logOneMinus) * w * Math.sqrt((nH * z) / 2);
  // 1 - (1 - s) e^-tau without cancellation
  return Math.min(1, -Math.expm1(Math.log1p(-single) - tau));
}

/** Power at which the bound equals `probability`, by bisection. */
export function powerAtFalseAlarm(probability: number, setting: FalseAlarmSetting): number {
  let low = 0;
  let high = 1;
  for (let step = 0; step < 60; step++) {
    const middle = 0.5 * (low + high);
    if (sinusoidFalseAlarm(middle, setting) > probability) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/**
 * Growth of the false-alarm rate of Keplerian shapes over sinusoids: noise offers eccentricity and phase as two more
 * directions to follow. Fitted to the maxima of simulated noise, see *decisions* in DEVELOPERS.md.
 */
const SHAPE_FACTOR = 2.5;

/**
 * False-alarm probability of the best Keplerian shape (any eccentricity) from its gain in log-likelihood over the
 * background, both with the jitter at its best. Form of the bound for two more nonlinear parameters, z^(3/2) exp(-z)
 * in place of z^(1/2) exp(-z), with the factor measured on simulated noise.
 */
export function shapeFalseAlarm(deltaLogLikelihood: number, setting: FalseAlarmSetting): number {
  const nK = setting.dataCount - setting.backgroundCount - 5;
  if (nK < 1 || !(deltaLogLikelihood > 0)) return 1;
  const z = (deltaLogLikelihood * nK) / setting.dataCount;
  const w = setting.bandwidthPerDay * Math.sqrt(4 * Math.PI * setting.timeVarianceDays2);
  const expected = SHAPE_FACTOR * w * Math.pow(z, 1.5) * Math.exp(-z);
  return z < 1.5 ? 1 : Math.min(1, -Math.expm1(-expected));
}

/** Power that corresponds to a gain in log-likelihood with the jitter refitted: 1 - exp(-2 gain/n). */
export function powerOfGain(deltaLogLikelihood: number, dataCount: number): number {
  return deltaLogLikelihood > 0 ? -Math.expm1((-2 * deltaLogLikelihood) / dataCount) : 0;
}
