/** The contacts of the two discs during one transit or occultation, exact, as observed mean longitudes. */
import type { ProjectedOrbit } from './projected-orbit.js';

const MOST_STEPS = 60;
/** Newton steps on a root of z^2; below this the next one is rounding. */
const STEP_GOAL_RAD = 1e-13;

/** Observed mean longitudes, rad, on one revolution, ascending from `first` to `last`; NaN for contacts that do not happen. */
export class EventContacts {
  /** True for the transit, false for the occultation. */
  readonly inFront: boolean;
  first: number = NaN;
  /** End of ingress; NaN when grazing. */
  second: number = NaN;
  /** Smallest separation; given also where the discs do not meet. */
  middle: number = NaN;
  /** Begin of egress; NaN when grazing. */
  third: number = NaN;
  last: number = NaN;
  /** Stellar radii, at `middle`. */
  leastSeparation: number = NaN;

  constructor(inFront: boolean) {
    this.inFront = inFront;
  }

  /**
   * @param orbit - prepared, with the bodies apart at periastron: rho (1 - e) > 1 + k
   * @param radiusRatio - k >= 0
   */
  find(orbit: ProjectedOrbit, radiusRatio: number): void {
    const outer = 1 + radiusRatio;
    const inner = Math.abs(1 - radiusRatio);
    const opening = this.inFront ? outer : -outer;
    const start = orbit.longitudeAtReach(opening, this.inFront);
    const end = orbit.longitudeAtReach(-opening, this.inFront);
    const middle = closestApproach(orbit, start, end);
    orbit.placeAt(middle);
    this.leastSeparation = orbit.separation;
    this.middle = orbit.observedLongitude(middle);
    this.first = NaN;
    this.second = NaN;
    this.third = NaN;
    this.last = NaN;
    if (!(this.leastSeparation < outer)) return;
    const first = crossing(orbit, outer, start, middle);
    const last = crossing(orbit, outer, end, middle);
    this.first = orbit.observedLongitude(first);
    this.last = orbit.observedLongitude(last);
    if (!(this.leastSeparation < inner)) return;
    this.second = orbit.observedLongitude(crossing(orbit, inner, first, middle));
    this.third = orbit.observedLongitude(crossing(orbit, inner, last, middle));
  }
}

/** Eccentric longitude of the smallest separation between two others, rad: safeguarded Newton on d(z^2)/dF. */
function closestApproach(orbit: ProjectedOrbit, fromRad: number, toRad: number): number {
  let low = fromRad;
  let high = toRad;
  let place = 0.5 * (low + high);
  for (let step = 0; step < MOST_STEPS; step++) {
    orbit.placeAt(place);
    if (orbit.slope < 0) low = place;
    else high = place;
    let next = place - orbit.slope / orbit.bend;
    if (!(next > low && next < high)) next = 0.5 * (low + high);
    const change = Math.abs(next - place);
    place = next;
    if (change < STEP_GOAL_RAD) break;
  }
  return place;
}

/**
 * Eccentric longitude, rad, at which the separation equals `reach`, between a place outside of it and one inside:
 * safeguarded Newton on z^2 from the outside.
 */
function crossing(orbit: ProjectedOrbit, reach: number, outsideRad: number, insideRad: number): number {
  let outside = outsideRad;
  let inside = insideRad;
  let place = outsideRad;
  for (let step = 0; step < MOST_STEPS; step++) {
    orbit.placeAt(place);
    const excess = 0.5 * (orbit.separation - reach) * (orbit.separation + reach);
    if (excess > 0) outside = place;
    else inside = place;
    let next = place - excess / orbit.slope;
    if (!((next - outside) * (next - inside) <= 0)) next = 0.5 * (outside + inside);
    const change = Math.abs(next - place);
    place = next;
    if (change < STEP_GOAL_RAD) break;
  }
  return place;
}
