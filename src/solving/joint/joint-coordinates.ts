/**
 * The coordinates of a joint model: position vector to natural parameters to orbit and transit coordinates, and slopes back.
 */
import { TWO_PI } from '../../orbit/constants.js';
import { LOG_SCALED_AXIS_FACTOR } from '../../orbit/star-density.js';
import { conjunctionLongitude } from '../../orbit/conjunction-longitude.js';
import { ORBIT_COORDINATES } from '../../signals/keplerian.js';
import { TRANSIT_COORDINATES } from '../../signals/transit/light-curve-kernel.js';
import type { Block, PriorUse } from './block.js';
import { blocksOf } from './blocks-of.js';
import type { JointRecipe } from './joint-data.js';
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
  SHAPE,
} from './natural.js';

/** Orbits of companions without transits are searched up to this eccentricity. */
const LARGEST_ECCENTRICITY = 0.985;

export class JointCoordinates {
  readonly size: number;
  readonly recipe: JointRecipe;
  readonly index: NaturalIndex;
  /** ln of the volume of the prior, over one mirror image. */
  readonly logNormalisation: number;
  readonly natural: Float64Array;
  /** Slopes by natural parameters; filled by the likelihoods, completed by `pull`. */
  readonly byNatural: Float64Array;
  /** (5 x companions), orbit coordinates of the velocity term, and slopes by them. */
  readonly orbit: Float64Array;
  readonly byOrbit: Float64Array;
  /** (7 x companions), transit coordinates, and slopes by them. */
  readonly transit: Float64Array;
  readonly byTransit: Float64Array;
  readonly mirrored: readonly number[];
  readonly #blocks: readonly Block[];
  readonly #offsets: readonly number[];
  readonly #front: readonly Float64Array[];

  constructor(recipe: JointRecipe, use: PriorUse) {
    this.recipe = recipe;
    this.index = new NaturalIndex(recipe);
    this.#blocks = blocksOf(recipe, this.index, use);
    const offsets: number[] = [];
    const mirrored: number[] = [];
    let at = 0;
    let logNormalisation = 0;
    for (const block of this.#blocks) {
      offsets.push(at);
      for (const own of block.mirrored) mirrored.push(at + own);
      at += block.size;
      logNormalisation += block.logNormalisation;
    }
    this.#offsets = offsets;
    this.mirrored = mirrored;
    this.logNormalisation = use === 'all' ? logNormalisation : 0;
    this.size = at;
    this.natural = new Float64Array(this.index.size);
    this.byNatural = new Float64Array(this.index.size);
    const companions = recipe.companions.length;
    this.orbit = new Float64Array(ORBIT_COORDINATES * companions);
    this.byOrbit = new Float64Array(ORBIT_COORDINATES * companions);
    this.transit = new Float64Array(TRANSIT_COORDINATES * companions);
    this.byTransit = new Float64Array(TRANSIT_COORDINATES * companions);
    this.#front = recipe.companions.map(() => new Float64Array(3));
  }

  /** Fills everything from a position and clears the slopes; returns the ln prior, -Infinity outside the domain. */
  read(position: Float64Array): number {
    let logPrior = 0;
    for (let b = 0; b < this.#blocks.length; b++) {
      const value = this.#blocks[b]!.read(position, this.#offsets[b]!, this.natural);
      if (!(value > -Infinity)) return -Infinity;
      logPrior += value;
    }
    this.byNatural.fill(0);
    this.byOrbit.fill(0);
    this.byTransit.fill(0);
    return this.#fillOrbits() ? logPrior : -Infinity;
  }

