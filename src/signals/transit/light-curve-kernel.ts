/** Loss of light of one companion at many times: transit, occultation, exposures averaged, with partial derivatives. */
import { TWO_PI } from '../../orbit/constants.js';
import { solveKeplerArray } from '../../orbit/kepler-array.js';
import { ProjectedOrbit } from '../../orbit/projected-orbit.js';
import { MAXIMUM_ECCENTRICITY } from '../keplerian.js';
import { OVERLAP_MOMENTS, overlapArea, overlapMoments } from './disc-overlap.js';
import { EventWindow } from './event-window.js';
import { DEFAULT_ERROR_BOUND, NODES, nodesFor, stretched, WEIGHTS } from './exposure-nodes.js';
import { starLight } from './transit-flux.js';

/** ln P, lambda0, k, h, radius ratio, impact parameter, ln(a/R_star). */
export const TRANSIT_COORDINATES = 7;
/** The seven above, u1, u2, occultation depth. */
export const LIGHT_CURVE_PARTIALS = 10;

/** When a light curve was taken. */
export interface LightCurveGrid {
  /** (n) mid-exposures, days since the epoch. */
  readonly timesDays: Float64Array;
  /** Length of each exposure, days; 0 takes the loss at mid-exposure. */
  readonly exposureDays: number;
  /** R_star / c, days; 0 ignores light time across the orbit. */
  readonly starRadiusLightDays: number;
  /** What averages over exposures may be wrong by, fraction of the star's light; 1e-8 unless given, and far below the errors. */
  readonly errorBound?: number;
}

/** Nodes that are solved for in one go: small enough to stay in the cache. */
const BLOCK_NODES = 1024;
/** Rows of partial derivatives that there is room for at first, in numbers. */
const FIRST_ROOM = 64 * LIGHT_CURVE_PARTIALS;
const PER_TURN = 1 / TWO_PI;

/**
 * Work arrays of one set of times, made once and reused at every evaluation.
 *
 * Only points that an event touches cost more than a comparison. The average over an exposure is within 1e-8 of the star's light
 * (3e-9 at worst of 24 000 random events, of which test/signals/transit/light-curve-kernel.test.ts keeps some); where the exposure
 * is too short to matter at that level it is one step. Partial derivatives are averaged with the same nodes.
 */
export class LightCurveKernel {
  readonly #times: Float64Array;
  readonly #exposureDays: number;
  readonly #errorBound: number;
  readonly #starRadiusLightDays: number;
  readonly #orbit = new ProjectedOrbit();
  readonly #transit = new EventWindow(true);
  readonly #occultation = new EventWindow(false);
  readonly #moments = new Float64Array(OVERLAP_MOMENTS);

  readonly #means = new Float64Array(BLOCK_NODES);
  readonly #advances = new Float64Array(BLOCK_NODES);
  readonly #weights = new Float64Array(BLOCK_NODES);
  readonly #entries = new Int32Array(BLOCK_NODES);
  readonly #isOccultation = new Uint8Array(BLOCK_NODES);
  readonly #sinE = new Float64Array(BLOCK_NODES);
  readonly #cosE = new Float64Array(BLOCK_NODES);
  #nodes = 0;

  #radiusRatio = 0;
  /** Intensity = flat + slope mu + u2 r^2. */
  #flat = 0;
  #slope = 0;
  #u2 = 0;
  #inverseLight = 0;
  #occultationDepth = 0;
  #withPartials = false;
  #partials = new Float64Array(0);

  /** (n) indices of points with a loss, ascending; the first `touchedCount` are valid. */
  readonly touched: Int32Array;
  touchedCount = 0;
  /** Loss 1 - F per touched point. */
  readonly loss: Float64Array;

  constructor(grid: LightCurveGrid) {
    this.#times = grid.timesDays;
    this.#exposureDays = grid.exposureDays;
    this.#errorBound = grid.errorBound ?? DEFAULT_ERROR_BOUND;
    this.#starRadiusLightDays = grid.starRadiusLightDays;
    this.touched = new Int32Array(grid.timesDays.length);
    this.loss = new Float64Array(grid.timesDays.length);
  }

  /** Row-major (touched, LIGHT_CURVE_PARTIALS), of the loss. Read it after `evaluate`: the array grows as needed. */
  get partials(): Float64Array {
    return this.#partials;
  }

