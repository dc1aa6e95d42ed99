/** The phase of an orbit where the case states its time of periastron instead of its time of conjunction. */
import { conjunctionLongitude } from '../../orbit/conjunction-longitude.js';
import type { ElementChoice } from '../../observations/types.js';
import type { Block, Dial } from './block.js';
import { gaussianDial, rangeDial } from './dials.js';
import type { JointCompanion } from './joint-data.js';
import { CONJUNCTION, LOG_PERIOD, SHAPE } from './natural.js';

const TWO_PI = 2 * Math.PI;

/**
 * The coordinate is the time of periastron (days since the epoch); the conjunction follows from it, the period and the shape,
 * whose blocks must come before.
 *
 * @param base - natural index of the companion
 */
export function timeOfPeriastronBlock(
  choice: ElementChoice,
  epochBjdTdb: number,
  companion: JointCompanion,
  base: number,
): Block {
  const front = new Float64Array(3);
  const dial: Dial | null =
    choice.kind === 'fixed'
      ? null
      : choice.kind === 'prior'
        ? gaussianDial(choice.value - epochBjdTdb, choice.sigma)
        : rangeDial(choice.low - epochBjdTdb, choice.high - epochBjdTdb, 'all');
  const fixed = choice.kind === 'fixed' ? choice.value - epochBjdTdb : 0;
  const reference = companion.conjunctionDays;
  /** Revolutions from periastron to the reference conjunction; `lagTurns` of them belong to the orbit's shape. */
  const lagTurns = (natural: Float64Array): number => {
    const k = natural[base + SHAPE]!;
    const h = natural[base + SHAPE + 1]!;
    if (!conjunctionLongitude(k, h, 1, front)) return NaN;
    return (front[0]! - Math.atan2(h, k)) / TWO_PI;
  };
  let turns = NaN;
  let period = NaN;
  /** d omega by k and by h at the last reading. */
  const turn = new Float64Array(2);
  return {
    size: dial === null ? 0 : 1,
    mirrored: [],
    logNormalisation: dial?.logNormalisation ?? 0,
    read(position, at, natural) {
      period = Math.exp(natural[base + LOG_PERIOD]!);
      const time = dial === null ? fixed : dial.value(position[at]!);
      const lag = lagTurns(natural);
      turns = lag + Math.round((reference - time) / period - lag);
      natural[base + CONJUNCTION] = time + period * turns;
      const k = natural[base + SHAPE]!;
      const h = natural[base + SHAPE + 1]!;
      const e2 = Math.max(1e-12, k * k + h * h);
      turn[0] = -h / e2;
      turn[1] = k / e2;
      return Number.isNaN(turns) ? -Infinity : (dial?.logPrior(position[at]!) ?? 0);
    },
    pull(position, at, byNatural, gradient) {
      const slope = byNatural[base + CONJUNCTION]!;
      // What the conjunction owes to period and shape is handed on to them: their blocks are pulled afterwards.
      byNatural[base + LOG_PERIOD]! += slope * period * turns;
      byNatural[base + SHAPE]! += (slope * period * (front[1]! - turn[0]!)) / TWO_PI;
      byNatural[base + SHAPE + 1]! += (slope * period * (front[2]! - turn[1]!)) / TWO_PI;
      if (dial !== null) {
        const u = position[at]!;
        gradient[at]! += slope * dial.slope(u) + dial.logPriorSlope(u);
      }
    },
    write(natural, position, at) {
      if (dial === null) return;
      const own = Math.exp(natural[base + LOG_PERIOD]!);
      const time = natural[base + CONJUNCTION]! - own * lagTurns(natural);
      const centre = choice.kind === 'range' ? 0.5 * (choice.low + choice.high) : choice.value;
      const wanted = centre - epochBjdTdb;
      position[at] = dial.position(time + own * Math.round((wanted - time) / own));
    },
  };
}