  /** Orbit and transit coordinates from the natural parameters; false where a companion would touch the star. */
  #fillOrbits(): boolean {
    const natural = this.natural;
    const logDensity = natural[this.index.logStarDensity]!;
    for (let c = 0; c < this.recipe.companions.length; c++) {
      const { transits } = this.recipe.companions[c]!;
      const base = this.index.companion(c);
      const logPeriod = natural[base + LOG_PERIOD]!;
      const k = natural[base + SHAPE]!;
      const h = natural[base + SHAPE + 1]!;
      const front = this.#front[c]!;
      if (!conjunctionLongitude(k, h, 1, front)) return false;
      const longitude = front[0]! - TWO_PI * natural[base + CONJUNCTION]! * Math.exp(-logPeriod);
      const o = c * ORBIT_COORDINATES;
      this.orbit[o] = logPeriod;
      this.orbit[o + 1] = longitude;
      this.orbit[o + 2] = k;
      this.orbit[o + 3] = h;
      this.orbit[o + 4] = natural[base + AMPLITUDE]!;
      const e = Math.hypot(k, h);
      const t = c * TRANSIT_COORDINATES;
      this.transit.set(this.orbit.subarray(o, o + 4), t);
      if (!transits) {
        if (!(e < this.#largestEccentricity(logPeriod))) return false;
        this.transit.fill(0, t + 4, t + 7);
        this.transit[t + 6] = Math.log(10);
        continue;
      }
      const ratio = natural[base + RADIUS_RATIO]!;
      const logAxis = (logDensity + 2 * logPeriod + LOG_SCALED_AXIS_FACTOR) / 3;
      const impact = Math.abs(natural[base + RELATIVE_IMPACT]!) * (1 + ratio);
      const axis = Math.exp(logAxis);
      if (!(axis * (1 - e) > 1 + ratio) || !(impact * (1 + h) < axis * (1 - e * e))) return false;
      this.transit[t + 4] = ratio;
      this.transit[t + 5] = impact;
      this.transit[t + 6] = logAxis;
    }
    return true;
  }

  #largestEccentricity(logPeriod: number): number {
    const scale = this.recipe.scales?.starRadiusAtOneDay ?? 0;
    return Math.min(LARGEST_ECCENTRICITY, 1 - scale * Math.exp((-2 / 3) * logPeriod));
  }

  /** Gradient by the position, from the slopes that the likelihoods left; `read` was called before at this position. */
  pull(position: Float64Array, gradient: Float64Array): void {
    this.#pullOrbits();
    gradient.fill(0);
    for (let b = this.#blocks.length - 1; b >= 0; b--)
      this.#blocks[b]!.pull(position, this.#offsets[b]!, this.byNatural, gradient);
  }

  /** From slopes by orbit and transit coordinates to slopes by natural parameters. */
  #pullOrbits(): void {
    const natural = this.natural;
    const by = this.byNatural;
    for (let c = 0; c < this.recipe.companions.length; c++) {
      const base = this.index.companion(c);
      const o = c * ORBIT_COORDINATES;
      const t = c * TRANSIT_COORDINATES;
      const front = this.#front[c]!;
      const rate = TWO_PI * Math.exp(-natural[base + LOG_PERIOD]!);
      const byLongitude = this.byOrbit[o + 1]! + this.byTransit[t + 1]!;
      by[base + LOG_PERIOD]! +=
        this.byOrbit[o]! + this.byTransit[t]! + byLongitude * rate * natural[base + CONJUNCTION]!;
      by[base + CONJUNCTION]! -= byLongitude * rate;
      by[base + SHAPE]! += this.byOrbit[o + 2]! + this.byTransit[t + 2]! + byLongitude * front[1]!;
      by[base + SHAPE + 1]! += this.byOrbit[o + 3]! + this.byTransit[t + 3]! + byLongitude * front[2]!;
      by[base + AMPLITUDE]! += this.byOrbit[o + 4]!;
      if (!this.recipe.companions[c]!.transits) continue;
      const ratio = natural[base + RADIUS_RATIO]!;
      const relative = natural[base + RELATIVE_IMPACT]!;
      const byImpact = this.byTransit[t + 5]!;
      by[base + RADIUS_RATIO]! += this.byTransit[t + 4]! + byImpact * Math.abs(relative);
      by[base + RELATIVE_IMPACT]! += byImpact * (1 + ratio) * (relative < 0 ? -1 : 1);
      const byAxis = this.byTransit[t + 6]!;
      by[base + LOG_PERIOD]! += (2 / 3) * byAxis;
      by[this.index.logStarDensity]! += byAxis / 3;
    }
  }

  /** Position nearest to natural parameters. */
  position(natural: Float64Array): Float64Array {
    const position = new Float64Array(this.size);
    this.#blocks.forEach((block, b) => {
      block.write(natural, position, this.#offsets[b]!);
    });
    return position;
  }
}