  /**
   * Loss of light 1 - F of one companion.
   *
   * @param coordinates - `TRANSIT_COORDINATES` numbers from `offset` on
   * @param occultationDepth - loss when the companion is hidden, fraction of the star's light; 0 leaves occultations out
   *   altogether, their partial derivative too, so a free depth must not start at 0
   * @returns false outside the domain, with nothing touched: not finite, e >= MAXIMUM_ECCENTRICITY, |cos i| >= 1, radius ratio < 0,
   *   u1/3 + u2/6 >= 1, or bodies that touch at periastron, rho (1 - e) <= 1 + radius ratio
   */
  evaluate(
    coordinates: Float64Array,
    offset: number,
    u1: number,
    u2: number,
    occultationDepth: number,
    withPartials: boolean,
  ): boolean {
    this.touchedCount = 0;
    this.#nodes = 0;
    const orbit = this.#orbit;
    const radiusRatio = coordinates[offset + 4]!;
    const inDomain = orbit.prepare(
      coordinates[offset]!,
      coordinates[offset + 1]!,
      coordinates[offset + 2]!,
      coordinates[offset + 3]!,
      coordinates[offset + 5]!,
      coordinates[offset + 6]!,
      this.#starRadiusLightDays,
    );
    if (!inDomain || !(radiusRatio >= 0) || !(starLight(u1, u2) > 0) || !Number.isFinite(occultationDepth))
      return false;
    if (!(orbit.eccentricity < MAXIMUM_ECCENTRICITY)) return false;
    if (!(orbit.scaledAxis * (1 - orbit.eccentricity) > 1 + radiusRatio)) return false;
    if (radiusRatio === 0) return true;
    this.#radiusRatio = radiusRatio;
    this.#flat = 1 - u1 - 2 * u2;
    this.#slope = u1 + 2 * u2;
    this.#u2 = u2;
    this.#inverseLight = 1 / starLight(u1, u2);
    this.#occultationDepth = occultationDepth;
    this.#withPartials = withPartials;
    const halfRad = 0.5 * orbit.rate * this.#exposureDays;
    this.#transit.open(orbit, radiusRatio, halfRad, Math.min(1, radiusRatio * radiusRatio), this.#errorBound);
    if (occultationDepth === 0) this.#occultation.close();
    else this.#occultation.open(orbit, radiusRatio, halfRad, Math.abs(occultationDepth), this.#errorBound);
    this.#gather(halfRad);
    return true;
  }

