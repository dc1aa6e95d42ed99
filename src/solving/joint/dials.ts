/** The kinds of dials: what a prior looks like in the coordinate that is sampled. */
import type { ElementChoice } from '../../observations/types.js';
import type { Dial, PriorUse } from './block.js';

/** A start this share of a range away from its ends: beyond, the logistic map is flat. */
const CLEAR_OF_ENDS = 0.02;
/** Logistic coordinates end here: the share of the range left outside is 1e-9. */
const LARGEST_LOGISTIC = 20;

const flat = (): number => 0;

/** The parameter itself, uniform between two walls. */
export function uniformDial(low: number, high: number): Dial {
  return {
    isMirrored: false,
    logNormalisation: Math.log(high - low),
    value: (u) => u,
    slope: () => 1,
    logPrior: (u) => (u > low && u < high ? 0 : -Infinity),
    logPriorSlope: flat,
    position: (value) => value,
  };
}

/** The parameter itself with a Gaussian prior. */
export function gaussianDial(centre: number, sigma: number): Dial {
  return {
    isMirrored: false,
    logNormalisation: Math.log(sigma * Math.sqrt(2 * Math.PI)),
    value: (u) => u,
    slope: () => 1,
    logPrior: (u) => -0.5 * ((u - centre) / sigma) ** 2,
    logPriorSlope: (u) => -(u - centre) / (sigma * sigma),
    position: (value) => value,
  };
}

/** A positive parameter by its logarithm: density 1/(value + scale) up to `largest`; scale 0 is log-uniform from `smallest`. */
export function logarithmicDial(smallest: number, largest: number, scale: number, use: PriorUse): Dial {
  const low = Math.log(smallest);
  const high = Math.log(largest);
  const all = use === 'all';
  return {
    isMirrored: false,
    logNormalisation: Math.log(scale > 0 ? Math.log1p(largest / scale) : high - low),
    value: Math.exp,
    slope: Math.exp,
    logPrior(u) {
      if (!(u < high) || (scale === 0 && !(u > low))) return -Infinity;
      return all && scale > 0 ? u - Math.log(Math.exp(u) + scale) : 0;
    },
    logPriorSlope: (u) => (all && scale > 0 ? scale / (Math.exp(u) + scale) : 0),
    position: (value) => Math.log(Math.min(0.98 * largest, Math.max(1.02 * smallest, value))),
  };
}

/** A positive parameter by its logarithm with a Gaussian prior on the parameter. */
export function positiveGaussianDial(centre: number, sigma: number, use: PriorUse): Dial {
  const jacobian = use === 'all' ? 1 : 0;
  return {
    isMirrored: false,
    logNormalisation: Math.log(sigma * Math.sqrt(2 * Math.PI)),
    value: Math.exp,
    slope: Math.exp,
    logPrior: (u) => -0.5 * ((Math.exp(u) - centre) / sigma) ** 2 + jacobian * u,
    logPriorSlope: (u) => (-(Math.exp(u) - centre) * Math.exp(u)) / (sigma * sigma) + jacobian,
    position: (value) => Math.log(Math.max(1e-12, value)),
  };
}

/** Uniform within a range, through a logistic map. */
export function rangeDial(low: number, high: number, use: PriorUse): Dial {
  const width = high - low;
  const share = (u: number): number => 1 / (1 + Math.exp(-u));
  const all = use === 'all' ? 1 : 0;
  return {
    isMirrored: false,
    logNormalisation: 0,
    value: (u) => low + width * share(u),
    slope: (u) => width * share(u) * share(-u),
    logPrior(u) {
      if (!(Math.abs(u) < LARGEST_LOGISTIC)) return -Infinity;
      return all === 1 ? Math.log(share(u)) + Math.log(share(-u)) : 0;
    },
    logPriorSlope: (u) => all * (share(-u) - share(u)),
    position(value) {
      const inside = Math.min(1 - CLEAR_OF_ENDS, Math.max(CLEAR_OF_ENDS, (value - low) / width));
      return Math.log(inside / (1 - inside));
    },
  };
}

/** Extra scatter: s = scale |sinh u|, mirrored and smooth at 0; uniform in u is the density 1/sqrt(s^2 + scale^2). */
export function scatterDial(scale: number, largest: number): Dial {
  const clearOfMirror = 0.3;
  return {
    isMirrored: true,
    logNormalisation: Math.log(Math.asinh(largest / scale)),
    value: (u) => scale * Math.abs(Math.sinh(u)),
    slope: (u) => scale * Math.cosh(u) * (u < 0 ? -1 : 1),
    logPrior: (u) => (scale * Math.abs(Math.sinh(u)) <= largest ? 0 : -Infinity),
    logPriorSlope: flat,
    position: (value) => Math.max(clearOfMirror, Math.asinh(Math.min(value, 0.9 * largest) / scale)),
  };
}

/** Uniform on (-reach, reach), mirrored at 0: value = reach u / sqrt(1 + u^2). For impact parameters. */
export function mirroredDial(reach: number, use: PriorUse): Dial {
  const all = use === 'all' ? 1 : 0;
  return {
    isMirrored: true,
    logNormalisation: 0,
    value: (u) => (reach * u) / Math.sqrt(1 + u * u),
    slope: (u) => reach * (1 + u * u) ** -1.5,
    logPrior: (u) => (Math.abs(u) < 1e4 ? -1.5 * all * Math.log1p(u * u) : -Infinity),
    logPriorSlope: (u) => (-3 * all * u) / (1 + u * u),
    position(value) {
      const share = Math.min(0.995, Math.max(-0.995, value / reach));
      return share / Math.sqrt(1 - share * share);
    },
  };
}

/** What a case states of one positive or signed number; `null` when it is fixed. */
export function statedDial(choice: ElementChoice, isPositive: boolean, use: PriorUse): Dial | null {
  switch (choice.kind) {
    case 'fixed':
      return null;
    case 'range':
      return rangeDial(choice.low, choice.high, use);
    case 'prior':
      return isPositive
        ? positiveGaussianDial(choice.value, choice.sigma, use)
        : gaussianDial(choice.value, choice.sigma);
  }
}
