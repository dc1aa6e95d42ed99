/** Where each natural parameter of a joint model stands in one vector. */
import type { JointRecipe } from './joint-data.js';

/** Natural parameters of one companion, in this order. */
export const COMPANION_NATURALS = 7;
export const LOG_PERIOD = 0;
/** Days since the epoch. */
export const CONJUNCTION = 1;
/** e cos omega; e sin omega follows. */
export const SHAPE = 2;
/** m/s */
export const AMPLITUDE = 4;
export const RADIUS_RATIO = 5;
/** Impact parameter over (1 + radius ratio), signed. */
export const RELATIVE_IMPACT = 6;

/** Places of the natural parameters. */
export class NaturalIndex {
  readonly size: number;
  readonly #companions: number;
  readonly #bands: number;
  readonly #curves: number;
  readonly #instruments: number;
  readonly #firstBand: number;
  readonly #firstOccultation: number;
  readonly #firstCurve: number;
  readonly #firstVelocity: number;
  readonly #firstMidTime: number;

  constructor(recipe: JointRecipe) {
    this.#companions = recipe.companions.length;
    this.#bands = recipe.bands.length;
    this.#curves = recipe.curves.length;
    this.#instruments = recipe.velocities?.instrumentCount ?? 0;
    this.#firstBand = this.#companions * COMPANION_NATURALS + 1;
    this.#firstOccultation = this.#firstBand + 2 * this.#bands;
    this.#firstCurve = this.#firstOccultation + this.#companions * this.#bands;
    this.#firstVelocity = this.#firstCurve + 4 * this.#curves;
    this.#firstMidTime = this.#firstVelocity + 2 * this.#instruments + 2;
    this.size = this.#firstMidTime + recipe.midTimes.length;
  }

  companion(index: number): number {
    return index * COMPANION_NATURALS;
  }

  /** ln of the mean density of the star, g/cm3. */
  get logStarDensity(): number {
    return this.#companions * COMPANION_NATURALS;
  }

  /** u1; u2 follows. */
  band(index: number): number {
    return this.#firstBand + 2 * index;
  }

  occultationDepth(companion: number, band: number): number {
    return this.#firstOccultation + companion * this.#bands + band;
  }

  /** Extra scatter, in units of the flux. */
  curveJitter(curve: number): number {
    return this.#firstCurve + 4 * curve;
  }

  dilution(curve: number): number {
    return this.#firstCurve + 4 * curve + 1;
  }

  /** Standard deviation and time scale (days) of the correlated noise. */
  correlatedNoise(curve: number): number {
    return this.#firstCurve + 4 * curve + 2;
  }

  zeroPoint(instrument: number): number {
    return this.#firstVelocity + instrument;
  }

  /** Slope (m/s/d); curvature (m/s/d^2) follows. */
  get drift(): number {
    return this.#firstVelocity + this.#instruments;
  }

  velocityJitter(instrument: number): number {
    return this.#firstVelocity + this.#instruments + 2 + instrument;
  }

  /** Extra scatter of mid-times, days. */
  midTimeJitter(set: number): number {
    return this.#firstMidTime + set;
  }
}