  /** Finds the points in an event and lists where the loss is needed for them. */
  #gather(halfRad: number): void {
    const { rate, longitude } = this.#orbit;
    const times = this.#times;
    const transit = this.#transit;
    const occultation = this.#occultation;
    const { opensRad: transitOpens, widthRad: transitWidth } = transit;
    const { opensRad: occultationOpens, widthRad: occultationWidth } = occultation;
    for (let i = 0; i < times.length; i++) {
      const longitudeNow = longitude + rate * times[i]!;
      const sinceTransit = longitudeNow - transitOpens;
      const afterTransit = sinceTransit - TWO_PI * Math.floor(sinceTransit * PER_TURN);
      const inTransit = afterTransit < transitWidth;
      const sinceOccultation = longitudeNow - occultationOpens;
      const afterOccultation = sinceOccultation - TWO_PI * Math.floor(sinceOccultation * PER_TURN);
      const inOccultation = afterOccultation < occultationWidth;
      if (!inTransit && !inOccultation) continue;
      const entry = this.#touch(i);
      // More than one turn only where an exposure is longer than what lies between two events.
      if (inTransit)
        for (let after = afterTransit; after < transitWidth; after += TWO_PI)
          this.#average(transit, entry, longitudeNow, transitOpens + after, halfRad);
      if (inOccultation)
        for (let after = afterOccultation; after < occultationWidth; after += TWO_PI)
          this.#average(occultation, entry, longitudeNow, occultationOpens + after, halfRad);
    }
    this.#solveNodes();
  }

  /** A new touched point with nothing lost yet. */
  #touch(index: number): number {
    const entry = this.touchedCount++;
    this.touched[entry] = index;
    this.loss[entry] = 0;
    if (this.#withPartials) {
      const end = (entry + 1) * LIGHT_CURVE_PARTIALS;
      if (end > this.#partials.length) {
        const most = this.#times.length * LIGHT_CURVE_PARTIALS;
        const grown = new Float64Array(Math.min(most, 2 * end + FIRST_ROOM));
        grown.set(this.#partials);
        this.#partials = grown;
      }
      this.#partials.fill(0, end - LIGHT_CURVE_PARTIALS, end);
    }
    return entry;
  }

  /** Lists the nodes of one exposure in one event; `longitudeRad` is its middle on the revolution of the event's bounds. */
  #average(
    event: EventWindow,
    entry: number,
    longitudeNow: number,
    longitudeRad: number,
    halfRad: number,
  ): void {
    const turnsRad = longitudeNow - longitudeRad;
    if (event.atOnce) {
      this.#list(event.inFront, entry, longitudeRad, turnsRad, 1);
      return;
    }
    const bounds = event.bounds;
    for (let stretch = 1; stretch < event.count; stretch++) {
      const start = bounds[stretch - 1]!;
      const length = bounds[stretch]! - start;
      const from = (longitudeRad - halfRad - start) / length;
      const to = (longitudeRad + halfRad - start) / length;
      if (!(from < 1 && to > 0)) continue;
      const fromS = stretched(from);
      const extent = stretched(to) - fromS;
      const n = nodesFor(extent, event.depth, this.#errorBound);
      const first = (n * (n - 1)) / 2;
      for (let node = first; node < first + n; node++) {
        const s = fromS + extent * NODES[node]!;
        const weight = (3 * length * s * (1 - s) * extent * WEIGHTS[node]!) / halfRad;
        this.#list(event.inFront, entry, start + length * s * s * (3 - 2 * s), turnsRad, weight);
      }
    }
  }

  #list(inFront: boolean, entry: number, longitudeRad: number, turnsRad: number, weight: number): void {
    if (this.#nodes === BLOCK_NODES) this.#solveNodes();
    const node = this.#nodes++;
    this.#means[node] = longitudeRad - this.#orbit.omega;
    this.#advances[node] = longitudeRad + turnsRad - this.#orbit.longitude;
    this.#weights[node] = weight;
    this.#entries[node] = entry;
    this.#isOccultation[node] = inFront ? 0 : 1;
  }

  /** Adds the losses at the listed nodes to their points. */
  #solveNodes(): void {
    const orbit = this.#orbit;
    const count = this.#nodes;
    this.#nodes = 0;
    solveKeplerArray(this.#means, orbit.eccentricity, this.#sinE, this.#cosE, count);
    for (let node = 0; node < count; node++) {
      orbit.place(this.#sinE[node]!, this.#cosE[node]!, this.#advances[node]!, this.#withPartials);
      const entry = this.#entries[node]!;
      const weight = this.#weights[node]!;
      if (this.#isOccultation[node] === 1) this.#addOccultation(entry, weight);
      else this.#addTransit(entry, weight);
    }
  }

  #addTransit(entry: number, weight: number): void {
    const moments = this.#moments;
    const separation = this.#orbit.separation;
    overlapMoments(separation, this.#radiusRatio, moments);
    const scale = weight * this.#inverseLight;
    const flat = this.#flat;
    const slope = this.#slope;
    const u2 = this.#u2;
    const area = moments[0]!;
    const root = moments[1]!;
    const square = moments[2]!;
    const loss = (flat * area + slope * root + u2 * square) * scale;
    this.loss[entry]! += loss;
    if (!this.#withPartials) return;
    const partials = this.#partials;
    const at = entry * LIGHT_CURVE_PARTIALS;
    const byZ = (flat * moments[3]! + slope * moments[4]! + u2 * moments[5]!) * scale;
    this.#addPath(at, byZ);
    partials[at + 4]! += (flat * moments[6]! + slope * moments[7]! + u2 * moments[8]!) * scale;
    partials[at + 7]! += (root - area) * scale + (Math.PI / 3) * this.#inverseLight * loss;
    partials[at + 8]! += (2 * (root - area) + square) * scale + (Math.PI / 6) * this.#inverseLight * loss;
  }

  #addOccultation(entry: number, weight: number): void {
    const moments = this.#moments;
    const ratio = this.#radiusRatio;
    overlapArea(this.#orbit.separation, ratio, moments);
    const perArea = weight / (Math.PI * ratio * ratio);
    const hidden = moments[0]! * perArea;
    const depth = this.#occultationDepth;
    this.loss[entry]! += depth * hidden;
    if (!this.#withPartials) return;
    const partials = this.#partials;
    const at = entry * LIGHT_CURVE_PARTIALS;
    this.#addPath(at, depth * perArea * moments[1]!);
    partials[at + 4]! += depth * (perArea * moments[2]! - (2 * hidden) / ratio);
    partials[at + 9]! += hidden;
  }

  /** Carries a derivative by the separation to the coordinates of the path. */
  #addPath(at: number, byZ: number): void {
    const separation = this.#orbit.separation;
    if (byZ === 0 || separation === 0) return; // at z = 0 the loss is smooth in z^2 and byZ vanishes
    const perHalfSquare = byZ / separation;
    const gradient = this.#orbit.halfGradient;
    const partials = this.#partials;
    partials[at]! += perHalfSquare * gradient[0]!;
    partials[at + 1]! += perHalfSquare * gradient[1]!;
    partials[at + 2]! += perHalfSquare * gradient[2]!;
    partials[at + 3]! += perHalfSquare * gradient[3]!;
    partials[at + 5]! += perHalfSquare * gradient[4]!;
    partials[at + 6]! += perHalfSquare * gradient[5]!;
  }
}
