/** The nights of a site on which a target can be observed, and from when to when. */
import { ModelDomainError } from '../errors.js';
import type { MockPlan } from '../observations/types.js';
import { barycentricMinusUtcDays } from './site-clock.js';
import { altitudeDeg, altitudeOfAirmass, precessFromJ2000, sunPosition } from './sky.js';
import type { SkyDirection } from './sky.js';

/** An uninterrupted span in which the target can be observed. */
export interface ObservableWindow {
  readonly startBjdTdb: number;
  readonly endBjdTdb: number;
  /** When the target stands highest within the window; one of the ends when it culminates outside. */
  readonly bestBjdTdb: number;
}

/** One night, from local mean noon to the next, on which there is something to observe. */
export interface ObservableNight {
  /** The Julian day number that begins at this night's local mean noon, as counted at the site's own meridian. */
  readonly night: number;
  /** At least one; in order of time; times in BJD_TDB. */
  readonly windows: readonly ObservableWindow[];
  /** What was added to UTC for this night's BJD_TDB, days. */
  readonly barycentricMinusUtcDays: number;
}

/** What of a plan decides about its nights. */
export type SkyPlan = Pick<MockPlan, 'site' | 'target' | 'maximumAirmass' | 'twilightDeg'>;

/** Shorter gaps and windows than this may go unseen. */
const STEP_DAYS = 1 / 144;
const STEPS_PER_NIGHT = 144;
/** A tenth of a second. */
const EDGE_TOLERANCE_DAYS = 1e-6;

/**
 * The observable windows of every night between two dates: the Sun's centre below `twilightDeg` (airless altitude)
 * and the target's airmass (Kasten & Young 1989) not above `maximumAirmass`.
 *
 * Edges agree with astropy to 6 s on test/planning/reference (25 nights, five sites); they are
 * less sure where the Sun or the target only grazes its limit. Windows shorter than ten minutes may be missed. Moonlight is not considered.
 *
 * @param fromBjdTdb - start, BJD_TDB; a window that is cut by either end is returned as the part inside
 * @param toBjdTdb - end, BJD_TDB; not before the start
 * @returns nights in order of time, those without a window left out; empty when the target never qualifies
 * @throws ModelDomainError when the dates are not finite or in the wrong order
 */
export function observableWindows(plan: SkyPlan, fromBjdTdb: number, toBjdTdb: number): ObservableNight[] {
  if (!Number.isFinite(fromBjdTdb))
    throw new ModelDomainError('start date', fromBjdTdb, 'the finite numbers');
  if (!(toBjdTdb >= fromBjdTdb && toBjdTdb < Infinity))
    throw new ModelDomainError('end date', toBjdTdb, `${fromBjdTdb} or later, and finite`);
  const lowestAltitudeDeg = altitudeOfAirmass(plan.maximumAirmass);
  const meridianDays = plan.site.longitudeEastDeg / 360;
  const nights: ObservableNight[] = [];
  // one night more at each end, because barycentric and local time differ
  const lastNight = Math.floor(toBjdTdb + meridianDays) + 1;
  for (let night = Math.floor(fromBjdTdb + meridianDays) - 1; night <= lastNight; night += 1) {
    const noonJdUt = night - meridianDays;
    const target = precessFromJ2000(plan.target, noonJdUt);
    const shiftDays = barycentricMinusUtcDays(noonJdUt + 0.5, target);
    const windows: ObservableWindow[] = [];
    for (const window of windowsOfNight(plan, target, lowestAltitudeDeg, noonJdUt)) {
      const start = Math.max(fromBjdTdb, window.start + shiftDays);
      const end = Math.min(toBjdTdb, window.end + shiftDays);
      if (end <= start) continue;
      const best = highestBetween(plan, target, start - shiftDays, end - shiftDays) + shiftDays;
      windows.push({
        startBjdTdb: start,
        endBjdTdb: end,
        bestBjdTdb: Math.min(end, Math.max(start, best)),
      });
    }
    if (windows.length > 0) nights.push({ night, windows, barycentricMinusUtcDays: shiftDays });
  }
  return nights;
}

interface Span {
  readonly start: number;
  readonly end: number;
}

/** How far both conditions are fulfilled, degrees; positive when the target can be observed. Continuous in time. */
function marginDeg(plan: SkyPlan, target: SkyDirection, lowestAltitudeDeg: number, jdUt: number): number {
  const darkness = plan.twilightDeg - altitudeDeg(sunPosition(jdUt), plan.site, jdUt);
  // by day there is no need to look for the target
  if (darkness < 0) return darkness;
  return Math.min(darkness, altitudeDeg(target, plan.site, jdUt) - lowestAltitudeDeg);
}

/** Windows in UT between a local noon and the next. */
function windowsOfNight(
  plan: SkyPlan,
  target: SkyDirection,
  lowestAltitudeDeg: number,
  noonJdUt: number,
): Span[] {
  const spans: Span[] = [];
  const isOpen = (jdUt: number): boolean => marginDeg(plan, target, lowestAltitudeDeg, jdUt) >= 0;
  let openedAt: number | null = isOpen(noonJdUt) ? noonJdUt : null;
  for (let step = 1; step <= STEPS_PER_NIGHT; step += 1) {
    const jdUt = noonJdUt + step * STEP_DAYS;
    const open = isOpen(jdUt);
    if (open && openedAt === null) openedAt = edgeBetween(jdUt - STEP_DAYS, jdUt, isOpen);
    else if (!open && openedAt !== null) {
      spans.push({ start: openedAt, end: edgeBetween(jdUt, jdUt - STEP_DAYS, isOpen) });
      openedAt = null;
    }
  }
  if (openedAt !== null) spans.push({ start: openedAt, end: noonJdUt + STEPS_PER_NIGHT * STEP_DAYS });
  return spans;
}

/** The first open moment next to an edge, by bisection; `closed` may be before or after `open`. */
function edgeBetween(closed: number, open: number, isOpen: (jdUt: number) => boolean): number {
  while (Math.abs(open - closed) > EDGE_TOLERANCE_DAYS) {
    const middle = (open + closed) / 2;
    if (isOpen(middle)) open = middle;
    else closed = middle;
  }
  return open;
}

/** When the target is highest in a span, to five minutes. */
function highestBetween(plan: SkyPlan, target: SkyDirection, start: number, end: number): number {
  const steps = Math.max(1, Math.ceil((end - start) / (STEP_DAYS / 2)));
  let best = start;
  let bestAltitudeDeg = -Infinity;
  for (let step = 0; step <= steps; step += 1) {
    const jdUt = start + ((end - start) * step) / steps;
    const altitude = altitudeDeg(target, plan.site, jdUt);
    if (altitude > bestAltitudeDeg) {
      bestAltitudeDeg = altitude;
      best = jdUt;
    }
  }
  return best;
}
