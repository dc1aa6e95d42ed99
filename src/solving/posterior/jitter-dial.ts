/**
 * How one jitter is sampled. By default s = scale |sinh u|, mirrored at 0 and smooth there: uniform in u is the density
 * 1/sqrt(s^2 + scale^2). A jitter that the case confines to a range goes through a logistic map, uniform in s.
 */
import type { JitterSetting } from '../model-structure.js';
import type { PriorScales } from './priors.js';

export interface JitterDial {
  readonly instrument: number;
  /** u and -u are the same jitter. */
  readonly isMirrored: boolean;
  /** Jitter, m/s. */
  value(u: number): number;
  /** ds/du, m/s. */
  slope(u: number): number;
  /** ln prior density in u; -Infinity outside. */
  logPrior(u: number): number;
  /** Its derivative by u. */
  logPriorSlope(u: number): number;
  /** u of a jitter, kept clear of points where the map is flat. */
  position(jitterMps: number): number;
  /** ln of the integral of the prior over one mirror image. */
  readonly logNormalisation: number;
}

/** Above this a bound is none that a case has stated. */
const UNSTATED_MPS = 1e6;
/** A start this share of a range away from its ends: beyond, the logistic map is flat. */
const CLEAR_OF_ENDS = 0.03;
/** A start this far from u = 0, where the slope of the mirrored map's square vanishes. */
const CLEAR_OF_MIRROR = 0.3;

export function jitterDial(instrument: number, setting: JitterSetting, scales: PriorScales): JitterDial {
  const { lowMps, highMps, prior } = setting;
  if (prior === null && highMps < UNSTATED_MPS) return rangeDial(instrument, lowMps, highMps);
  const scale = scales.jitterScaleMps;
  const largest = scales.largestJitterMps;
  const value = (u: number): number => scale * Math.abs(Math.sinh(u));
  const slope = (u: number): number => scale * Math.cosh(u) * (u < 0 ? -1 : 1);
  const position = (jitterMps: number): number =>
    Math.max(CLEAR_OF_MIRROR, Math.asinh(Math.min(jitterMps, 0.9 * largest) / scale));
  const shared = { instrument, isMirrored: true, value, slope, position };
  if (prior === null) {
    return {
      ...shared,
      logPrior: (u) => (value(u) <= largest ? 0 : -Infinity),
      logPriorSlope: () => 0,
      logNormalisation: Math.log(Math.asinh(largest / scale)),
    };
  }
  // A Gaussian in s: the slope of the map enters.
  return {
    ...shared,
    logPrior(u) {
      const s = value(u);
      const z = (s - prior.centre) / prior.sigma;
      return s <= largest ? Math.log(Math.cosh(u)) - 0.5 * z * z : -Infinity;
    },
    logPriorSlope: (u) => Math.tanh(u) - ((value(u) - prior.centre) / prior.sigma ** 2) * slope(u),
    logNormalisation: 0,
  };
}

function rangeDial(instrument: number, lowMps: number, highMps: number): JitterDial {
  const width = highMps - lowMps;
  const share = (u: number): number => 1 / (1 + Math.exp(-u));
  return {
    instrument,
    isMirrored: false,
    value: (u) => lowMps + width * share(u),
    slope: (u) => width * share(u) * share(-u),
    logPrior: (u) => Math.log(share(u)) + Math.log(share(-u)),
    logPriorSlope: (u) => share(-u) - share(u),
    position(jitterMps) {
      const inside = Math.min(1 - CLEAR_OF_ENDS, Math.max(CLEAR_OF_ENDS, (jitterMps - lowMps) / width));
      return Math.log(inside / (1 - inside));
    },
    logNormalisation: 0,
  };
}
