/** The density of the star by what a transit tells best: how long the companion takes to cross. */
import type { Block, Dial } from './block.js';
import { LOG_PERIOD, RADIUS_RATIO, RELATIVE_IMPACT, SHAPE } from './natural.js';

/** Grazing transits end at an impact parameter of 1 + k; ln of what is left of the chord is bounded there. */
const LEAST_CHORD = 1e-9;

/**
 * The coordinate is ln of the density that would give the same crossing time to a central transit of a point on a circular
 * orbit of one day: duration is proportional to P^(1/3) rho^(-1/3) (1 + k) sqrt(1 - beta^2) sqrt(1 - e^2)/(1 + e sin omega),
 * with beta the impact parameter over 1 + k. Impact parameter and density, tied by the duration along a bent ridge, become
 * nearly independent; the volume is unchanged. The blocks of the companion must come before.
 *
 * @param dial - prior of ln density, in the parameter itself
 * @param target - natural index of ln density
 * @param base - natural index of the companion whose transit is meant
 */
export function crossingBlock(dial: Dial, target: number, base: number): Block {
  const shift = (natural: Float64Array): number => {
    const k = natural[base + SHAPE]!;
    const h = natural[base + SHAPE + 1]!;
    const beta = natural[base + RELATIVE_IMPACT]!;
    return (
      natural[base + LOG_PERIOD]! +
      3 * Math.log(1 + natural[base + RADIUS_RATIO]!) +
      1.5 * Math.log(Math.max(LEAST_CHORD, 1 - beta * beta)) +
      1.5 * Math.log(1 - k * k - h * h) -
      3 * Math.log(1 + h)
    );
  };
  const seen = new Float64Array(5);
  return {
    size: 1,
    mirrored: [],
    logNormalisation: dial.logNormalisation,
    read(position, at, natural) {
      seen[0] = natural[base + SHAPE]!;
      seen[1] = natural[base + SHAPE + 1]!;
      seen[2] = natural[base + RADIUS_RATIO]!;
      seen[3] = natural[base + RELATIVE_IMPACT]!;
      const value = position[at]! + shift(natural);
      seen[4] = value;
      natural[target] = value;
      return Number.isNaN(value) ? -Infinity : dial.logPrior(value);
    },
    pull(_position, at, byNatural, gradient) {
      const [k, h, ratio, beta, value] = [seen[0]!, seen[1]!, seen[2]!, seen[3]!, seen[4]!];
      const slope = byNatural[target]! + dial.logPriorSlope(value);
      const eta2 = 1 - k * k - h * h;
      const chord = 1 - beta * beta;
      gradient[at]! += slope;
      byNatural[base + LOG_PERIOD]! += slope;
      byNatural[base + RADIUS_RATIO]! += (3 * slope) / (1 + ratio);
      if (chord > LEAST_CHORD) byNatural[base + RELATIVE_IMPACT]! -= (3 * beta * slope) / chord;
      byNatural[base + SHAPE]! -= (3 * k * slope) / eta2;
      byNatural[base + SHAPE + 1]! -= slope * ((3 * h) / eta2 + 3 / (1 + h));
    },
    write(natural, position, at) {
      position[at] = natural[target]! - shift(natural);
    },
  };
}
