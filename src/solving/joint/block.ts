/**
 * How parts of the natural parameters are sampled. A block owns a few unbounded coordinates of the position vector,
 * writes the natural parameters that follow from them, and carries derivatives back; priors come along.
 */

export interface Block {
  /** Number of coordinates; 0 for what is fixed. */
  readonly size: number;
  /** Coordinates, counted within the block, of which u and -u are the same. */
  readonly mirrored: readonly number[];
  /** ln of the integral of the unnormalised prior, over one mirror image. */
  readonly logNormalisation: number;
  /** Writes the block's natural parameters; returns the ln prior density of the coordinates, -Infinity outside. */
  read(position: Float64Array, at: number, natural: Float64Array): number;
  /** Blocks are pulled last first. Adds to `gradient` what the slopes by natural parameters and the prior give; `read` was called before at this position. */
  pull(position: Float64Array, at: number, byNatural: Float64Array, gradient: Float64Array): void;
  /** Writes the coordinates of natural parameters, kept clear of the ends of ranges. */
  write(natural: Float64Array, position: Float64Array, at: number): void;
}

/** Whether default priors count: all in the posterior, only those that the case states where the likelihood is maximised. */
export type PriorUse = 'all' | 'stated';

/** One coordinate for one natural parameter. */
export interface Dial {
  readonly isMirrored: boolean;
  readonly logNormalisation: number;
  value(u: number): number;
  slope(u: number): number;
  /** ln prior density in u; -Infinity outside. */
  logPrior(u: number): number;
  logPriorSlope(u: number): number;
  position(value: number): number;
}

export function dialBlock(dial: Dial, target: number): Block {
  return {
    size: 1,
    mirrored: dial.isMirrored ? [0] : [],
    logNormalisation: dial.logNormalisation,
    read(position, at, natural) {
      const u = position[at]!;
      natural[target] = dial.value(u);
      return dial.logPrior(u);
    },
    pull(position, at, byNatural, gradient) {
      const u = position[at]!;
      gradient[at]! += byNatural[target]! * dial.slope(u) + dial.logPriorSlope(u);
    },
    write(natural, position, at) {
      position[at] = dial.position(natural[target]!);
    },
  };
}

/** A natural parameter that does not move. */
export function fixedBlock(value: number, target: number): Block {
  return {
    size: 0,
    mirrored: [],
    logNormalisation: 0,
    read(_position, _at, natural) {
      natural[target] = value;
      return 0;
    },
    pull: () => undefined,
    write: () => undefined,
  };
}
