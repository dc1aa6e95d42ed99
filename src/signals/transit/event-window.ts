/** One transit or occultation as the light-curve kernel needs it: when a point is touched, and where the loss is smooth. */
import { EventContacts } from '../../orbit/contacts.js';
import type { ProjectedOrbit } from '../../orbit/projected-orbit.js';
import { negligible } from './exposure-nodes.js';

export class EventWindow {
  readonly inFront: boolean;
  /**
   * Ends of the stretches in which the loss is a smooth function of time, rad of mean longitude, ascending: the four contacts,
   * or first contact, smallest separation and last contact of a grazing event.
   */
  readonly bounds: Float64Array = new Float64Array(4);
  /** How many of `bounds` are valid: 4, 3, or 0 where nothing is covered. */
  count = 0;
  /** Size of the loss, fraction of the star's light. */
  depth = 0;
  /** Whether exposures are so short that their middle stands for them. */
  atOnce = true;
  /** Mean longitude from which on a mid-exposure is touched, rad, and for how long. */
  opensRad = 0;
  widthRad = 0;
  readonly #contacts: EventContacts;

  /** @param inFront - true for the transit, false for the occultation */
  constructor(inFront: boolean) {
    this.inFront = inFront;
    this.#contacts = new EventContacts(inFront);
  }

  /** Nothing happens: no point is touched. */
  close(): void {
    this.count = 0;
    this.widthRad = 0;
  }

  /**
   * @param orbit - prepared, with the bodies apart at periastron
   * @param halfExposureRad - in mean longitude
   * @param depth - size of the loss, fraction of the star's light
   * @param errorBound - what averages over exposures may be wrong by
   */
  open(
    orbit: ProjectedOrbit,
    radiusRatio: number,
    halfExposureRad: number,
    depth: number,
    errorBound: number,
  ): void {
    const contacts = this.#contacts;
    contacts.find(orbit, radiusRatio);
    if (!(contacts.last > contacts.first)) {
      this.close();
      return;
    }
    const bounds = this.bounds;
    bounds[0] = contacts.first;
    if (contacts.third >= contacts.second) {
      bounds[1] = contacts.second;
      bounds[2] = contacts.third;
      bounds[3] = contacts.last;
      this.count = 4;
    } else {
      bounds[1] = contacts.middle;
      bounds[2] = contacts.last;
      this.count = 3;
    }
    const ingressRad = Math.min(bounds[1] - bounds[0], contacts.last - bounds[this.count - 2]!);
    this.depth = depth;
    this.atOnce = halfExposureRad === 0 || negligible(halfExposureRad / ingressRad, depth, errorBound);
    const reachRad = this.atOnce ? 0 : halfExposureRad;
    this.opensRad = contacts.first - reachRad;
    this.widthRad = contacts.last + reachRad - this.opensRad;
  }
}
